#include <doctest/doctest.h>

#include <cmath>
#include <cstdlib>
#include <fstream>
#include <limits>
#include <map>

#include "report/definition_tree.hpp"
#include "report/document.hpp"
#include "report/sample_audits.hpp"
#include "report/sample_parts.hpp"
#include "table/number.hpp"

namespace {

using namespace gramproof;
using Json = nlohmann::ordered_json;
using design::ExpressionPtr;
using design::Operation;

/// What a checker makes of a definition: doubles suffice to tell right from wrong here.
double value_of(const Json& tree, const std::map<std::string, double>& row) {
  const auto part = [&](const char* key, std::size_t i) { return value_of(tree[key][i], row); };
  if (tree.contains("cell")) return row.at(tree["cell"].get<std::string>());
  if (tree.contains("number")) return std::stod(tree["number"].get<std::string>());
  if (tree.contains("subtract")) return part("subtract", 0) - part("subtract", 1);
  if (tree.contains("add")) return part("add", 0) + part("add", 1);
  if (tree.contains("multiply")) {
    double product = 1;
    for (std::size_t i = 0; i < tree["multiply"].size(); ++i) product *= part("multiply", i);
    return product;
  }
  REQUIRE(tree.contains("compare"));
  const std::string comparison = tree["compare"];
  const double left = part("of", 0), right = part("of", 1);
  if (comparison == "<") return left < right ? 1 : 0;
  if (comparison == "<=") return left <= right ? 1 : 0;
  if (comparison == ">") return left > right ? 1 : 0;
  REQUIRE(comparison == ">=");
  return left >= right ? 1 : 0;
}

table::Schema schema_of(const std::vector<std::string>& names) {
  table::Schema schema;
  for (const std::string& name : names) {
    schema.columns.emplace_back();
    schema.columns.back().name = name;
    schema.columns.back().most_decimals = 2;
  }
  return schema;
}

ExpressionPtr level(int column, int which) {
  design::Expression expression;
  expression.operation = Operation::is_level;
  expression.column = column;
  expression.level = which;
  return std::make_shared<const design::Expression>(expression);
}

ExpressionPtr power(ExpressionPtr base, int exponent) {
  design::Expression expression;
  expression.operation = Operation::power;
  expression.operands = {std::move(base)};
  expression.exponent = exponent;
  return std::make_shared<const design::Expression>(expression);
}

}  // namespace

TEST_CASE("documents are written for the validator") {
  // GRAMPROOF_DOCUMENTS is the directory from which validate.py takes them (tests/CMakeLists.txt).
  const char* directory = std::getenv("GRAMPROOF_DOCUMENTS");
  for (const sample::Sample& sample : sample::all()) {
    CAPTURE(sample.name);
    const std::string text = report::to_json_text(report::verdict_document(sample.audit, "0.1.0"));
    CHECK(Json::parse(text) == report::verdict_document(sample.audit, "0.1.0"));
    if (directory == nullptr) continue;
    std::ofstream file(std::string(directory) + "/" + sample.name + ".json", std::ios::binary);
    file << text;
    REQUIRE(file.good());
  }
}

TEST_CASE("what is infinite or undefined is null with its state") {
  audit::Audit audit = sample::sound();
  audit.conditioning.condition_number = std::numeric_limits<double>::infinity();
  audit.conditioning.condition_indices[3] = std::numeric_limits<double>::infinity();
  audit.conditioning.known_digits = -std::numeric_limits<double>::infinity();
  audit.conditioning.log10_determinant_correlation.reset();
  const Json document = report::verdict_document(audit, "0.1.0");
  const Json& conditioning = document["conditioning"];
  CHECK(conditioning["condition_number"].is_null());
  CHECK(conditioning["condition_number_state"] == "infinite");
  CHECK(conditioning["condition_indices"][3].is_null());
  CHECK(conditioning["condition_indices_state"][3] == "infinite");
  CHECK(conditioning["condition_indices_state"][0] == "finite");
  CHECK(conditioning["log10_determinant_correlation_state"] == "undefined");
  CHECK(conditioning["known_digits"] == 0.0);
  CHECK(document["inflation"][0]["vif"].is_null());
  CHECK(document["inflation"][0]["vif_state"] == "undefined");
  CHECK(document["inflation"][1]["vif_state"] == "finite");
}

