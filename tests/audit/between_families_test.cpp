// Figures between families: closed forms for two columns, the determinants of [FM92] Fox & Monette,
// JASA 87 (1992) 178-183, and what must not change them. Tolerances: 64 k u kappa with kappa below
// 1,000 where no other is named.
#include <doctest/doctest.h>

#include <Eigen/LU>
#include <algorithm>
#include <cmath>
#include <string>

#include "audit/figures.hpp"
#include "support/folded.hpp"
#include "support/known_designs.hpp"
#include "support/made_design.hpp"

namespace {

using namespace gramproof;

constexpr double mild = 64 * 8 * unit_roundoff * 1000;

audit::BetweenFamilies between(const Matrix& x, const design::Design& design,
                               const std::vector<int>& constant_support) {
  REQUIRE(x.cols() == static_cast<Index>(design.columns.size()));
  std::vector<int> kept;
  for (int j = 0; j < static_cast<int>(x.cols()); ++j) kept.push_back(j);
  return audit::between_families(test::folded_with_ones(x), design, kept, constant_support);
}

double last_index(const audit::BetweenFamilies& found) {
  return found.indices[found.indices.size() - 1];
}

void check_proportions_add_up(const audit::BetweenFamilies& found) {
  REQUIRE(found.proportions.rows() == found.indices.size());
  REQUIRE(found.proportions.cols() == static_cast<Index>(found.families.size()));
  REQUIRE(found.inflation.size() == found.families.size());
  CHECK(std::is_sorted(found.indices.begin(), found.indices.end()));
  for (Index f = 0; f < found.proportions.cols(); ++f) {
    CHECK(std::abs(found.proportions.col(f).sum() - 1) <= 32 * unit_roundoff);
  }
}

/// Correlation matrix of the columns.
Matrix correlations(const Matrix& x) {
  const Matrix centred = x.rowwise() - x.colwise().mean();
  const Matrix scaled = centred.colwise().normalized();
  return scaled.transpose() * scaled;
}

/// 0/1 columns of levels 0 .. `levels` - 1 but the one left out, -1 for none.
Matrix brackets(const Eigen::VectorXi& level, int levels, int left_out) {
  Matrix columns(level.size(), levels - (left_out >= 0 ? 1 : 0));
  Index at = 0;
  for (int l = 0; l < levels; ++l) {
    if (l != left_out) columns.col(at++) = (level.array() == l).cast<double>().matrix();
  }
  return columns;
}

struct People {
  Vector age, income;
  Eigen::VectorXi region;
};

People people(Index rows, std::uint64_t seed) {
  test::Random random(seed);
  People made{Vector(rows), Vector(rows), Eigen::VectorXi(rows)};
  for (Index i = 0; i < rows; ++i) {
    made.age[i] = static_cast<double>(random.whole(20, 65));
    made.region[i] = static_cast<int>(random.whole(0, 2));
    made.income[i] = 100 * random.unit() + made.age[i] + 20 * made.region[i];
  }
  return made;
}

}  // namespace

TEST_CASE("a family does not compete with itself, nor with the constant") {
  const People data = people(100, 1);
  Matrix x(100, 3);
  x << Vector::Ones(100), data.age, data.age.cwiseAbs2();
  const auto found = between(
      x, test::made_design({{"constant", {}, {"constant"}}, {"age", {0}, {"age", "age^2"}}}), {0});
  CHECK(found.families == std::vector<int>{1});
  REQUIRE(found.indices.size() == 2);
  CHECK(std::abs(last_index(found) - 1) <= mild);
  CHECK(found.inflation[0].dimensions == 2);
  CHECK(found.inflation[0].generalised_vif == 1);
  CHECK(found.inflation[0].per_dimension == 1);
  check_proportions_add_up(found);
}

