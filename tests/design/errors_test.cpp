// Every error of the design language: where it points, what it says, what it advises.
#include <doctest/doctest.h>

#include "harbour.hpp"

using namespace gramproof;

namespace {

struct Case {
  std::string why;
  std::string design;
  std::string line;  ///< as printed, without the program's prefix
};

const std::vector<Case> cases = {
    {"unknown column", "constant, age,incme",
     "--design:15: no column \"incme\" in harbour.csv (did you mean \"income\"?)"},
    {"nothing near", "zzzzzz",
     "--design:1: no column \"zzzzzz\" in harbour.csv (its columns: age, income, \"net income\", "
     "region, town, grade and 3 more)"},
    {"characters, not bytes", "\"\xC3\xBC\", age",
     "--design:1: no column \"\xC3\xBC\" in harbour.csv (its columns: age, income, \"net income\", "
     "region, town, grade and 3 more)"},
    {"place after a wide character", "[town = \"\xC3\xBC\"]",
     "--design:9: no level \"\xC3\xBC\" in column \"town\" (its levels: \"North East\", Bay, \"Old "
     "\"\"Quay\"\"\")"},
    {"empty", " ", "--design:2: the design is empty"},
    {"comma at the end", "age,", "--design:5: a term is expected before the end of the text"},
    {"two commas", "age,,income", "--design:5: a term is expected before `,`"},
    {"no operator", "age income", "--design:5: `,` is expected before `income`"},
    {"unclosed parenthesis", "(age", "--design:1: this parenthesis is not closed"},
    {"unclosed bracket", "[age > 1", "--design:1: this bracket is not closed"},
    {"unclosed quote", "\"net",
     "--design:1: this quote is not closed (a quote inside a name is written twice)"},
    {"a comparison without brackets", "age > 3",
     "--design:5: `,` is expected before `>` (comparisons stand in brackets, as in [age >= 65])"},
    {"no comparison in brackets", "[age]",
     "--design:2: a comparison is expected here (as in age >= 65)"},
    {"chained comparison", "[17 < age < 65]",
     "--design:11: comparisons cannot be chained (as in [age > 17 and age < 65])"},
    {"reserved word", "log",
     "--design:1: `log` is a word of the design language (a column of that name is written "
     "\"log\")"},
    {"reserved word as a function", "and(age)",
     "--design:1: `and` is no function (a column of that name is written \"and\")"},
    {"unknown function", "ln(age)",
     "--design:1: no function is called `ln` (functions are log sqrt exp asinh abs min max hinge; "
     "a product is written *)"},
    {"lag", "lag(age, 1)",
     "--design:1: `lag` is not built yet (make the column beforehand and name it here)"},
    {"effects", "constant, effects(region)",
     "--design:11: `effects` is not built yet (make the column beforehand and name it here)"},
    {"year", "year(age)",
     "--design:1: `year` is not built yet (make the column beforehand and name it here)"},
    {"arguments", "log(age, 2)", "--design:1: `log` takes one argument"},
    {"arguments of min", "min(age)", "--design:1: `min` takes 2 to 64 arguments"},
    {"digits first", "2x",
     "--design:1: a name cannot begin with a digit (put the name in quotes, or write * between a "
     "number and a name)"},
    {"stray character", "age ~ income",
     "--design:5: the character \"~\" has no meaning here (terms are parted by commas, products "
     "are written *)"},
    {"curly quote",
     "\xE2\x80\x9C"
     "age",
     "--design:1: the character \"\xE2\x80\x9C\" has no meaning here (names with blanks or signs "
     "stand in straight double quotes)"},
    {"a large exponent", "age^1000000",
     "--design:5: an exponent is a whole number from -64 to 64 (not 1000000)"},
    {"a fraction as exponent", "age^0.5",
     "--design:5: an exponent is a whole number from -64 to 64 (not 0.5)"},
    {"a column as exponent", "age^income",
     "--design:5: an exponent is a whole number from -64 to 64"},
    {"65", "age^-65", "--design:5: an exponent is a whole number from -64 to 64 (not -65)"},
    {"power of a power", "age^2^3",
     "--design:6: a power of a power needs parentheses (as in (x^2)^3)"},
    {"a huge number", "age + 1e999999999",
     "--design:7: the number is out of range (numbers lie between 1e-305 and 1e305 in size)"},
    {"division by the number zero", "age / 0.0", "--design:7: division by zero"},
    {"text in arithmetic", "region + 1",
     "--design:1: \"region\" is a text column where a number is needed (levels(region) gives a "
     "column for each level)"},
    {"text as a term", "constant, region",
     "--design:11: \"region\" is a text column where a number is needed (levels(region) gives a "
     "column for each level)"},
    {"unknown level", "[region = noth]",
     "--design:11: no level \"noth\" in column \"region\" (did you mean \"north\"?)"},
    {"order of text", "[region < south]",
     "--design:2: \"region\" is a text column: its levels have no order (compare it with = or !=; "
     "steps() makes ordered levels)"},
    {"level on the left", "[north = region]",
     "--design:2: no column \"north\" in harbour.csv (the column stands on the left: region = "
     "north)"},
    {"arithmetic beside text", "[size = 2-4]",
     "--design:9: a level of \"size\" is expected here (a level that is not a plain word is "
     "quoted)"},
    {"text beside a number", "[region = column(\"age\")]",
     "--design:11: \"region\" is a text column, \"age\" a numeric one: they cannot be compared"},
    {"a column beside numbers", "[age = nrth]",
     "--design:8: no column \"nrth\" in harbour.csv (its columns: age, income, \"net income\", "
     "region, town, grade and 3 more)"},
    {"sum of sets", "levels(region) + levels(grade)",
     "--design:1: a set of columns stands where one column is needed (sets are terms of their own "
     "or parts of a product)"},
    {"function of a set", "log(columns(\"*income\"))",
     "--design:5: a set of columns stands where one column is needed (sets are terms of their own "
     "or parts of a product)"},
    {"power of a set", "levels(region)^2",
     "--design:1: a set of columns stands where one column is needed (sets are terms of their own "
     "or parts of a product)"},
    {"minus a set", "-levels(region)",
     "--design:2: a set of columns stands where one column is needed (sets are terms of their own "
     "or parts of a product)"},
    {"constant in arithmetic", "2 * constant",
     "--design:5: `constant` stands alone as a term (in arithmetic, write the number 1)"},
    {"rest in a product", "rest * levels(region)", "--design:1: `rest` stands alone as a term"},
    {"rest twice", "rest, rest",
     "--design:7: `rest` stands here for the second time (it takes all that is left at once)"},
    {"row in a design", "row",
     "--design:1: `row` has a meaning in --rows only (a column of that name is written \"row\")"},
    {"levels of nothing", "levels()", "--design:8: the name of a column is expected before `)`"},
    {"levels of arithmetic", "levels(age + 1)", "--design:12: `)` is expected before `+`"},
    {"against what", "levels(region, north)",
     "--design:16: `against = ` and a level is expected before `north`"},
    {"against an unknown level", "levels(region, against = nort)",
     "--design:26: no level \"nort\" in column \"region\" (did you mean \"north\"?)"},
    {"steps without all levels", "steps(region, north < south)",
     "--design:1: steps must list all levels of \"region\": \"east\" is absent"},
    {"steps with a level twice", "steps(grade, 1 < 2 < 1.0)",
     "--design:22: the level \"1.0\" is listed twice"},
    {"steps of one level", "steps(grade, 1)",
     "--design:1: `steps` needs two levels or more (as in steps(grade, low < mid < high))"},
    {"pattern without a match", "columns(\"incom\")",
     "--design:1: no column matches \"incom\" in harbour.csv (did you mean \"income\"?)"},
    {"pattern without quotes", "columns(income)",
     "--design:9: a pattern in quotes is expected before `income` (as in columns(\"share_*\"))"},
    {"one column twice", "age, income, (age)",
     "--design:15: the column age is already made by the term at --design:1 (leave one of them "
     "out)"},
    {"a bracket that levels make", "levels(region), [region=south]",
     "--design:17: the column [region = south] is already made by the term at --design:1 (leave "
     "one of them out)"},
    {"a comparison in arithmetic", "[(age > 3) + 1 = 2]",
     "--design:3: a comparison cannot be a part of arithmetic as it stands (put it in brackets, as "
     "in [age >= 65])"},
};

}  // namespace

