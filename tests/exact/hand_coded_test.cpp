// 0/1 columns that were coded by hand are told as sets of levels: full, side by side, one inside
// the other, overlapping; whatever they are called and wherever they stand.
#include <doctest/doctest.h>

#include <algorithm>
#include <numeric>
#include <set>

#include "exact/told.hpp"

using namespace gramproof;
using exact::Cause;
using test::all_texts;
using test::has;
using test::Matrix;
using test::Random;
using test::relations_of;
using test::Texts;

namespace {

std::string text(std::int64_t value) {
  return std::to_string(value);
}

/// Rows by a function of a seeded source.
template <class Row>
std::vector<Texts> drawn(int count, std::uint64_t seed, Row&& row) {
  Random random(seed);
  std::vector<Texts> rows;
  for (int i = 0; i < count; ++i) {
    rows.emplace_back();
    for (const std::int64_t value : row(random)) rows.back().push_back(text(value));
  }
  return rows;
}

using Values = std::vector<std::int64_t>;

}  // namespace

TEST_CASE("sets of 0/1 columns and how they are told") {
  struct Case {
    std::string why;
    Texts names;
    std::vector<Texts> rows;
    std::string text;
    Cause cause;
    std::string says;
  };
  const std::vector<Case> cases = {
      {"one level in each row",
       {"constant", "district_north", "district_south", "district_harbour"},
       drawn(60, 1,
             [](Random& r) {
               const auto d = r.whole(0, 2);
               return Values{1, d == 0, d == 1, d == 2};
             }),
       "district_north + district_south + district_harbour = 1",
       Cause::level_set,
       "Exactly one of district_north, district_south and district_harbour is 1 in each row used, "
       "so together they repeat the constant."},
      {"two full sets without a constant",
       {"own", "rent", "coal", "oil", "wood"},
       drawn(60, 2,
             [](Random& r) {
               const auto a = r.whole(0, 1), b = r.whole(0, 2);
               return Values{a == 0, a == 1, b == 0, b == 1, b == 2};
             }),
       "coal + oil + wood = own + rent",
       Cause::level_set,
       "Each row used has exactly one of coal, oil and wood and exactly one of own and rent"},
      {"parts of a level",
       {"men", "men_in_town", "men_in_country", "married"},
       drawn(60, 3,
             [](Random& r) {
               const auto m = r.whole(0, 1), t = r.whole(0, 1);
               return Values{m, m * t, m * (1 - t), r.whole(0, 1)};
             }),
       "men_in_town + men_in_country = men",
       Cause::nested_levels,
       "The rows of men_in_town and men_in_country together are exactly those of men: the finer "
       "levels lie inside it."},
      {"either and both",
       {"constant", "smokes", "drinks", "either", "both"},
       drawn(60, 4,
             [](Random& r) {
               const auto a = r.whole(0, 1), b = r.whole(0, 1);
               return Values{1, a, b, a | b, a & b};
             }),
       "smokes + drinks = either + both",
       Cause::level_set,
       "Counting the ones in a row, smokes and drinks have as many as either and both: these 0/1 "
       "columns mark sets of rows that overlap."},
      {"everybody has one of two at least",
       {"constant", "phone", "letter", "both"},
       drawn(60, 5,
             [](Random& r) {
               const auto way = r.whole(0, 2);
               return Values{1, way != 0, way != 1, way == 2};
             }),
       "phone + letter = both + 1",
       Cause::level_set,
       "Counting the ones in a row, phone and letter have 1 more than both"},
      {"exactly two of four were chosen",
       {"constant", "tea", "milk", "juice", "water"},
       drawn(80, 6,
             [](Random& r) {
               const auto a = r.whole(0, 3), b = (a + r.whole(1, 3)) % 4;
               Values row = {1, 0, 0, 0, 0};
               row[static_cast<std::size_t>(a + 1)] = row[static_cast<std::size_t>(b + 1)] = 1;
               return row;
             }),
       "tea + milk + juice + water = 2",
       Cause::fixed_sum,
       "Exactly 2 of tea, milk, juice and water are 1 in each row used"},
      {"the same rows marked twice",
       {"york", "yorkshire", "x"},
       drawn(60, 7,
             [](Random& r) {
               const auto y = r.whole(0, 1);
               return Values{y, y, r.whole(1, 99)};
             }),
       "york = yorkshire",
       Cause::duplicate,
       "york and yorkshire are equal in all 60 rows used: both mark the same rows."},
      {"a group, its complement and their slopes",
       {"inside", "x_inside", "x_outside", "x"},
       drawn(60, 8,
             [](Random& r) {
               const auto in = r.whole(0, 1), x = r.whole(1, 99);
               return Values{in, in * x, (1 - in) * x, x};
             }),
       "x_inside + x_outside = x",
       Cause::parts_and_total,
       "x is the sum of x_inside and x_outside in all 60 rows used"},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const auto relations = relations_of(test::matrix_of(c.names, c.rows));
    CAPTURE(all_texts(relations));
    REQUIRE(relations.size() == 1);
    CHECK(relations[0].text == c.text);
    CHECK(exact::word_of(relations[0].cause) == exact::word_of(c.cause));
    CHECK(relations[0].cause_text.find(c.says) != std::string::npos);
  }
}

