// tests/support/known_designs.hpp - designs whose figures follow from a formula, and small ones
// made of seeded numbers.
#pragma once

#include <cmath>
#include <cstdint>

#include "base/numeric.hpp"
#include "support/random_numbers.hpp"

namespace gramproof::test {

/// Columns 1 .. `columns` of Sylvester's matrix of order 64 over 8: orthonormal, each orthogonal to
/// the constant, entries exact.
inline Matrix orthonormal_centred(Index columns) {
  Matrix signs = Matrix::Ones(1, 1);
  while (signs.rows() < 64) {
    const Index n = signs.rows();
    Matrix twice(2 * n, 2 * n);
    twice << signs, signs, signs, -signs;
    signs = twice;
  }
  return signs.middleCols(1, columns) / 8;
}

/// Unit-length columns with one cosine rho between any two and condition number kappa; 64 rows.
///   rho = (kappa^2 - 1) / (kappa^2 + p - 1), eigenvalues 1 + (p - 1) rho and, p - 1 times, 1 - rho
struct Equicorrelated {
  double one_minus_rho, largest;  ///< the eigenvalues of X'X; never by subtraction
  double vif;
  Matrix x;

  Equicorrelated(Index columns, double kappa) {
    const auto p = static_cast<double>(columns);
    one_minus_rho = p / (kappa * kappa + p - 1);
    largest = kappa * kappa * one_minus_rho;
    vif = (1 + (p - 2) * (1 - one_minus_rho)) / (one_minus_rho * largest);
    const double small = std::sqrt(one_minus_rho);
    const Matrix root = small * Matrix::Identity(columns, columns) +
                        (std::sqrt(largest) - small) / p * Matrix::Ones(columns, columns);
    x = orthonormal_centred(columns) * root;
  }
};

/// A constant, then columns of the given spread about 1 that lean on each other; mild condition.
inline Matrix constant_and_random(Index rows, Index columns, std::uint64_t seed) {
  Random random(seed);
  Matrix x = Matrix::Ones(rows, columns);
  for (Index i = 0; i < rows; ++i) {
    const double common = random.unit();
    for (Index j = 1; j < columns; ++j) x(i, j) = 1 + common + 2 * random.unit();
  }
  return x;
}

}  // namespace gramproof::test
