// What COLUMN may be: labels, terms, columns of the data, levels left out.
#include <doctest/doctest.h>
#include <fmt/format.h>

#include <string>
#include <vector>

#include "asked.hpp"
#include "support/random_numbers.hpp"

namespace gramproof::audit {
namespace {

using test::Random;

/// region (north most frequent), grade 1 to 3, age; 40 rows.
std::string regions() {
  Random random(8);
  std::string text = "region,grade,age,away\n";
  const char* names[] = {"north", "north", "south", "east"};
  for (int i = 0; i < 40; ++i) {
    text += fmt::format("{},{},{},{}\n", names[i % 4], 1 + i * i % 3, random.whole(18, 80),
                        random.whole(0, 9));
  }
  return text;
}

}  // namespace

TEST_CASE("names: labels however written, terms, sources and levels left out") {
  struct Case {
    std::string why, design, column;
    AskedFor asked_for;
    std::vector<std::string> columns;
  };
  const std::string both = "constant, levels(region), age";
  const std::vector<Case> cases = {
      {"a label", both, "age", AskedFor::column, {"age"}},
      {"blanks", both, "[region=south]", AskedFor::column, {"[region = south]"}},
      {"quotes that are not needed",
       both,
       "[\"region\" = \"south\"]",
       AskedFor::column,
       {"[region = south]"}},
      {"a term", both, "levels(region)", AskedFor::term, {"[region = east]", "[region = south]"}},
      {"a column of the data",
       both,
       "region",
       AskedFor::source,
       {"[region = east]", "[region = south]"}},
      {"a label before a source", "constant, age, age^2", "age", AskedFor::column, {"age"}},
      {"a source of one column", "constant, age^2", "age", AskedFor::column, {"age^2"}},
      {"the most frequent level",
       both,
       "[region = north]",
       AskedFor::level_left_out,
       {"[region = north]"}},
      {"the level of against",
       "constant, levels(region, against = east), age",
       "[region = east]",
       AskedFor::level_left_out,
       {"[region = east]"}},
      {"a level that is a number",
       "constant, levels(grade)",
       "[grade = 2]",
       AskedFor::level_left_out,
       {"[grade = 2]"}},
      {"a product with it",
       "constant, age, levels(region), levels(region) * age",
       "[region = north] * age",
       AskedFor::level_left_out,
       {"[region = north] * age"}},
  };
  for (const Case& test : cases) {
    CAPTURE(test.why);
    const Why why = asked(regions(), test.design, test.column);
    CHECK(why.asked_for == test.asked_for);
    std::vector<int> columns;
    for (const WhyColumn& column : why.columns) columns.push_back(column.column);
    CHECK(labels(why, columns) == test.columns);
    if (test.asked_for == AskedFor::level_left_out) CHECK(why.columns.front().dependence);
  }
}

TEST_CASE("a level left out beside no constant can be kept; roles survive its being added") {
  CHECK(asked(regions(), "levels(region), age", "[region = north]").columns.front().nearness);
  Request request;
  request.design.design = "constant, levels(region), age";
  request.design.protect = {"levels(region)"};
  const Result<Why> why = asked(regions(), request, "[region = north]");
  REQUIRE(why);
  CHECK(labels(why.value(), why.value().columns.front().dependence->instead) ==
        std::vector<std::string>{"constant"});
}

TEST_CASE("names that mean nothing: the nearest is named") {
  struct Case {
    std::string column, message;
  };
  const std::vector<Case> cases = {
      {"agee",
       "COLUMN: no column or term of the design is called \"agee\" (did you mean "
       "\"age\"?)"},
      {"[region = west]",
       "COLUMN: no column or term of the design is called \"[region = west]\" (did you mean "
       "\"[region = east]\"?)"},
      {"away",
       "COLUMN: no column of the design is made of \"away\" (add it to --design to ask "
       "about it)"},
      {"2 * age + 1",
       "COLUMN: no column or term of the design is called \"2 * age + 1\" (write it "
       "as the design or the report does)"},
  };
  Request request;
  request.design.design = "constant, levels(region), age";
  for (const Case& test : cases) {
    const Result<Why> why = asked(regions(), request, test.column);
    REQUIRE_FALSE(why);
    CHECK(to_line(why.error()) == test.message);
  }
}

}  // namespace gramproof::audit
