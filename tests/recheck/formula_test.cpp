#include "recheck/formula.hpp"

#include <doctest/doctest.h>

#include <string>
#include <vector>

using gramproof::Result;
using gramproof::recheck::CellPlaces;
using gramproof::recheck::Formula;
using gramproof::recheck::Json;
using gramproof::recheck::RowCells;
using gramproof::recheck::Value;

namespace {

/// The value of a tree in row 7 of a table with x = 3, y = 0, z = -1.5, s = north, t = north.
std::string value_of(const std::string& tree) {
  CellPlaces places;
  for (const char* column : {"x", "y", "z", "s", "t"}) places.place_of(column);
  Result<Formula> formula = Formula::compile(Json::parse(tree), places);
  if (!formula) return "error";
  const std::vector<std::string> texts = {"3", "0", "-1.5", "north", "north"};
  std::vector<std::optional<Value>> numbers(texts.size());
  const Value value = formula.value().evaluate({&texts, '.', 7, &numbers});
  switch (value.state) {
    case Value::State::rational:
      return value.number.get_str();
    case Value::State::undefined:
      return "undefined";
    case Value::State::irrational:
      return "irrational";
    case Value::State::unsettled:
      return "unsettled";
    case Value::State::not_number:
      return "no number";
    case Value::State::too_large:
      break;
  }
  return "too large";
}

const std::string x = R"({"cell": "x"})";
const std::string y = R"({"cell": "y"})";
const std::string z = R"({"cell": "z"})";

std::string with(const std::string& key, const std::vector<std::string>& operands) {
  std::string list;
  for (const std::string& operand : operands) list += (list.empty() ? "" : ", ") + operand;
  return "{\"" + key + "\": [" + list + "]}";
}

std::string power(const std::string& base, int exponent) {
  return "{\"power\": [" + base + "], \"exponent\": " + std::to_string(exponent) + "}";
}

std::string compared(const std::string& left, const std::string& sign, const std::string& right) {
  return "{\"compare\": \"" + sign + "\", \"of\": [" + left + ", " + right + "]}";
}

}  // namespace

TEST_CASE("definitions: values in rationals") {
  const std::string log_x = with("log", {x});
  struct Case {
    std::string tree;
    std::string value;
    std::string why;
  };
  const std::vector<Case> cases = {
      {x, "3", "a cell"},
      {R"({"number": "-0.125"})", "-1/8", "a number"},
      {R"({"row": true})", "7", "the row number"},
      {with("add", {x, z}), "3/2", "a sum"},
      {with("subtract", {x, z}), "9/2", "a difference, left less right"},
      {with("multiply", {x, z, z}), "27/4", "a product of three"},
      {with("divide", {x, z}), "-2", "a quotient"},
      {with("divide", {z, x}), "-1/2", "a quotient, left by right"},
      {with("divide", {x, y}), "undefined", "by zero"},
      {power(z, 3), "-27/8", "a power"},
      {power(z, -2), "4/9", "a negative power"},
      {power(y, 0), "1", "anything to the power 0"},
      {power(y, -1), "undefined", "zero to a negative power"},
      {compared(x, ">", z), "1", "a comparison that holds"},
      {compared(x, "<=", z), "0", "one that does not"},
      {compared(z, "!=", z), "0", "equal numbers"},
      {R"({"level": {"column": "s", "is": "north"}})", "1", "a level"},
      {R"({"level": {"column": "s", "is": "North"}})", "0", "levels have their case"},
      {R"({"same_text": ["s", "t"]})", "1", "the same text"},
      {R"({"same_text": ["s", "x"]})", "0", "another text"},
      {with("and", {x, z}), "1", "both"},
      {with("and", {x, y}), "0", "not both"},
      {with("or", {y, x}), "1", "either"},
      {"{\"not\": " + y + "}", "1", "not"},
      {with("multiply", {y, with("divide", {x, y})}), "undefined", "zero times undefined"},
      {with("and", {y, with("divide", {x, y})}), "undefined", "`and` is not cut short"},
      {log_x, "irrational", "a logarithm"},
      {with("log", {y}), "undefined", "of zero"},
      {with("log", {z}), "undefined", "of a negative number"},
      {with("sqrt", {y}), "irrational", "the root of zero is defined"},
      {with("sqrt", {z}), "undefined", "the root of a negative number"},
      {with("exp", {log_x}), "irrational", "exp is defined everywhere"},
      {with("asinh", {z}), "irrational", "and so is asinh"},
      {with("log", {log_x}), "unsettled", "log 3 may have a logarithm"},
      {with("divide", {x, log_x}), "unsettled", "log 3 may be zero"},
      {power(power(power(power(x, 64), 64), 64), 64), "too large", "27 million bits"},
      {power(log_x, 2), "irrational", "a power of something irrational"},
      {power(log_x, -2), "unsettled", "may be a division by zero"},
      {compared(log_x, ">", y), "irrational", "a comparison that is not decided here"},
      {with("add", {log_x, with("divide", {x, y})}), "undefined", "undefined whatever the log is"},
      {with("divide", {log_x, y}), "undefined", "a quotient by zero"},
      {R"({"cell": "s"})", "no number", "a text where a number is wanted"},
      {with("add", {x, R"({"cell": "s"})"}), "no number", "and within a sum"},
  };
  for (const Case& one : cases) {
    CAPTURE(one.why);
    CAPTURE(one.tree);
    CHECK(value_of(one.tree) == one.value);
  }
}

TEST_CASE("definitions: what is no tree is refused") {
  for (const std::string& tree :
       std::vector<std::string>{"null",
                                "3",
                                "{}",
                                "[]",
                                R"({"cell": 3})",
                                R"({"number": 3})",
                                R"({"number": "three"})",
                                R"({"row": false})",
                                R"({"sine": [{"cell": "x"}]})",
                                with("add", {x}),
                                with("divide", {x, x, x}),
                                with("log", {x, x}),
                                power(x, 65),
                                R"({"power": [{"cell": "x"}]})",
                                R"({"power": [{"cell": "x"}], "exponent": 0.5})",
                                compared(x, "~", x),
                                R"({"compare": "="})",
                                R"({"level": {"column": "s"}})",
                                R"({"same_text": ["s"]})",
                                R"({"not": 1})",
                                R"({"add": {"cell": "x"}})",
                                with("add", {x, "null"})}) {
    CAPTURE(tree);
    CHECK(value_of(tree) == "error");
  }
}

TEST_CASE("definitions: a tree of 20,000 levels needs no stack") {
  std::string tree = x;
  for (int i = 0; i < 20'000; ++i) tree = "{\"not\": " + tree + "}";
  CHECK(value_of(tree) == "1");
  CellPlaces places;
  Result<Formula> formula =
      Formula::compile(Json::parse(with("add", {with("log", {x}), x})), places);
  REQUIRE(formula);
  CHECK_FALSE(formula.value().is_rational());
  CHECK(formula.value().reads().size() == 1);
}
