#include "report/definition_tree.hpp"

#include <algorithm>
#include <string>
#include <vector>

#include "table/number.hpp"

namespace gramproof::report {
namespace {

using design::Comparison;
using design::Expression;
using design::Operation;
using Json = nlohmann::ordered_json;

Json tree(const Expression& expression, const table::Schema& schema);

const table::ColumnFacts& facts(const table::Schema& schema, int column) {
  return schema.columns.at(static_cast<std::size_t>(column));
}

Json number_node(const std::string& text) {
  return {{"number", text}};
}

Json compare_node(const char* comparison, Json left, Json right) {
  return {{"compare", comparison}, {"of", Json::array({std::move(left), std::move(right)})}};
}

const char* word_of(Comparison comparison) {
  switch (comparison) {
    case Comparison::equal:
      return "=";
    case Comparison::not_equal:
      return "!=";
    case Comparison::less:
      return "<";
    case Comparison::less_equal:
      return "<=";
    case Comparison::greater:
      return ">";
    case Comparison::greater_equal:
      break;
  }
  return ">=";
}

Json operands(const Expression& expression, const table::Schema& schema) {
  Json list = Json::array();
  for (const auto& operand : expression.operands) list.push_back(tree(*operand, schema));
  return list;
}

/// |x| = x [x >= 0] - x [x < 0].
Json absolute(const Expression& expression, const table::Schema& schema) {
  const Json x = tree(*expression.operands.at(0), schema);
  const auto part = [&](const char* comparison) -> Json {
    return {{"multiply", Json::array({x, compare_node(comparison, x, number_node("0"))})}};
  };
  return {{"subtract", Json::array({part(">="), part("<")})}};
}

/// min(x_1, ..., x_m) = sum of x_i times [x_i < x_j] for each earlier j and [x_i <= x_j] for each
/// later one: exactly one i, the first smallest, has all brackets 1. Likewise the maximum.
Json extreme(const Expression& expression, const table::Schema& schema, const char* strict,
             const char* loose) {
  const Json x = operands(expression, schema);
  Json sum;
  for (std::size_t i = 0; i < x.size(); ++i) {
    Json factors = Json::array({x[i]});
    for (std::size_t j = 0; j < x.size(); ++j) {
      if (j != i) factors.push_back(compare_node(j < i ? strict : loose, x[i], x[j]));
    }
    Json product = factors.size() == 1 ? factors[0] : Json{{"multiply", factors}};
    sum = i == 0 ? product : Json{{"add", Json::array({sum, product})}};
  }
  return sum;
}

Json level(const Expression& expression, const table::Schema& schema) {
  if (expression.level < 0) return number_node("0");
  const table::ColumnFacts& column = facts(schema, expression.column);
  const table::Level& found = column.levels.at(static_cast<std::size_t>(expression.level));
  return {{"level", {{"column", column.name}, {"is", found.text}}}};
}

Json tree(const Expression& expression, const table::Schema& schema) {
  switch (expression.operation) {
    case Operation::cell:
      return {{"cell", facts(schema, expression.column).name}};
    case Operation::number:
      return number_node(table::plain_text(expression.number));
    case Operation::row_number:
      return {{"row", true}};
    case Operation::add:
      return {{"add", operands(expression, schema)}};
    case Operation::subtract:
      return {{"subtract", operands(expression, schema)}};
    case Operation::multiply:
      return {{"multiply", operands(expression, schema)}};
    case Operation::divide:
      return {{"divide", operands(expression, schema)}};
    case Operation::power:
      return {{"power", operands(expression, schema)}, {"exponent", expression.exponent}};
    case Operation::absolute:
      return absolute(expression, schema);
    case Operation::minimum:
      return extreme(expression, schema, "<", "<=");
    case Operation::maximum:
      return extreme(expression, schema, ">", ">=");
    case Operation::log:
      return {{"log", operands(expression, schema)}};
    case Operation::sqrt:
      return {{"sqrt", operands(expression, schema)}};
    case Operation::exp:
      return {{"exp", operands(expression, schema)}};
    case Operation::asinh:
      return {{"asinh", operands(expression, schema)}};
    case Operation::compare:
      return {{"compare", word_of(expression.comparison)}, {"of", operands(expression, schema)}};
    case Operation::is_level:
      return level(expression, schema);
    case Operation::same_text:
      return {{"same_text", Json::array({facts(schema, expression.column).name,
                                         facts(schema, expression.other_column).name})}};
    case Operation::both:
      return {{"and", operands(expression, schema)}};
    case Operation::either:
      return {{"or", operands(expression, schema)}};
    case Operation::negation:
      break;
  }
  return {{"not", tree(*expression.operands.at(0), schema)}};
}

/// Nodes that tree() would write; a double, since nested sizes overflow any integer.
double nodes(const Expression& expression) {
  double sum = 0;
  for (const auto& operand : expression.operands) sum += nodes(*operand);
  const auto count = static_cast<double>(expression.operands.size());
  switch (expression.operation) {
    case Operation::absolute:
      return 4 * sum + 7;
    case Operation::minimum:
    case Operation::maximum:
      return (2 * count - 1) * sum + count * (count + 2);
    default:
      return sum + 1;
  }
}

std::optional<int> decimals_of_operands(const Expression& expression, const table::Schema& schema,
                                        bool sum) {
  int decimals = 0;
  for (const auto& operand : expression.operands) {
    const std::optional<int> part = decimals_of(*operand, schema);
    if (!part) return std::nullopt;
    decimals = sum ? decimals + *part : std::max(decimals, *part);
  }
  return decimals;
}

}  // namespace

std::optional<Json> definition_tree(const Expression& expression, const table::Schema& schema) {
  if (nodes(expression) > most_definition_nodes) return std::nullopt;
  return tree(expression, schema);
}

std::optional<int> decimals_of(const Expression& expression, const table::Schema& schema) {
  switch (expression.operation) {
    case Operation::cell:
      return std::max(facts(schema, expression.column).most_decimals, 0);
    case Operation::number:
      return std::max(expression.number.decimals, 0);
    case Operation::add:
    case Operation::subtract:
    case Operation::absolute:
    case Operation::minimum:
    case Operation::maximum:
      return decimals_of_operands(expression, schema, false);
    case Operation::multiply:
      return decimals_of_operands(expression, schema, true);
    case Operation::power: {
      const std::optional<int> base = decimals_of_operands(expression, schema, false);
      if (!base || expression.exponent < 0) return std::nullopt;
      return *base * expression.exponent;
    }
    case Operation::divide:
    case Operation::log:
    case Operation::sqrt:
    case Operation::exp:
    case Operation::asinh:
      return std::nullopt;
    default:
      return 0;  // row numbers and brackets are whole
  }
}

}  // namespace gramproof::report
