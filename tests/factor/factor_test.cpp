// Folding and merging. What the factor must satisfy is judged by LAPACK (dgeqrf; Anderson et al.,
// "LAPACK Users' Guide", 3rd ed., SIAM 1999) and by invariants.
//
// Tolerance 16 k u |x_j| for entries of column j: a Householder QR is exact for X + E with
// |E_j| <= c k u |x_j| (Higham, "Accuracy and Stability of Numerical Algorithms", 2nd ed., SIAM
// 2002, theorem 19.4; in practice the constant times k stays near sqrt(k)), and R moves by as much
// times the condition number, which the random designs here keep below 10.
#include "factor/factor.hpp"

#include <doctest/doctest.h>
#include <lapacke.h>

#include <cmath>
#include <limits>
#include <string>

#include "support/folded.hpp"
#include "support/random_numbers.hpp"

namespace {

using namespace gramproof;

Matrix random_matrix(Index rows, Index columns, std::uint64_t seed) {
  test::Random random(seed);
  Matrix matrix(rows, columns);
  for (Index j = 0; j < columns; ++j) {
    for (Index i = 0; i < rows; ++i) matrix(i, j) = 2 * random.unit() - 1;
  }
  return matrix;
}

/// R of LAPACK with a non-negative diagonal; rows >= columns.
Matrix lapack_r(Matrix x) {
  const auto rows = static_cast<lapack_int>(x.rows());
  const auto columns = static_cast<lapack_int>(x.cols());
  Vector tau(x.cols());
  REQUIRE(LAPACKE_dgeqrf(LAPACK_COL_MAJOR, rows, columns, x.data(), rows, tau.data()) == 0);
  Matrix r = x.topRows(x.cols()).triangularView<Eigen::Upper>();
  for (Index i = 0; i < r.rows(); ++i) {
    if (r(i, i) < 0) r.row(i) = -r.row(i);
  }
  return r;
}

Matrix in_own_units(const factor::Factor& factor) {
  Matrix r = factor.r;
  for (Index j = 0; j < r.cols(); ++j) {
    for (Index i = 0; i < r.rows(); ++i) {
      r(i, j) = std::ldexp(r(i, j), factor.exponents[static_cast<std::size_t>(j)]);
    }
  }
  return r;
}

void check_same(const Matrix& found, const Matrix& expected, double factor = 1) {
  REQUIRE(found.rows() == expected.rows());
  REQUIRE(found.cols() == expected.cols());
  for (Index j = 0; j < found.cols(); ++j) {
    CAPTURE(j);
    const double tolerance = 16 * factor * static_cast<double>(found.cols()) * unit_roundoff;
    CHECK((found.col(j) - expected.col(j)).norm() <= tolerance * expected.col(j).norm());
  }
}

bool is_triangular_with_positive_diagonal(const Matrix& r) {
  for (Index j = 0; j < r.cols(); ++j) {
    if (std::signbit(r(j, j))) return false;
    for (Index i = j + 1; i < r.rows(); ++i) {
      if (r(i, j) != 0) return false;
    }
  }
  return true;
}

bool same_bits(const factor::Factor& a, const factor::Factor& b) {
  return a.r == b.r && a.exponents == b.exponents && a.rows == b.rows;
}

}  // namespace

TEST_CASE("the factor is that of LAPACK, folded at once or merged from leaves") {
  struct Case {
    std::string why;
    Index rows, columns, leaf_rows;
  };
  const Case cases[] = {{"one column", 30, 1, 30},
                        {"one leaf", 40, 5, 40},
                        {"leaves with fewer rows than columns", 200, 27, 8},
                        {"leaves of one row", 60, 6, 1},
                        {"a last leaf that is short", 1000, 13, 300},
                        {"several panels of the blocked QR", 500, 100, 250}};
  for (const Case& row : cases) {
    for (std::uint64_t seed = 1; seed <= 3; ++seed) {
      CAPTURE(row.why);
      CAPTURE(seed);
      const Matrix x = random_matrix(row.rows, row.columns, seed);
      const factor::Factor factor = test::folded(x, Vector(), row.leaf_rows);
      CHECK(factor.rows == row.rows);
      CHECK(is_triangular_with_positive_diagonal(factor.r));
      check_same(in_own_units(factor), lapack_r(x));
    }
  }
}

TEST_CASE("weights are square roots on the rows") {
  const Matrix x = random_matrix(120, 7, 4);
  test::Random random(5);
  Vector weights(120);
  for (double& weight : weights) weight = 0.1 + 3 * random.unit();
  check_same(in_own_units(test::folded(x, weights)),
             lapack_r(weights.cwiseSqrt().asDiagonal() * x));
}

TEST_CASE("a weight of 4 is a row taken four times") {
  Matrix x = random_matrix(30, 4, 6);
  Vector weights = Vector::Ones(30);
  weights[11] = 4;
  Matrix repeated(33, 4);
  repeated << x, x.row(11), x.row(11), x.row(11);
  check_same(in_own_units(test::folded(x, weights)), in_own_units(test::folded(repeated)));
}

TEST_CASE("columns, and weights, of any size leave the same mantissas") {
  const Matrix x = random_matrix(90, 5, 7);
  const factor::Factor plain = test::folded(x);
  const int shifts[] = {0, 1010, -1010, 333, -1};
  Matrix scaled = x;
  for (Index j = 0; j < 5; ++j) scaled.col(j) *= std::ldexp(1.0, shifts[j]);
  const factor::Factor far = test::folded(scaled);
  CHECK(plain.r == far.r);  // bit for bit: powers of two do not round
  for (std::size_t j = 0; j < 5; ++j) {
    CHECK(far.exponents[j] - plain.exponents[j] == shifts[j]);
  }
  const factor::Factor light = test::folded(x, Vector::Constant(90, 0x1p-1000));
  check_same(light.r, test::folded(x, Vector::Ones(90)).r);
  CHECK(light.exponents[0] - test::folded(x, Vector::Ones(90)).exponents[0] == -500);
}