TEST_CASE("two columns of correlation r: the index is the root of (1 + r) / (1 - r)") {
  for (const double kappa : {3.0, 1e2, 1e5, 1e9}) {
    CAPTURE(kappa);
    const test::Equicorrelated pair(2, kappa);
    Matrix x(64, 3);
    // Far from 0 and in other units: neither counts.
    x << Vector::Ones(64), (pair.x.col(0).array() + 2).matrix(), 1000 * pair.x.col(1);
    const auto found = between(
        x,
        test::made_design({{"constant", {}, {"constant"}}, {"a", {0}, {"a"}}, {"b", {1}, {"b"}}}),
        {0});
    const double tolerance = 64 * 3 * unit_roundoff * kappa * 16;  // 16: |a| over its spread
    REQUIRE(found.indices.size() == 2);
    CHECK(std::abs(last_index(found) / kappa - 1) <= tolerance);
    // The last share: (1 + r) / 2.
    for (Index f = 0; f < 2; ++f) {
      CHECK(std::abs(found.proportions(1, f) - (1 - pair.one_minus_rho / 2)) <= tolerance);
      const audit::FamilyInflation& entry = found.inflation[static_cast<std::size_t>(f)];
      CHECK(entry.dimensions == 1);
      CHECK(std::abs(entry.generalised_vif / pair.vif - 1) <= tolerance);
      CHECK(std::abs(entry.per_dimension / std::sqrt(pair.vif) - 1) <= tolerance);
    }
    check_proportions_add_up(found);
  }
}

TEST_CASE("generalised inflation is the ratio of determinants of Fox and Monette") {
  for (std::uint64_t seed = 1; seed <= 5; ++seed) {
    CAPTURE(seed);
    const People data = people(150, seed);
    Matrix x(150, 6);
    x << Vector::Ones(150), data.age, data.age.cwiseAbs2() / 100, data.income,
        brackets(data.region, 3, 0);
    const auto found =
        between(x,
                test::made_design({{"constant", {}, {"constant"}},
                                   {"age", {0}, {"age", "age^2"}},
                                   {"income", {1}, {"income"}},
                                   {"region", {2}, {"[region = 1]", "[region = 2]"}}}),
                {0});
    const Matrix all = correlations(x.rightCols(5));
    const std::vector<std::vector<Index>> blocks = {{0, 1}, {2}, {3, 4}};
    for (std::size_t f = 0; f < blocks.size(); ++f) {
      CAPTURE(f);
      std::vector<Index> others;
      for (Index j = 0; j < 5; ++j) {
        if (std::find(blocks[f].begin(), blocks[f].end(), j) == blocks[f].end())
          others.push_back(j);
      }
      const double expected = all(blocks[f], blocks[f]).determinant() *
                              all(others, others).determinant() / all.determinant();
      const audit::FamilyInflation& entry = found.inflation[f];
      CHECK(std::abs(entry.generalised_vif / expected - 1) <= 10 * mild);
      CHECK(std::abs(std::pow(entry.per_dimension, 2 * entry.dimensions) / expected - 1) <=
            10 * mild);
    }
    check_proportions_add_up(found);
  }
}

TEST_CASE("another level left out, centring and orthogonal polynomials change nothing") {
  const People data = people(120, 6);
  const design::Design design = test::made_design({{"constant", {}, {"constant"}},
                                                   {"age", {0}, {"age", "age^2"}},
                                                   {"income", {1}, {"income"}},
                                                   {"region", {2}, {"level", "other level"}}});
  Matrix x(120, 6), changed(120, 6);
  x << Vector::Ones(120), data.age, data.age.cwiseAbs2(), data.income, brackets(data.region, 3, 0);
  const Vector centred = data.age.array() - data.age.mean();
  changed << Vector::Ones(120), centred, centred.cwiseAbs2(),
      (3 * data.income.array() + 1e4).matrix(), brackets(data.region, 3, 2);
  const auto one = between(x, design, {0});
  const auto other = between(changed, design, {0});
  REQUIRE(one.indices.size() == 5);
  REQUIRE(other.indices.size() == 5);
  CHECK((one.indices - other.indices).cwiseAbs().maxCoeff() <= 10 * mild);
  for (std::size_t f = 0; f < 3; ++f) {
    CHECK(std::abs(one.inflation[f].generalised_vif - other.inflation[f].generalised_vif) <=
          10 * mild);
  }
  CHECK((one.proportions - other.proportions).cwiseAbs().maxCoeff() <= 1e4 * mild);
}

