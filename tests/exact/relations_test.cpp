#include "exact/relations.hpp"

#include <doctest/doctest.h>

#include <algorithm>

#include "exact/told.hpp"

using namespace gramproof;
using exact::Cause;
using test::add_all_levels;
using test::add_text_column;
using test::all_texts;
using test::has;
using test::Matrix;
using test::relations_of;
using test::Texts;

namespace {

/// 12 rows of a constant, an age and two text columns; regions lie in zones.
Matrix regions() {
  std::vector<Texts> cells;
  for (int i = 0; i < 12; ++i) cells.push_back({"1", std::to_string(20 + i * i % 37)});
  Matrix matrix = test::matrix_of({"constant", "age"}, cells);
  add_text_column(matrix, "region", {0, 1, 2, 3, 0, 1, 2, 3, 0, 1, 2, 3},
                  {"north", "south", "east", "west"});
  add_text_column(matrix, "zone", {0, 0, 1, 1, 0, 0, 1, 1, 0, 0, 1, 1}, {"a", "b"});
  add_text_column(matrix, "shift", {0, 1, 0, 1, 1, 0, 1, 0, 0, 1, 1, 1}, {"day", "night"});
  return matrix;
}

}  // namespace

TEST_CASE("causes of relations among plain columns") {
  struct Case {
    std::string why;
    Texts names;
    std::vector<Texts> rows;
    std::string text;
    Cause cause;
    std::string says;  ///< part of the sentence
  };
  const std::vector<Case> cases = {
      {"zero",
       {"a", "b"},
       {{"1", "0"}, {"2", "0"}, {"5", "0"}},
       "b = 0",
       Cause::zero_column,
       "b is 0 in all 3 rows used."},
      {"one value",
       {"constant", "a"},
       {{"1", "2.5"}, {"1", "2.5"}},
       "a = 2.5",
       Cause::constant_column,
       "a is 2.5 in all 2 rows used"},
      {"duplicate",
       {"a", "b"},
       {{"1", "1.0"}, {"2", "2"}, {"7", "7"}},
       "a = b",
       Cause::duplicate,
       "a and b are equal in all 3 rows used"},
      {"dozens",
       {"eggs", "dozens"},
       {{"12", "1"}, {"36", "3"}, {"24", "2"}},
       "12\u00b7dozens = eggs",
       Cause::multiple,
       "eggs is 12 times dozens"},
      {"sign",
       {"a", "b"},
       {{"1", "-1"}, {"2", "-2"}, {"7", "-7"}},
       "a + b = 0",
       Cause::multiple,
       "b is minus a"},
      {"feet",
       {"feet", "metres"},
       {{"10", "3.048"}, {"5", "1.524"}, {"1", "0.3048"}},
       "381\u00b7feet = 1250\u00b7metres",
       Cause::unit_conversion,
       "metres is 0.3048 times feet"},
      {"fahrenheit",
       {"constant", "c", "f"},
       {{"1", "0", "32"}, {"1", "100", "212"}, {"1", "37", "98.6"}, {"1", "1", "33.8"}},
       "9\u00b7c + 160 = 5\u00b7f",
       Cause::unit_conversion,
       "f is 1.8 times c plus 32"},
      {"male and female",
       {"constant", "male", "female"},
       {{"1", "1", "0"}, {"1", "0", "1"}, {"1", "0", "1"}},
       "male + female = 1",
       Cause::level_set,
       "Exactly one of male and female is 1"},
      {"shares",
       {"constant", "s1", "s2", "s3"},
       {{"1", "20.5", "30", "49.5"},
        {"1", "1", "2", "97"},
        {"1", "50", "40", "10"},
        {"1", "10", "20.1", "69.9"},
        {"1", "3", "3", "94"}},
       "s1 + s2 + s3 = 100",
       Cause::fixed_sum,
       "s1, s2 and s3 add up to 100"},
      {"two shares",
       {"constant", "s1", "s2"},
       {{"1", "20.5", "79.5"}, {"1", "1", "99"}, {"1", "50", "50"}},
       "s1 + s2 = 100",
       Cause::fixed_sum,
       "add up to 100"},
      {"parts",
       {"total", "heat", "light"},
       {{"3", "1", "2"}, {"0.30", "0.1", "0.2"}, {"7", "7", "0"}},
       "heat + light = total",
       Cause::parts_and_total,
       "total is the sum of heat and light"},
      {"a difference of signed columns",
       {"p", "q", "d"},
       {{"3", "1", "2"}, {"1", "3", "-2"}, {"5", "-1", "6"}},
       "p \u2212 q = d",
       Cause::other,
       "d is p less q in all 3 rows used."},
      {"a sum of signed columns",
       {"p", "q", "s"},
       {{"3", "-1", "2"}, {"-1", "3", "2"}, {"5", "1", "6"}},
       "p + q = s",
       Cause::other,
       "s follows from the others by this equation in all 3 rows used."},
      {"a total of signed parts",
       {"gain", "loss", "fee", "result"},
       {{"3", "-1", "-1", "1"},
        {"0", "-3", "0", "-3"},
        {"5", "-1", "2", "6"},
        {"1", "1", "1", "3"}},
       "gain + loss + fee = result",
       Cause::parts_and_total,
       "result is the sum of gain, loss and fee"},
      {"columns that never change, without a constant",
       {"x", "five", "seven"},
       {{"1", "5", "7"}, {"2", "5", "7"}, {"7", "5", "7"}},
       "7\u00b7five = 5\u00b7seven",
       Cause::constant_column,
       "Neither five nor seven changes in all 3 rows used"},
      {"an index of weighted parts",
       {"x", "y", "score"},
       {{"10", "5", "6.5"}, {"2", "10", "7.6"}, {"7", "30", "23.1"}},
       "3\u00b7x + 7\u00b7y = 10\u00b7score",
       Cause::other,
       "Any one of these columns follows from the others"},
      {"a centred column",
       {"constant", "age", "age_less_40"},
       {{"1", "45", "5"}, {"1", "30", "-10"}, {"1", "71", "31"}},
       "age_less_40 + 40 = age",
       Cause::unit_conversion,
       "age is age_less_40 plus 40 in all 3 rows used: the same quantity on two scales."},
      {"a factor that nobody reads",
       {"a", "b"},
       {{"1", "1.000000000000000000000000000001"},
        {"2", "2.000000000000000000000000000002"},
        {"3", "3.000000000000000000000000000003"}},
       "1.00000\u2026\u00b710^30\u00b7a = 10^30\u00b7b",
       Cause::unit_conversion,
       "b is a fixed multiple of a in all 3 rows used: the same quantity on two scales."},
      {"years by value",
       {"p", "b", "years"},
       {{"2001", "1970", "31"}, {"1999", "1950", "49"}, {"2010", "1990", "20"}},
       "p \u2212 b = years",
       Cause::clock_identity,
       "Time is counted three ways, in p, b and years"},
      {"years by name",
       {"age", "period", "cohort"},
       {{"3", "5", "2"}, {"1", "6", "5"}, {"2", "9", "7"}},
       "period \u2212 age = cohort",
       Cause::clock_identity,
       "any two of them give the third"},
      {"wage is no age",
       {"wage", "bonus", "pay"},
       {{"3", "2", "5"}, {"1", "5", "6"}, {"2", "7", "9"}},
       "wage + bonus = pay",
       Cause::parts_and_total,
       "pay is the sum of wage and bonus"},
      {"odd factors",
       {"a", "b", "d"},
       {{"12", "0", "7"}, {"0", "4", "-1461"}, {"24", "8", "-2908"}, {"1200", "4", "-761"}},
       "4383\u00b7b + 12\u00b7d = 7\u00b7a",
       Cause::other,
       "Any one of these columns"},
      {"one row",
       {"a", "b"},
       {{"2", "3"}},
       "3\u00b7a = 2\u00b7b",
       Cause::too_few_rows,
       "Only 1 row is used: any 2 columns"},
      {"affine through two points",
       {"constant", "a", "b"},
       {{"1", "1", "5"}, {"1", "2", "9"}},
       "4\u00b7a + 1 = b",
       Cause::too_few_rows,
       "Only 2 rows are used: any 3 columns"},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const auto relations = relations_of(test::matrix_of(c.names, c.rows));
    CAPTURE(all_texts(relations));
    REQUIRE(relations.size() == 1);
    CHECK(relations[0].text == c.text);
    CHECK(exact::word_of(relations[0].cause) == exact::word_of(c.cause));
    CHECK(relations[0].cause_text.find(c.says) != std::string::npos);
    for (std::size_t j = 0; j < c.names.size(); ++j) {
      const auto& removable = relations[0].removable;
      const bool listed =
          std::find(removable.begin(), removable.end(), static_cast<int>(j)) != removable.end();
      CHECK(listed == (relations[0].coefficients[j] != 0));
    }
  }
}

