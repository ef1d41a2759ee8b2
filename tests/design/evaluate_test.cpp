// Values in doubles against exact values, comparisons near ties, derivatives against differences.
#include <doctest/doctest.h>

#include <cmath>

#include "design/build.hpp"
#include "design/rows.hpp"
#include "harbour.hpp"
#include "random_tree.hpp"

using namespace gramproof;

namespace {

/// Rows of decimals with up to three places; zeros are frequent so that denominators meet them.
test::Table random_rows(std::uint64_t seed, int rows) {
  std::mt19937_64 bits(seed);
  std::vector<std::vector<std::string>> cells;
  for (int r = 0; r < rows; ++r) {
    std::vector<std::string> row;
    for (int c = 0; c < 3; ++c) {
      const auto draw = static_cast<int>(bits() % 8001) - 4000;
      const int shrunk = bits() % 3 == 0 ? draw % 3 : draw;
      const std::string digits = std::to_string(std::abs(shrunk));
      const std::size_t places = bits() % 4;
      const std::string padded =
          std::string(digits.size() <= places ? places + 1 - digits.size() : 0, '0') + digits;
      std::string text = padded.substr(0, padded.size() - places);
      if (places > 0) text += "." + padded.substr(padded.size() - places);
      row.push_back((shrunk < 0 ? "-" : "") + text);
    }
    row.push_back(std::string(1, static_cast<char>('a' + static_cast<char>(bits() % 3))));
    cells.push_back(row);
  }
  return test::make_table({"x", "y", "z", "group"}, cells);
}

std::vector<std::size_t> all_rows(const table::Piece& piece) {
  std::vector<std::size_t> rows(piece.rows);
  for (std::size_t r = 0; r < rows.size(); ++r) rows[r] = r;
  return rows;
}

double value_of(const std::string& text, const test::Table& table, std::size_t row) {
  const auto design = test::bind_text(text, table.schema);
  if (!design) FAIL(to_line(design.error()));
  return design::evaluate(*design.value().columns[0].definition, table.piece, {row})[0];
}

}  // namespace

TEST_CASE("doubles agree with exact values on random trees") {
  int compared = 0, undefined = 0;
  for (std::uint64_t seed = 1; seed <= 600; ++seed) {
    CAPTURE(seed);
    const auto table = random_rows(seed, 20);
    test::RandomTree random(seed, {{0, 1, 2}, 3, 3, false, true});
    const auto tree = random.number(3);
    CAPTURE(design::canonical_text(*tree, table.schema));
    const auto rows = all_rows(table.piece);
    const Vector values = design::evaluate(*tree, table.piece, rows);
    for (std::size_t r = 0; r < rows.size(); ++r) {
      const double value = values[static_cast<Index>(r)];
      const auto exact = design::exact_value(*tree, table.piece, r);
      CAPTURE(r);
      if (!exact) {
        CHECK(std::isnan(value));
        ++undefined;
        continue;
      }
      // Cells have at most 4 digits: sizes stay below 1e3 and denominators above 1e-10, so that
      // depth 3 leaves at most cancellation by 1e6 of numbers below 1e12; anything wrong in kind is
      // wrong by more.
      const double expected = exact->get_d();
      CHECK(std::abs(value - expected) <= 1e-9 * std::max(1.0, std::abs(expected)));
      ++compared;
    }
  }
  CHECK(compared > 5000);
  CHECK(undefined > 100);
}

TEST_CASE("brackets are decided on decimals") {
  // 0.1 + 0.2 is not 0.3 in doubles (it is 0.30000000000000004), but it is in decimals.
  const auto table =
      test::make_table({"a", "b", "c", "d"}, {{"0.1", "0.2", "0.3", "0.30000000000000000001"},
                                              {"1", "2", "3.0000000000000000000001", "3"}});
  CHECK(value_of("[a + b = c]", table, 0) == 1);
  CHECK(value_of("[a + b > c]", table, 0) == 0);
  CHECK(value_of("[c < d]", table, 0) == 1);
  CHECK(value_of("[c = 0.3]", table, 0) == 1);
  CHECK(value_of("[d = 0.3]", table, 0) == 0);
  CHECK(value_of("[d > 0.3]", table, 0) == 1);
  CHECK(value_of("[a + b < c]", table, 1) == 1);
  CHECK(value_of("[c > 3]", table, 1) == 1);
  CHECK(value_of("[d = 3.000]", table, 1) == 1);
  CHECK(std::isnan(value_of("1 / (a + b - c)", table, 0)));
  CHECK(std::isnan(value_of("log(a + b - c)", table, 0)));
  CHECK(std::isnan(value_of("(a + b - c)^-2", table, 0)));
  CHECK(value_of("sqrt(a + b - c)", table, 0) == 0);
  // -1e-22, which in doubles is 0: its logarithm is undefined, its reciprocal is not.
  CHECK(std::isnan(value_of("log(a + b - c)", table, 1)));
  CHECK(value_of("1 / (a + b - c)", table, 1) == doctest::Approx(-1e22));
}