TEST_CASE("a product is judged beside what it is made of, and is no competitor of it") {
  const People data = people(200, 7);
  Matrix x(200, 4);
  x << Vector::Ones(200), data.age, data.income, data.age.cwiseProduct(data.income);
  const design::Design design = test::made_design({{"constant", {}, {"constant"}},
                                                   {"age * income", {0, 1}, {"age * income"}},
                                                   {"age", {0}, {"age"}},
                                                   {"income", {1}, {"income"}}});
  // In design order the product comes first; it is judged last.
  Matrix reordered(200, 4);
  reordered << x.col(0), x.col(3), x.col(1), x.col(2);
  const auto found = between(reordered, design, {0});
  CHECK(found.families == std::vector<int>{2, 3, 1});
  const double r = correlations(x.middleCols(1, 2))(0, 1);
  CHECK(std::abs(found.inflation[0].generalised_vif - 1 / (1 - r * r)) <= mild);
  CHECK(std::abs(found.inflation[1].generalised_vif - 1 / (1 - r * r)) <= mild);
  CHECK(found.inflation[2].generalised_vif == 1);
  CHECK(std::abs(last_index(found) - std::sqrt((1 + std::abs(r)) / (1 - std::abs(r)))) <= mild);
  // A ratio of the two is under and above nothing: it competes with both.
  design::Design ratio = design;
  ratio.families[1].products_only = false;
  CHECK(between(reordered, ratio, {0}).inflation[2].generalised_vif > 10);
}

TEST_CASE("dimensions are the exact rank beside the constant") {
  const People data = people(90, 8);
  SUBCASE("all levels hold the constant: one dimension less") {
    Matrix x(90, 4);
    x << brackets(data.region, 3, -1), data.income;
    const auto found = between(
        x, test::made_design({{"region", {1}, {"r0", "r1", "r2"}}, {"income", {0}, {"income"}}}),
        {0, 1, 2});
    REQUIRE(found.inflation.size() == 2);
    CHECK(found.inflation[0].dimensions == 2);
    CHECK(found.indices.size() == 3);
    Matrix coded(90, 4);
    coded << Vector::Ones(90), brackets(data.region, 3, 1), data.income;
    const auto usual = between(coded,
                               test::made_design({{"constant", {}, {"constant"}},
                                                  {"region", {1}, {"r0", "r2"}},
                                                  {"income", {0}, {"income"}}}),
                               {0});
    CHECK(std::abs(last_index(found) - last_index(usual)) <= mild);
    CHECK(std::abs(found.inflation[0].generalised_vif - usual.inflation[0].generalised_vif) <=
          mild);
  }
  SUBCASE("a column of one value adds nothing: its family is dropped") {
    Matrix x(90, 2);
    x << Vector::Constant(90, 7), data.income;
    const auto found = between(
        x, test::made_design({{"seven", {1}, {"seven"}}, {"income", {0}, {"income"}}}), {0});
    CHECK(found.families == std::vector<int>{1});
    CHECK(found.indices.size() == 1);
  }
  SUBCASE("a column of one value inside a family does not stand for the family") {
    Matrix x(90, 3);
    x << Vector::Constant(90, 7), data.income, data.age;
    const auto found = between(
        x, test::made_design({{"f", {1}, {"seven", "income"}}, {"age", {0}, {"age"}}}), {0});
    REQUIRE(found.inflation.size() == 2);
    CHECK(found.inflation[0].dimensions == 1);
    const double r = correlations(x.rightCols(2))(0, 1);
    CHECK(std::abs(found.inflation[0].generalised_vif - 1 / (1 - r * r)) <= mild);
  }
}

TEST_CASE("without a constant in the span nothing is projected out") {
  const People data = people(80, 9);
  Matrix x(80, 2);
  x << data.age, data.income;
  const auto found =
      between(x, test::made_design({{"age", {0}, {"age"}}, {"income", {1}, {"income"}}}), {});
  const double cosine = x.col(0).normalized().dot(x.col(1).normalized());
  CHECK(std::abs(last_index(found) - std::sqrt((1 + cosine) / (1 - cosine))) <= mild);
  CHECK(std::abs(found.inflation[0].generalised_vif - 1 / (1 - cosine * cosine)) <= mild);
}

