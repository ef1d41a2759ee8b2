#include <cmath>

#include "audit/figures.hpp"
#include "factor/spectrum.hpp"

namespace gramproof::audit {
namespace {

int ones_column(const factor::Factor& factor) {
  return static_cast<int>(factor.r.cols()) - 1;
}

/// |row j of R^-1|^2 for unit-length columns: the uncentred VIF without any subtraction (BKW 1980).
Vector uncentred(const Matrix& scaled) {
  return factor::triangular_inverse(scaled).rowwise().squaredNorm();
}

/// Centred VIFs where the constant is a kept column: what is left of the others beside the ones,
/// then as above.
Vector centred_by_column(const factor::Factor& factor, const std::vector<int>& kept,
                         const std::vector<bool>& is_constant) {
  std::vector<int> columns = {ones_column(factor)};
  for (std::size_t i = 0; i < kept.size(); ++i) {
    if (!is_constant[i]) columns.push_back(kept[i]);
  }
  const Index count = static_cast<Index>(columns.size()) - 1;
  if (count == 0) return {};
  factor::Factor centred;
  centred.r = factor::select(factor, columns).r.bottomRightCorner(count, count);
  return uncentred(factor::unit_length(centred));
}

/// Squared share of each kept column's length that is left beside the ones.
Vector centred_share(const factor::Factor& factor, const std::vector<int>& kept) {
  std::vector<int> columns = {ones_column(factor)};
  columns.insert(columns.end(), kept.begin(), kept.end());
  const Matrix r = factor::select(factor, columns).r;
  Vector share(static_cast<Index>(kept.size()));
  for (Index j = 0; j < share.size(); ++j) {
    const double whole = r.col(j + 1).squaredNorm();
    share[j] = whole > 0 ? r.col(j + 1).tail(r.rows() - 1).squaredNorm() / whole : 0.0;
  }
  return share;
}

void fill_vif(Inflation& entry, double vif) {
  entry.vif = vif;
  entry.own_share = 1 / vif;
  entry.r_squared = 1 - *entry.own_share;
}

}  // namespace

std::vector<Inflation> inflation_of(const factor::Factor& factor, const std::vector<int>& kept,
                                    const std::vector<bool>& is_constant, CentredBy centred_by) {
  const factor::Factor own = factor::select(factor, kept);
  const Vector lengths = factor::column_lengths(own);
  const Vector plain = uncentred(factor::unit_length(own));
  const Vector centred =
      centred_by == CentredBy::column ? centred_by_column(factor, kept, is_constant) : Vector();
  const Vector share = centred_by == CentredBy::span ? centred_share(factor, kept) : Vector();
  std::vector<Inflation> result;
  Index next_centred = 0;
  for (std::size_t i = 0; i < kept.size(); ++i) {
    const auto at = static_cast<Index>(i);
    Inflation entry;
    entry.column = kept[i];
    entry.vif_uncentred = plain[at];
    entry.standard_error_per_sigma = std::sqrt(plain[at]) / lengths[at];
    if (centred_by == CentredBy::none) {
      fill_vif(entry, plain[at]);
    } else if (!is_constant[i]) {
      fill_vif(entry,
               centred_by == CentredBy::column ? centred[next_centred] : plain[at] * share[at]);
    }
    if (!is_constant[i]) ++next_centred;
    result.push_back(entry);
  }
  return result;
}

double contrast_error(const factor::Factor& factor, const std::vector<int>& kept,
                      const Vector& coefficients) {
  const factor::Factor own = factor::select(factor, kept);
  Vector scaled = coefficients;
  for (Index j = 0; j < scaled.size(); ++j) {
    scaled[j] = std::ldexp(scaled[j], -own.exponents[static_cast<std::size_t>(j)]);
  }
  own.r.transpose().triangularView<Eigen::Lower>().solveInPlace(scaled);
  return scaled.stableNorm();  // tiny columns have coefficients whose squares overflow
}

}  // namespace gramproof::audit