TEST_CASE("sets that share a column: both are told, and not their difference") {
  // Not in work is a level of two codings, of occupation and of hours. The constant stands last.
  const auto rows = drawn(90, 9, [](Random& r) {
    const bool idle = r.whole(0, 2) == 0;
    const auto job = r.whole(0, 1), hours = r.whole(0, 2);
    return Values{!idle && job == 0,   !idle && job == 1,   idle, !idle && hours == 0,
                  !idle && hours == 1, !idle && hours == 2, 1};
  });
  for (const Texts& names : {Texts{"farm", "town", "idle", "short", "half", "full", "constant"},
                             Texts{"a1", "a2", "shared", "b1", "b2", "b3", "constant"}}) {
    const auto relations = relations_of(test::matrix_of(names, rows));
    CAPTURE(all_texts(relations));
    REQUIRE(relations.size() == 2);
    CHECK(relations[0].text == names[0] + " + " + names[1] + " + " + names[2] + " = 1");
    CHECK(relations[0].cause == Cause::level_set);
    // The second costs as much to read as the difference of the two or more.
    CHECK(relations[1].cause == Cause::level_set);
  }
}

TEST_CASE("sets nested three deep, shuffled among other columns") {
  // 12 towns in 6 counties in 2 regions: one full set, the others inside it.
  for (std::uint64_t seed = 1; seed <= 10; ++seed) {
    CAPTURE(seed);
    std::vector<std::size_t> place(27);
    std::iota(place.begin(), place.end(), 0);
    Random shuffle(seed);
    for (std::size_t j = place.size() - 1; j > 0; --j) {
      std::swap(place[j],
                place[static_cast<std::size_t>(shuffle.whole(0, static_cast<std::int64_t>(j)))]);
    }
    Texts names(27);
    const auto rows = drawn(200, seed + 100, [&](Random& r) {
      const auto town = r.whole(0, 11);
      Values plain;
      for (std::int64_t t = 0; t < 12; ++t) plain.push_back(t == town);
      for (std::int64_t c = 0; c < 6; ++c) plain.push_back(c == town / 2);
      for (std::int64_t g = 0; g < 2; ++g) plain.push_back(g == town / 6);
      for (int x = 0; x < 6; ++x) plain.push_back(r.whole(1, 999));
      plain.push_back(1);
      Values row(27);
      for (std::size_t j = 0; j < 27; ++j) row[place[j]] = plain[j];
      return row;
    });
    for (std::size_t j = 0; j < 27; ++j) {
      names[place[j]] = j == 26  ? "constant"
                        : j < 12 ? "t" + text(static_cast<std::int64_t>(j))
                                 : "v" + text(static_cast<std::int64_t>(j));
    }
    const auto relations = relations_of(test::matrix_of(names, rows));
    CAPTURE(all_texts(relations));
    REQUIRE(relations.size() == 9);
    std::size_t nested = 0, full = 0;
    for (const exact::Relation& relation : relations) {
      nested += relation.cause == Cause::nested_levels;
      full += relation.cause == Cause::level_set && relation.coefficients[place[26]] != 0;
      CHECK(relation.removable.size() <= 4);
    }
    CHECK(nested == 8);
    CHECK(full == 1);
  }
}

TEST_CASE("products of finer levels add up to the product of the level they lie in") {
  std::vector<Texts> cells;
  for (int i = 0; i < 40; ++i) cells.push_back({"1", text(20 + i * i % 37)});
  Matrix matrix = test::matrix_of({"constant", "age"}, cells);
  std::vector<int> town, county;
  for (int i = 0; i < 40; ++i) {
    town.push_back(i % 4);
    county.push_back(i % 4 / 2);
  }
  test::add_text_column(matrix, "town", town, {"ayle", "brock", "carse", "dunny"});
  test::add_text_column(matrix, "county", county, {"east", "west"});
  test::add_all_levels(matrix, "town", 1);
  test::add_all_levels(matrix, "county", 1);
  const auto relations = relations_of(matrix);
  CAPTURE(all_texts(relations));
  REQUIRE(relations.size() == 3);
  CHECK(has(relations, "[town = ayle] * age + [town = brock] * age = [county = east] * age",
            Cause::nested_levels));
  CHECK(has(relations, "[county = east] * age + [county = west] * age = age", Cause::level_set));
  const auto nested =
      std::find_if(relations.begin(), relations.end(),
                   [](const exact::Relation& r) { return r.cause == Cause::nested_levels; });
  REQUIRE(nested != relations.end());
  CHECK(nested->cause_text.find("The rows of 2 levels of town together are exactly those of one "
                                "level of county, so the products") == 0);
}
