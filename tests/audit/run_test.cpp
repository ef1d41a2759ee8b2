// From a file to a verdict: the traps of real specifications, each with what must be found, and
// ordinary specifications, which must not be accused of anything.
#include <doctest/doctest.h>
#include <fmt/format.h>

#include <algorithm>
#include <functional>
#include <string>
#include <vector>

#include "audit/audited.hpp"

namespace gramproof::audit {
namespace {

using test::Random;

const RelationFinding* first_of(const Audit& audit, Standing standing) {
  const auto found = relations_at(audit, standing);
  return found.empty() ? nullptr : found.front();
}

std::string panel(int count, std::uint64_t seed) {
  return rows("region,sector,age,income,log_hours", count, seed, [](int, Random& random) {
    const char* regions[] = {"north", "south", "east", "west"};
    const char* sectors[] = {"fish", "wool", "slate"};
    return fmt::format("{},{},{}.{},{}.{:02d},{}.{:03d}", regions[random.whole(0, 3)],
                       sectors[random.whole(0, 2)], random.whole(18, 70), random.whole(0, 9),
                       random.whole(200, 5000), random.whole(0, 99), random.whole(1, 4),
                       random.whole(0, 999));
  });
}

}  // namespace

TEST_CASE("exact relations: found, named, and what is left out") {
  struct Case {
    std::string why, text, design, equation, cause;
    std::vector<std::string> left_out;
  };
  const auto three = [](int a, int b, int c) { return fmt::format("{},{},{}", a, b, c); };
  const std::vector<Case> cases = {
      {"all levels of a factor coded by hand beside the constant: the most frequent goes",
       rows("north,south,west", 90, 1,
            [&](int i, Random&) {
              return i % 9 < 5 ? three(0, 1, 0) : i % 9 < 7 ? three(1, 0, 0) : three(0, 0, 1);
            }),
       "constant, north, south, west",
       "north + south + west = 1",
       "level_set",
       {"south"}},
      {"all_levels beside the constant",
       panel(300, 2),
       "constant, all_levels(sector)",
       "[sector = fish] + [sector = slate] + [sector = wool] = constant",
       "level_set",
       {}},
      {"age, period and cohort",
       rows("age,period,birth", 200, 3,
            [&](int, Random& random) {
              const int year = static_cast<int>(random.whole(2001, 2012)),
                        age = static_cast<int>(random.whole(16, 80));
              return three(age, year, year - age);
            }),
       "constant, age, period, birth",
       "period \u2212 age = birth",
       "clock_identity",
       {"birth"}},
      {"a total beside its parts, in cents",
       rows("heat,light,total", 200, 4,
            [](int, Random& random) {
              const auto heat = random.whole(100, 9999), light = random.whole(100, 9999),
                         total = heat + light;
              return fmt::format("{}.{:02d},{}.{:02d},{}.{:02d}", heat / 100, heat % 100,
                                 light / 100, light % 100, total / 100, total % 100);
            }),
       "constant, heat, light, total",
       "heat + light = total",
       "parts_and_total",
       {"total"}},
      {"two units of one quantity, unrounded",
       rows("celsius,fahrenheit", 100, 5,
            [](int, Random& random) {
              const auto tenths = random.whole(-100, 300) * 5;
              const auto fahrenheit = tenths * 9 / 5 + 320;
              return fmt::format("{:.1f},{:.1f}", static_cast<double>(tenths) / 10,
                                 static_cast<double>(fahrenheit) / 10);
            }),
       "constant, celsius, fahrenheit",
       "",
       "unit_conversion",
       {"fahrenheit"}},
      {"a column twice under two names",
       rows("a,b", 50, 6,
            [](int, Random& random) {
              const auto x = random.whole(1, 99);
              return fmt::format("{},{}.0", x, x);
            }),
       "constant, a, b",
       "a = b",
       "duplicate",
       {"b"}},
      {"a column that does not vary",
       rows("a,b", 50, 7,
            [](int, Random& random) { return fmt::format("{},7", random.whole(1, 99)); }),
       "constant, a, b",
       "b = 7",
       "constant_column",
       {"b"}},
      {"an interaction with an empty cell",
       rows("a,b", 90, 8,
            [](int i, Random&) { return i % 3 == 0   ? "x,p"
                                        : i % 3 == 1 ? "x,q"
                                                     : "y,p"; }),
       "constant, levels(a), levels(b), levels(a) * levels(b)",
       "",
       "empty_cell",
       {"[a = y] * [b = q]"}},
  };
  for (const Case& row : cases) {
    CAPTURE(row.why);
    const Audit audit = audited(row.text, row.design);
    const RelationFinding* relation = first_of(audit, Standing::exact);
    REQUIRE(relation != nullptr);
    CAPTURE(relation->text);
    CHECK(audit.verdict.overall == Overall::singular);
    CHECK(audit.rank.nullity == 1);
    CHECK(audit.rank.proved);
    CHECK(relation->cause_kind == row.cause);
    CHECK(relation->rows_holding == audit.rows_used);
    if (!row.equation.empty()) CHECK(relation->text == row.equation);
    if (!row.left_out.empty()) CHECK(labels(audit, audit.left_out) == row.left_out);
    CHECK(audit.kept.size() + audit.left_out.size() == audit.design.columns.size());
    REQUIRE(audit.rank.certificate);
    CHECK(audit.rank.certificate->residue != 0);
    CHECK(audit.rank.certificate->rows.size() == audit.rank.rank);
  }
}

TEST_CASE("a relation is tested on every row, not on the sample alone") {
  // 20,000 rows, more than the sample holds. One row breaks the total by a cent: no relation, but
  // one that holds except there.
  const int bad = 13'131;
  const std::string text = rows("men,women,all", 20'000, 9, [&](int i, Random& random) {
    const auto men = random.whole(0, 5000), women = random.whole(0, 5000);
    return fmt::format("{}.5,{}.25,{}.{}", men, women, men + women, i == bad ? "76" : "75");
  });
  const Audit audit = audited(text, "constant, men, women, all");
  CHECK(audit.rank.nullity == 0);
  const RelationFinding* relation = first_of(audit, Standing::exact_except);
  REQUIRE(relation != nullptr);
  CHECK(relation->text == "men + women = all");
  CHECK(relation->rows_violating == 1);
  CHECK(relation->rows_holding == 19'999);
  REQUIRE(relation->violations.size() == 1);
  CHECK(relation->violations[0].row == bad + 1);
  CHECK(relation->violations[0].line == bad + 2);
  CHECK(relation->violations[0].residual.find("0.01") != std::string::npos);
  CHECK(audit.verdict.grounds.informative.grade == Grade::fail);
  const std::string clean = rows("men,women,all", 20'000, 9, [&](int, Random& random) {
    const auto men = random.whole(0, 5000), women = random.whole(0, 5000);
    return fmt::format("{}.5,{}.25,{}.75", men, women, men + women);
  });
  const Audit whole = audited(clean, "constant, men, women, all");
  CHECK(whole.rank.nullity == 1);
  CHECK(whole.rank.certificate->rows_tested == 20'000);
  CHECK(whole.passes == 3);  // types, fold, relations, the doubles
}

TEST_CASE("a level of one row is rare, not a relation with an exception") {
  const std::string text = rows("fuel,x", 400, 10, [](int i, Random& random) {
    return fmt::format("{},{}",
                       i == 200     ? "peat"
                       : i % 2 == 0 ? "oil"
                                    : "wood",
                       random.whole(1, 500));
  });
  for (const std::string design :
       {"constant, levels(fuel), x", "constant, levels(fuel, against = peat), x"}) {
    CAPTURE(design);
    const Audit audit = audited(text, design);
    CHECK(first_of(audit, Standing::exact_except) == nullptr);
    REQUIRE(audit.rare_levels.size() == 1);
    CHECK(audit.rare_levels[0].label == "[fuel = peat]");
    CHECK(audit.rare_levels[0].rows == 1);
    CHECK(audit.verdict.overall == Overall::guarded);
  }
}

TEST_CASE("what is left beside hand-coded 0/1 columns is a level too") {
  struct Case {
    std::string why, text, design, label;
    std::uint64_t rows;
  };
  const auto fuel = [](int i, const std::string& odd) {
    return i == 149 ? odd : i % 3 == 0 ? "1,0,0" : i % 3 == 1 ? "0,1,0" : "0,0,1";
  };
  const std::vector<Case> cases = {
      {"one row without any of them",
       rows("gas,oil,wood,z", 300, 21,
            [&](int i, Random& random) {
              return fmt::format("{},{}", fuel(i, "0,0,0"), random.whole(0, 96));
            }),
       "constant, rest", "none of `gas`, `oil` and `wood`", 1},
      {"a column that is 0 in three rows",
       rows("urban,z", 300, 22,
            [&](int i, Random& random) {
              return fmt::format("{},{}", i % 140 == 5 ? 0 : 1, random.whole(0, 96));
            }),
       "constant, rest", "not urban", 3}};
  for (const Case& row : cases) {
    CAPTURE(row.why);
    const Audit audit = audited(row.text, row.design);
    REQUIRE(audit.rare_levels.size() == 1);
    CHECK(audit.rare_levels[0].label == row.label);
    CHECK(audit.rare_levels[0].rows == row.rows);
    CHECK(audit.verdict.overall == Overall::guarded);
  }
  // Two 1s in one row are no level left out: the sum holds except there.
  const Audit twice =
      audited(rows("gas,oil,wood,z", 300, 23,
                   [&](int i, Random& random) {
                     return fmt::format("{},{}", fuel(i, "1,1,0"), random.whole(0, 96));
                   }),
              "constant, rest");
  const RelationFinding* relation = first_of(twice, Standing::exact_except);
  REQUIRE(relation != nullptr);
  CHECK(relation->text == "gas + oil + wood = 1");
  CHECK(relation->violations.at(0).row == 150);
  CHECK(twice.verdict.grounds.informative.grade == Grade::fail);
}

TEST_CASE("focus: protection does not cancel it, and controls are not accused") {
  const std::string text = rows("f,g,c,d,h", 300, 24, [](int, Random& random) {
    const auto f = random.whole(1, 900), c = random.whole(1, 900);
    return fmt::format("{},{},{},{},{}", f * 10 + random.whole(0, 4), f * 10,
                       c * 1000 + random.whole(0, 6), c * 1000, random.whole(0, 90));
  });
  Request request;
  request.design.design = "constant, rest";
  request.design.focus = {"f"};
  for (const std::vector<std::string>& protect :
       {std::vector<std::string>{}, std::vector<std::string>{"f"}}) {
    request.design.protect = protect;
    const Result<Audit> audit = tried(text, request);
    REQUIRE(audit);
    const Ground& ground = audit.value().verdict.grounds.informative;
    CAPTURE(ground.finding);
    CHECK(ground.grade == Grade::fail);
    CHECK(ground.finding.find("`f`") != std::string::npos);
    CHECK(ground.finding.find("`g`") != std::string::npos);
    CHECK(ground.finding.find("`c`") == std::string::npos);
  }
  request.design.focus = {"h"};
  request.design.protect = {};
  const Result<Audit> audit = tried(text, request);
  REQUIRE(audit);
  CHECK(audit.value().verdict.grounds.informative.grade == Grade::pass);
  CHECK(audit.value().verdict.grounds.informative.finding.find("not graded") != std::string::npos);
}

TEST_CASE("fewer rows than columns through functions: no single coefficient is called estimable") {
  Request request;
  request.design.design = "constant, a, b, log(a), log(b), sqrt(a)";
  request.contrasts = {"a", "sqrt(a)"};
  const Result<Audit> audit = tried("a,b\n1.5,2\n2,3.5\n3,5.1\n4,1.2\n", request);
  REQUIRE(audit);
  CHECK(audit.value().rank.rank == 4);
  for (const ContrastFinding& contrast : audit.value().contrasts) CHECK_FALSE(contrast.estimable);
  CHECK(audit.value().verdict.coefficients_lost.size() == 6);
}

TEST_CASE("cumulative brackets are no level set: the column written last is left out") {
  const std::string text = rows("x,band,y", 100, 25, [](int i, Random& random) {
    const int x = i * 7 % 21;
    return fmt::format("{},{},{}", x, (x >= 5) + (x >= 10), random.whole(0, 96));
  });
  Request request;
  request.design.design = "constant, [x >= 5], [x >= 10], band, y";
  Result<Audit> audit = tried(text, request);
  REQUIRE(audit);
  CHECK(labels(audit.value(), audit.value().left_out) == std::vector<std::string>{"band"});
  request.design.protect = {"band"};
  audit = tried(text, request);
  REQUIRE(audit);
  for (const std::string& name : labels(audit.value(), audit.value().relations.at(0).removable))
    CHECK(name != "band");
}

TEST_CASE("shares rounded to one decimal: no farther from 100 than their rounding") {
  const std::string text = rows("rent,fuel,other", 500, 11, [](int, Random& random) {
    const double rent = 20 + 40 * random.unit(), fuel = 10 + 30 * random.unit();
    return fmt::format("{:.1f},{:.1f},{:.1f}", rent, fuel, 100 - rent - fuel);
  });
  const Audit audit = audited(text, "constant, rent, fuel, other");
  CHECK(audit.rank.nullity == 0);
  const RelationFinding* relation = first_of(audit, Standing::within_recorded_precision);
  REQUIRE(relation != nullptr);
  CHECK(relation->terms.size() == 4);
  CHECK(audit.verdict.grounds.recorded.grade == Grade::fail);
  CHECK(audit.recording.close.size() == 1);
  // Pure rounding: the ratio is 1 up to sampling, about 1 / sqrt(2 n) = 0.03.
  CHECK(audit.recording.distance_ratios[0] == doctest::Approx(1.0).epsilon(0.15));
}

TEST_CASE("a design of zeros is singular, and nothing is left of it") {
  const Audit audit = audited("x,y\n0,1\n0,2\n0,4\n", "x");
  CHECK(audit.rank.rank == 0);
  CHECK(audit.kept.empty());
  CHECK(audit.verdict.overall == Overall::singular);
  CHECK(audit.verdict.summary.find("no coefficient is left") != std::string::npos);
  REQUIRE(audit.relations.size() == 1);
  CHECK(audit.relations[0].cause_kind == "zero_column");
}

TEST_CASE("ordinary specifications are left in peace") {
  struct Case {
    std::string why, design;
    Overall overall;
  };
  const std::vector<Case> cases = {
      {"two factors and a number", "constant, age, levels(region), levels(sector)", Overall::sound},
      {"an uncentred square is one family with its source", "constant, age, age^2, levels(region)",
       Overall::sound},
      {"a cubic too", "constant, age, age^2, age^3, levels(sector)", Overall::sound},
      {"slopes by group under their main effects",
       "constant, age, levels(region), levels(region) * age", Overall::sound},
      {"full interaction of two factors",
       "constant, levels(region), levels(sector), levels(region) * levels(sector)", Overall::sound},
      {"levels without a constant", "all_levels(region), age", Overall::sound},
      {"a logarithm", "constant, log(income), age", Overall::sound}};
  const std::string text = panel(3'000, 12);
  for (const Case& row : cases) {
    CAPTURE(row.why);
    const Audit audit = audited(text, row.design);
    CAPTURE(audit.verdict.summary);
    CAPTURE(audit.verdict.grounds.computable.finding);
    CAPTURE(audit.verdict.grounds.informative.finding);
    CAPTURE(audit.verdict.grounds.recorded.finding);
    CHECK(audit.verdict.overall == row.overall);
    CHECK(audit.rank.nullity == 0);
  }
}

TEST_CASE("contrasts: estimable or not, decided exactly") {
  const std::string text = rows("north,south,x", 100, 14, [](int i, Random& random) {
    return fmt::format("{},{},{}", i % 2, 1 - i % 2, random.whole(1, 50));
  });
  Request request;
  request.design.design = "constant, north, south, x";
  request.contrasts = {"north - south", "north", "2*x"};
  const Result<Audit> result = tried(text, request);
  REQUIRE(result);
  const std::vector<ContrastFinding>& contrasts = result.value().contrasts;
  REQUIRE(contrasts.size() == 3);
  CHECK(contrasts[0].estimable);
  CHECK_FALSE(contrasts[1].estimable);
  CHECK(contrasts[1].blocking_relation == "north + south = 1");
  CHECK(contrasts[2].estimable);
  // Two groups of 50 beside x: the difference of their means has sqrt(1/50 + 1/50) = 0.2, a little
  // more for x.
  CHECK(*contrasts[0].standard_error_per_sigma == doctest::Approx(0.2).epsilon(0.05));
}

TEST_CASE("protected and focused columns are kept before the others") {
  const std::string text = rows("a,b", 50, 15, [](int, Random& random) {
    const auto x = random.whole(1, 99);
    return fmt::format("{},{}", x, x);
  });
  Request request;
  request.design.design = "constant, a, b";
  request.design.focus = {"b"};
  Result<Audit> result = tried(text, request);
  REQUIRE(result);
  CHECK(labels(result.value(), result.value().left_out) == std::vector<std::string>{"a"});
  request.design.focus = {"b"};
  request.design.protect = {"a"};
  result = tried(text, request);
  REQUIRE(result);
  CHECK(labels(result.value(), result.value().left_out) == std::vector<std::string>{"b"});
}

TEST_CASE("more columns than rows, one row, and no row at all") {
  const Audit wide = audited("a,b,c\n1,2,4\n2,1,5\n", "constant, a, b, c");
  CHECK(wide.rank.rank == 2);
  CHECK(wide.verdict.overall == Overall::singular);
  CHECK(wide.residual_degrees_of_freedom == 0);
  const Audit one = audited("a\n3\n", "a");
  CHECK(one.rank.rank == 1);
  CHECK(one.verdict.overall == Overall::fragile);
  Request request;
  request.design.design = "constant, a";
  request.design.rows = "a > 5";
  const Result<Audit> none = tried("a\n3\n4\n", request);
  REQUIRE_FALSE(none);
  CHECK(none.error().what == "none of the 2 rows can be used: not kept by --rows: 2");
}

TEST_CASE("a design larger than --memory is refused before anything is allocated") {
  Request request;
  request.design.design = "constant, levels(x)";
  request.memory = 1 << 20;
  const Result<Audit> result =
      tried(rows("x", 600, 16, [](int i, Random&) { return std::to_string(i % 300); }), request);
  REQUIRE_FALSE(result);
  CHECK(to_line(result.error()).find("--memory") != std::string::npos);
  CHECK(most_columns(memory_needed(250, 2), 2) == 250);
  CHECK(most_columns(memory_needed(250, 2) - 1, 2) == 249);
}

}  // namespace gramproof::audit
