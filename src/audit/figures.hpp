// src/audit/figures.hpp - the floating-point questions, each a pure function of the triangular
// factor.
//   [BKW80] Belsley, Kuh & Welsch, "Regression Diagnostics", Wiley 1980, ch. 3.
//   [vdS69] van der Sluis, "Condition numbers and equilibration of matrices", Numer. Math. 14
//   (1969) 14-23. [M70] Marquardt, Technometrics 12 (1970) 591-612 (VIF).   [FM92] Fox & Monette,
//   JASA 87 (1992) 178-183 (generalised VIF).
// Arguments: `factor` is scan::Digest::factor, whose last column is the column of ones; `kept` are
// design columns that are linearly independent, in design order.
#pragma once

#include <vector>

#include "audit/audit.hpp"
#include "base/numeric.hpp"
#include "design/design.hpp"
#include "factor/factor.hpp"
#include "scan/digest.hpp"

namespace gramproof::audit {

/// Figures of the kept columns: scaled and raw singular values, indices, proportions, determinants,
/// digits. `is_constant`: kept columns with one value (they have no correlation).
/// `correlation_singular`: the constant is a combination of kept columns that are not constant, so
/// that their correlation matrix is singular. O(k^3).
[[nodiscard]] Conditioning conditioning_of(const factor::Factor& factor,
                                           const std::vector<int>& kept,
                                           const std::vector<bool>& is_constant,
                                           bool correlation_singular);

/// VIFs and their kin. `centred_by`: column (the constant is a kept column), span (it is a
/// combination of kept columns) or none (uncentred figures only; vif, r_squared, own_share are then
/// the uncentred ones). Constant columns have undefined VIF. O(k^3).
[[nodiscard]] std::vector<Inflation> inflation_of(const factor::Factor& factor,
                                                  const std::vector<int>& kept,
                                                  const std::vector<bool>& is_constant,
                                                  CentredBy centred_by);

/// Square root of c'(X'WX)^-1 c for coefficients c on the kept columns.
[[nodiscard]] double contrast_error(const factor::Factor& factor, const std::vector<int>& kept,
                                    const Vector& coefficients);

/// Between-family figures (methods: 4). `constant_support`: design columns whose exact combination
/// is the constant (the constant column itself, or the kept columns that make it; empty when it is
/// not in the span). Dimensions follow from it exactly: |F| minus one where the constant is in the
/// span of F and the families under F but not of the latter alone. A constant that no family holds
/// so (shares that add up to one) is projected out of the families without a part in it only.
/// O(k^3), and as much again for each family that has others above it.
[[nodiscard]] BetweenFamilies between_families(const factor::Factor& factor,
                                               const design::Design& design,
                                               const std::vector<int>& kept,
                                               const std::vector<int>& constant_support);

/// Steps of the table columns that reach a design column through arithmetic. `given`: --recorded,
/// by table column; 0 = exact.
[[nodiscard]] std::vector<Step> recorded_steps(const scan::Digest& digest,
                                               const table::Schema& schema,
                                               const std::vector<std::pair<int, double>>& given);

/// Distance ratios and attenuation (methods: 5): 1 / non-zero singular values of L R^-1, N = L'L.
[[nodiscard]] Recording recording_of(const scan::Digest& digest, const std::vector<int>& kept,
                                     std::vector<Step> steps);

/// Near relations of the kept columns, the worst first, at most one for each scaled condition index
/// of 30 or more and at most `most`: the columns with |v_j| >= 0.1 max|v| of the worst direction,
/// of which the one that pivoted QR takes last is refitted on the others by least squares in the
/// columns' own units; columns without which it fits as well are dropped. Then the explained column
/// is set aside and the rest is looked at again: two relations that are near each other in size
/// have singular vectors that are mixtures of both.
[[nodiscard]] std::vector<RelationFinding> near_relations(const factor::Factor& factor,
                                                          const design::Design& design,
                                                          const std::vector<int>& kept,
                                                          const Conditioning& conditioning,
                                                          std::size_t most);

}  // namespace gramproof::audit
