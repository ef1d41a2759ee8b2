// Why a column goes: relations, choices and meanings against arithmetic that shares nothing with
// the program.
#include <doctest/doctest.h>
#include <fmt/format.h>

#include <algorithm>
#include <string>
#include <vector>

#include "asked.hpp"
#include "support/planted_relations.hpp"

namespace gramproof::audit {
namespace {

using test::IntegerVectors;
using test::Random;

/// "heat + total; light + total": what each kept coefficient that changes estimates.
std::vector<std::string> meanings(const Why& why, const Choice& choice) {
  std::vector<std::string> texts;
  for (const Estimand& estimand : choice.changed) {
    std::string text = labels(why, {estimand.column}).front();
    for (const auto& [column, factor] : estimand.carries)
      text += " + " + factor.get_str() + "*" + labels(why, {column}).front();
    texts.push_back(text);
  }
  return texts;
}

std::string form(const Why& why, const exact::LinearForm& sum) {
  std::string text;
  for (const auto& [column, factor] : sum)
    text += factor.get_str() + "*" + labels(why, {column}).front() + " ";
  return text;
}

/// heat, light, total = heat + light, celsius, fahrenheit, other; 30 rows.
std::string energy() {
  Random random(7);
  std::string text = "heat,light,total,celsius,fahrenheit,other\n";
  for (int i = 0; i < 30; ++i) {
    const auto heat = random.whole(100, 999), light = random.whole(100, 999);
    const auto celsius = random.whole(-10, 30) * 5;
    text += fmt::format("{}.5,{}.25,{}.75,{},{},{}\n", heat, light, heat + light, celsius,
                        celsius * 9 / 5 + 32, random.whole(0, 50));
  }
  return text;
}

}  // namespace

TEST_CASE("a combination: of which, since when, what else could go, what the rest then means") {
  struct Case {
    std::string why, design, column, relation, since;
    bool left_out;
    std::vector<std::string> without, instead, meanings;
  };
  const std::string all = "constant, heat, light, total, celsius, fahrenheit, other";
  const std::vector<Case> cases = {
      {"the total is left out, its parts take it up",
       "constant, heat, light, total, other",
       "total",
       "heat + light = total",
       "total",
       true,
       {"total"},
       {"heat", "light"},
       {"heat + 1*total", "light + 1*total"}},
      {"a part that gramproof keeps",
       "constant, heat, light, total, other",
       "heat",
       "heat + light = total",
       "total",
       false,
       {"heat"},
       {"light", "total"},
       {"light + -1*heat", "total + 1*heat"}},
      {"written first, dependent with the last part",
       "total, other, light, heat",
       "total",
       "light + heat = total",
       "heat",
       false,
       {"total"},
       {"light", "heat"},
       {"light + 1*total", "heat + 1*total"}},
      {"units: fractions",
       "constant, celsius, fahrenheit",
       "celsius",
       "9·celsius + 160 = 5·fahrenheit",
       "fahrenheit",
       false,
       {"celsius"},
       {"constant", "fahrenheit"},
       {"constant + -160/9*celsius", "fahrenheit + 5/9*celsius"}},
      {"two relations: the other one's column goes too",
       all,
       "total",
       "heat + light = total",
       "total",
       true,
       {"total", "fahrenheit"},
       {"heat", "light"},
       {"constant + 32*fahrenheit", "heat + 1*total", "light + 1*total",
        "celsius + 9/5*fahrenheit"}},
      {"a column of zeros goes alone",
       "constant, heat, heat - heat",
       "heat - heat",
       "(heat - heat) = 0",
       "heat - heat",
       true,
       {"heat - heat"},
       {},
       {}},
  };
  for (const Case& test : cases) {
    CAPTURE(test.why);
    const Why why = asked(energy(), test.design, test.column);
    REQUIRE(why.columns.size() == 1);
    REQUIRE(why.columns.front().dependence);
    const Dependence& found = *why.columns.front().dependence;
    CHECK(found.relation.text == test.relation);
    CHECK(labels(why, {found.since}).front() == test.since);
    CHECK(found.left_out == test.left_out);
    CHECK(labels(why, found.choice.without) == test.without);
    CHECK(labels(why, found.instead) == test.instead);
    CHECK(meanings(why, found.choice) == test.meanings);
    CHECK(found.choice.without.size() + found.choice.changed.size() +
              found.choice.untouched.size() ==
          why.audit.design.columns.size());
    CHECK_FALSE(why.passed_for_rows);
  }
}

TEST_CASE("columns by what their relations allow") {
  const Why why = asked(energy(), "constant, heat, light, total, other, other - other", "heat");
  CHECK(labels(why, why.never_removable) == std::vector<std::string>{"constant", "other"});
  CHECK(labels(why, why.sometimes) == std::vector<std::string>{"heat", "light", "total"});
  CHECK(labels(why, why.always) == std::vector<std::string>{"other - other"});
}

TEST_CASE("two rows for six columns: what goes for want of rows is in no relation and goes") {
  const Why why = asked("a,b,c,d\n1,2,3,4\n2,1,7,5\n", "constant, a, b, log(c), d, a*b", "log(c)");
  CHECK(why.never_removable.empty());
  REQUIRE(why.columns.front().nearness);
  CHECK_FALSE(why.columns.front().nearness->kept);
}

TEST_CASE("a protected column is never proposed in place of another") {
  Request request;
  request.design.design = "heat, light, total";
  request.design.protect = {"light"};
  const Result<Why> why = asked(energy(), request, "total");
  REQUIRE(why);
  const Dependence& found = *why.value().columns.front().dependence;
  CHECK(labels(why.value(), found.instead) == std::vector<std::string>{"heat"});
}

TEST_CASE("sums of coefficients: proved either way, and what is read in their place") {
  struct Case {
    std::string why, sum;
    bool estimable;
    std::string on_kept, estimates;
  };
  // Without total: heat then tells heat + total, light tells light + total.
  const std::vector<Case> cases = {
      {"the common part cancels", "heat - light", true, "1*heat -1*light ", "1*heat -1*light "},
      {"a part and the total", "heat + total", true, "1*heat ", "1*heat 1*total "},
      {"a part alone", "heat", false, "1*heat ", "1*heat 1*total "},
      {"the column that goes", "total", false, "", ""},
      {"halves", "0.5*heat + 0.5*total", true, "1/2*heat ", "1/2*heat 1/2*total "},
      {"nothing to do with it", "3*other", true, "3*other ", "3*other "},
  };
  for (const Case& test : cases) {
    CAPTURE(test.why);
    const Why why = asked(energy(), "constant, heat, light, total, other", "total", {test.sum});
    REQUIRE(why.contrasts.size() == 1);
    const WhyContrast& contrast = why.contrasts.front();
    CHECK(contrast.estimable == test.estimable);
    CHECK(contrast.blocking_relation == (test.estimable ? "" : "heat + light = total"));
    CHECK(form(why, contrast.on_kept) == test.on_kept);
    CHECK(form(why, contrast.estimates) == test.estimates);
  }
}

TEST_CASE("habits: what goes first, last, and by the largest remainder") {
  const auto outcome = [](const Why& why, Habit habit) {
    for (const HabitOutcome& found : why.habits) {
      if (found.habit == habit) return labels(why, found.left_out);
    }
    return std::vector<std::string>{};
  };
  using Names = std::vector<std::string>;
  const Why parts = asked(energy(), "heat, light, total, other", "heat");
  CHECK(outcome(parts, Habit::first_kept) == Names{"total"});
  CHECK(outcome(parts, Habit::last_kept) == Names{"heat"});
  CHECK(outcome(parts, Habit::gramproof) == Names{"total"});
  // Beside the total, which is longest, as much is left of one part as of the other: the first.
  CHECK(outcome(parts, Habit::largest_raw) == Names{"light"});
  // In own units the longer of two multiples is taken; with unit length they tie, and the first
  // as written is.
  const Why multiples = asked(energy(), "heat, other, 1000 * heat", "heat");
  CHECK(outcome(multiples, Habit::largest_raw) == Names{"heat"});
  CHECK(outcome(multiples, Habit::largest_unit) == Names{"1000 * heat"});
  CHECK(asked(energy(), "constant, heat", "heat").habits.empty());
}

TEST_CASE("random designs: every claimed meaning reproduces X b exactly, every choice is greedy") {
  for (std::uint64_t seed = 1; seed <= 60; ++seed) {
    CAPTURE(seed);
    Random random(seed);
    const auto columns = static_cast<std::size_t>(random.whole(3, 8));
    const IntegerVectors rows =
        test::with_planted_relations(random, columns, static_cast<std::size_t>(random.whole(1, 3)));
    std::string text, design;
    std::vector<int> as_written, beta;
    for (std::size_t j = 0; j < columns; ++j) {
      text += fmt::format("{}x{}", j == 0 ? "" : ",", j);
      design += fmt::format("{}x{}", j == 0 ? "" : ", ", j);
      as_written.push_back(static_cast<int>(j));
      beta.push_back(static_cast<int>(random.whole(-99, 99)));
    }
    for (const auto& row : rows) {
      text += "\n";
      for (std::size_t j = 0; j < columns; ++j) text += (j == 0 ? "" : ",") + row[j].get_str();
    }
    const int column = static_cast<int>(random.whole(0, static_cast<long>(columns) - 1));
    const Why why = asked(text + "\n", design, fmt::format("x{}", column));
    const WhyColumn& answer = why.columns.front();
    std::vector<int> others = as_written;
    std::erase(others, column);
    const bool dependent = test::rank_of(rows, others) == test::rank_of(rows, as_written);
    REQUIRE(answer.dependence.has_value() == dependent);
    if (!dependent) continue;
    const Dependence& found = *answer.dependence;
    for (const auto& row : rows) {
      mpq_class whole = 0, kept = 0;
      for (std::size_t j = 0; j < columns; ++j) whole += beta[j] * row[j];
      for (const Estimand& estimand : found.choice.changed) {
        mpq_class coefficient = beta[static_cast<std::size_t>(estimand.column)];
        for (const auto& [carried, factor] : estimand.carries)
          coefficient += factor * beta[static_cast<std::size_t>(carried)];
        kept += coefficient * row[static_cast<std::size_t>(estimand.column)];
      }
      for (const int j : found.choice.untouched)
        kept += beta[static_cast<std::size_t>(j)] * row[static_cast<std::size_t>(j)];
      CHECK(kept == whole);
    }
    for (const int other : found.instead) {
      std::vector<int> kept = as_written;
      for (const int gone : found.choice.without) {
        if (gone != column) std::erase(kept, gone);
      }
      std::erase(kept, other);
      CHECK(test::rank_of(rows, kept) == kept.size());
    }
    std::vector<int> backwards(as_written.rbegin(), as_written.rend());
    for (const HabitOutcome& outcome : why.habits) {
      if (outcome.habit == Habit::first_kept)
        CHECK(outcome.left_out == test::left_out_by_ranks(rows, backwards));
      if (outcome.habit == Habit::last_kept)
        CHECK(outcome.left_out == test::left_out_by_ranks(rows, as_written));
      std::vector<int> kept = as_written;
      for (const int gone : outcome.left_out) std::erase(kept, gone);
      CHECK(kept.size() == why.audit.rank.rank);
      CHECK(test::rank_of(rows, kept) == kept.size());
    }
  }
}

}  // namespace gramproof::audit