TEST_CASE("errors of designs") {
  const auto table = test::harbour();
  for (const Case& item : cases) {
    CAPTURE(item.why);
    const auto design = test::bind_text(item.design, table.schema);
    REQUIRE_FALSE(design);
    CHECK(to_line(design.error()) == item.line);
    CHECK(design.error().kind == ErrorKind::design);
  }
}

TEST_CASE("a design file is pointed at by line and character") {
  design::Request request;
  request.design = "constant,\n  age, # years\n  incme";
  request.design_where = "design.txt";
  const auto design = test::bind_request(request, test::harbour().schema);
  REQUIRE_FALSE(design);
  CHECK(design.error().where == "design.txt:3:3");
}

TEST_CASE("names in options") {
  const auto table = test::harbour();
  design::Request response;
  response.response = "incom";
  CHECK(to_line(test::bind_request(response, table.schema).error()) ==
        "--response: no column \"incom\" in harbour.csv (did you mean \"income\"?)");
  design::Request weight;
  weight.weight = "region";
  CHECK(to_line(test::bind_request(weight, table.schema).error()) ==
        "--weight: \"region\" holds cells that are no numbers, first \"north\" at table.csv:2:4 "
        "(--missing names the cells "
        "that count as missing)");
  design::Request complete;
  complete.complete = {"age", "sizes"};
  CHECK(to_line(test::bind_request(complete, table.schema).error()) ==
        "--complete: no column \"sizes\" in harbour.csv (did you mean \"size\"?)");
  design::Request rows;
  rows.rows = "row > 3 and regon = north";
  CHECK(to_line(test::bind_request(rows, table.schema).error()) ==
        "--rows:13: no column \"regon\" in harbour.csv (did you mean \"region\"?)");
  rows.rows = "age > 3,";
  CHECK(to_line(test::bind_request(rows, table.schema).error()) ==
        "--rows:8: the condition should end before `,` (comparisons are joined by and, or)");
}