TEST_CASE("the row number and text") {
  const auto table = test::harbour();
  design::Request request;
  request.rows = "row >= 3 and row != 5 and region != column(\"town\")";
  const auto design = test::bind_request(request, table.schema);
  REQUIRE(design);
  const Vector holds = design::evaluate(*design.value().filter, table.piece, {0, 1, 2, 3, 4, 5});
  CHECK(holds == (Vector(6) << 0, 0, 1, 1, 0, 1).finished());
  const auto twice = test::make_table({"a", "b"}, {{"x", "y"}, {"y", "y"}, {"z", "x"}, {"x", "x"}});
  for (std::size_t r = 0; r < 4; ++r) {
    CHECK(value_of("[a = column(\"b\")]", twice, r) == (r == 1 || r == 3 ? 1 : 0));
    CHECK(value_of("[a != column(\"b\")]", twice, r) == (r == 1 || r == 3 ? 0 : 1));
  }
}

TEST_CASE("derivatives agree with central differences") {
  int compared = 0;
  for (std::uint64_t seed = 1; seed <= 1500; ++seed) {
    CAPTURE(seed);
    test::RandomTree random(seed, {{0, 1}, -1, 0, true, true});
    const auto tree = random.number(3);
    const auto slope = design::derivative(tree, 0);
    table::Piece piece;
    piece.rows = 3;
    piece.row = {1, 2, 3};
    const double x = 0.3 + 0.01 * static_cast<double>(seed % 211), y = 0.7, step = 0x1p-20;
    piece.columns.resize(2);
    piece.columns[0].value = {x - step, x, x + step};
    piece.columns[1].value = {y, y, y};
    for (auto& column : piece.columns) {
      column.missing.assign(3, 0);
      // The exact path needs decimals: seven places, which is finer than the step.
      for (const double value : column.value) {
        column.mantissa.push_back(static_cast<std::int64_t>(std::llround(value * 1e9)));
        column.decimals.push_back(9);
      }
    }
    const Vector values = design::evaluate(*tree, piece, {0, 1, 2});
    if (!values.allFinite() || values.cwiseAbs().maxCoeff() > 1e3) continue;
    const double left = (values[1] - values[0]) / step, right = (values[2] - values[1]) / step;
    // A kink or a jump lies between: nothing to compare.
    if (std::abs(left - right) > 1e-3 * std::max(1.0, std::abs(left) + std::abs(right))) continue;
    const double expected = (left + right) / 2;
    const double found = slope ? design::evaluate(*slope, piece, {1})[0] : 0.0;
    CAPTURE(expected);
    CHECK(std::abs(found - expected) <= 2e-3 * std::max(1.0, std::abs(expected)));
    ++compared;
  }
  CHECK(compared > 700);
}

TEST_CASE("derivatives at points of their own") {
  const auto table = test::make_table({"x", "y"}, {{"0", "2"}, {"3", "3"}, {"-2", "5"}});
  const auto slope_at = [&](const std::string& text, std::size_t row) {
    const auto design = test::bind_text(text, table.schema);
    REQUIRE(design);
    const auto slope = design::derivative(design.value().columns[0].definition, 0);
    return slope ? design::evaluate(*slope, table.piece, {row})[0] : 0.0;
  };
  CHECK(slope_at("[x > 1] + y", 1) == 0);
  CHECK(slope_at("[x > 1] * x", 1) == 1);
  CHECK(slope_at("x^2", 2) == -4);
  CHECK(slope_at("x * y", 2) == 5);
  CHECK(slope_at("y / x", 1) == doctest::Approx(-1.0 / 3));
  CHECK(slope_at("abs(x)", 2) == -1);
  CHECK(slope_at("abs(x)", 0) == 0);
  CHECK(slope_at("hinge(x, 1)", 1) == 1);
  CHECK(slope_at("hinge(x, 1)", 0) == 0);
  CHECK(slope_at("max(x, y)", 1) == 1);  // a tie goes to the first
  CHECK(slope_at("max(y, x)", 1) == 0);
  CHECK(slope_at("min(x, y, 1)", 2) == 1);
  CHECK(slope_at("sqrt(x)", 0) == 0);
  CHECK(slope_at("sqrt(x)", 1) == doctest::Approx(0.5 / std::sqrt(3.0)));
  CHECK(slope_at("x^0", 0) == 0);
}

TEST_CASE("an undefined part makes the whole undefined") {
  const auto table = test::make_table({"x", "y"}, {{"0", "2"}, {"0.0", "-1.5"}});
  const std::vector<std::string> texts = {
      "(y / x)^0",         "x * (1 / x)",           "[(y / x)^0 = 1]",
      "[x * (1 / x) = 0]", "[1 / x > 0 or y > -9]", "min(y, 1 / x)",
      "max(1 / x, y)",     "abs(log(x))",           "[log(x) < 1]",
      "[not 1 / x > 0]",   "exp(log(x))",           "1 / (y / x)",
      "asinh(1 / x)",      "[x > 3 and 1 / x > 2]", "x^-1",
      "[y * x + 1/x = y]"};
  for (const std::string& text : texts) {
    CAPTURE(text);
    for (const std::size_t row : {0u, 1u}) CHECK(std::isnan(value_of(text, table, row)));
  }
}

TEST_CASE("exact numbers") {
  const std::vector<std::pair<std::string, std::string>> numbers = {
      {"12.40", "62/5"},
      {"-0.5", "-1/2"},
      {"1e3", "1000"},
      {"0.00", "0"},
      {"123456789012345678901234567890.5", "246913578024691357802469135781/2"}};
  for (const auto& [text, fraction] : numbers) {
    CAPTURE(text);
    table::Number number;
    REQUIRE(table::parse_number(text, '.', number) == table::NumberStatus::number);
    CHECK(design::exact_number(number) == mpq_class(fraction));
  }
}
