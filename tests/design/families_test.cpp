// Families, what is under what, roles and contrasts.
#include <doctest/doctest.h>

#include "harbour.hpp"

using namespace gramproof;

namespace {

using Names = std::vector<std::string>;
using Flags = std::vector<std::vector<bool>>;

test::Table people() {
  return test::make_table(
      {"age", "education", "region", "north", "south", "east", "income", "treated"},
      {{"25", "12", "a", "1", "0", "0", "100", "1"},
       {"35", "9", "b", "0", "1", "0", "200", "1"},
       {"45", "16", "c", "0", "0", "1", "300", "0"},
       {"55", "10", "a", "1", "0", "0", "150", "1"}});
}

/// never_together as the scan finds it, on all rows of the table.
Flags never_together(const design::Design& design, const test::Table& table) {
  const std::size_t columns = design.columns.size();
  Flags flags(columns, std::vector<bool>(columns, false));
  const auto is_one = [&](std::size_t j, std::size_t r) {
    const auto& definition = *design.columns[j].definition;
    if (definition.operation != design::Operation::cell) return false;
    return table.piece.columns[static_cast<std::size_t>(definition.column)].value[r] == 1;
  };
  for (std::size_t a = 0; a < columns; ++a) {
    for (std::size_t b = 0; b < columns; ++b) {
      if (a == b || !design.columns[a].zero_one || !design.columns[b].zero_one) continue;
      bool together = false;
      for (std::size_t r = 0; r < table.piece.rows; ++r)
        together = together || (is_one(a, r) && is_one(b, r));
      flags[a][b] = !together;
    }
  }
  return flags;
}

design::Design with_families(const std::string& text, const test::Table& table) {
  auto design = test::bind_text(text, table.schema);
  if (!design) FAIL(to_line(design.error()));
  design::assign_families(design.value(), table.schema, never_together(design.value(), table));
  return design.value();
}

struct Case {
  std::string why, design;
  Names families;
  std::vector<int> family_of;  ///< of each column
};

const std::vector<Case> cases = {
    {"one source",
     "constant, age, age^2, log(age), 1 / age, [age > 30]",
     {"constant", "age"},
     {0, 1, 1, 1, 1, 1}},
    {"brackets of a factor", "levels(region, against = a), [region = a]", {"region"}, {0, 0, 0}},
    {"products over one set of sources",
     "levels(region, against = a) * age, levels(region, against = a) * age^2",
     {"region * age"},
     {0, 0, 0, 0}},
    {"order of factors does not matter",
     "age * education, education^2 * age, (age * education)^2, 2 * age * education / 3",
     {"age * education"},
     {0, 0, 0, 0}},
    {"sums and ratios stand alone",
     "age + education, age / education, log(age * education), age - education",
     {"age + education", "age / education", "log(age * education)", "age - education"},
     {0, 1, 2, 3}},
    {"a product with a ratio stands alone",
     "income * (age / education), income * age",
     {"income * (age / education)", "income * age"},
     {0, 1}},
    {"coded by hand", "north, age, south, east", {"north", "age"}, {0, 1, 0, 0}},
    {"0/1 columns that meet are apart", "north, treated, south", {"north", "treated"}, {0, 1, 0}},
    {"one 0/1 column is a family of its own name", "treated, age", {"treated", "age"}, {0, 1}},
    {"products over columns coded by hand",
     "north, south, north * age, south * age",
     {"north", "north * age"},
     {0, 0, 1, 1}},
    {"logic of two sources is their product",
     "[region = a and age > 30], [region = b] * age",
     {"region * age"},
     {0, 0}},
};

}  // namespace

TEST_CASE("families") {
  const auto table = people();
  for (const Case& item : cases) {
    CAPTURE(item.why);
    const auto design = with_families(item.design, table);
    Names names;
    for (const auto& family : design.families) names.push_back(family.name);
    CHECK(names == item.families);
    std::vector<int> family_of;
    for (const auto& column : design.columns) family_of.push_back(column.family);
    CHECK(family_of == item.family_of);
  }
}

TEST_CASE("what is under what") {
  const auto design = with_families(
      "constant, age, levels(region), levels(region) * age, age * income * education, age / "
      "income, north, south, north * age",
      people());
  const auto family = [&](const std::string& name) {
    for (const auto& known : design.families) {
      if (known.name == name) return known;
    }
    FAIL(name);
    return design::Family{};
  };
  struct Pair {
    std::string below, above;
    bool under;
  };
  const std::vector<Pair> pairs = {{"age", "region * age", true},
                                   {"region", "region * age", true},
                                   {"region * age", "age", false},
                                   {"age", "age * income * education", true},
                                   {"region", "age * income * education", false},
                                   {"age", "age / income", false},
                                   {"age / income", "age * income * education", false},
                                   {"age", "age", false},
                                   {"constant", "age", false},
                                   {"north", "north * age", true},
                                   {"age", "north * age", true}};
  for (const Pair& pair : pairs) {
    CAPTURE(pair.below);
    CAPTURE(pair.above);
    CHECK(design::is_under(family(pair.below), family(pair.above)) == pair.under);
  }
}

