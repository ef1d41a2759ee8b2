#include <fmt/format.h>

#include <algorithm>
#include <cmath>
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

/// Least squares of the first design column on the others, in the columns' own units.
Vector refit(const factor::Factor& factor, const std::vector<int>& columns) {
  std::vector<int> order(columns.begin() + 1, columns.end());
  order.push_back(columns.front());
  const factor::Factor own = factor::select(factor, order);
  const auto others = static_cast<Index>(order.size()) - 1;
  Vector coefficients = own.r.topLeftCorner(others, others)
                            .triangularView<Eigen::Upper>()
                            .solve(own.r.col(others).head(others));
  for (Index j = 0; j < others; ++j) {
    coefficients[j] = std::ldexp(coefficients[j],
                                 own.exponents.back() - own.exponents[static_cast<std::size_t>(j)]);
  }
  return coefficients;
}

std::string number(double value) {
  return fmt::format("{:.5g}", value);
}

/// "a + 2.5·b - 3": the constant as its number.
std::string right_side(const design::Design& design, const std::vector<int>& columns,
                       const Vector& coefficients) {
  std::string text;
  for (std::size_t i = 1; i < columns.size(); ++i) {
    const double value = coefficients[static_cast<Index>(i) - 1];
    const design::DesignColumn& column = design.columns[static_cast<std::size_t>(columns[i])];
    const std::string size = number(std::abs(value));
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
  for (const int j : columns) {
    const design::DesignColumn& column = design.columns[static_cast<std::size_t>(j)];
    if (column.constant) continue;
    families.insert(column.family);
    names.push_back(column.label);
  }
  if (families.size() == 1 && *families.begin() >= 0) {
    const std::string& family = design.families[static_cast<std::size_t>(*families.begin())].name;
    return fmt::format(
        "All of it is made of `{}`{}: centring it, or orthogonal polynomials, takes this away and "
        "leaves the "
        "fitted values as they are.",
        family, columns.size() > names.size() ? " and the constant" : "");
  }
  return fmt::format("{} move together in these rows and compete for the same effect.",
                     names_in_words(names, 6));
}

RelationFinding finding_of(const factor::Factor& factor, const design::Design& design,
                           const std::vector<int>& columns, double index) {
  const Vector coefficients = refit(factor, columns);
  RelationFinding finding;
  finding.standing = Standing::near;
  finding.condition_index = index;
  finding.text = design.columns[static_cast<std::size_t>(columns.front())].label + " \u2248 " +
                 right_side(design, columns, coefficients);
  finding.terms.push_back({columns.front(), "", 1});
  for (std::size_t i = 1; i < columns.size(); ++i) {
    finding.terms.push_back({columns[i], "", -coefficients[static_cast<Index>(i) - 1]});
  }
  finding.cause_kind = "other";
  finding.cause_text = cause_of(design, columns);
  finding.removable = columns;
  std::sort(finding.removable.begin(), finding.removable.end());
  return finding;
}

}  // namespace

std::vector<RelationFinding> near_relations(const factor::Factor& factor,
                                            const design::Design& design,
                                            const std::vector<int>& kept,
                                            const Conditioning& conditioning, std::size_t most) {
  std::vector<RelationFinding> findings;
  const Vector& indices = conditioning.condition_indices;
  for (Index i = indices.size() - 1; i > 0 && indices[i] >= told_from && findings.size() < most;
       --i) {
    std::vector<int> columns = members(conditioning.right_vectors.col(i));
    if (columns.size() < 2) continue;
    // The constant is never the one that is explained: it is written as a number.
    const auto first_varying = std::find_if(columns.begin(), columns.end(), [&](int j) {
      return !design.columns[static_cast<std::size_t>(kept[static_cast<std::size_t>(j)])].constant;
    });
    std::iter_swap(columns.begin(), first_varying);
    for (int& column : columns) column = kept[static_cast<std::size_t>(column)];
    findings.push_back(finding_of(factor, design, columns, indices[i]));
  }
  return findings;
}

}  // namespace gramproof::audit
