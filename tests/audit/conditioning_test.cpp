// Closed forms and properties of the condition figures. Designs from the literature:
// published_test.
#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <limits>
#include <numeric>
#include <string>

#include "audit/figures.hpp"
#include "support/folded.hpp"
#include "support/known_designs.hpp"

namespace {

using namespace gramproof;

constexpr double infinity = std::numeric_limits<double>::infinity();

std::vector<int> first_columns(Index count) {
  std::vector<int> columns(static_cast<std::size_t>(count));
  std::iota(columns.begin(), columns.end(), 0);
  return columns;
}

audit::Conditioning conditioning_of(const Matrix& x, bool first_is_constant,
                                    const Vector& weights = Vector()) {
  std::vector<bool> is_constant(static_cast<std::size_t>(x.cols()), false);
  is_constant[0] = first_is_constant;
  return audit::conditioning_of(test::folded_with_ones(x, weights), first_columns(x.cols()),
                                is_constant, false);
}

double tolerance_of(const audit::Conditioning& figures, Index columns) {
  return 64 * static_cast<double>(columns) * unit_roundoff * figures.condition_number;
}

void check_close(const Vector& found, const Vector& expected, double tolerance) {
  REQUIRE(found.size() == expected.size());
  for (Index i = 0; i < found.size(); ++i) {
    CAPTURE(i);
    CHECK(std::abs(found[i] - expected[i]) <= tolerance * std::abs(expected[i]));
  }
}

}  // namespace

// Tolerance 8 k u kappa: R is the factor of a matrix within c u of X column by column, and its
// decomposition is exact for a matrix within c k u of R (Weyl). The constant is that of
// published_test divided by 8. A program that forms X'X is off by u kappa^2: by 100 u kappa at the
// first row, and it has no digit left from 1e8 on.
TEST_CASE("equicorrelated columns have the figures of their formula") {
  struct Case {
    std::string why;
    Index columns;
    double kappa;
  };
  const Case cases[] = {{"small and mild", 2, 1e2},
                        {"three columns", 3, 30},
                        {"X'X factorises, but wrongly", 5, 1e4},
                        {"X'X singular in double", 8, 1e8},
                        {"wide", 40, 1e6},
                        {"four digits left", 20, 1e12}};
  for (const Case& row : cases) {
    CAPTURE(row.why);
    const test::Equicorrelated design(row.columns, row.kappa);
    const audit::Conditioning found = conditioning_of(design.x, false);
    const auto p = static_cast<double>(row.columns);
    const double tolerance = 8 * p * unit_roundoff * row.kappa;
    REQUIRE(found.condition_indices.size() == row.columns);
    CHECK(found.complete);
    CHECK(std::abs(found.condition_number / row.kappa - 1) <= tolerance);
    CHECK(found.condition_indices[0] == 1);
    CHECK(found.condition_indices[row.columns - 1] == found.condition_number);
    CHECK(std::abs(found.singular_values[0] / std::sqrt(design.largest) - 1) <= tolerance);
    CHECK(std::abs(found.singular_values[1] / std::sqrt(design.one_minus_rho) - 1) <= tolerance);
    const double determinant =
        std::log10(design.largest) + (p - 1) * std::log10(design.one_minus_rho);
    CHECK(std::abs(found.log10_determinant - determinant) <= p * tolerance);
    // Centred already: the correlation matrix is X'X itself.
    CHECK(std::abs(found.log10_determinant_correlation.value() - determinant) <= p * tolerance);
    // The first vector is (1, ..., 1) / sqrt p; the others are tied and share what it leaves.
    const double first = 1 / (p * design.largest * design.vif);
    for (Index j = 0; j < row.columns; ++j) {
      CHECK(std::abs(found.proportions(0, j) - first) <= tolerance);
      CHECK(std::abs(found.proportions(row.columns - 1, j) - (1 - first) / (p - 1)) <= tolerance);
    }
    std::vector<int> tied = first_columns(row.columns);
    tied.erase(tied.begin());
    if (row.columns > 2) {
      CHECK(found.tied_rows == std::vector<std::vector<int>>{tied});
    } else {
      CHECK(found.tied_rows.empty());
    }
  }
}

