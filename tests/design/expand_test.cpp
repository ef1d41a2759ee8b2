// Rows of the design matrix from a piece: which rows are used, why others are not, and what stops.
#include <doctest/doctest.h>

#include <cmath>

#include "design/rows.hpp"
#include "harbour.hpp"

using namespace gramproof;
using Reason = design::Exclusion::Reason;
using Rows = std::vector<std::size_t>;

namespace {

const std::vector<std::string> files = {"table.csv"};

design::Design must_bind(const design::Request& request, const test::Table& table) {
  auto design = test::bind_request(request, table.schema);
  if (!design) FAIL(to_line(design.error()));
  return design.value();
}

design::Block must_expand(const design::Request& request, const test::Table& table) {
  auto block = design::expand(must_bind(request, table), table.schema, files, table.piece);
  if (!block) FAIL(to_line(block.error()));
  return block.value();
}

Error expand_error(const design::Request& request, const test::Table& table) {
  const auto block = design::expand(must_bind(request, table), table.schema, files, table.piece);
  REQUIRE_FALSE(block);
  return block.error();
}

std::uint64_t excluded(const design::Block& block, Reason reason, int column) {
  for (const auto& entry : block.excluded) {
    if (entry.reason == reason && entry.column == column) return entry.rows;
  }
  return 0;
}

design::Request request_of(const std::string& text) {
  design::Request request;
  request.design = text;
  return request;
}

}  // namespace

TEST_CASE("values of a small design") {
  const auto table = test::harbour();
  const auto block =
      must_expand(request_of("constant, age, [region = north] * age, age / 2"), table);
  CHECK(block.rows.size() == 12);
  CHECK(block.rows_excluded == 0);
  CHECK(block.weights.size() == 0);
  CHECK(block.values.row(0) == (Vector(4) << 1, 25, 25, 12.5).finished().transpose());
  CHECK(block.values.row(1) == (Vector(4) << 1, 30, 0, 15).finished().transpose());
}

TEST_CASE("why rows are excluded") {
  const auto table = test::make_table({"x", "y", "w", "t"},
                                      {{"1", "1", "1", "a"},
                                       {"", "", "1", "a"},     // missing in x and y
                                       {"3", "", "0", "a"},    // missing counts before weight
                                       {"4", "2", "0", "a"},   // weight 0
                                       {"0", "-1", "2", "a"},  // log x and sqrt y undefined
                                       {"6", "-1", "2", "a"},  // sqrt y undefined
                                       {"9", "", "1", "b"},    // filtered, and missing in y
                                       {"9", "3", "1", ""},    // condition not known: missing in t
                                       {"9", "4", "3", "a"}});
  design::Request request = request_of("constant, log(x), sqrt(y)");
  request.weight = "w";
  request.rows = "t = a";
  const auto block = must_expand(request, table);
  CHECK(block.rows == Rows{0, 8});
  CHECK(block.rows_excluded == 7);
  CHECK(excluded(block, Reason::filter, -1) == 1);
  CHECK(excluded(block, Reason::missing, 0) == 1);
  CHECK(excluded(block, Reason::missing, 1) == 2);
  CHECK(excluded(block, Reason::missing, 3) == 1);
  CHECK(excluded(block, Reason::weight_zero, -1) == 1);
  CHECK(excluded(block, Reason::undefined, 1) == 1);
  CHECK(excluded(block, Reason::undefined, 2) == 2);
  CHECK(block.excluded.size() == 7);
  CHECK(block.weights == (Vector(2) << 1, 3).finished());
  CHECK(block.values(1, 1) == doctest::Approx(std::log(9.0)));
}

TEST_CASE("response and further columns must be present") {
  const auto table =
      test::make_table({"x", "y", "z"}, {{"1", "", "a"}, {"2", "1", ""}, {"3", "1", "b"}});
  design::Request request = request_of("constant, x");
  CHECK(must_expand(request, table).rows.size() == 3);
  request.response = "y";
  CHECK(must_expand(request, table).rows == Rows{1, 2});
  request.complete = {"z"};
  CHECK(must_expand(request, table).rows == Rows{2});
}

