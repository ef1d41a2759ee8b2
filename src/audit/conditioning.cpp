#include <algorithm>
#include <cmath>
#include <limits>
#include <numeric>

#include "audit/figures.hpp"
#include "factor/spectrum.hpp"

namespace gramproof::audit {
namespace {

constexpr double infinity = std::numeric_limits<double>::infinity();
/// Decimal digits that one rounding keeps: -log10 u.
const double digits_of_double = -std::log10(unit_roundoff);
const double digits_of_single = -std::log10(0x1p-24);

/// Columns up to which every row of proportions is reported; beyond, rows with an index from 10 on,
/// at most 50.
constexpr Index proportions_in_full = 200;
constexpr double proportions_from_index = 10;
constexpr std::size_t most_proportion_rows = 50;

/// Digits known of a figure whose relative error is bounded by 64 k u kappa.
double known_digits(Index columns, double condition) {
  if (!std::isfinite(condition)) return 0;
  const double error = 64 * static_cast<double>(columns) * unit_roundoff * condition;
  return std::clamp(-std::log10(error), 0.0, digits_of_double);
}

Digits digits_of(double condition) {
  const double lost = std::isfinite(condition) ? std::log10(std::max(condition, 1.0)) : infinity;
  const auto left = [lost](double digits, int times) {
    return std::max(0.0, digits - times * lost);
  };
  return {left(digits_of_double, 1), left(digits_of_double, 2), left(digits_of_single, 1),
          left(digits_of_single, 2)};
}

/// The matrix in the columns' own units times 2^-shift; the shift puts the sizes of the columns
/// evenly about 1, so that neither the largest overflows nor the smallest loses digits.
Matrix in_own_units(const factor::Factor& factor, int& shift) {
  const auto [smallest, largest] =
      std::minmax_element(factor.exponents.begin(), factor.exponents.end());
  shift = (*smallest + *largest) / 2;
  Matrix raw = factor.r;
  for (Index j = 0; j < raw.cols(); ++j) {
    const int exponent = factor.exponents[static_cast<std::size_t>(j)] - shift;
    raw.col(j) = raw.col(j)
                     .unaryExpr([exponent](double value) { return std::ldexp(value, exponent); })
                     .eval();
  }
  return raw;
}

double ratio(double largest, double smallest) {
  return smallest > 0 ? largest / smallest : infinity;
}

/// Groups of consecutive values that agree to 12 digits, or as far as double precision tells them
/// apart.
std::vector<std::vector<int>> tied(const Vector& values) {
  std::vector<std::vector<int>> groups;
  std::vector<int> group = {0};
  const auto close = [&] {
    if (group.size() > 1) groups.push_back(group);
  };
  for (Index i = 1; i < values.size(); ++i) {
    const double resolution = 8 * static_cast<double>(values.size()) * unit_roundoff * values[0];
    if (values[i - 1] - values[i] <= std::max(1e-12 * values[i - 1], resolution)) {
      group.push_back(static_cast<int>(i));
      continue;
    }
    close();
    group = {static_cast<int>(i)};
  }
  if (values.size() > 0) close();
  return groups;
}

/// phi_ij = (v_ji / sigma_i)^2 over the sum of column j: that sum is |row j of R^-1|^2, known also
/// when few triplets are.
Matrix proportions_of(const factor::Spectrum& spectrum, const Matrix& scaled) {
  const Index count = spectrum.values.size();
  const double smallest = spectrum.values[count - 1];
  Matrix shares(count, scaled.cols());
  for (Index i = 0; i < count; ++i) {
    // Relative to the smallest value, so that nothing overflows; a zero value takes everything.
    const double weight = spectrum.values[i] > 0 ? smallest / spectrum.values[i] : 1.0;
    shares.row(i) = (weight * spectrum.right.col(i)).array().square().transpose();
  }
  Eigen::RowVectorXd totals = shares.colwise().sum();
  if (!spectrum.complete) {
    totals = (smallest * factor::triangular_inverse(scaled)).rowwise().squaredNorm().transpose();
  }
  for (Index j = 0; j < shares.cols(); ++j) {
    if (totals[j] > 0) shares.col(j) /= totals[j];
  }
  return shares;
}

void share_ties(const std::vector<std::vector<int>>& groups, Matrix& proportions) {
  for (const std::vector<int>& group : groups) {
    Eigen::RowVectorXd sum = Eigen::RowVectorXd::Zero(proportions.cols());
    for (const int row : group) sum += proportions.row(row);
    for (const int row : group) proportions.row(row) = sum / static_cast<double>(group.size());
  }
}

std::vector<int> rows_to_report(const Vector& indices, Index columns) {
  std::vector<int> rows;
  for (Index i = 0; i < indices.size(); ++i) {
    if (columns <= proportions_in_full || indices[i] >= proportions_from_index)
      rows.push_back(static_cast<int>(i));
  }
  if (columns > proportions_in_full && rows.size() > most_proportion_rows) {
    rows.erase(rows.begin(), rows.end() - static_cast<std::ptrdiff_t>(most_proportion_rows));
  }
  return rows;
}

/// log10 det of the correlation matrix: the factor of what is left of the columns beside the column
/// of ones.
std::optional<double> correlation_determinant(const factor::Factor& factor,
                                              const std::vector<int>& kept,
                                              const std::vector<bool>& is_constant, bool singular) {
  std::vector<int> columns = {static_cast<int>(factor.r.cols()) - 1};
  for (std::size_t i = 0; i < kept.size(); ++i) {
    if (!is_constant[i]) columns.push_back(kept[i]);
  }
  if (columns.size() == 1) return std::nullopt;
  if (singular) return -infinity;
  const factor::Factor with_ones = factor::select(factor, columns);
  const Index count = static_cast<Index>(columns.size()) - 1;
  factor::Factor centred;
  centred.r = with_ones.r.bottomRightCorner(count, count);
  return 2 * factor::log10_abs_determinant(factor::unit_length(centred));
}

}  // namespace

Conditioning conditioning_of(const factor::Factor& factor, const std::vector<int>& kept,
                             const std::vector<bool>& is_constant, bool correlation_singular) {
  Conditioning result;
  if (kept.empty()) {
    result.digits = digits_of(result.condition_number);
    return result;
  }
  const factor::Factor own = factor::select(factor, kept);
  const Matrix scaled = factor::unit_length(own);
  const factor::Spectrum spectrum = factor::spectrum(scaled);
  const Index count = spectrum.values.size();
  const Index columns = scaled.cols();
  result.singular_values = spectrum.values;
  result.right_vectors = spectrum.right;
  result.complete = spectrum.complete;
  result.condition_number = ratio(spectrum.values[0], spectrum.values[count - 1]);
  result.condition_indices =
      spectrum.values.unaryExpr([&](double value) { return ratio(spectrum.values[0], value); });
  result.tied_rows = tied(spectrum.values);
  result.proportions = proportions_of(spectrum, scaled);
  share_ties(result.tied_rows, result.proportions);
  result.proportions_rows = rows_to_report(result.condition_indices, columns);
  int shift = 0;
  Vector raw = factor::spectrum(in_own_units(own, shift)).values;
  result.raw_condition_number = ratio(raw[0], raw[raw.size() - 1]);
  result.raw_singular_values =
      raw.unaryExpr([shift](double value) { return std::ldexp(value, shift); });
  const double exponents = std::accumulate(own.exponents.begin(), own.exponents.end(), 0.0);
  result.log10_determinant =
      2 * (factor::log10_abs_determinant(own.r) + exponents * std::log10(2.0));
  result.log10_determinant_correlation =
      correlation_determinant(factor, kept, is_constant, correlation_singular);
  for (const int position : factor::pivot_order(scaled)) {
    result.pivot_order.push_back(kept[static_cast<std::size_t>(position)]);
  }
  result.digits = digits_of(result.condition_number);
  result.known_digits = known_digits(columns, result.condition_number);
  result.known_digits_raw = known_digits(columns, result.raw_condition_number);
  return result;
}

}  // namespace gramproof::audit