TEST_CASE("shares that add up to one without a constant are told apart") {
  // Taking out a constant that no family holds would leave x = -y: an infinite index, for columns
  // with a cosine of about one half.
  test::Random random(10);
  Matrix x(70, 2);
  for (Index i = 0; i < 70; ++i) {
    x(i, 0) = random.unit();
    x(i, 1) = 1 - x(i, 0);
  }
  const auto found = between(x, test::made_design({{"x", {0}, {"x"}}, {"y", {1}, {"y"}}}), {0, 1});
  CHECK(last_index(found) < 3);
  CHECK(found.inflation[0].generalised_vif < 2);
}

TEST_CASE(
    "beside shares that add up to one, a column is judged as beside a constant and fewer shares") {
  // Both designs span the same columns, so what age keeps beside the rest is the same in both; its
  // mean costs it nothing in either.
  test::Random random(12);
  Matrix shares(70, 4), beside_constant(70, 4);
  for (Index i = 0; i < 70; ++i) {
    const double first = 0.2 + 0.3 * random.unit(), second = 0.2 + 0.2 * random.unit();
    const double age = 40 + 20 * random.unit() + 10 * first;
    shares.row(i) << first, second, 1 - first - second, age;
    beside_constant.row(i) << 1, first, second, age;
  }
  const auto parts =
      between(shares,
              test::made_design(
                  {{"a", {0}, {"a"}}, {"b", {1}, {"b"}}, {"c", {2}, {"c"}}, {"age", {3}, {"age"}}}),
              {0, 1, 2});
  const auto usual = between(beside_constant,
                             test::made_design({{"constant", {}, {"constant"}},
                                                {"a", {0}, {"a"}},
                                                {"b", {1}, {"b"}},
                                                {"age", {3}, {"age"}}}),
                             {0});
  const double inflation = parts.inflation.back().generalised_vif;
  CHECK(std::abs(inflation - usual.inflation.back().generalised_vif) <= mild);
  CHECK(inflation < 2);
  check_proportions_add_up(parts);
  CHECK(parts.proportions(parts.proportions.rows() - 1, 3) < 0.1);
}

TEST_CASE("a constant alone has no families between which to judge") {
  const auto found =
      between(Matrix::Ones(10, 1), test::made_design({{"constant", {}, {"constant"}}}), {0});
  CHECK(found.families.empty());
  CHECK(found.indices.size() == 0);
}

TEST_CASE("a family of one column has the generalised inflation that is its VIF") {
  // [FM92]: the generalised figure reduces to the usual one. Both ways of computing it are met:
  // columns with a product above them, and columns without.
  const Index rows = 300, columns = 30;
  Matrix x = test::constant_and_random(rows, columns, 11);
  std::vector<test::MadeFamily> families = {{"constant", {}, {"constant"}}};
  std::vector<int> kept = {0};
  for (int j = 1; j < static_cast<int>(columns); ++j) {
    families.push_back({"x" + std::to_string(j), {j}, {"x" + std::to_string(j)}});
    kept.push_back(j);
  }
  std::vector<bool> is_constant(kept.size(), false);
  is_constant[0] = true;
  const auto vifs =
      audit::inflation_of(test::folded_with_ones(x), kept, is_constant, audit::CentredBy::column);
  const auto alone = between(x, test::made_design(families), {0});
  Matrix with_product(rows, columns + 1);
  with_product << x, x.col(1).cwiseProduct(x.col(2));
  families.push_back({"x1 * x2", {1, 2}, {"x1 * x2"}});
  const auto under = between(with_product, test::made_design(families), {0});
  REQUIRE(alone.inflation.size() == static_cast<std::size_t>(columns) - 1);
  for (std::size_t f = 0; f < alone.inflation.size(); ++f) {
    CAPTURE(f);
    CHECK(std::abs(alone.inflation[f].generalised_vif / vifs[f + 1].vif.value() - 1) <= mild);
    const bool below_product = f < 2;
    if (!below_product) continue;
    CHECK(std::abs(under.inflation[f].generalised_vif / vifs[f + 1].vif.value() - 1) <= mild);
  }
  check_proportions_add_up(under);
}