TEST_CASE("orthogonal columns: every index is one, all tied, nothing lost") {
  const audit::Conditioning found = conditioning_of(test::orthonormal_centred(4) * 8, false);
  CHECK(found.condition_number == 1);
  CHECK(found.singular_values == Vector::Ones(4));
  // 64 k u kappa with k = 4, kappa = 1; entries of size 8. Instruction sets sum in different
  // orders.
  CHECK((found.raw_singular_values.array() - 8).abs().maxCoeff() <= 8 * 64 * 4 * unit_roundoff);
  CHECK(found.log10_determinant == doctest::Approx(4 * std::log10(64.0)).epsilon(1e-14));
  CHECK(*found.log10_determinant_correlation == 0);
  CHECK(found.tied_rows == std::vector<std::vector<int>>{{0, 1, 2, 3}});
  CHECK((found.proportions.array() == 0.25).all());
  CHECK(found.digits.qr == doctest::Approx(15.95).epsilon(1e-3));
}

TEST_CASE("digits are those of the precision less once or twice the logarithm of kappa") {
  struct Case {
    std::string why;
    double kappa, qr, normal, qr_single, normal_single;
  };
  // 15.9546 = -log10 2^-53, 7.2247 = -log10 2^-24; never below none.
  const Case cases[] = {
      {"mild", 1e2, 13.9546, 11.9546, 5.2247, 3.2247},
      {"single precision is lost to the normal equations", 1e4, 11.9546, 7.9546, 3.2247, 0},
      {"only QR in double is left", 1e9, 6.9546, 0, 0, 0}};
  for (const Case& row : cases) {
    CAPTURE(row.why);
    const audit::Digits digits =
        conditioning_of(test::Equicorrelated(3, row.kappa).x, false).digits;
    CHECK(std::abs(digits.qr - row.qr) < 1e-3);
    CHECK(std::abs(digits.normal_equations - row.normal) < 1e-3);
    CHECK(std::abs(digits.qr_single - row.qr_single) < 1e-3);
    CHECK(std::abs(digits.normal_equations_single - row.normal_single) < 1e-3);
  }
}

TEST_CASE("known digits follow the stated bound") {
  const test::Equicorrelated design(4, 1e6);
  Matrix x = design.x;
  x.col(0) *= 1e5;
  const audit::Conditioning found = conditioning_of(x, false);
  CHECK(std::abs(found.known_digits + std::log10(64 * 4 * unit_roundoff * 1e6)) < 1e-3);
  CHECK(found.known_digits_raw <= found.known_digits - 4);
  CHECK(conditioning_of(test::Equicorrelated(4, 1e15).x, false).known_digits == 0);
}

TEST_CASE("a change of units by powers of two changes no scaled figure by a bit") {
  for (std::uint64_t seed = 1; seed <= 5; ++seed) {
    CAPTURE(seed);
    const Matrix x = test::constant_and_random(60, 6, seed);
    const audit::Conditioning plain = conditioning_of(x, true);
    Matrix scaled = x;
    const int shifts[] = {0, 100, -3, -1000, 1000, 17};
    for (Index j = 0; j < 6; ++j) scaled.col(j) *= std::ldexp(1.0, shifts[j]);
    const audit::Conditioning found = conditioning_of(scaled, true);
    CHECK(found.singular_values == plain.singular_values);
    CHECK(found.proportions == plain.proportions);
    CHECK(found.log10_determinant_correlation == plain.log10_determinant_correlation);
    CHECK(std::abs(found.log10_determinant - plain.log10_determinant - 2 * 114 * std::log10(2.0)) <=
          1e-10);
    // The raw values do change: the largest and the smallest are the far columns' own.
    CHECK(found.raw_singular_values[0] > 1e300);
    CHECK(found.raw_singular_values[5] < 1e-300);
  }
}

TEST_CASE("figures do not depend on the order of rows and follow that of the columns") {
  for (std::uint64_t seed = 1; seed <= 5; ++seed) {
    CAPTURE(seed);
    const Matrix x = test::constant_and_random(80, 5, seed);
    const audit::Conditioning plain = conditioning_of(x, true);
    const double tolerance = tolerance_of(plain, 5);
    const audit::Conditioning reversed = conditioning_of(x.colwise().reverse(), true);
    check_close(reversed.singular_values, plain.singular_values, tolerance);
    const audit::Conditioning mirrored = conditioning_of(x.rowwise().reverse(), false);
    check_close(mirrored.singular_values, plain.singular_values, tolerance);
    // Random values are apart by more than a thousandth, which the vectors are divided by.
    CHECK((mirrored.proportions.rowwise().reverse() - plain.proportions).cwiseAbs().maxCoeff() <=
          1000 * tolerance);
  }
}

