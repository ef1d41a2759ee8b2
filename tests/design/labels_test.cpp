// What a design gives: the columns, their labels, and what is known of each.
#include <doctest/doctest.h>

#include "harbour.hpp"

using namespace gramproof;
using Labels = std::vector<std::string>;

namespace {

struct Case {
  std::string why;
  std::string design;
  Labels labels;
  std::string term;  ///< canonical text of the last term
};

const std::vector<Case> cases = {
    {"plain columns", "constant, age", {"constant", "age"}, "age"},
    {"quotes where needed", "\"net income\", \"age\"", {"\"net income\"", "age"}, "age"},
    {"a column named like a word",
     "\"log\", log(\"log\")",
     {"\"log\"", "log(\"log\")"},
     "log(\"log\")"},
    {"free blanks, lines and comments",
     "  age # years\n , # then\n age ^ 2",
     {"age", "age^2"},
     "age^2"},
    {"precedence", "age + income * age ^ 2 / 2 - 1", {"age + income * age^2 / 2 - 1"}, ""},
    {"needless parentheses go", "((age) + (income * age))", {"age + income * age"}, ""},
    {"needed ones stay",
     "(age + income) * age, age - (income - age)",
     {"(age + income) * age", "age - (income - age)"},
     ""},
    {"numbers are plain", "1.50e2 * age, age + 1e-3", {"150 * age", "age + 0.001"}, ""},
    {"minus",
     "-age, -age^2, (-age)^2, 3 - -age, -(age * income)",
     {"-age", "-age^2", "(-age)^2", "3 - -age", "-(age * income)"},
     ""},
    {"-1 times is minus", "-1 * age, -1 * (2 + age)", {"-age", "-(2 + age)"}, ""},
    {"negative power", "age^-2, (age^2)^3", {"age^-2", "(age^2)^3"}, ""},
    {"functions",
     "sqrt(age), exp(age / 100), asinh(income), abs(age - 40), min(age, 40, 50), max(0, age - 40)",
     {"sqrt(age)", "exp(age / 100)", "asinh(income)", "abs(age - 40)", "min(age, 40, 50)",
      "max(0, age - 40)"},
     ""},
    {"hinge", "hinge(age, 40)", {"hinge(age, 40)"}, "hinge(age, 40)"},
    {"bracket on a number", "[age>=65], [ 65 <= age ]", {"[age >= 65]", "[65 <= age]"}, ""},
    {"is and is not", "[age is 30], [age is not 30]", {"[age = 30]", "[age != 30]"}, ""},
    {"bracket on columns", "[income > 2 * age]", {"[income > 2 * age]"}, ""},
    {"level", "[region = north], [region != south]", {"[region = north]", "[region != south]"}, ""},
    {"quoted level",
     "[town = \"North East\"], [town = \"Old \"\"Quay\"\"\"], [town = \"Bay\"]",
     {"[town = \"North East\"]", "[town = \"Old \"\"Quay\"\"\"]", "[town = Bay]"},
     ""},
    {"level like a word or no word",
     "[size = \"not\"], [size = \"2-4\"]",
     {"[size = \"not\"]", "[size = \"2-4\"]"},
     ""},
    {"two text columns", "[region = column(\"town\")]", {"[region = column(\"town\")]"}, ""},
    {"logic",
     "[region = north and (age < 30 or not age < 60)]",
     {"[region = north and (age < 30 or not age < 60)]"},
     ""},
    {"not of a level", "[not region = north]", {"[region != north]"}, ""},
    {"bracket in arithmetic and in a bracket",
     "2 * [age > 30], [[age > 30] + [age > 40] = 1]",
     {"2 * [age > 30]", "[[age > 30] + [age > 40] = 1]"},
     ""},
    {"levels, all until the rows are known",
     "levels(region)",
     {"[region = east]", "[region = north]", "[region = south]"},
     "levels(region)"},
    {"against",
     "levels( region , against=north )",
     {"[region = east]", "[region = south]"},
     "levels(region, against = north)"},
    {"all levels",
     "all_levels(region)",
     {"[region = east]", "[region = north]", "[region = south]"},
     "all_levels(region)"},
    {"levels of numbers are values",
     "levels(grade, against = 2.0)",
     {"[grade = 1]", "[grade = 3]"},
     "levels(grade, against = 2)"},
    {"steps",
     "steps(region, north < south < east)",
     {"[region = south] + [region = east]", "[region = east]"},
     "steps(region, north < south < east)"},
    {"steps of numbers",
     "steps(grade, 1 < 2 < 3)",
     {"[grade = 2] + [grade = 3]", "[grade = 3]"},
     "steps(grade, 1 < 2 < 3)"},
    {"product with a set",
     "levels(region, against = east) * age",
     {"[region = north] * age", "[region = south] * age"},
     "levels(region, against = east) * age"},
    {"scalar product stays at the left",
     "2 * age * levels(region, against = east)",
     {"2 * age * [region = north]", "2 * age * [region = south]"},
     "2 * age * levels(region, against = east)"},
    {"product of two sets",
     "levels(region, against = east) * levels(grade, against = 1)",
     {"[region = north] * [grade = 2]", "[region = north] * [grade = 3]",
      "[region = south] * [grade = 2]", "[region = south] * [grade = 3]"},
     "levels(region, against = east) * levels(grade, against = 1)"},
    {"a product on the right",
     "age * (income * levels(region, against = east))",
     {"age * (income * [region = north])", "age * (income * [region = south])"},
     "age * (income * levels(region, against = east))"},
    {"a sum as a factor",
     "(age + 1) * levels(region, against = east)",
     {"(age + 1) * [region = north]", "(age + 1) * [region = south]"},
     "(age + 1) * levels(region, against = east)"},
    {"pattern", "columns(\"*income\")", {"income", "\"net income\""}, "columns(\"*income\")"},
    {"pattern with one character", "columns(\"?ge\")", {"age"}, "columns(\"?ge\")"},
    {"a name beyond ASCII is not a word of ours", "[town = Bay] * age", {"[town = Bay] * age"}, ""},
};

}  // namespace