TEST_CASE("what stops an expansion") {
  const auto table =
      test::make_table({"x", "big", "w"}, {{"1", "1e200", "1"}, {"0", "1e-200", "-0.5"}});
  design::Request request = request_of("constant, log(x)");
  request.undefined = design::Undefined::stop;
  CHECK(to_line(expand_error(request, table)) ==
        "table.csv:3: log(x) is undefined in this row (--undefined exclude leaves such rows out)");
  request = request_of("constant");
  request.weight = "w";
  CHECK(to_line(expand_error(request, table)) ==
        "table.csv:3: the weight \"w\" is -0.5 (weights are numbers from 0 up)");
  CHECK(to_line(expand_error(request_of("x, big^2"), table)) ==
        "table.csv:2: big^2 is out of range: inf (values lie between 1e-305 and 1e305 in size; "
        "change the unit)");
  // 1e-400 underflows: it is not a zero.
  const auto small = test::make_table({"x"}, {{"1e-200"}});
  CHECK(expand_error(request_of("x * x"), small).where == "table.csv:2");
  CHECK(expand_error(request_of("x^2"), small).where == "table.csv:2");
  CHECK(expand_error(request_of("exp(-1 / x)"), small).where == "table.csv:2");
  // An intermediate result beyond the doubles does no harm when the value itself is exact.
  CHECK(must_expand(request_of("x * x / x"), small).values(0, 0) == doctest::Approx(1e-200));
  const auto large = test::make_table({"x"}, {{"1e200"}});
  CHECK(must_expand(request_of("x^4 / x^4"), large).values(0, 0) == 1);
}

TEST_CASE("rows of a gathered piece name their own file") {
  auto table = test::make_table({"x"}, {{"1"}, {"0"}});
  table.piece.file_of_row = {0, 1};
  auto request = request_of("log(x)");
  request.undefined = design::Undefined::stop;
  const auto block =
      design::expand(must_bind(request, table), table.schema, {"a.csv", "b.csv"}, table.piece);
  REQUIRE_FALSE(block);
  CHECK(block.error().where == "b.csv:3");
}

TEST_CASE("no row used") {
  const auto table = test::make_table({"x", "y"}, {{"1", ""}, {"2", "NA"}});
  const auto block = must_expand(request_of("constant, x, y"), table);
  CHECK(block.rows.empty());
  CHECK(block.values.rows() == 0);
  CHECK(block.values.cols() == 3);
}

TEST_CASE("levels are counted on the rows used") {
  const auto table = test::harbour();
  const auto design = must_bind(request_of("levels(region), levels(grade)"), table);
  auto counts = design::start_counts(design, table.schema);
  design::count_levels(design, table.schema, table.piece, {0, 1, 2, 4}, counts);
  design::count_levels(design, table.schema, table.piece, {3}, counts);
  CHECK(counts == design::LevelCounts{{1, 3, 1}, {2, 2, 1}});
}

TEST_CASE("numeric levels that share a double are kept apart") {
  const auto table =
      test::make_table({"x"}, {{"0.1"}, {"0.10000000000000000001"}, {"0.10"}, {"2"}});
  const auto design = must_bind(request_of("levels(x)"), table);
  REQUIRE(design.columns.size() == 3);
  auto counts = design::start_counts(design, table.schema);
  design::count_levels(design, table.schema, table.piece, {0, 1, 2, 3}, counts);
  CHECK(counts == design::LevelCounts{{2, 1, 1}});
  CHECK(design.columns[1].label == "[x = 0.10000000000000000001]");
  const auto block = must_expand(request_of("levels(x)"), table);
  CHECK(block.values.col(0) == (Vector(4) << 1, 0, 1, 0).finished());
  CHECK(block.values.col(1) == (Vector(4) << 0, 1, 0, 0).finished());
}
