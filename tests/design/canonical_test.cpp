// Canonical text parses back to the same tree, for every tree the parser can make.
#include <doctest/doctest.h>

#include "harbour.hpp"
#include "random_tree.hpp"

using namespace gramproof;

namespace {

bool same_tree(const design::Expression& a, const design::Expression& b) {
  if (a.operation != b.operation || a.operands.size() != b.operands.size()) return false;
  if (a.column != b.column || a.other_column != b.other_column || a.level != b.level) return false;
  if (a.exponent != b.exponent || a.comparison != b.comparison) return false;
  if (table::compare(a.number, b.number) != 0) return false;
  for (std::size_t i = 0; i < a.operands.size(); ++i) {
    if (!same_tree(*a.operands[i], *b.operands[i])) return false;
  }
  return true;
}

/// Division by the number zero is an error of the design, so such a tree has no design to parse
/// back.
bool has_division_by_zero(const design::Expression& tree) {
  if (tree.operation == design::Operation::divide && design::is_number(*tree.operands[1], 0))
    return true;
  for (const auto& operand : tree.operands) {
    if (has_division_by_zero(*operand)) return true;
  }
  return false;
}

}  // namespace

TEST_CASE("random trees survive text and back") {
  const auto table = test::harbour();
  int compared = 0;
  for (std::uint64_t seed = 1; seed <= 4000; ++seed) {
    CAPTURE(seed);
    test::RandomTree random(seed, {{0, 1, 2, 7}, 4, 3, true, true});
    const auto tree = random.number(1 + random.below(5));
    if (has_division_by_zero(*tree)) continue;
    const std::string text = design::canonical_text(*tree, table.schema);
    CAPTURE(text);
    const auto design = test::bind_text(text, table.schema);
    if (!design) FAIL(to_line(design.error()));
    CHECK(same_tree(*tree, *design.value().columns[0].definition));
    CHECK(design.value().columns[0].label == text);
    ++compared;
  }
  CHECK(compared > 3000);
}

TEST_CASE("two spellings of one tree have one label") {
  const auto table = test::harbour();
  const std::vector<std::pair<std::string, std::string>> pairs = {
      {"(age)", "age"},
      {"age*1.0", "age * 1"},
      {"[region is not north]", "[not region = north]"},
      {"-(2)", "-2"},
      {"+age", "age"},
      {"column(\"age\")", "age"},
      {"[age=30.00]", "[age is 3e1]"}};
  for (const auto& [one, other] : pairs) {
    CAPTURE(one);
    const auto a = test::bind_text(one, table.schema), b = test::bind_text(other, table.schema);
    REQUIRE(a);
    REQUIRE(b);
    CHECK(a.value().columns[0].label == b.value().columns[0].label);
  }
}

TEST_CASE("runs of random tokens end in an error or in a design that pastes back") {
  const std::vector<std::string> tokens = {
      "age",      "income", "region",  "grade",       "north",
      "constant", "rest",   "levels(", "all_levels(", "steps(",
      "columns(", "\"a*\"", "column(", "log(",        "hinge(",
      "max(",     ",",      ",",       "+",           "-",
      "*",        "/",      "^",       "2",           "-3",
      "0.5",      "(",      ")",       ")",           "[",
      "]",        "=",      "<",       "!=",          "is",
      "not",      "and",    "or",      "against",     "\"net income\"",
      "row",      "lag(",   "#x\n",    "1e400",       "\"Bay\""};
  const auto table = test::harbour();
  int bound = 0;
  for (std::uint64_t seed = 1; seed <= 30000; ++seed) {
    CAPTURE(seed);
    std::mt19937_64 bits(seed);
    std::string text;
    for (std::uint64_t i = 0, size = 1 + bits() % 9; i < size; ++i)
      text += tokens[bits() % tokens.size()] + " ";
    CAPTURE(text);
    const auto design = test::bind_text(text, table.schema);
    if (!design) {
      CHECK_FALSE(design.error().what.empty());
      CHECK(design.error().kind != ErrorKind::internal);
      continue;
    }
    ++bound;
    for (const auto& column : design.value().columns) {
      const auto again = test::bind_text(column.label, table.schema);
      REQUIRE(again);
      CHECK(again.value().columns[0].label == column.label);
    }
  }
  CHECK(bound > 500);
}
