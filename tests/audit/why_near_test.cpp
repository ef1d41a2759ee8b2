// A column that can be kept: figures in closed form, and the rows that hold it up.
#include <doctest/doctest.h>
#include <fmt/format.h>

#include <cmath>
#include <string>
#include <vector>

#include "asked.hpp"
#include "support/folded.hpp"
#include "support/random_numbers.hpp"

namespace gramproof::audit {
namespace {

using test::Random;

/// The answer to a question that has one.
Why answered(const std::string& text, const Request& request, const std::string& column) {
  Result<Why> result = asked(text, request, column);
  if (!result) FAIL(to_line(result.error()));
  return std::move(result.value());
}

const Nearness& nearness(const Why& why) {
  REQUIRE(why.columns.size() == 1);
  REQUIRE(why.columns.front().nearness);
  return *why.columns.front().nearness;
}

std::vector<std::uint64_t> lines(const std::vector<HoldingRow>& rows) {
  std::vector<std::uint64_t> result;
  for (const HoldingRow& row : rows) result.push_back(row.line);
  return result;
}

/// `ones` rows of 1 among `count`, the first at row 3, then every other; a second column varies.
std::string indicator(int count, int ones, int weight = 1) {
  std::string text = "flag,x,w\n";
  for (int i = 0; i < count; ++i) {
    const bool on = i >= 2 && i % 2 == 0 && (i - 2) / 2 < ones;
    text += fmt::format("{},{},{}\n", on ? 1 : 0, 10 + i * i % 7, weight);
  }
  return text;
}

}  // namespace

TEST_CASE("rows that hold a 0/1 column up beside the constant: closed form") {
  // r is 1 - p in the m rows of ones and -p in the others, p = m / n; equal weights cancel.
  for (const int weight : {1, 3}) {
    for (const int ones : {3, 12, 40}) {
      CAPTURE(ones);
      CAPTURE(weight);
      const int count = 100;
      Request request;
      request.design.design = "constant, flag";
      request.design.weight = "w";
      const Why why = answered(indicator(count, ones, weight), request, "flag");
      const Nearness& near = nearness(why);
      const double m = ones, n = count, p = m / n, q = 1 - p;
      const double squares = m * q;  // m q^2 + (n - m) p^2
      const double fourth = m * q * q * q * q + (n - m) * p * p * p * p;
      REQUIRE(near.identifying_rows);
      // Sums of 100 squares, condition number below 10: 100 * 10 * 2^-53 is 1e-13; a formula
      // without the mean, or with plain shares for their squares, is off by more than 1 in 100.
      CHECK(*near.identifying_rows == doctest::Approx(squares * squares / fourth).epsilon(1e-11));
      REQUIRE(near.rows.size() == 5);
      const double largest = std::max(q * q, p * p) / squares;
      CHECK(near.rows.front().share == doctest::Approx(largest).epsilon(1e-11));
      CHECK(near.inflation);
      CHECK(near.kept);
      CHECK(why.passed_for_rows);
      CHECK(near.rare.empty() == (ones >= 10));
      // All rows of a rare level are named, and none where there are many.
      CHECK(near.rare_rows.size() == (ones < 10 ? static_cast<std::size_t>(ones) : 0));
      if (ones == 3) {
        CHECK(lines(near.rare_rows) == std::vector<std::uint64_t>{4, 6, 8});
        CHECK(near.rare_rows.front().row == 3);
        CHECK(near.rare_rows.front().cells ==
              std::vector<std::pair<std::string, std::string>>{{"flag", "1"}});
      }
    }
  }
}

TEST_CASE("the few zeros of a 0/1 column are named beside the constant") {
  std::string text = "flag,x\n";
  for (int i = 0; i < 60; ++i)
    text += fmt::format("{},{}\n", i == 7 || i == 30 ? 0 : 1, i * i % 11);
  const Why why = asked(text, "constant, flag, x", "flag");
  CHECK(lines(nearness(why).rare_rows) == std::vector<std::uint64_t>{9, 32});
}

TEST_CASE("a relation that rows break: those rows are the ones that hold it up") {
  Random random(3);
  std::string text = "a,b,total\n";
  for (int i = 0; i < 200; ++i) {
    const auto a = random.whole(1, 500), b = random.whole(1, 500);
    text += fmt::format("{},{},{}\n", a, b, a + b + (i == 41 ? 7 : 0));
  }
  const Why why = asked(text, "constant, a, b, total", "total");
  const Nearness& near = nearness(why);
  REQUIRE_FALSE(near.relations.empty());
  CHECK(near.relations.front().standing == Standing::exact_except);
  REQUIRE(near.relations.front().violations.size() == 1);
  CHECK(near.relations.front().violations.front().line == 43);
  REQUIRE(near.identifying_rows);
  // One row has a residual and the others, through it, almost none.
  CHECK(*near.identifying_rows < 1.1);
  REQUIRE_FALSE(near.rows.empty());
  CHECK(near.rows.front().line == 43);
  CHECK(near.rows.front().share > 0.95);
  CHECK(near.rows.front().cells.size() == 3);
  CHECK_FALSE(near.between_columns.empty());
}

TEST_CASE("the residual direction gives the residuals of least squares, whatever the units") {
  for (std::uint64_t seed = 1; seed <= 20; ++seed) {
    CAPTURE(seed);
    Random random(seed);
    Matrix x(50, 4);
    for (Index i = 0; i < x.rows(); ++i) {
      x(i, 0) = 1;
      x(i, 1) = random.unit() * 1e100;
      x(i, 2) = random.unit() * 1e-100;
      x(i, 3) = x(i, 1) * 1e-100 + 0.1 * random.unit();
    }
    const Vector direction = residual_direction(test::folded_with_ones(x), {0, 1, 2, 3}, 3, 4);
    const Vector residual = x * direction;
    CHECK(residual.squaredNorm() == doctest::Approx(1).epsilon(1e-12));
    // Orthogonal to every other column: c u kappa with kappa below 100 and 50 rows is 1e-12; a
    // direction that forgot a column or its unit would be off by 0.1 and more.
    for (Index j = 0; j < 3; ++j) CHECK(std::abs(residual.dot(x.col(j)) / x.col(j).norm()) < 1e-11);
  }
}

TEST_CASE("columns that stand for themselves, and columns outside the proof") {
  Random random(5);
  std::string text = "x,y,income\n";
  for (int i = 0; i < 80; ++i)
    text += fmt::format("{},{},{}\n", random.whole(0, 99), random.whole(0, 99),
                        random.whole(1000, 9000));
  const Why plain = asked(text, "constant, x, y, log(income)", "x");
  CHECK(nearness(plain).relations.empty());
  CHECK(nearness(plain).between_columns.empty());
  CHECK(plain.habits.empty());
  CHECK(nearness(asked(text, "constant, x, y, log(income)", "log(income)")).kept);
  CHECK(nearness(asked(text, "constant, x, y, log(income)", "constant")).inflation);
}

TEST_CASE("the same answer for any number of threads and for several columns at once") {
  Random random(6);
  std::string text = "region,x,y\n";
  for (int i = 0; i < 9000; ++i) {
    const char* names[] = {"north", "south", "east", "west"};
    text += fmt::format("{},{},{}\n", names[random.whole(0, 3)], random.whole(0, 99),
                        random.whole(0, 9));
  }
  Request request;
  request.design.design = "constant, levels(region), x, y";
  const auto rows_of = [&](unsigned threads) {
    request.threads = threads;
    const Why why = answered(text, request, "levels(region)");
    CHECK(why.columns.size() == 3);
    std::vector<double> figures;
    for (const WhyColumn& column : why.columns) {
      REQUIRE(column.nearness);
      figures.push_back(*column.nearness->identifying_rows);
      for (const HoldingRow& row : column.nearness->rows) {
        figures.push_back(static_cast<double>(row.row));
        figures.push_back(row.share);
      }
    }
    return figures;
  };
  CHECK(rows_of(1) == rows_of(3));
}

}  // namespace gramproof::audit