TEST_CASE("invalid UTF-8 is pointed at") {
  const auto design = test::bind_text("age, \xFFx", test::harbour().schema);
  REQUIRE_FALSE(design);
  CHECK(design.error().where == "--design:6");
}

TEST_CASE("a column that is mostly numbers says which cell is not") {
  const auto table = test::make_table({"x"}, {{"1"}, {"2"}, {"?"}, {"4"}});
  const auto design = test::bind_text("constant, x", table.schema);
  REQUIRE_FALSE(design);
  CHECK(to_line(design.error()) ==
        "--design:11: \"x\" is text: 1 cell is no number, first \"?\" at table.csv:4:1 (--missing "
        "names the cells that "
        "count as missing)");
}

TEST_CASE("levels that were too many to list") {
  auto table = test::harbour();
  table.schema.columns[3].levels.clear();
  table.schema.columns[3].levels_cut = true;
  table.schema.columns[3].distinct_at_least = 1'000'001;
  for (const std::string text : {"levels(region)", "[region = north]", "steps(region, a < b)"}) {
    CAPTURE(text);
    const auto design = test::bind_text(text, table.schema);
    REQUIRE_FALSE(design);
    CHECK(design.error().what ==
          "column \"region\" has at least 1,000,001 distinct values, too many to list");
  }
}

TEST_CASE("nesting and size have limits that are named") {
  const auto table = test::harbour();
  const auto repeated = [](const std::string& text, int times) {
    std::string result;
    for (int i = 0; i < times; ++i) result += text;
    return result;
  };
  struct LimitCase {
    std::string why, design, what;
  };
  const std::vector<LimitCase> limits = {
      {"parentheses", repeated("(", 10000) + "age" + repeated(")", 10000),
       "nested more than 64 deep"},
      {"signs", repeated("-", 10000) + "age", "nested more than 64 deep"},
      {"not", "[" + repeated("not ", 10000) + "age > 1]", "nested more than 64 deep"},
      {"functions", repeated("abs(", 10000) + "age" + repeated(")", 10000),
       "nested more than 64 deep"},
      {"brackets", repeated("[", 10000) + "age", "brackets are nested more than 8 deep"},
      {"sums", "age" + repeated(" + age", 10000), "a term may have at most 1,000 operations"},
      {"digits", repeated("9", 2000), "a number may have at most 1,000 significant digits"},
  };
  for (const LimitCase& item : limits) {
    CAPTURE(item.why);
    const auto design = test::bind_text(item.design, table.schema);
    REQUIRE_FALSE(design);
    CHECK(design.error().what == item.what);
  }
  CHECK(test::bind_text(repeated("(", 60) + "age" + repeated(")", 60), table.schema));
}

TEST_CASE("columns are counted before they are made") {
  std::vector<std::vector<std::string>> rows;
  for (int i = 0; i < 1000; ++i) rows.push_back({"a" + std::to_string(i), std::to_string(i)});
  const auto table = test::make_table({"firm", "x"}, rows);
  const auto refused = test::bind_text(
      "constant, all_levels(firm) * all_levels(firm) * all_levels(firm)", table.schema, 500);
  REQUIRE_FALSE(refused);
  CHECK(refused.error().kind == ErrorKind::limit);
  CHECK(to_line(refused.error()) ==
        "--design:11: with this term the design has 1,000,000,001 columns; the memory is enough "
        "for 500 (--memory sets how "
        "much may be used)");
  const auto overflow = test::bind_text(
      "all_levels(firm)*all_levels(firm)*all_levels(firm)*all_levels(firm)*all_levels(firm)*all_"
      "levels(firm)*"
      "all_levels(firm)*all_levels(firm)",
      table.schema, 500);
  REQUIRE_FALSE(overflow);
  CHECK(overflow.error().what ==
        "with this term the design has more than 2^64 columns; the memory is enough for 500");
}

TEST_CASE("a number out of range stops a design that needs it") {
  const auto table = test::make_table({"x", "y"}, {{"1", "2"}, {"1e400", "3"}});
  CHECK(test::bind_text("constant, y", table.schema));
  for (const std::string text : {"x^2", "constant, rest", "[x > 1]", "columns(\"*\")"}) {
    CAPTURE(text);
    const auto design = test::bind_text(text, table.schema);
    REQUIRE_FALSE(design);
    CHECK(to_line(design.error()) ==
          "table.csv:3:1: the number \"1e400\" in column \"x\" is out of range (numbers lie "
          "between 1e-305 and "
          "1e305 in size)");
  }
}