TEST_CASE("labels of a design") {
  const auto table = test::harbour();
  for (const Case& item : cases) {
    CAPTURE(item.why);
    CAPTURE(item.design);
    const auto design = test::bind_text(item.design, table.schema);
    if (!design) FAIL(to_line(design.error()));
    CHECK(test::labels_of(design.value()) == item.labels);
    if (!item.term.empty()) CHECK(design.value().terms.back().text == item.term);
  }
}

TEST_CASE("every label and every term pastes back") {
  const auto table = test::harbour();
  for (const Case& item : cases) {
    const auto design = test::bind_text(item.design, table.schema);
    REQUIRE(design);
    for (const auto& term : design.value().terms) {
      CAPTURE(term.text);
      const auto again = test::bind_text(term.text, table.schema);
      REQUIRE(again);
      CHECK(again.value().terms[0].text == term.text);
    }
    for (const auto& column : design.value().columns) {
      CAPTURE(column.label);
      const auto again = test::bind_text(column.label, table.schema);
      REQUIRE(again);
      CHECK(test::labels_of(again.value()) == Labels{column.label});
    }
  }
}

TEST_CASE("rest takes what has no other part") {
  const auto table = test::harbour();
  design::Request request;
  request.design = "constant, age^2, rest";
  request.response = "income";
  request.weight = "log";
  request.complete = {"size"};
  request.rows = "town = Bay";
  const auto design = test::bind_request(request, table.schema);
  REQUIRE(design);
  CHECK(test::labels_of(design.value()) == Labels{"constant", "age^2", "\"net income\"",
                                                  "[region = east]", "[region = north]",
                                                  "[region = south]", "grade", "treated"});
  CHECK(test::kinds_of(design.value().notes) == std::vector<std::string>{"code_used_as_number"});
  CHECK(design.value().used_columns == std::vector<int>{0, 1, 2, 3, 4, 5, 6, 7, 8});
  CHECK(design.value().filter_text == "town = Bay");
  CHECK(design.value().terms[2].text == "rest");
}