TEST_CASE("levels: a full set, two of them, one inside another") {
  Matrix matrix = regions();
  add_all_levels(matrix, "region");
  auto relations = relations_of(matrix);
  REQUIRE(relations.size() == 1);
  CHECK(relations[0].text ==
        "[region = north] + [region = south] + [region = east] + [region = west] = constant");
  CHECK(relations[0].cause == Cause::level_set);
  CHECK(
      relations[0].cause_text ==
      "Each row used has exactly one level of region, so the 4 columns made from its levels add up "
      "to the constant.");

  add_all_levels(matrix, "zone");
  relations = relations_of(matrix);
  CAPTURE(all_texts(relations));
  REQUIRE(relations.size() == 3);
  CHECK(has(relations, "[zone = a] + [zone = b] = constant", Cause::level_set));
  CHECK(has(relations, "[region = north] + [region = south] = [zone = a]", Cause::nested_levels));
  CHECK(has(relations, "[region = east] + [region = west] = [zone = b]", Cause::nested_levels));
}

TEST_CASE("what arithmetic makes of the same columns is no total of parts") {
  Matrix matrix = test::matrix_of({"a", "b"}, {{"1", "3"}, {"2", "7"}, {"5", "2"}, {"4", "9"}});
  const auto a = test::cell(0), b = test::cell(1);
  using design::Operation;
  test::add_column(matrix, "a * b", test::tree(Operation::multiply, {a, b}));
  test::add_column(
      matrix, "a * (b + 1)",
      test::tree(Operation::multiply, {a, test::tree(Operation::add, {b, test::number("1")})}));
  const auto relations = relations_of(matrix);
  CAPTURE(all_texts(relations));
  REQUIRE(relations.size() == 1);
  CHECK(relations[0].text == "a + a * b = a * (b + 1)");
  CHECK(relations[0].cause == Cause::other);
  CHECK(relations[0].cause_text ==
        "All of these columns are made of a and b, and one of them follows from the others by this "
        "equation in all 4 rows used.");
}

