// Which levels stay once the rows used are known.
#include <doctest/doctest.h>

#include "design/rows.hpp"
#include "harbour.hpp"

using namespace gramproof;
using Labels = std::vector<std::string>;

namespace {

design::Settled settle_on(const std::string& text, const test::Table& table,
                          const std::vector<std::size_t>& rows) {
  const auto design = test::bind_text(text, table.schema);
  if (!design) FAIL(to_line(design.error()));
  auto counts = design::start_counts(design.value(), table.schema);
  design::count_levels(design.value(), table.schema, table.piece, rows, counts);
  return design::settle(design.value(), table.schema, counts);
}

/// region: north 0 5 9 10, south 1 2 4 7 8, east 3 6 11.  grade: 1 in 0 4 8, 2 in 1 2 5 7 9 11, 3
/// in 3 6 10.
struct Case {
  std::string why, design;
  std::vector<std::size_t> rows;
  Labels labels;
  std::vector<int>
      left_out;  ///< indices by first appearance: north 0, south 1, east 2; grades 1, 2, 3 likewise
  Labels notes;
};

const std::vector<Case> cases = {
    {"the most frequent is left out",
     "levels(region)",
     {0, 1, 2, 3},
     {"[region = east]", "[region = north]"},
     {1},
     {}},
    {"on the rows used",
     "levels(region)",
     {0, 5, 2, 3},
     {"[region = east]", "[region = south]"},
     {0},
     {}},
    {"ties go to the first in listing order",
     "levels(region)",
     {0, 2, 3},
     {"[region = north]", "[region = south]"},
     {2},
     {}},
    {"numbers list as numbers",
     "levels(grade)",
     {0, 3, 1},
     {"[grade = 2]", "[grade = 3]"},
     {0},
     {}},
    {"absent levels give no column", "levels(region)", {0, 5, 1}, {"[region = south]"}, {0}, {}},
    {"against",
     "levels(region, against = east)",
     {0, 5, 1, 3},
     {"[region = north]", "[region = south]"},
     {2},
     {}},
    {"against a level without rows",
     "levels(region, against = east)",
     {0, 5, 1},
     {"[region = south]"},
     {0},
     {"level_against_absent"}},
    {"all levels",
     "all_levels(region)",
     {0, 5, 1},
     {"[region = north]", "[region = south]"},
     {-1},
     {}},
    {"a single level", "constant, levels(region)", {0, 5}, {"constant"}, {0}, {"single_level"}},
    {"products keep combinations of present levels",
     "levels(region) * all_levels(grade)",
     {0, 1, 2, 3},
     {"[region = east] * [grade = 1]", "[region = east] * [grade = 2]",
      "[region = east] * [grade = 3]", "[region = north] * [grade = 1]",
      "[region = north] * [grade = 2]", "[region = north] * [grade = 3]"},
     {1, -1},
     {"main_effect_absent"}},
    {"products of two sets that leave one out",
     "levels(region), levels(grade), levels(region) * levels(grade)",
     {0, 1, 2, 3},
     {"[region = east]", "[region = north]", "[grade = 1]", "[grade = 3]",
      "[region = east] * [grade = 1]", "[region = east] * [grade = 3]",
      "[region = north] * [grade = 1]", "[region = north] * [grade = 3]"},
     {1, 1},
     {}},
    {"no rows", "constant, levels(region)", {}, {"constant"}, {-1}, {}},
};

}  // namespace

TEST_CASE("settled levels") {
  const auto table = test::harbour();
  for (const Case& item : cases) {
    CAPTURE(item.why);
    const auto settled = settle_on(item.design, table, item.rows);
    CHECK(test::labels_of(settled.design) == item.labels);
    CHECK(settled.left_out == item.left_out);
    CHECK(test::kinds_of(settled.design.notes) == item.notes);
  }
}

TEST_CASE("provisional columns are named by the settled ones") {
  const auto table = test::harbour();
  const auto provisional = test::bind_text("constant, levels(region), age", table.schema);
  REQUIRE(provisional);
  const auto settled = settle_on("constant, levels(region), age", table, {0, 1, 2, 3});
  REQUIRE(settled.provisional.size() == settled.design.columns.size());
  for (std::size_t j = 0; j < settled.provisional.size(); ++j) {
    const auto& before =
        provisional.value().columns[static_cast<std::size_t>(settled.provisional[j])];
    CHECK(before.label == settled.design.columns[j].label);
  }
  CHECK(settled.design.terms[1].columns == std::vector<int>{1, 2});
  CHECK(settled.design.terms[2].columns == std::vector<int>{3});
}