TEST_CASE("a column that is not zero on rows of tiny weight only is not lost") {
  Matrix x = Matrix::Zero(40, 2);
  x.col(0).head(20) = random_matrix(20, 1, 8);
  x.col(1).tail(20) = random_matrix(20, 1, 9);
  Vector weights = Vector::Ones(40);
  weights.tail(20).setConstant(0x1p-1000);
  const factor::Factor factor = test::folded(x, weights, 40);
  const Vector lengths = factor::column_lengths(factor);
  CHECK(lengths[1] == doctest::Approx(x.col(1).norm() * 0x1p-500).epsilon(1e-14));
  CHECK(factor::unit_length(factor)(1, 1) == doctest::Approx(1).epsilon(1e-14));
}

TEST_CASE("leaves whose columns differ in size by 2000 powers of two are merged") {
  Matrix x = random_matrix(32, 2, 10);
  x.topRows(16).col(1) *= 0x1p-1000;
  x.bottomRows(16).col(1) *= 0x1p1000;
  const factor::Factor factor = test::folded(x, Vector(), 16);
  CHECK(factor.r.allFinite());
  CHECK(factor::column_lengths(factor)[1] ==
        doctest::Approx(x.bottomRows(16).col(1).stableNorm()).epsilon(1e-14));
}

TEST_CASE("a column that is zero in one leaf keeps the other leaf's exponent") {
  Matrix x = random_matrix(32, 2, 11);
  x.topRows(16).col(1).setZero();
  x.bottomRows(16).col(1) *= 1e-280;
  const factor::Factor factor = test::folded(x, Vector(), 16);
  CHECK(factor::column_lengths(factor)[1] == doctest::Approx(x.col(1).stableNorm()).epsilon(1e-14));
  CHECK(factor::unit_length(factor).col(1).norm() == doctest::Approx(1).epsilon(1e-14));
}

TEST_CASE("degenerate blocks are factored too") {
  CHECK(factor::fold(Matrix(0, 3), Vector()).r == Matrix::Zero(3, 3));
  CHECK(factor::MergeTree().finish(2).r == Matrix::Zero(2, 2));
  const Matrix wide = random_matrix(2, 5, 12);
  const factor::Factor padded = test::folded(wide);
  CHECK(padded.r.bottomRows(3).isZero(0.0));
  check_same(in_own_units(padded).transpose() * in_own_units(padded), wide.transpose() * wide, 10);
  Matrix zero = random_matrix(20, 3, 13);
  zero.col(1).setZero();
  const factor::Factor with_zero = test::folded(zero);
  CHECK(with_zero.r.col(1).isZero(0.0));
  CHECK(factor::unit_length(with_zero).col(1).isZero(0.0));
  Matrix twice = random_matrix(20, 3, 14);
  twice.col(2) = 3 * twice.col(0);
  const factor::Factor deficient = test::folded(twice);
  CHECK(std::abs(deficient.r(2, 2)) <= 16 * 3 * unit_roundoff * deficient.r.col(2).norm());
}

TEST_CASE("a value that is not finite ends in NaN, not in a hang or a crash") {
  Matrix x = random_matrix(40, 4, 15);
  x(3, 2) = std::numeric_limits<double>::quiet_NaN();
  const factor::Factor factor = test::folded(x);
  CHECK_FALSE(factor.r.allFinite());
}

TEST_CASE("the tree of merges depends on the leaves and their order only") {
  const Matrix x = random_matrix(7 * 16, 6, 16);
  CHECK(same_bits(test::folded(x), test::folded(x)));
  // Seven leaves: ((0 1)(2 3)) ((4 5) 6), as the counter 111 has it.
  std::vector<factor::Factor> leaf;
  for (Index i = 0; i < 7; ++i) {
    leaf.push_back(factor::fold(Matrix(x.middleRows(16 * i, 16)), Vector()));
  }
  const factor::Factor head =
      factor::merge(factor::merge(leaf[0], leaf[1]), factor::merge(leaf[2], leaf[3]));
  const factor::Factor tail = factor::merge(factor::merge(leaf[4], leaf[5]), leaf[6]);
  CHECK(same_bits(test::folded(x), factor::merge(head, tail)));
}

TEST_CASE("a selection is the factor of the selected columns") {
  const Matrix x = random_matrix(80, 6, 17);
  const factor::Factor factor = test::folded(x);
  const std::vector<int> columns = {5, 0, 3};
  const factor::Factor selected = factor::select(factor, columns);
  CHECK(selected.rows == 80);
  CHECK(is_triangular_with_positive_diagonal(selected.r));
  check_same(in_own_units(selected), lapack_r(x(Eigen::all, columns)), 4);
  const factor::Factor repeated = factor::select(factor, {2, 2});
  CHECK(repeated.r(1, 1) <= 16 * unit_roundoff * repeated.r(0, 0));
  CHECK(factor::select(factor, {}).r.size() == 0);
}

TEST_CASE("lengths are those of the columns, and unit length takes them out") {
  Matrix x = random_matrix(50, 3, 18);
  x.col(2) *= 0x1p-1000;
  const factor::Factor factor = test::folded(x);
  const Vector lengths = factor::column_lengths(factor);
  for (Index j = 0; j < 3; ++j) {
    CHECK(lengths[j] == doctest::Approx(x.col(j).stableNorm()).epsilon(1e-14));
    CHECK(factor::unit_length(factor).col(j).norm() == doctest::Approx(1).epsilon(1e-15));
  }
}
