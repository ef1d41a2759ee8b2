// src/factor/factor.hpp - the triangular factor of a design matrix, folded row block by row block.
//   [DGHL12] Demmel, Grigori, Hoemmen & Langou, "Communication-optimal parallel and sequential QR
//   and LU factorizations",
//            SIAM J. Sci. Comput. 34 (2012) A206-A239 (TSQR).
// sqrt(W) X = Q R D,  R upper triangular, D = diag(2^exponents).  X'X is never formed: kappa(X'X) =
// kappa(X)^2. The exponents keep columns of any size between 1e-305 and 1e305 safe from over- and
// underflow; scaling by powers of two adds no rounding error, so a change of a column's unit by a
// power of two changes nothing but its exponent.
#pragma once

#include <vector>

#include "base/numeric.hpp"

namespace gramproof::factor {

struct Factor {
  Matrix r;  ///< k x k upper triangular, diagonal >= 0, zero rows below when fewer than k rows were
             ///< folded
  std::vector<int>
      exponents;   ///< k; column j of sqrt(W) X has the coordinates r.col(j) * 2^exponents[j]
  Index rows = 0;  ///< rows folded (with weight > 0)
};

/// Factor of one block of rows. `block`: m x k, finite (destroyed); `weights`: m positive finite
/// numbers, or empty. Deterministic, single-threaded. O(m k^2).
[[nodiscard]] Factor fold(Matrix&& block, const Vector& weights);

/// Factor of the rows of both, `top` first. O(k^3).
[[nodiscard]] Factor merge(const Factor& top, const Factor& bottom);

/// Merges leaves in a fixed binary tree by index (a binary counter of partial trees), so that the
/// result depends on the leaves' order only. Memory: log2(leaves) factors.
class MergeTree {
 public:
  void add(Factor leaf);
  [[nodiscard]] Factor finish(Index columns) const;  ///< of no leaf: all zero
 private:
  struct Node {
    Factor factor;
    int height;
  };
  std::vector<Node> nodes_;
};

/// Factor of the named columns in that order (repeats allowed). O(k * selected^2).
[[nodiscard]] Factor select(const Factor& factor, const std::vector<int>& columns);

/// Length of each column of sqrt(W) X: mantissa * 2^exponent, so that squares of 1e305 can be
/// avoided by the caller; as double.
[[nodiscard]] Vector column_lengths(const Factor& factor);

/// The columns scaled to unit length (zero columns stay zero). k x k upper triangular; independent
/// of the columns' units.
[[nodiscard]] Matrix unit_length(const Factor& factor);

}  // namespace gramproof::factor
