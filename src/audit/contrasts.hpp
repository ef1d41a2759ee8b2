// src/audit/contrasts.hpp - sums of coefficients that the analyst asks for: are they determined,
// and how precisely?
//   [S69] Silvey, "Multicollinearity and imprecise estimation", J. Royal Stat. Soc. B 31 (1969)
//         539-552.
#pragma once

#include <string>
#include <vector>

#include "audit/audit.hpp"
#include "base/result.hpp"
#include "scan/digest.hpp"

namespace gramproof::audit {

/// One finding a text ("age + 80*age^2"): estimable if it is orthogonal to every exact relation, by
/// integers [S69], and to those that hold within rounding; then its standard error per unit of
/// residual standard deviation. `too_few_rows`: no contrast is determined for sure. Errors: those
/// of the language, a label that is no column of the design. O(k^2) a contrast.
[[nodiscard]] Result<void> fill_contrasts(const std::vector<std::string>& texts, bool too_few_rows,
                                          const scan::Digest& digest, Audit& audit);

}  // namespace gramproof::audit
