// Near relations: which are told, how they are written, and least squares by its textbook formula.
#include <doctest/doctest.h>

#include <cmath>
#include <string>

#include "audit/figures.hpp"
#include "support/folded.hpp"
#include "support/made_design.hpp"
#include "support/random_numbers.hpp"

namespace {

using namespace gramproof;

std::vector<audit::RelationFinding> near_relations(const Matrix& x, const design::Design& design,
                                                   std::size_t most = 50) {
  const factor::Factor factor = test::folded_with_ones(x);
  std::vector<int> kept;
  for (int j = 0; j < static_cast<int>(x.cols()); ++j) kept.push_back(j);
  std::vector<bool> is_constant(kept.size(), false);
  is_constant[0] = design.columns[0].constant;
  const audit::Conditioning conditioning = audit::conditioning_of(factor, kept, is_constant, false);
  return audit::near_relations(factor, design, kept, conditioning, most);
}

design::Design separate_columns(const std::vector<std::string>& labels) {
  std::vector<test::MadeFamily> families;
  int source = 0;
  for (const std::string& label : labels) {
    if (label == "constant") {
      families.push_back({label, {}, {label}});
    } else {
      families.push_back({label, {source++}, {label}});
    }
  }
  return test::made_design(families);
}

Vector uniform(Index rows, double low, double high, test::Random& random) {
  Vector column(rows);
  for (double& value : column) value = low + (high - low) * random.unit();
  return column;
}

double coefficient_of(const audit::RelationFinding& relation, int column) {
  for (const audit::RelationTerm& term : relation.terms) {
    if (term.column == column) return term.coefficient;
  }
  return 0;
}

}  // namespace

TEST_CASE("parts that nearly add up to a total are told as a person would say it") {
  test::Random random(1);
  Matrix x(300, 5);
  const Vector heat = uniform(300, 0, 40, random), light = uniform(300, 0, 30, random);
  x << Vector::Ones(300), heat, light, heat + light + uniform(300, -0.1, 0.1, random),
      uniform(300, 0, 1, random);
  const auto found =
      near_relations(x, separate_columns({"constant", "heat", "light", "total", "noise"}));
  REQUIRE(found.size() == 1);
  const audit::RelationFinding& relation = found[0];
  CHECK(relation.standing == audit::Standing::near);
  CHECK(relation.text == "total \u2248 heat + light");
  CHECK(relation.condition_index > 100);
  CHECK(relation.cause_kind == "near");
  for (const std::string name : {"`heat`", "`light`", "`total`"}) {
    CAPTURE(name);
    CHECK(relation.cause_text.find(name) != std::string::npos);
  }
  CHECK(relation.removable == std::vector<int>{1, 2, 3});
  CHECK(relation.rows_holding == 0);
  CHECK(relation.violations.empty());
  REQUIRE(relation.terms.size() == 3);
  CHECK(relation.terms[0].column == 3);
  CHECK(relation.terms[0].coefficient == 1);
  CHECK(std::abs(coefficient_of(relation, 1) + 1) < 0.01);
  // The sum of coefficient times column is small beside its largest part.
  Vector rest = Vector::Zero(300);
  for (const audit::RelationTerm& term : relation.terms) {
    CHECK(term.exact.empty());
    rest += term.coefficient * x.col(term.column);
  }
  CHECK(rest.norm() < 0.01 * x.col(3).norm());
}

TEST_CASE("beside the constant the refit is a regression line: slope = covariance / variance") {
  // The slope of one column on another and a constant; common practice. Tolerance 64 k u kappa.
  for (std::uint64_t seed = 1; seed <= 5; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const Index rows = 120;
    const Vector celsius = uniform(rows, 5, 25, random);
    const Vector fahrenheit =
        (1.8 * celsius.array() + 32).matrix() + uniform(rows, -0.3, 0.3, random);
    Matrix x(rows, 3);
    x << Vector::Ones(rows), celsius, fahrenheit;
    const auto found = near_relations(x, separate_columns({"constant", "c", "f"}));
    REQUIRE(found.size() >= 1);
    const audit::RelationFinding& relation = found[0];
    REQUIRE(relation.terms.size() == 3);
    CHECK(relation.terms[0].column != 0);  // a constant is never what is explained
    const int explained = relation.terms[0].column, by = 3 - explained;
    const Vector a = x.col(by).array() - x.col(by).mean();
    const Vector b = x.col(explained).array() - x.col(explained).mean();
    const double slope = a.dot(b) / a.squaredNorm();
    const double offset = x.col(explained).mean() - slope * x.col(by).mean();
    const double tolerance = 64 * 3 * unit_roundoff * relation.condition_index;
    CHECK(std::abs(coefficient_of(relation, by) / -slope - 1) <= tolerance);
    CHECK(std::abs(coefficient_of(relation, 0) / -offset - 1) <= tolerance * 100);
  }
}

