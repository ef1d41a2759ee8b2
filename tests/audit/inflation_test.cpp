// Inflation figures by closed forms and identities. Designs from the literature: published_test.
// Tolerances: 64 k u kappa, as derived there, with kappa below 100 where no other is named.
#include <doctest/doctest.h>

#include <Eigen/LU>
#include <cmath>
#include <string>

#include "audit/figures.hpp"
#include "support/folded.hpp"
#include "support/known_designs.hpp"

namespace {

using namespace gramproof;
using audit::CentredBy;

constexpr double mild = 64 * 8 * unit_roundoff * 100;

std::vector<audit::Inflation> inflation_of(const Matrix& x, CentredBy centred_by,
                                           const Vector& weights = Vector()) {
  std::vector<int> kept;
  std::vector<bool> is_constant;
  for (Index j = 0; j < x.cols(); ++j) {
    kept.push_back(static_cast<int>(j));
    is_constant.push_back(x.col(j).minCoeff() == x.col(j).maxCoeff());
  }
  return audit::inflation_of(test::folded_with_ones(x, weights), kept, is_constant, centred_by);
}

double relative(double found, double expected) {
  return std::abs(found - expected) / std::abs(expected);
}

Vector centred(const Vector& column) {
  return column.array() - column.mean();
}

}  // namespace

TEST_CASE("equicorrelated columns have the inflation of their formula") {
  for (const double kappa : {1e1, 1e4, 1e8, 1e11}) {
    for (const Index columns : {2, 5, 20}) {
      CAPTURE(kappa);
      CAPTURE(columns);
      const test::Equicorrelated design(columns, kappa);
      const double tolerance = 8 * static_cast<double>(columns) * unit_roundoff * kappa;
      for (const audit::Inflation& entry : inflation_of(design.x, CentredBy::none)) {
        CHECK(relative(entry.vif_uncentred, design.vif) <= tolerance);
        CHECK(relative(entry.vif.value(), design.vif) <= tolerance);
        CHECK(relative(entry.own_share.value(), 1 / design.vif) <= tolerance);
        // Columns of length one: the standard error is the root of the VIF.
        CHECK(relative(entry.standard_error_per_sigma, std::sqrt(design.vif)) <= tolerance);
      }
      // With a constant they are orthogonal to, the centred figures are the same.
      Matrix x(64, columns + 1);
      x << Vector::Ones(64), design.x;
      const auto with_constant = inflation_of(x, CentredBy::column);
      CHECK_FALSE(with_constant[0].vif.has_value());
      for (Index j = 1; j <= columns; ++j) {
        CHECK(relative(with_constant[static_cast<std::size_t>(j)].vif.value(), design.vif) <=
              tolerance);
      }
    }
  }
}

TEST_CASE("two columns beside a constant inflate each other by 1 / (1 - r^2)") {
  for (std::uint64_t seed = 1; seed <= 5; ++seed) {
    CAPTURE(seed);
    const Matrix x = test::constant_and_random(40, 3, seed);
    const Vector a = centred(x.col(1)), b = centred(x.col(2));
    const double r = a.dot(b) / (a.norm() * b.norm());
    const auto found = inflation_of(x, CentredBy::column);
    CHECK(relative(found[1].vif.value(), 1 / (1 - r * r)) <= mild);
    CHECK(relative(found[2].vif.value(), found[1].vif.value()) <= mild);
    CHECK(relative(found[1].r_squared.value(), r * r) <= mild);
  }
}

TEST_CASE("identities that hold for every column") {
  for (std::uint64_t seed = 1; seed <= 5; ++seed) {
    CAPTURE(seed);
    const Matrix x = test::constant_and_random(60, 7, seed);
    const auto found = inflation_of(x, CentredBy::column);
    const Matrix inverse = (x.transpose() * x).inverse();  // kappa^2 u is harmless here
    for (Index j = 1; j < 7; ++j) {
      const audit::Inflation& entry = found[static_cast<std::size_t>(j)];
      CAPTURE(j);
      CHECK(entry.column == j);
      CHECK(entry.vif.value() >= 1 - mild);
      CHECK(entry.vif_uncentred >= entry.vif.value() * (1 - mild));
      CHECK(std::abs(entry.r_squared.value() + 1 / entry.vif.value() - 1) <= 4 * unit_roundoff);
      CHECK(relative(entry.own_share.value() * entry.vif.value(), 1) <= 4 * unit_roundoff);
      const double variation = centred(x.col(j)).squaredNorm();
      CHECK(relative(entry.standard_error_per_sigma, std::sqrt(inverse(j, j))) <= 100 * mild);
      CHECK(relative(entry.standard_error_per_sigma, std::sqrt(entry.vif.value() / variation)) <=
            mild);
    }
  }
}