TEST_CASE("rest leaves out what cannot be a column and says so") {
  const auto table = test::make_table(
      {"", "id", "empty", "x"},
      {{"1", "a", "", "1.5"}, {"2", "b", "", "2.5"}, {"3", "c", "", "1.0"}, {"4", "c", "", "7"}});
  const auto design = test::bind_text("constant, rest", table.schema);
  REQUIRE(design);
  CHECK(test::labels_of(design.value()) == Labels{"constant", "x"});
  CHECK(test::kinds_of(design.value().notes) ==
        std::vector<std::string>{"left_out_of_rest", "left_out_of_rest", "left_out_of_rest"});
}

TEST_CASE("a column of numbers with a few other cells stops rest") {
  std::vector<std::vector<std::string>> rows(20, {"1.5"});
  rows[6] = {"n/a"};
  rows[9] = {"?"};
  const auto table = test::make_table({"x"}, rows);
  const auto design = test::bind_text("constant, rest", table.schema);
  REQUIRE_FALSE(design);
  CHECK(design.error().kind == ErrorKind::data);
  CHECK(to_line(design.error()) ==
        "table.csv:8:1: \"n/a\" is no number: column \"x\" has 2 such cells among 18 numbers (if "
        "it means missing, name "
        "it in --missing; or write levels(x) in the design)");
  rows[11] = {"?"};
  rows[12] = {"?"};
  const auto levels = test::make_table({"x"}, rows);
  CHECK(test::bind_text("constant, rest", levels.schema));
}

TEST_CASE("what is known of each column") {
  const auto table = test::harbour();
  const auto design = test::bind_text(
      "constant, treated, levels(region) * treated, log(age), steps(grade, 1 < 2 < 3), age / "
      "income",
      table.schema);
  REQUIRE(design);
  const auto& columns = design.value().columns;
  CHECK(columns[0].constant);
  CHECK(columns[0].sources.empty());
  CHECK(columns[1].zero_one);
  CHECK(columns[2].zero_one);
  CHECK(columns[2].levels.size() == 1);
  CHECK(columns[2].sources == std::vector<int>{3, 6});
  CHECK_FALSE(columns[5].exact);
  CHECK(columns[6].zero_one);
  CHECK(columns[6].label == "[grade = 2] + [grade = 3]");
  CHECK(columns[8].exact);
  CHECK_FALSE(columns[8].zero_one);
}

TEST_CASE("one level set for equal words") {
  const auto table = test::harbour();
  const auto design = test::bind_text(
      "levels(region), levels(region) * age, all_levels(region) * income", table.schema);
  REQUIRE(design);
  CHECK(design.value().level_sets.size() == 2);
}

TEST_CASE("products without their factors are noted") {
  struct NoteCase {
    std::string why, design;
    bool noted;
  };
  const std::vector<NoteCase> notes = {
      {"complete", "constant, age, income, age * income", false},
      {"one absent", "constant, age, age * income", true},
      {"levels present as all_levels", "all_levels(region), age, levels(region) * age", false},
      {"levels absent", "constant, age, levels(region) * age", true},
      {"a slope for every level needs no common slope", "levels(region), all_levels(region) * age",
       false},
      {"the square is a factor of its own", "constant, age, income, age^2 * income", true},
      {"a number is no factor", "constant, 2 * age", false},
      {"within a pattern", "columns(\"a*\"), income, age * income", false},
  };
  const auto table = test::harbour();
  for (const NoteCase& item : notes) {
    CAPTURE(item.why);
    const auto design = test::bind_text(item.design, table.schema);
    if (!design) FAIL(to_line(design.error()));
    const auto kinds = test::kinds_of(design.value().notes);
    CHECK((std::find(kinds.begin(), kinds.end(), "main_effect_absent") != kinds.end()) ==
          item.noted);
  }
}

TEST_CASE("columns with levels are named before the survey") {
  design::Request request;
  request.design = "age, levels(grade) * all_levels(region), steps(size, a < b)";
  const auto syntax = design::parse(request);
  REQUIRE(syntax);
  CHECK(design::columns_with_levels(*syntax.value()) ==
        std::vector<std::string>{"grade", "region", "size"});
}
