#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <cstdlib>
#include <limits>
#include <set>

#include "audit/figures.hpp"
#include "audit/verdict.hpp"
#include "factor/spectrum.hpp"

namespace gramproof::audit {
namespace {

/// A scaled index from which a near relation is told (BKW 1980, ch. 3).
constexpr double told_from = 30;
/// Columns with at least this share of the largest entry of the singular vector take part (methods:
/// 2, Standings).
constexpr double least_entry = 0.1;

/// Columns of one near relation, as positions among the kept; the one to be written as a
/// combination of the others first.
std::vector<int> members(const Vector& direction) {
  Index largest = 0;
  const double top = direction.cwiseAbs().maxCoeff(&largest);
  std::vector<int> result = {static_cast<int>(largest)};
  for (Index j = 0; j < direction.size(); ++j) {
    if (j != largest && std::abs(direction[j]) >= least_entry * top)
      result.push_back(static_cast<int>(j));
  }
  return result;
}

/// `value` rounded to so many significant digits.
double rounded(double value, int digits) {
  return std::strtod(fmt::format("{:.{}e}", value, digits - 1).c_str(), nullptr);
}

/// The fewest digits that stay within two standard errors of a coefficient, at most five: nobody is
/// helped by 0.99964 where 1 fits the data as well.
int digits_worth_writing(double coefficient, double error) {
  constexpr int most = 5;
  int digits = 1;
  while (digits < most && !(std::abs(rounded(coefficient, digits) - coefficient) <= 2 * error))
    ++digits;
  return digits;
}

struct Refit {
  Vector coefficients, errors;
  std::vector<int> digits;  ///< significant digits worth writing of each coefficient
};

/// Least squares of the first design column on the others, in the columns' own units.
Refit refit(const factor::Factor& factor, const std::vector<int>& columns) {
  std::vector<int> order(columns.begin() + 1, columns.end());
  order.push_back(columns.front());
  const factor::Factor own = factor::select(factor, order);
  const auto others = static_cast<Index>(order.size()) - 1;
  const Matrix triangle = own.r.topLeftCorner(others, others);
  Refit result;
  result.coefficients =
      triangle.triangularView<Eigen::Upper>().solve(own.r.col(others).head(others));
  const double freedom = std::max(1.0, static_cast<double>(own.rows - others));
  result.errors = std::abs(own.r(others, others)) / std::sqrt(freedom) *
                  factor::triangular_inverse(triangle).rowwise().norm();
  for (Index j = 0; j < others; ++j) {
    const int exponent = own.exponents.back() - own.exponents[static_cast<std::size_t>(j)];
    result.coefficients[j] = std::ldexp(result.coefficients[j], exponent);
    result.errors[j] = std::ldexp(result.errors[j], exponent);
    result.digits.push_back(digits_worth_writing(result.coefficients[j], result.errors[j]));
  }
  return result;
}

/// "10.764", "2.3·10^-7": rounded to `digits` significant digits, no trailing zeros.
std::string number(double value, int digits) {
  if (value == 0 || !std::isfinite(value)) return value == 0 ? "0" : "?";
  const int exponent = static_cast<int>(std::floor(std::log10(value)));
  if (exponent < -5 || exponent > 14) {
    return number(value / std::pow(10.0, exponent), digits) + "\u00b710^" +
           std::to_string(exponent);
  }
  std::string text =
      fmt::format("{:.{}f}", rounded(value, digits), std::max(0, digits - 1 - exponent));
  if (text.find('.') != std::string::npos) {
    text.erase(text.find_last_not_of('0') + 1);
    if (text.back() == '.') text.pop_back();
  }
  return text;
}

/// "a + 2.5·b - 3": the constant as its number.
std::string right_side(const design::Design& design, const std::vector<int>& columns,
                       const Refit& refitted) {
  std::string text;
  for (std::size_t i = 1; i < columns.size(); ++i) {
    const double value = refitted.coefficients[static_cast<Index>(i) - 1];
    const design::DesignColumn& column = design.columns[static_cast<std::size_t>(columns[i])];
    const std::string size = number(std::abs(value), refitted.digits[i - 1]);
    text += value < 0 ? (text.empty() ? "\u2212" : " \u2212 ") : (text.empty() ? "" : " + ");
    if (column.constant) {
      text += size;
    } else {
      text += (size == "1" ? "" : size + "\u00b7") + column.label;
    }
  }
  return text.empty() ? "0" : text;
}

std::string cause_of(const design::Design& design, const std::vector<int>& columns) {
  std::set<int> families;
  std::vector<std::string> names;
  bool all_zero_one = true, all_exact = true;
  for (const int j : columns) {
    const design::DesignColumn& column = design.columns[static_cast<std::size_t>(j)];
    if (column.constant) continue;
    all_zero_one = all_zero_one && column.zero_one;
    all_exact = all_exact && column.exact;
    families.insert(column.family);
    names.push_back(column.label);
  }
  if (families.size() == 1 && *families.begin() >= 0 && (all_exact || names.size() == 1)) {
    const std::string& family = design.families[static_cast<std::size_t>(*families.begin())].name;
    return fmt::format("All of it is made of `{}`{}: {}, and the fitted values stay as they are.",
                       family, columns.size() > names.size() ? " and the constant" : "",
                       all_zero_one ? "another level left out takes this away"
                                    : "centring it, or orthogonal polynomials, takes this away");
  }
  return fmt::format("{} move together in these rows and compete for the same effect.",
                     names_in_words(names, 6));
}

RelationFinding finding_of(const factor::Factor& factor, const design::Design& design,
                           const std::vector<int>& columns, double index) {
  const Refit refitted = refit(factor, columns);
  RelationFinding finding;
  finding.standing = Standing::near;
  finding.condition_index = index;
  finding.text = design.columns[static_cast<std::size_t>(columns.front())].label + " \u2248 " +
                 right_side(design, columns, refitted);
  finding.terms.push_back({columns.front(), "", 1});
  finding.errors.push_back(0);
  for (std::size_t i = 1; i < columns.size(); ++i) {
    finding.terms.push_back({columns[i], "", -refitted.coefficients[static_cast<Index>(i) - 1]});
    finding.errors.push_back(refitted.errors[static_cast<Index>(i) - 1]);
  }
  finding.cause_kind = "near";
  finding.cause_text = cause_of(design, columns);
  finding.removable = columns;
  std::sort(finding.removable.begin(), finding.removable.end());
  return finding;
}

/// Length of what the first column keeps beside the others.
double residual_length(const factor::Factor& factor, const std::vector<int>& columns) {
  std::vector<int> order(columns.begin() + 1, columns.end());
  order.push_back(columns.front());
  const Matrix r = factor::select(factor, order).r;
  return std::abs(r(r.rows() - 1, r.cols() - 1));
}

/// Takes out the columns without which the rest fits as well: a singular vector also points a
/// little along columns that have no part in the relation.
void drop_bystanders(const factor::Factor& factor, std::vector<int>& columns) {
  constexpr double as_well = 1.25;      // the residual may grow by a quarter: our own choice
  constexpr std::size_t too_many = 40;  // each trial is a QR of its own
  if (columns.size() > too_many) return;
  const double whole = residual_length(factor, columns);
  while (columns.size() > 2) {
    double least = std::numeric_limits<double>::infinity();
    std::vector<int> shortest;
    for (std::size_t i = 1; i < columns.size(); ++i) {
      std::vector<int> without = columns;
      without.erase(without.begin() + static_cast<std::ptrdiff_t>(i));
      const double length = residual_length(factor, without);
      if (length >= least) continue;
      least = length;
      shortest = std::move(without);
    }
    if (!(least <= as_well * whole)) return;
    columns = std::move(shortest);
  }
}

/// The smallest singular triplet (and the largest value) of the named columns with unit length.
factor::Spectrum worst_direction(const factor::Factor& factor, const std::vector<int>& columns) {
  constexpr std::size_t all_at_once = 40;  // beyond, Lanczos is faster (tests/bench)
  const Matrix scaled = factor::unit_length(factor::select(factor, columns));
  return columns.size() <= all_at_once ? factor::decompose(scaled) : factor::extremes(scaled, 1);
}

}  // namespace

std::vector<RelationFinding> near_relations(const factor::Factor& factor,
                                            const design::Design& design,
                                            const std::vector<int>& kept,
                                            const Conditioning& conditioning, std::size_t most) {
  std::vector<RelationFinding> findings;
  std::vector<int> remaining = kept;
  const auto strong = (conditioning.condition_indices.array() >= told_from).count();
  most = std::min(most, static_cast<std::size_t>(strong));
  const Index last = conditioning.condition_indices.size() - 1;
  double index = conditioning.condition_indices[last];
  Vector direction = conditioning.right_vectors.col(last);
  while (index >= told_from && findings.size() < most && remaining.size() > 1) {
    std::vector<int> columns = members(direction);
    if (columns.size() < 2) break;
    for (int& column : columns) column = remaining[static_cast<std::size_t>(column)];
    // The constant is never the one that is explained: it is written as a number.
    std::iter_swap(columns.begin(), std::find_if(columns.begin(), columns.end(), [&](int column) {
                     return !design.columns[static_cast<std::size_t>(column)].constant;
                   }));
    drop_bystanders(factor, columns);
    findings.push_back(finding_of(factor, design, columns, index));
    std::erase(remaining, columns.front());
    const factor::Spectrum next = worst_direction(factor, remaining);
    const Index smallest = next.values.size() - 1;
    index = next.values[smallest] > 0 ? next.values[0] / next.values[smallest]
                                      : std::numeric_limits<double>::infinity();
    direction = next.right.col(smallest);
  }
  return findings;
}

}  // namespace gramproof::audit
