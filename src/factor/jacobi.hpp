// src/factor/jacobi.hpp - singular values by one-sided rotations.
//   [H58] Hestenes, "Inversion of matrices by biorthogonalization", J. SIAM 6 (1958) 51-90.
//   [DV92] Demmel & Veselic, "Jacobi's method is more accurate than QR", SIAM J. Matrix Anal. 13
//   (1992) 1204-1245. [dR89] de Rijk, "A one-sided Jacobi algorithm", SIAM J. Sci. Stat. Comput. 10
//   (1989) 359-371 (order of the pairs).
#pragma once

#include "base/numeric.hpp"
#include "factor/spectrum.hpp"

namespace gramproof::factor {

/// All singular values and right singular vectors of a square matrix. The relative error of every
/// value, however small, is about u times the condition number of the matrix with *unit-length
/// columns* [DV92], so wild units cost nothing. Columns may lie between 1e-305 and 1e305. O(k^3) a
/// sweep, a dozen sweeps at most.
[[nodiscard]] Spectrum jacobi_decomposition(const Matrix& matrix);

}  // namespace gramproof::factor