TEST_CASE("one column beside the constant: its standard error is that of a mean's slope") {
  Matrix x(5, 2);
  x << 1, 2, 1, 3, 1, 5, 1, 7, 1, 13;
  // mean 6, sum of squares about it 76: Var(slope) = 1/76, Var(constant) = 1/5 + 36/76.
  const auto found = inflation_of(x, CentredBy::column);
  CHECK(relative(found[1].vif.value(), 1) <= mild);
  CHECK(relative(found[1].own_share.value(), 1) <= mild);
  CHECK(relative(found[1].vif_uncentred, 256.0 / 76) <= mild);
  CHECK(relative(found[1].standard_error_per_sigma, std::sqrt(1.0 / 76)) <= mild);
  CHECK(relative(found[0].standard_error_per_sigma, std::sqrt(0.2 + 36.0 / 76)) <= mild);
}

TEST_CASE("all levels without a constant centre as the constant with one level left out") {
  test::Random random(3);
  Matrix with_constant(60, 4), all_levels(60, 4);
  for (Index i = 0; i < 60; ++i) {
    const auto level = random.whole(0, 2);
    const double age = 20 + random.unit() * 40 + 5 * static_cast<double>(level);
    all_levels.row(i) << (level == 0), (level == 1), (level == 2), age;
    with_constant.row(i) << 1, (level == 1), (level == 2), age;
  }
  const auto span = inflation_of(all_levels, CentredBy::span);
  const auto column = inflation_of(with_constant, CentredBy::column);
  CHECK(relative(span[3].vif.value(), column[3].vif.value()) <= mild);
  CHECK(relative(span[3].standard_error_per_sigma, column[3].standard_error_per_sigma) <= mild);
  // Centred, an all-levels column is its share of variation times the uncentred figure.
  const double n1 = all_levels.col(1).sum();
  CHECK(relative(span[1].vif.value(), span[1].vif_uncentred * (1 - n1 / 60)) <= mild);
}

TEST_CASE("a column of one value has no inflation where the constant is in the span") {
  Matrix x = test::constant_and_random(30, 3, 4);
  x.col(0) *= 7;
  const auto found = inflation_of(x, CentredBy::span);
  CHECK_FALSE(found[0].vif.has_value());
  CHECK_FALSE(found[0].r_squared.has_value());
  CHECK_FALSE(found[0].own_share.has_value());
  CHECK(found[0].vif_uncentred > 1);
  const auto plain = inflation_of(test::constant_and_random(30, 3, 4), CentredBy::column);
  CHECK(relative(found[1].vif.value(), plain[1].vif.value()) <= mild);
}

TEST_CASE("units and weights") {
  const Matrix x = test::constant_and_random(50, 4, 5);
  Vector weights(50);
  test::Random random(6);
  for (double& weight : weights) weight = 0.5 + random.unit();
  const auto found = inflation_of(x, CentredBy::column, weights);
  const Matrix inverse = (x.transpose() * weights.asDiagonal() * x).inverse();
  const double total = weights.sum();
  for (Index j = 1; j < 4; ++j) {
    const audit::Inflation& entry = found[static_cast<std::size_t>(j)];
    const double mean = weights.dot(x.col(j)) / total;
    const double variation = weights.dot((x.col(j).array() - mean).square().matrix());
    CHECK(relative(entry.standard_error_per_sigma, std::sqrt(inverse(j, j))) <= 100 * mild);
    CHECK(relative(entry.vif.value(), inverse(j, j) * variation) <= 100 * mild);
  }
  Matrix scaled = x;
  scaled.col(2) *= 0x1p-900;
  const auto far = inflation_of(scaled, CentredBy::column, weights);
  CHECK(far[2].vif == found[2].vif);
  CHECK(far[2].standard_error_per_sigma == found[2].standard_error_per_sigma * 0x1p900);
}

TEST_CASE("the error of a contrast is that of its coefficients together") {
  const Matrix x = test::constant_and_random(40, 4, 7);
  const factor::Factor factor = test::folded_with_ones(x);
  const std::vector<int> kept = {0, 1, 2, 3};
  const auto found = inflation_of(x, CentredBy::column);
  for (Index j = 0; j < 4; ++j) {
    const double error = audit::contrast_error(factor, kept, Vector::Unit(4, j));
    CHECK(relative(error, found[static_cast<std::size_t>(j)].standard_error_per_sigma) <= mild);
  }
  const Vector contrast = (Vector(4) << 0, 1, -2, 0.5).finished();
  const double variance = contrast.dot((x.transpose() * x).inverse() * contrast);
  CHECK(relative(audit::contrast_error(factor, kept, contrast), std::sqrt(variance)) <= 100 * mild);
  CHECK(audit::contrast_error(factor, kept, Vector::Zero(4)) == 0);
  // Kept columns only, and in units of 1e-270.
  Matrix far = x;
  far.col(1) *= 0x1p-900;
  const Vector two = (Vector(2) << 0, 3).finished();
  CHECK(relative(audit::contrast_error(test::folded_with_ones(far), {0, 1}, two),
                 3 * 0x1p900 / centred(x.col(1)).norm()) <= mild);
}