TEST_CASE("coefficients are written as the shortest number within two standard errors") {
  struct Case {
    std::string why;
    double factor, half_width;  ///< noise beside the relation: uniform, either way
    std::string text;
  };
  const Case cases[] = {
      {"a whole number", 3, 1e-2, "total \u2248 3\u00b7a + 3\u00b7b"},
      {"one is not written", 1, 1e-2, "total \u2248 a + b"},
      {"five digits at most", 1.2345678, 1e-6, "total \u2248 1.2346\u00b7a + 1.2346\u00b7b"},
      {"beyond plain digits", 1.25e-7, 1e-12,
       "total \u2248 1.25\u00b710^-7\u00b7a + 1.25\u00b710^-7\u00b7b"},
      {"large", 120000, 1, "total \u2248 120000\u00b7a + 120000\u00b7b"},
      {"negative", -2, 1e-3, "total \u2248 \u22122\u00b7a \u2212 2\u00b7b"},
      // Standard error 1 / (sqrt 3 * 29 * 20) = 0.001: of 1.2386, say, 1.24 is within two.
      {"no more digits than the rows tell", 1.24, 1, "total \u2248 1.24\u00b7a + 1.24\u00b7b"}};
  for (const Case& row : cases) {
    CAPTURE(row.why);
    test::Random random(7);
    const Index rows = 400;
    Matrix x(rows, 3);
    x.col(0) = uniform(rows, -50, 50, random);
    x.col(1) = uniform(rows, -50, 50, random);
    x.col(2) =
        row.factor * (x.col(0) + x.col(1)) + uniform(rows, -row.half_width, row.half_width, random);
    const auto found = near_relations(x, separate_columns({"a", "b", "total"}));
    REQUIRE(found.size() == 1);
    CHECK(found[0].text == row.text);
  }
}

TEST_CASE("units are the columns' own, however far apart") {
  test::Random random(9);
  Matrix x(200, 3);
  x.col(0) = uniform(200, -1, 1, random);
  x.col(1) = uniform(200, -1, 1, random);
  x.col(2) = 3 * (x.col(0) + x.col(1)) + uniform(200, -1e-3, 1e-3, random);
  const design::Design design = separate_columns({"a", "b", "total"});
  const auto plain = near_relations(x, design);
  x.col(0) *= 0x1p-500;
  const auto far = near_relations(x, design);
  REQUIRE(plain.size() == 1);
  REQUIRE(far.size() == 1);
  CHECK(far[0].condition_index == plain[0].condition_index);
  CHECK(coefficient_of(far[0], 0) == coefficient_of(plain[0], 0) * 0x1p500);
  CHECK(coefficient_of(far[0], 1) == coefficient_of(plain[0], 1));
}

TEST_CASE("what lies within one family is said to cost nothing, with the way out") {
  test::Random random(10);
  const Vector age = uniform(200, 40, 60, random);
  Matrix x(200, 4);
  x << Vector::Ones(200), age, age.cwiseAbs2(), uniform(200, -1, 1, random);
  const auto found = near_relations(x, test::made_design({{"constant", {}, {"constant"}},
                                                          {"age", {0}, {"age", "age^2"}},
                                                          {"noise", {1}, {"noise"}}}));
  REQUIRE(found.size() >= 1);
  CHECK(found[0].cause_text.find("`age` and the constant") != std::string::npos);
  CHECK(found[0].cause_text.find("centring") != std::string::npos);
  CHECK(found[0].cause_text.find("fitted values stay") != std::string::npos);
  CHECK(coefficient_of(found[0], 3) == 0);
}

TEST_CASE("the worst first, each on its own, at most as many as asked, none below 30") {
  test::Random random(11);
  const Index rows = 300;
  Matrix x(rows, 7);
  for (Index j = 0; j < 4; ++j) x.col(j) = uniform(rows, -1, 1, random);
  x.col(4) = x.col(0) + 1e-3 * uniform(rows, -1, 1, random);
  x.col(5) = x.col(1) + 1e-2 * uniform(rows, -1, 1, random);
  x.col(6) = x.col(2) + 0.3 * uniform(rows, -1, 1, random);
  const design::Design design = separate_columns({"a", "b", "c", "d", "a2", "b2", "c2"});
  const auto found = near_relations(x, design);
  REQUIRE(found.size() == 2);
  CHECK(found[0].removable == std::vector<int>{0, 4});
  CHECK(found[1].removable == std::vector<int>{1, 5});
  CHECK(found[0].condition_index > found[1].condition_index);
  CHECK(found[1].condition_index >= 30);
  CHECK(near_relations(x, design, 1).size() == 1);
  CHECK(near_relations(x.leftCols(4), separate_columns({"a", "b", "c", "d"})).empty());
}

TEST_CASE("relations of a wide design are found by solves as by the whole decomposition") {
  test::Random random(12);
  const Index rows = 200, columns = 70;
  Matrix x(rows, columns);
  std::vector<std::string> labels;
  for (Index j = 0; j < columns; ++j) {
    x.col(j) = uniform(rows, -1, 1, random);
    labels.push_back("x" + std::to_string(j));
  }
  const double sizes[] = {1e-5, 1e-4, 1e-3};
  for (Index pair = 0; pair < 3; ++pair) {
    x.col(60 + pair) = x.col(pair) + sizes[pair] * uniform(rows, -1, 1, random);
  }
  const auto found = near_relations(x, separate_columns(labels));
  REQUIRE(found.size() == 3);
  for (int pair = 0; pair < 3; ++pair) {
    CAPTURE(pair);
    const audit::RelationFinding& relation = found[static_cast<std::size_t>(pair)];
    CHECK(relation.removable == std::vector<int>{pair, 60 + pair});
    CHECK(std::abs(relation.terms[1].coefficient + 1) < 1e-2);
  }
}
