// Columns with log, sqrt, exp and asinh: proved independent, or related to 60 digits.
#include "exact/interval_rank.hpp"

#include <doctest/doctest.h>
#include <fmt/format.h>

#include <algorithm>
#include <functional>
#include <map>
#include <numeric>
#include <string>
#include <vector>

#include "design/bind.hpp"
#include "design/rows.hpp"
#include "exact/rank.hpp"
#include "exact/surely_regular.hpp"
#include "support/random_numbers.hpp"
#include "support/table_builder.hpp"

using namespace gramproof;
using Cells = std::vector<std::vector<std::string>>;

namespace {

/// One coefficient a label, the dependent column -1; simple ones as fractions, others rounded.
std::string text_of(const exact::RoundingRelation& relation, const design::Design& design) {
  std::string text;
  for (const exact::RoundingRelation::Term& term : relation.terms) {
    const std::string number =
        term.simple ? term.coefficient.get_str() : fmt::format("~{:.9g}", term.coefficient.get_d());
    text += fmt::format("{}{} [{}]", text.empty() ? "" : " ", number,
                        design.columns[static_cast<std::size_t>(term.column)].label);
  }
  return text;
}

struct Answer {
  std::vector<std::string> relations;
  std::size_t independent = 0, unsettled = 0;
};

Answer answered(const test::Table& table, const std::string& text) {
  design::Request request;
  request.design = text;
  const auto syntax = design::parse(request);
  REQUIRE(syntax);
  const auto bound = design::bind(*syntax.value(), request, table.schema, "table.csv", 1000);
  REQUIRE(bound);
  const design::Design& design = bound.value();
  std::vector<int> exact_columns, inexact;
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    (design.columns[j].exact ? exact_columns : inexact).push_back(static_cast<int>(j));
  }
  const exact::SampleRank rank = exact::rank_of_sample(design, table.piece, exact_columns);
  const auto block = design::expand(design, table.schema, {"table.csv"}, table.piece);
  REQUIRE(block);
  REQUIRE(block.value().rows.size() == table.piece.rows);
  const exact::IntervalRank found = exact::interval_rank({design,
                                                          table.piece,
                                                          block.value().values,
                                                          rank.pivot_columns,
                                                          rank.pivot_rows,
                                                          inexact,
                                                          {}});
  Answer answer{{}, found.independent.size(), found.unsettled.size()};
  const exact::Enclosures enclosures(design);
  for (const exact::RoundingRelation& relation : found.relations) {
    answer.relations.push_back(text_of(relation, design));
    for (std::size_t i = 0; i < table.piece.rows; ++i) {
      exact::RowEnclosures row(enclosures, table.piece, i);
      CHECK(exact::residual_of(relation, row).holds);
    }
  }
  CHECK(answer.independent + answer.relations.size() + answer.unsettled == inexact.size());
  return answer;
}

test::Table table_of(const std::vector<std::string>& names, int count, std::uint64_t seed,
                     const std::function<std::vector<std::string>(int, test::Random&)>& row) {
  test::Random random(seed);
  Cells cells;
  for (int i = 0; i < count; ++i) cells.push_back(row(i, random));
  return test::make_table(names, cells);
}

/// Positive decimals a, b and x.
test::Table positive(int count, std::uint64_t seed) {
  return table_of({"a", "b", "x"}, count, seed, [](int, test::Random& random) {
    const auto decimal = [&random] {
      return fmt::format("{}.{:02d}", random.whole(1, 400), random.whole(0, 99));
    };
    return std::vector<std::string>{decimal(), decimal(), decimal()};
  });
}

}  // namespace

