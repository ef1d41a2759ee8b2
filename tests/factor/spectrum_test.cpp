// Singular values and vectors against LAPACK (dgesvd), closed forms and scaled invariants.
//
// Tolerance 16 k u sigma_1 for a singular value (Weyl: an SVD is exact for R + E, |E| <= c k u
// sigma_1, with c near 1 in practice), 16 k u for |I - V'V| and for |R V - U S| / sigma_1.
#include "factor/spectrum.hpp"

#include <doctest/doctest.h>
#include <lapacke.h>

#include <algorithm>
#include <cmath>
#include <functional>
#include <limits>
#include <string>

#include "factor/factor.hpp"
#include "factor/jacobi.hpp"
#include "support/folded.hpp"
#include "support/random_numbers.hpp"

namespace {

using namespace gramproof;

/// Unit-length factor of columns that lean on each other down to `own` of themselves.
Matrix leaning(Index columns, double own, std::uint64_t seed) {
  test::Random random(seed);
  Matrix x(2 * columns + 5, columns);
  for (double& entry : x.reshaped()) entry = random.unit() - 0.5;
  for (Index j = 1; j < columns; ++j) {
    const double share = std::pow(own, static_cast<double>(j) / static_cast<double>(columns));
    x.col(j) = x.col(0) + share * x.col(j);
  }
  return factor::unit_length(test::folded(x, Vector(), 64));
}

Vector lapack_values(Matrix matrix) {
  const auto order = static_cast<lapack_int>(matrix.cols());
  Vector values(matrix.cols()), rest(std::max<Index>(matrix.cols(), 1));
  REQUIRE(LAPACKE_dgesvd(LAPACK_COL_MAJOR, 'N', 'N', order, order, matrix.data(), order,
                         values.data(), nullptr, 1, nullptr, 1, rest.data()) == 0);
  return values;
}

void check_decomposition(const Matrix& r, const factor::Spectrum& found) {
  const double tolerance = 16 * static_cast<double>(r.cols()) * unit_roundoff;
  const Index count = found.values.size();
  REQUIRE(found.right.cols() == count);
  CHECK(std::is_sorted(found.values.begin(), found.values.end(), std::greater<>()));
  const Matrix identity = Matrix::Identity(count, count);
  CHECK((found.right.transpose() * found.right - identity).norm() <= tolerance);
  const Matrix products = r * found.right;
  for (Index i = 0; i < count; ++i) {
    CAPTURE(i);
    CHECK(std::abs(products.col(i).norm() - found.values[i]) <= tolerance * found.values[0]);
  }
}

}  // namespace

TEST_CASE("all singular values are those of LAPACK, at sizes on both sides of the crossover") {
  struct Case {
    std::string why;
    Index columns;
    double own;
  };
  const Case cases[] = {{"one column", 1, 1},
                        {"two columns", 2, 1e-3},
                        {"well conditioned", 20, 1},
                        {"typical", 27, 1e-6},
                        {"nearly singular", 30, 1e-14},
                        {"last size of rotations", 128, 1e-6},
                        {"first of divide and conquer", 129, 1e-6},
                        {"wide", 220, 1e-9}};
  for (const Case& row : cases) {
    for (std::uint64_t seed = 1; seed <= 2; ++seed) {
      CAPTURE(row.why);
      CAPTURE(seed);
      const Matrix r = leaning(row.columns, row.own, seed);
      const factor::Spectrum found = factor::decompose(r);
      CHECK(found.complete);
      check_decomposition(r, found);
      const Vector expected = lapack_values(r);
      const double tolerance = 16 * static_cast<double>(row.columns) * unit_roundoff;
      CHECK((found.values - expected).cwiseAbs().maxCoeff() <= tolerance * expected[0]);
    }
  }
}

TEST_CASE("rotations keep every digit of small values whatever the columns' units") {
  // X = B D with B of condition number 1.7 and D a power of ten a column: the values are those of
  // the graded matrix, known to u times the condition number of B (Demmel & Veselic 1992). LAPACK's
  // dgesvd, which is right to u sigma_1 only, has no correct digit in the last ones.
  Matrix b(3, 3);
  b << 1, 0.25, 0.25, 0, 1, 0.25, 0, 0, 1;
  const Vector sizes = (Vector(3) << 1e-140, 1, 1e140).finished();
  const factor::Spectrum found = factor::jacobi_decomposition(b * sizes.asDiagonal());
  // For such grades the values are, to relative 1e-280, the lengths left by Gram-Schmidt from the
  // largest column down.
  const Vector large = b.col(2).normalized();
  const Vector middle = b.col(1) - large * large.dot(b.col(1));
  Vector small = b.col(0) - large * large.dot(b.col(0));
  small -= middle.normalized() * middle.normalized().dot(small);
  const double tolerance = 16 * 3 * unit_roundoff * 3;
  CHECK(std::abs(found.values[0] / (b.col(2).norm() * 1e140) - 1) <= tolerance);
  CHECK(std::abs(found.values[1] / middle.norm() - 1) <= tolerance);
  CHECK(std::abs(found.values[2] / (small.norm() * 1e-140) - 1) <= tolerance);
}

