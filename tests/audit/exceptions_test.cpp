// Relations that a few rows break, and relations that only rounding breaks: from a file to the
// verdict.
#include <doctest/doctest.h>
#include <fmt/format.h>

#include <string>
#include <vector>

#include "audit/audited.hpp"

namespace gramproof::audit {
namespace {

using test::Random;

/// men + women = all but in the rows named, which are off by what is said.
std::string headcount(int count, const std::vector<std::pair<int, int>>& off) {
  return rows("men,women,all,x", count, 31, [&](int i, Random& random) {
    const auto men = random.whole(0, 5000), women = random.whole(0, 5000);
    std::int64_t all = men + women;
    for (const auto& [row, by] : off) {
      if (row == i) all += by;
    }
    return fmt::format("{},{},{},{}", men, women, all, random.whole(0, 99));
  });
}

}  // namespace

TEST_CASE("five rows off by one and one by 530 are one finding") {
  const std::vector<std::pair<int, int>> off = {{17, 1},    {400, 1},    {401, 1},
                                                {2500, -1}, {7000, 530}, {9999, 1}};
  for (const int count : {1000 * 10, 30'000}) {
    CAPTURE(count);
    const Audit audit = audited(headcount(count, off), "constant, men, women, all, x");
    CHECK(audit.rank.nullity == 0);
    const auto found = relations_at(audit, Standing::exact_except);
    REQUIRE(found.size() == 1);
    CHECK(found[0]->text == "men + women = all");
    CHECK(found[0]->rows_violating == off.size());
    REQUIRE(found[0]->violations.size() == off.size());
    for (std::size_t i = 0; i < off.size(); ++i) {
      CHECK(found[0]->violations[i].row == static_cast<std::uint64_t>(off[i].first) + 1);
      CHECK(found[0]->violations[i].line == static_cast<std::uint64_t>(off[i].first) + 2);
    }
    CHECK(found[0]->violations[4].residual == "-530");
    CHECK(found[0]->largest_residual == "530");
    CHECK(found[0]->cause_kind == "parts_and_total");
    CHECK(audit.verdict.grounds.informative.grade == Grade::fail);
  }
}

TEST_CASE("an exact relation beside one with exceptions: both are told") {
  std::vector<std::pair<int, int>> off = {{40, 3}, {41, 3}};
  std::string text = rows("a,b,c,d,e", 800, 32, [&](int i, Random& random) {
    const auto a = random.whole(0, 99), b = random.whole(0, 99), d = random.whole(0, 99);
    return fmt::format("{},{},{},{},{}", a, b, a + b, d, a + d + (i == 40 || i == 41 ? 3 : 0));
  });
  const Audit audit = audited(text, "constant, a, b, c, d, e");
  CHECK(audit.rank.nullity == 1);
  const auto found = relations_at(audit, Standing::exact_except);
  REQUIRE(found.size() == 1);
  CHECK(found[0]->text == "a + d = e");
  CHECK(found[0]->rows_violating == 2);
}

TEST_CASE("more rows than one in a hundred break it: no relation") {
  std::vector<std::pair<int, int>> off;
  for (int i = 0; i < 30; ++i) off.emplace_back(20 * i, 1);
  const Audit audit = audited(headcount(1000, off), "constant, men, women, all, x");
  CHECK(relations_at(audit, Standing::exact_except).empty());
}

TEST_CASE("cells of an interaction are not accused for being small") {
  // 60 of 3,000 rows are in the west, 20 of these in the level that is left out: what is 0 outside
  // the west says nothing about it.
  const auto table = [](int in_cell) {
    return rows("region,phase,x", 3000, 33, [in_cell](int i, Random& random) {
      const char* phases[] = {"early", "middle", "late"};
      const bool west = i % 50 == 0;
      const int place = i / 50;
      const char* phase = west ? (place < in_cell ? "late" : phases[place % 2])
                               : (i % 3 == 0 ? phases[i / 3 % 3] : "late");
      return fmt::format("{},{},{}",
                         west         ? "west"
                         : i % 2 == 0 ? "east"
                                      : "south",
                         phase, random.whole(0, 999));
    });
  };
  const std::string design =
      "constant, levels(region), levels(phase, against = late), levels(region) * levels(phase, "
      "against = late), x";
  const Audit twenty = audited(table(20), design);
  CHECK(relations_at(twenty, Standing::exact_except).empty());
  CHECK(twenty.rare_levels.empty());
  // Four rows are few: the coefficient of the west rests on them. A caution, as for any rare level.
  const Audit four = audited(table(4), design);
  CHECK(relations_at(four, Standing::exact_except).empty());
  REQUIRE(four.rare_levels.size() == 1);
  CHECK(four.rare_levels[0].label == "[region = west] * [phase = late]");
  CHECK(four.rare_levels[0].rows == 4);
  CHECK(four.verdict.grounds.informative.grade == Grade::caution);
}

TEST_CASE("shares that sum to 100 up to rounding, and a length in two rounded units") {
  const std::string text = rows("rent,food,other,feet,metres,z", 5000, 34, [](int, Random& random) {
    const double rent = 20 + 30 * random.unit(), food = 10 + 20 * random.unit();
    const double metres = 1 + 9 * random.unit();
    return fmt::format("{:.1f},{:.1f},{:.1f},{:.1f},{:.2f},{}", rent, food, 100 - rent - food,
                       metres / 0.3048, metres, random.whole(0, 99));
  });
  const Audit audit = audited(text, "constant, rent, food, other, feet, metres, z");
  CHECK(audit.rank.nullity == 0);
  const auto found = relations_at(audit, Standing::within_recorded_precision);
  REQUIRE(found.size() == 2);
  for (const RelationFinding* relation : found) {
    CAPTURE(relation->text);
    CHECK(relation->rows_holding == 5000);
    CHECK(relation->rows_violating == 0);
    // Three shares rounded to 0.1 are off by 0.15 at most; feet by 0.05, metres by 0.005 / 0.3048.
    CHECK(relation->largest_residual_value <= 0.15 * 1.02);
    CHECK(relation->largest_residual_value > 0.04);
  }
  CHECK(relations_at(audit, Standing::near).empty());
  CHECK(audit.verdict.grounds.recorded.grade == Grade::fail);
  // Said to be exact, the same numbers are merely near.
  Request request;
  request.design.design = "constant, rent, food, other, feet, metres, z";
  request.recorded = {{"rent", 0}, {"food", 0}, {"other", 0}, {"feet", 0}, {"metres", 0}};
  const Audit exact = audited(text, request);
  CHECK(relations_at(exact, Standing::within_recorded_precision).empty());
  CHECK(relations_at(exact, Standing::near).size() == 2);
}

TEST_CASE("one row beyond rounding: near, not within it") {
  const auto text = [](double error) {
    return rows("feet,metres,z", 5000, 35, [error](int i, Random& random) {
      const double metres = 1 + 9 * random.unit();
      return fmt::format("{:.1f},{:.2f},{}", metres / 0.3048 + (i == 3210 ? error : 0), metres,
                         random.whole(0, 99));
    });
  };
  CHECK(relations_at(audited(text(0), "constant, feet, metres, z"),
                     Standing::within_recorded_precision)
            .size() == 1);
  CHECK(relations_at(audited(text(0.3), "constant, feet, metres, z"),
                     Standing::within_recorded_precision)
            .empty());
}

TEST_CASE("relations are proved while rows are folded") {
  struct Case {
    std::string why;
    std::string text, design;
    std::uint64_t nullity;
    int passes;
  };
  const auto totals = [](int count, int from) {
    return rows("a,b,c,g", count, 36, [from](int i, Random& random) {
      const auto a = random.whole(0, 500), b = random.whole(0, 500);
      return fmt::format("{},{},{},{}", a, b, i < from ? a : a + b, i / 4096);
    });
  };
  const std::vector<Case> cases = {
      {"holds in all pieces: survey and fold", totals(20'000, 0), "constant, a, b, c", 1, 2},
      {"the first piece shows a relation that later ones break", totals(20'000, 4096),
       "constant, a, b, c", 0, 2},
      {"levels that the first piece has not seen", totals(20'000, 0),
       "constant, a, b, c, all_levels(g)", 2, 2},
      {"one piece holds everything", totals(3'000, 0), "constant, a, b, c", 1, 2}};
  for (const Case& row : cases) {
    CAPTURE(row.why);
    const Audit audit = audited(row.text, row.design);
    CHECK(audit.rank.nullity == row.nullity);
    CHECK(audit.passes == row.passes);
  }
}

}  // namespace gramproof::audit