TEST_CASE("a figure that is not built is an absent key") {
  audit::Audit audit = sample::sound();
  audit.rank.certificate.reset();
  const Json document = report::verdict_document(audit, "0.1.0");
  CHECK_FALSE(document["rank"].contains("certificate"));
  CHECK_FALSE(document["rank"].contains("rank_of_the_doubles"));
  CHECK_FALSE(document["inflation"][0].contains("identifying_rows"));
  CHECK(document["verdict"]["after_leaving_out"].is_null());
  CHECK(document["source"]["filter"].is_null());
}

TEST_CASE("exact values are strings and doubles come back as they were") {
  audit::Audit audit = sample::with_exceptions();
  audit.conditioning.condition_number = 0.1 + 0.2;
  const Json document = Json::parse(report::to_json_text(report::verdict_document(audit, "0.1.0")));
  CHECK(document["conditioning"]["condition_number"].get<double>() == 0.1 + 0.2);
  CHECK(document["rank"]["certificate"]["residue"] == "2305843009213693951");
  CHECK(document["relations"][0]["terms"][3] == Json({{"column", "total"}, {"coefficient", "-1"}}));
  CHECK(document["relations"][0]["violations"][3]["residual"] == "530");
  CHECK(document["relations"][0]["violations"][3]["cells"]["total"] == "30.49");
}

TEST_CASE("definitions say what a column is made of") {
  table::Schema schema = schema_of({"age", "region"});
  schema.columns[1].levels.emplace_back();
  schema.columns[1].levels.back().text = "North East";
  struct Case {
    ExpressionPtr expression;
    std::string tree;
    std::string why;
  };
  const std::vector<Case> cases = {
      {sample::cell(0), R"({"cell":"age"})", "a cell"},
      {sample::number("80.50"), R"({"number":"80.5"})", "an exact number"},
      {sample::node(Operation::row_number, {}), R"({"row":true})", "the row number"},
      {power(sample::cell(0), 2), R"({"power":[{"cell":"age"}],"exponent":2})", "a power"},
      {level(1, 0), R"({"level":{"column":"region","is":"North East"}})", "a level"},
      {level(1, -1), R"({"number":"0"})", "a level that never occurs"},
      {sample::node(Operation::negation, {level(1, 0)}),
       R"({"not":{"level":{"column":"region","is":"North East"}}})", "negation"},
      {sample::node(Operation::divide, {sample::cell(0), sample::number("3")}),
       R"({"divide":[{"cell":"age"},{"number":"3"}]})", "a quotient"},
      {sample::node(Operation::log, {sample::cell(0)}), R"({"log":[{"cell":"age"}]})", "log"},
      {sample::node(Operation::both, {level(1, 0), sample::number("1")}),
       R"({"and":[{"level":{"column":"region","is":"North East"}},{"number":"1"}]})", "and"},
  };
  for (const Case& one : cases) {
    CAPTURE(one.why);
    const auto tree = report::definition_tree(*one.expression, schema);
    REQUIRE(tree.has_value());
    CHECK(tree->dump() == one.tree);
  }
}

TEST_CASE("abs, min and max written out by comparisons have the same values, ties included") {
  const table::Schema schema = schema_of({"a", "b", "c"});
  const std::vector<ExpressionPtr> cells = {sample::cell(0), sample::cell(1), sample::cell(2)};
  const auto absolute =
      report::definition_tree(*sample::node(Operation::absolute, {cells[0]}), schema);
  const auto minimum = report::definition_tree(*sample::node(Operation::minimum, cells), schema);
  const auto maximum = report::definition_tree(*sample::node(Operation::maximum, cells), schema);
  REQUIRE((absolute && minimum && maximum));
  for (const double a : {-2.0, 0.0, 1.0, 3.0}) {
    for (const double b : {-2.0, 0.0, 1.0, 3.0}) {
      for (const double c : {-2.0, 0.0, 1.0, 3.0}) {
        CAPTURE(a);
        CAPTURE(b);
        CAPTURE(c);
        const std::map<std::string, double> row = {{"a", a}, {"b", b}, {"c", c}};
        CHECK(value_of(*absolute, row) == std::abs(a));
        CHECK(value_of(*minimum, row) == std::min({a, b, c}));
        CHECK(value_of(*maximum, row) == std::max({a, b, c}));
      }
    }
  }
}