TEST_CASE("columns whose neighbours by length are orthogonal are still compared with the rest") {
  // December 2026: powers of nodes symmetric about 0. Even and odd powers are orthogonal, and the
  // exchanges that put the longest column first made the first sweep compare only these, so it
  // ended with nothing turned and the columns' own lengths for values (off by a factor of 36).
  Matrix powers(9, 9);
  for (Index i = 0; i < 9; ++i) {
    for (Index j = 0; j < 9; ++j) powers(i, j) = std::pow(static_cast<double>(i - 4), j);
  }
  const factor::Spectrum found = factor::jacobi_decomposition(powers);
  const Vector expected = lapack_values(powers);
  CHECK((found.values - expected).cwiseAbs().maxCoeff() <= 16 * 9 * unit_roundoff * expected[0]);
  const Matrix products = powers * found.right;
  const Matrix cosines =
      products.colwise().normalized().transpose() * products.colwise().normalized();
  CHECK((cosines - Matrix::Identity(9, 9)).cwiseAbs().maxCoeff() <= 1e-9);
}

TEST_CASE("zero columns, zero matrices and equal columns are decomposed") {
  const factor::Spectrum zero = factor::decompose(Matrix::Zero(4, 4));
  CHECK(zero.values == Vector::Zero(4));
  CHECK(zero.right == Matrix::Identity(4, 4));
  Matrix same = Matrix::Zero(3, 3);
  same.row(0).setOnes();
  const factor::Spectrum found = factor::decompose(same);
  CHECK(found.values[0] == doctest::Approx(std::sqrt(3.0)).epsilon(1e-15));
  CHECK(found.values[1] <= 16 * 3 * unit_roundoff);
  CHECK((found.right.transpose() * found.right - Matrix::Identity(3, 3)).norm() <=
        16 * 3 * unit_roundoff);
}

TEST_CASE("what is not finite ends in a result that says so") {
  Matrix r = leaning(6, 1, 3);
  r(1, 4) = std::numeric_limits<double>::quiet_NaN();
  CHECK_FALSE(factor::decompose(r).values.allFinite());
}

TEST_CASE("extreme triplets are those of the full decomposition") {
  struct Case {
    std::string why;
    Index columns, smallest;
    double own;
  };
  const Case cases[] = {{"well conditioned", 60, 5, 1},
                        {"near relations", 150, 10, 1e-8},
                        {"as many as the audit asks for", 150, factor::smallest_computed, 1e-6},
                        {"one", 40, 1, 1e-3}};
  for (const Case& row : cases) {
    CAPTURE(row.why);
    const Matrix r = leaning(row.columns, row.own, 5);
    const factor::Spectrum found = factor::extremes(r, row.smallest);
    REQUIRE_FALSE(found.complete);
    REQUIRE(found.values.size() == row.smallest + 1);
    const Vector expected = lapack_values(r);
    const double kappa = expected[0] / expected[row.columns - 1];
    // Lanczos stops at 1e-13 of an eigenvalue of (R'R)^-1; |R v| squares what is left.
    const double tolerance = 1e-12 + 64 * static_cast<double>(row.columns) * unit_roundoff * kappa;
    CHECK(std::abs(found.values[0] / expected[0] - 1) <= tolerance);
    for (Index i = 0; i < row.smallest; ++i) {
      const double value = expected[row.columns - row.smallest + i];
      CAPTURE(i);
      CHECK(std::abs(found.values[i + 1] / value - 1) <= tolerance);
    }
  }
}

TEST_CASE("extremes fall back to the whole where Lanczos has nothing to stand on") {
  Matrix singular = leaning(12, 1, 6);
  singular(5, 5) = 0;
  CHECK(factor::extremes(singular, 3).complete);
  CHECK(factor::extremes(leaning(4, 1, 6), 3).complete);  // all are asked for
  CHECK(factor::extremes(Matrix::Zero(5, 5), 2).values == Vector::Zero(5));
}

TEST_CASE("spectrum is complete up to the stated width") {
  CHECK(factor::spectrum(leaning(30, 1e-3, 7)).complete);
}

TEST_CASE("determinant, inverse and order of pivots") {
  const Matrix r = leaning(9, 1e-4, 8);
  const Matrix inverse = factor::triangular_inverse(r);
  CHECK((inverse * r - Matrix::Identity(9, 9)).norm() <=
        64 * 9 * unit_roundoff * inverse.norm() * r.norm());
  const Vector values = lapack_values(r);
  CHECK(std::abs(factor::log10_abs_determinant(r) - values.array().log10().sum()) <=
        64 * 9 * unit_roundoff * values[0] / values[8]);
  CHECK(factor::log10_abs_determinant(Matrix::Zero(2, 2)) ==
        -std::numeric_limits<double>::infinity());
  Matrix sizes = Matrix::Zero(3, 3);
  sizes.diagonal() << 2, 5, 3;
  CHECK(factor::pivot_order(sizes) == std::vector<int>{1, 2, 0});
  // The second column repeats the first, so it comes last although it is the second longest.
  Matrix copies(3, 3);
  copies << 5, 4, 0, 0, 0, 1, 0, 0, 0.5;
  CHECK(factor::pivot_order(copies) == std::vector<int>{0, 2, 1});
}
