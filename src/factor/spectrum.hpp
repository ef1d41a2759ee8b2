// src/factor/spectrum.hpp - singular values and vectors of a triangular factor.
#pragma once

#include <vector>

#include "base/numeric.hpp"

namespace gramproof::factor {

struct Spectrum {
  Vector values;  ///< descending
  Matrix right;   ///< k x values.size(): right singular vectors, columns in the order of `values`
  bool complete = true;  ///< false: only the extreme values were computed (see extremes_beyond)
};

/// Above this many columns only the extreme singular triplets are computed. Set by measurement
/// (tests/bench).
inline constexpr Index extremes_beyond = 1200;
/// How many smallest triplets are computed then (the largest one besides).
inline constexpr Index smallest_computed = 30;

/// Full decomposition by one-sided Jacobi rotations or by divide and conquer according to size: the
/// error of each value is at most a modest multiple of k u sigma_1 (Weyl), relative to the
/// column-scaled matrix. matrix: k x k, finite.
[[nodiscard]] Spectrum decompose(const Matrix& matrix);

/// sigma_1 and the `smallest` smallest singular triplets of a non-singular upper triangular r by
/// Lanczos (Spectra) on triangular solves with r and r' (never on r'r as a matrix), start vector
/// fixed. Falls back to decompose() when not converged.
[[nodiscard]] Spectrum extremes(const Matrix& r, Index smallest);

/// decompose() or extremes() by size.
[[nodiscard]] Spectrum spectrum(const Matrix& r);

/// log10 |det r| as a sum of logarithms; -inf when a diagonal entry is 0.
[[nodiscard]] double log10_abs_determinant(const Matrix& r);

/// Inverse of a non-singular upper triangular matrix by back substitution. O(k^3/3).
[[nodiscard]] Matrix triangular_inverse(const Matrix& r);

/// Column-pivoted QR (Businger & Golub 1965): the columns in the order of what each adds to those
/// before it.
[[nodiscard]] std::vector<int> pivot_order(const Matrix& r);

}  // namespace gramproof::factor