TEST_CASE("identities are found with their coefficients, and nothing else") {
  struct Case {
    std::string why, design;
    std::vector<std::string> relations;
  };
  const std::vector<Case> cases = {
      {"a power", "constant, log(x), log(x^2)", {"2 [log(x)] -1 [log(x^2)]"}},
      {"a product",
       "constant, log(a), log(b), log(a * b)",
       {"1 [log(a)] 1 [log(b)] -1 [log(a * b)]"}},
      {"a quotient and a cube root of a kind",
       "log(a), log(b), log(a^3 / b^2)",
       {"3 [log(a)] -2 [log(b)] -1 [log(a^3 / b^2)]"}},
      {"a root taken out", "a * sqrt(b), sqrt(a^2 * b), x", {"1 [a * sqrt(b)] -1 [sqrt(a^2 * b)]"}},
      {"an inverse: the exact column is kept",
       "constant, exp(log(x)), x",
       {"-1 [exp(log(x))] 1 [x]"}},
      {"asinh is a logarithm",
       "constant, asinh(x), log(x + sqrt(x^2 + 1))",
       {"1 [asinh(x)] -1 [log(x + sqrt(x^2 + 1))]"}},
      {"another unit: log 100 is no fraction",
       "constant, log(x), log(x / 100)",
       {"~-4.60517019 [constant] 1 [log(x)] -1 [log(x / 100)]"}},
      {"a factor e",
       "exp(x / 100), exp(x / 100 + 1)",
       {"~2.71828183 [exp(x / 100)] -1 [exp(x / 100 + 1)]"}},
      {"a half", "constant, log(x), log(sqrt(x)), x", {"1/2 [log(x)] -1 [log(sqrt(x))]"}},
      {"zero in every row", "constant, x, log(x / x)", {"-1 [log(x / x)]"}},
      {"one value in every row",
       "constant, x, sqrt(x / x + 1)",
       {"~1.41421356 [constant] -1 [sqrt(x / x + 1)]"}},
      {"two at once",
       "log(a), log(b), log(a * b), log(a / b)",
       {"1 [log(a)] 1 [log(b)] -1 [log(a * b)]", "1 [log(a)] -1 [log(b)] -1 [log(a / b)]"}},
      {"the same column twice", "constant, log(x), 1 * log(x)", {"1 [log(x)] -1 [1 * log(x)]"}},
      {"nothing", "constant, x, log(x), sqrt(x), asinh(x), exp(x / 100)", {}},
      {"near, but not within rounding", "constant, asinh(100 * x), log(200 * x)", {}},
      {"a sum of logarithms is no logarithm of a sum", "log(a), log(b), log(a + b)", {}},
      {"products with brackets", "constant, [a > 200], [a > 200] * log(x), log(x)", {}},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const Answer answer = answered(positive(60, 5), c.design);
    CHECK(answer.relations == c.relations);
    CHECK(answer.unsettled == 0);
  }
}

TEST_CASE("two values only: any function of them is a straight line") {
  const test::Table table = table_of({"x"}, 30, 6, [](int i, test::Random&) {
    return std::vector<std::string>{i % 3 == 0 ? "1" : "2"};
  });
  const Answer answer = answered(table, "constant, x, log(x)");
  REQUIRE(answer.relations.size() == 1);
  CHECK(answer.relations[0] == "~-0.693147181 [constant] ~0.693147181 [x] -1 [log(x)]");
}

TEST_CASE("close columns far from zero are told apart where doubles cannot") {
  const test::Table table = table_of({"period"}, 40, 7, [](int i, test::Random&) {
    return std::vector<std::string>{std::to_string(2000 + i % 20)};
  });
  // What x, ..., x^5 leave of log(x) near 2010 is about (10 / 2010)^6 / (6 * 2^5) = 8e-17, the next
  // Chebyshev term: below the last digit of a double.
  for (const std::string powers :
       {"period, period^2, period^3, period^4, period^5",
        "period, period^2, period^3, period^4, period^5, period^6, period^7, period^8"}) {
    CAPTURE(powers);
    const Answer answer = answered(table, "constant, " + powers + ", log(period)");
    CHECK(answer.relations.empty());
    CHECK(answer.independent == 1);
  }
}

TEST_CASE("no more rows than columns") {
  const test::Table table = positive(3, 8);
  CHECK(answered(table, "constant, x, log(x)").independent == 1);
  CHECK(answered(table, "a, x, log(x)").independent == 1);
}