TEST_CASE("roles by label or term") {
  const auto table = test::harbour();
  auto bound =
      test::bind_text("constant, age, age^2, levels(region), \"net income\"", table.schema);
  REQUIRE(bound);
  design::Design& design = bound.value();
  REQUIRE(design::assign_roles(design, {"age ^ 2", "levels( region )"}, {"net income"}));
  CHECK(design.columns[1].role == design::Role::other);
  CHECK(design.columns[2].role == design::Role::focus);
  for (const std::size_t j : {3u, 4u, 5u}) CHECK(design.columns[j].role == design::Role::focus);
  CHECK(design.columns[6].role == design::Role::protect);
  CHECK(to_line(design::assign_roles(design, {"aeg"}, {}).error()) ==
        "--focus: no column or term of the design is called \"aeg\" (did you mean \"age\"?)");
  CHECK(to_line(design::assign_roles(design, {}, {"income"}).error()) ==
        "--protect: no column or term of the design is called \"income\" (write it as the design "
        "or the report does)");
}

namespace {

struct ContrastCase {
  std::string why, text;
  std::vector<std::pair<int, std::string>> parts;  ///< column and its number as plain text
};

const std::string contrast_design =
    "constant, age, age^2, [region = south] * age, [grade = 2] + [grade = 3], 3 * income, age / 2, "
    "(age + 1)^2";

const std::vector<ContrastCase> contrasts = {
    {"one label", "age", {{1, "1"}}},
    {"the sum of the documentation", "age + 80*age^2", {{1, "1"}, {2, "80"}}},
    {"signs", "-age - -2 * age^2 + constant", {{1, "-1"}, {2, "2"}, {0, "1"}}},
    {"number behind", "age^2 * 0.5 - constant*1e2", {{2, "0.5"}, {0, "-100"}}},
    {"number before a product", "2 * [region = south] * age - age", {{3, "2"}, {1, "-1"}}},
    {"number within a product", "[region=south] * 2 * age * 3", {{3, "6"}}},
    {"a label that is a sum", "[grade = 2] + [grade = 3]", {{4, "1"}}},
    {"a label that is a sum, in parentheses",
     "age - 2*([grade = 2] + [grade = 3])",
     {{1, "1"}, {4, "-2"}}},
    {"a label that holds a number", "3 * income + age / 2", {{5, "1"}, {6, "1"}}},
    {"a multiple of it", "4 * (3 * income)", {{5, "4"}}},
    {"numbers multiply exactly", "0.1 * 0.2 * age", {{1, "0.02"}}},
    {"a factor of a sum", "2 * (age + 3 * age^2)", {{1, "2"}, {2, "6"}}},
    {"a power", "(1 + age)^2 + age", {}},
};

}  // namespace

TEST_CASE("contrasts") {
  const auto table = test::harbour();
  const auto design = test::bind_text(contrast_design, table.schema);
  REQUIRE(design);
  for (const ContrastCase& item : contrasts) {
    CAPTURE(item.why);
    const auto contrast = design::parse_contrast(item.text, design.value(), table.schema);
    if (item.parts.empty()) {
      CHECK_FALSE(contrast);
      continue;
    }
    if (!contrast) FAIL(to_line(contrast.error()));
    std::vector<std::pair<int, std::string>> parts;
    for (const auto& part : contrast.value())
      parts.emplace_back(part.column, table::plain_text(part.number));
    CHECK(parts == item.parts);
  }
}

TEST_CASE("errors of contrasts") {
  const auto table = test::harbour();
  const auto design = test::bind_text(contrast_design, table.schema);
  REQUIRE(design);
  const std::vector<std::pair<std::string, std::string>> errors = {
      {"aeg", "--contrast:1: no column of the design is called \"aeg\" (did you mean \"age\"?)"},
      {"age + income",
       "--contrast:7: no column of the design is called \"income\" (write it as the design or the "
       "report does)"},
      {"age + 3",
       "--contrast:7: a number stands here without a column of the design (as in age + 80*age^2)"},
      {"age + 2*age", "--contrast:9: age stands here twice (join its two numbers into one)"},
      {"age^2 / 2",
       "--contrast:1: no column of the design is called \"age^2 / 2\" (a fraction is written as a "
       "factor, as in 0.5*age)"},
      {"age +",
       "--contrast:6: a column, a number or a function is expected before the end of the text"},
      {"1e300 * 1e300 * age",
       "--contrast: a factor of the contrast is out of range (numbers lie between 1e-305 and 1e305 "
       "in size)"},
      {"[region = nort]",
       "--contrast:11: no level \"nort\" in column \"region\" (did you mean \"north\"?)"},
      {"levels(region)",
       "--contrast:1: a set of columns stands where one column is needed (sets are terms of their "
       "own or parts of a product)"},
  };
  for (const auto& [text, line] : errors) {
    CAPTURE(text);
    const auto contrast = design::parse_contrast(text, design.value(), table.schema);
    REQUIRE_FALSE(contrast);
    CHECK(to_line(contrast.error()) == line);
  }
}