TEST_CASE("proportions add up to one, squared singular values multiply to the determinant") {
  for (std::uint64_t seed = 1; seed <= 5; ++seed) {
    CAPTURE(seed);
    const Matrix x = test::constant_and_random(70, 9, seed);
    const audit::Conditioning found = conditioning_of(x, true);
    const double tolerance = tolerance_of(found, 9);
    for (Index j = 0; j < 9; ++j) {
      CHECK(std::abs(found.proportions.col(j).sum() - 1) <= 32 * unit_roundoff);
    }
    CHECK(std::abs(2 * found.raw_singular_values.array().log10().sum() - found.log10_determinant) <=
          9 * tolerance);
    CHECK(found.raw_condition_number ==
          found.raw_singular_values[0] / found.raw_singular_values[8]);
  }
}

TEST_CASE("weights act as square roots on the rows") {
  const Matrix x = test::constant_and_random(50, 4, 6);
  Vector weights(50);
  test::Random random(7);
  for (double& weight : weights) weight = 0.5 + random.unit();
  const audit::Conditioning weighted = conditioning_of(x, true, weights);
  const audit::Conditioning rooted = conditioning_of(weights.cwiseSqrt().asDiagonal() * x, false);
  const double tolerance = tolerance_of(weighted, 4);
  check_close(weighted.singular_values, rooted.singular_values, tolerance);
  check_close(weighted.raw_singular_values, rooted.raw_singular_values, tolerance);
}

TEST_CASE("the correlation determinant of two columns is 1 - r^2, weights included") {
  Matrix x(4, 3);
  x << 1, 0, 0, 1, 1, 0, 1, 0, 1, 1, 1, 1;
  // Weighted means 1/2 each; weights 2, 1, 1, 2 give variances 1/4 and covariance 2/6 - 1/4 = 1/12:
  // r = 1/3.
  const Vector weights = (Vector(4) << 2, 1, 1, 2).finished();
  const audit::Conditioning found = conditioning_of(x, true, weights);
  CHECK(std::abs(*found.log10_determinant_correlation - std::log10(8.0 / 9)) <= 1e-14);
  CHECK(*conditioning_of(x, true).log10_determinant_correlation ==
        doctest::Approx(0).epsilon(1e-14));
}

TEST_CASE("the correlation determinant is absent of constants and zero of a singular correlation") {
  const Matrix ones = Matrix::Ones(10, 1);
  CHECK_FALSE(conditioning_of(ones, true).log10_determinant_correlation.has_value());
  Matrix levels = Matrix::Zero(10, 2);
  levels.col(0).head(4).setOnes();
  levels.col(1).tail(6).setOnes();
  const audit::Conditioning found =
      audit::conditioning_of(test::folded_with_ones(levels), {0, 1}, {false, false}, true);
  CHECK(*found.log10_determinant_correlation == -infinity);
}

TEST_CASE("only the kept columns count") {
  Matrix x = test::constant_and_random(40, 4, 8);
  const audit::Conditioning expected = conditioning_of(x, true);
  Matrix longer(40, 5);
  longer << x.leftCols(2), x.col(1), x.rightCols(2);
  const audit::Conditioning found = audit::conditioning_of(
      test::folded_with_ones(longer), {0, 1, 3, 4}, {true, false, false, false}, false);
  check_close(found.singular_values, expected.singular_values, tolerance_of(expected, 4));
}

TEST_CASE("proportions of a wide design are reported for the strong indices only") {
  test::Random random(9);
  Matrix x(500, 205);
  for (double& entry : x.reshaped()) entry = random.unit() - 0.5;
  for (Index j = 1; j <= 60; ++j) x.col(j) = x.col(0) + 0.02 * x.col(j);
  const audit::Conditioning found = conditioning_of(x, false);
  REQUIRE(found.proportions.rows() == 205);
  CHECK(found.proportions_rows.size() == 50);
  CHECK(found.proportions_rows.back() == 204);
  for (const int row : found.proportions_rows) CHECK(found.condition_indices[row] >= 10);
  const audit::Conditioning narrow = conditioning_of(x.rightCols(140), false);
  CHECK(narrow.proportions_rows == first_columns(140));
}