TEST_CASE("age, period and birth as levels are told as a clock") {
  std::vector<int> ages, years, births;
  std::vector<Texts> cells;
  for (int age = 0; age < 4; ++age) {
    for (int year = 0; year < 4; ++year) {
      cells.push_back({"1"});
      ages.push_back(age);
      years.push_back(year);
      births.push_back(year - age + 3);
    }
  }
  Matrix matrix = test::matrix_of({"constant"}, cells);
  const Texts four = {"0", "1", "2", "3"};
  add_text_column(matrix, "age", ages, four);
  add_text_column(matrix, "year", years, four);
  add_text_column(matrix, "birth", births, {"0", "1", "2", "3", "4", "5", "6"});
  for (const std::string name : {"age", "year", "birth"}) add_all_levels(matrix, name);
  const auto relations = relations_of(matrix);
  CAPTURE(all_texts(relations));
  REQUIRE(relations.size() == 4);
  const auto clock = std::find_if(relations.begin(), relations.end(), [](const auto& relation) {
    return relation.cause == Cause::clock_identity;
  });
  REQUIRE(clock != relations.end());
  CHECK(clock->cause_text.find("Time is counted three ways, in ") == 0);
  CHECK(clock->cause_text.find(": any two of them give the third.") != std::string::npos);
}

TEST_CASE("two full sets without a constant add up to each other") {
  Matrix matrix = regions();
  matrix.design.columns.clear();
  add_all_levels(matrix, "region");
  add_all_levels(matrix, "shift");
  const auto relations = relations_of(matrix);
  CAPTURE(all_texts(relations));
  REQUIRE(relations.size() == 1);
  CHECK(relations[0].cause == Cause::level_set);
  CHECK(relations[0].text ==
        "[region = north] + [region = south] + [region = east] + [region = west] = [shift = day] + "
        "[shift = night]");
  CHECK(relations[0].cause_text.find("the levels of region") != std::string::npos);
}

TEST_CASE("products of a full set with a column add up to the column; empty cells are named") {
  Matrix matrix = regions();
  add_all_levels(matrix, "zone", 1);
  auto relations = relations_of(matrix);
  REQUIRE(relations.size() == 1);
  CHECK(relations[0].text == "[zone = a] * age + [zone = b] * age = age");
  CHECK(relations[0].cause == Cause::level_set);
  CHECK(relations[0].cause_text.find("level of zone") != std::string::npos);

  Matrix crossed = regions();
  add_all_levels(crossed, "zone");
  add_all_levels(crossed, "region", 2);  // with [zone = a]
  relations = relations_of(crossed);
  CAPTURE(all_texts(relations));
  CHECK(has(relations, "[region = east] * [zone = a] = 0", Cause::empty_cell));
  CHECK(has(relations, "[region = west] * [zone = a] = 0", Cause::empty_cell));
  CHECK(has(relations, "[zone = a] + [zone = b] = constant", Cause::level_set));
}

TEST_CASE("hand-coded indicators far apart and totals that share parts are found") {
  std::vector<Texts> cells;
  test::Random random(5);
  for (int i = 0; i < 60; ++i) {
    const auto level = random.whole(0, 2);
    const auto a = random.whole(0, 99), b = random.whole(0, 99), c = random.whole(0, 99);
    const auto text = [](std::int64_t v) { return std::to_string(v); };
    cells.push_back({"1", text(level == 0), text(a), text(level == 1), text(b), text(level == 2),
                     text(c), text(a + b), text(a + b + c)});
  }
  const auto relations = relations_of(test::matrix_of(
      {"constant", "work_none", "a", "work_part", "b", "work_full", "c", "ab", "abc"}, cells));
  CAPTURE(all_texts(relations));
  REQUIRE(relations.size() == 3);
  CHECK(has(relations, "work_none + work_part + work_full = 1", Cause::level_set));
  CHECK(has(relations, "a + b = ab", Cause::parts_and_total));
  CHECK(has(relations, "c + ab = abc", Cause::parts_and_total));
}

TEST_CASE("words of causes are those of the document") {
  const Texts words = {
      "zero_column",    "constant_column", "duplicate",  "multiple",        "unit_conversion",
      "level_set",      "nested_levels",   "empty_cell", "parts_and_total", "fixed_sum",
      "clock_identity", "too_few_rows",    "other"};
  for (std::size_t i = 0; i < words.size(); ++i) {
    CHECK(exact::word_of(static_cast<Cause>(i)) == words[i]);
  }
}