TEST_CASE("random identities are found, random others are proved independent") {
  const std::vector<std::string> pieces = {
      "log(a)",   "log(b)",        "log(x)",     "sqrt(a)",     "sqrt(b)",
      "asinh(x)", "exp(a / 1000)", "a * log(x)", "sqrt(a * b)", "log(a + b)"};
  // Each can be written with the pieces named.
  const std::vector<std::pair<std::string, std::vector<std::size_t>>> planted = {
      {"log(a^2 * b)", {0, 1}},          {"log(x / a)", {2, 0}},         {"sqrt(16 * a)", {3}},
      {"sqrt(a) - 2 * sqrt(b)", {3, 4}}, {"exp(a / 1000) / 7", {6}},     {"a * log(x^3)", {7}},
      {"sqrt(9 * a * b)", {8}},          {"log((a + b)^2 / x)", {9, 2}}, {"asinh(-x)", {5}},
  };
  for (std::uint64_t seed = 1; seed <= 60; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    std::vector<std::size_t> chosen;
    for (std::size_t i = 0; i < pieces.size(); ++i) {
      if (random.whole(0, 2) > 0) chosen.push_back(i);
    }
    std::string design = "constant, a, x";
    for (const std::size_t i : chosen) design += ", " + pieces[i];
    std::size_t expected = 0;
    for (const auto& [text, needs] : planted) {
      if (random.whole(0, 2) > 0) continue;
      const bool there = std::all_of(needs.begin(), needs.end(), [&chosen](std::size_t need) {
        return std::find(chosen.begin(), chosen.end(), need) != chosen.end();
      });
      if (!there) continue;
      design += ", " + text;
      ++expected;
    }
    CAPTURE(design);
    const Answer answer = answered(positive(static_cast<int>(random.whole(25, 80)), seed), design);
    CHECK(answer.relations.size() == expected);
    CHECK(answer.independent == chosen.size());
    CHECK(answer.unsettled == 0);
  }
}

TEST_CASE("regularity in doubles: what is proved and what is not") {
  struct Case {
    std::string why;
    std::vector<std::vector<double>> rows;
    double radius;
    bool proved;
  };
  const std::vector<Case> cases = {
      {"the identity", {{1, 0}, {0, 1}}, 0, true},
      {"units far apart", {{1e-200, 3e100}, {2e-200, 1e100}}, 0, true},
      {"singular", {{1, 2}, {2, 4}}, 0, false},
      {"singular to the last bit", {{1, 1}, {1, 1 + 0x1p-52}}, 0, false},
      {"regular, but not within what is known of it", {{1, 1}, {1, 1.01}}, 0.01, false},
      {"regular within it", {{1, 1}, {1, 1.5}}, 0.01, true},
      {"a column of zeros", {{0, 1}, {0, 2}}, 0, false},
      {"not finite", {{1, 0}, {0, 1e308 * 10}}, 0, false},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    Matrix middle(2, 2);
    middle << c.rows[0][0], c.rows[0][1], c.rows[1][0], c.rows[1][1];
    CHECK(exact::surely_regular(middle, Matrix::Constant(2, 2, c.radius)) == c.proved);
  }
}

TEST_CASE("a matrix that some member of the interval makes singular is never proved regular") {
  for (std::uint64_t seed = 1; seed <= 200; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const Index n = random.whole(2, 12);
    Matrix middle(n, n);
    for (Index i = 0; i < n; ++i) {
      for (Index j = 0; j < n; ++j) middle(i, j) = static_cast<double>(random.whole(-99, 99));
    }
    // The last column becomes a combination of the others, moved by less than the radius.
    middle.col(n - 1).setZero();
    for (Index j = 0; j + 1 < n; ++j) {
      middle.col(n - 1) += static_cast<double>(random.whole(-3, 3)) * middle.col(j);
    }
    const double radius = std::ldexp(1.0, -static_cast<int>(random.whole(1, 40)));
    for (Index i = 0; i < n; ++i) middle(i, n - 1) += radius * (2 * random.unit() - 1);
    CHECK_FALSE(exact::surely_regular(middle, Matrix::Constant(n, n, radius)));
  }
}