TEST_CASE("a definition that would explode when written out is left out") {
  const table::Schema schema = schema_of({"a"});
  ExpressionPtr nested = sample::cell(0);
  for (int depth = 0; depth < 64; ++depth) nested = sample::node(Operation::absolute, {nested});
  CHECK_FALSE(report::definition_tree(*nested, schema).has_value());
}

TEST_CASE("decimals that suffice for every value") {
  const table::Schema schema = schema_of({"a", "b"});
  const auto a = sample::cell(0), b = sample::cell(1);
  const auto product = sample::node(Operation::multiply, {a, sample::number("0.125")});
  CHECK(report::decimals_of(*a, schema) == 2);
  CHECK(report::decimals_of(*product, schema) == 5);
  CHECK(report::decimals_of(*sample::node(Operation::add, {product, b}), schema) == 5);
  CHECK(report::decimals_of(*power(a, 3), schema) == 6);
  CHECK(report::decimals_of(*level(1, 0), schema) == 0);
  CHECK_FALSE(report::decimals_of(*power(a, -1), schema).has_value());
  CHECK_FALSE(report::decimals_of(*sample::node(Operation::divide, {a, b}), schema).has_value());
}

TEST_CASE("options given several times become a list") {
  audit::Audit audit = sample::sound();
  audit.options = {{"recorded", "a=1"}, {"design", "constant"}, {"recorded", "b=exact"}};
  const Json document = report::verdict_document(audit, "0.1.0");
  CHECK(document["options"]["recorded"] == Json::array({"a=1", "b=exact"}));
  CHECK(document["options"]["design"] == "constant");
}

TEST_CASE("reasons for excluded rows name their column") {
  const Json document = report::verdict_document(sample::focus(), "0.1.0");
  const Json& excluded = document["source"]["rows_excluded"];
  CHECK(excluded[0] == Json({{"reason", "weight_zero"}, {"column", "weight"}, {"rows", 12}}));
  CHECK(excluded[1]["reason"] == "filter");
  CHECK(excluded[1]["column"].is_null());
  CHECK(excluded[2] == Json({{"reason", "undefined"}, {"column", "schooling"}, {"rows", 2}}));
  CHECK(document["source"]["filter"]["compare"] == "=");
}

TEST_CASE("bytes that are no UTF-8 do not stop the document") {
  audit::Audit audit = sample::sound();
  audit.source.files = {{"bad\xff.csv", 3}};
  const std::string text = report::to_json_text(report::verdict_document(audit, "0.1.0"));
  CHECK(text.find("bad\xEF\xBF\xBD.csv") != std::string::npos);
}

TEST_CASE("relations within rounding: whole numbers as strings, others as numbers") {
  const Json document = Json::parse(
      report::to_json_text(report::verdict_document(sample::within_rounding(), "0.1.0")));
  const Json& product = document["relations"][0];
  CHECK(product["standing"] == "within_rounding");
  CHECK(product["terms"][1] == Json({{"column", "log(length)"}, {"coefficient", "-1"}}));
  CHECK(product["rows_holding"] == 2400);
  CHECK(product["largest_residual"] == "4.1e-76");
  const Json& unit = document["relations"][1];
  CHECK(unit["terms"][0]["coefficient"].get<double>() == 4.605170185988091);
  CHECK(document["rank"]["rank"] == 6);
  CHECK(document["rank"]["numerical"] == 4);
  CHECK(document["rank"]["rank_of_the_doubles"] == 6);
  CHECK(document["rank"]["proved"] == false);
}
