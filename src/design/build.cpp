#include "design/build.hpp"

#include <cstdlib>
#include <string>
#include <utility>

namespace gramproof::design {
namespace {

std::shared_ptr<Expression> blank(Operation operation) {
  auto node = std::make_shared<Expression>();
  node->operation = operation;
  return node;
}

}  // namespace

ExpressionPtr make_cell(int column) {
  auto node = blank(Operation::cell);
  node->column = column;
  return node;
}

ExpressionPtr make_number(table::Number number) {
  auto node = blank(Operation::number);
  node->number = std::move(number);
  return node;
}

ExpressionPtr make_whole(std::int64_t value) {
  table::Number number;
  number.value = static_cast<double>(value);
  number.mantissa = value;
  number.significant_digits =
      value == 0 ? 0 : static_cast<std::int32_t>(std::to_string(std::llabs(value)).size());
  return make_number(number);
}

ExpressionPtr make_row_number() {
  return blank(Operation::row_number);
}

ExpressionPtr make_operation(Operation operation, std::vector<ExpressionPtr> operands) {
  auto node = blank(operation);
  node->operands = std::move(operands);
  return node;
}

ExpressionPtr make_power(ExpressionPtr base, int exponent) {
  auto node = blank(Operation::power);
  node->operands.push_back(std::move(base));
  node->exponent = exponent;
  return node;
}

ExpressionPtr make_compare(ExpressionPtr left, Comparison comparison, ExpressionPtr right) {
  auto node = blank(Operation::compare);
  node->operands = {std::move(left), std::move(right)};
  node->comparison = comparison;
  return node;
}

ExpressionPtr make_is_level(int column, int level) {
  auto node = blank(Operation::is_level);
  node->column = column;
  node->level = level;
  return node;
}

ExpressionPtr make_same_text(int column, int other_column, const table::Schema& schema) {
  auto node = blank(Operation::same_text);
  node->column = column;
  node->other_column = other_column;
  const auto& other = schema.columns[static_cast<std::size_t>(other_column)].code_of;
  std::vector<std::int32_t> same;
  for (const table::Level& level : schema.columns[static_cast<std::size_t>(column)].levels) {
    const auto found = other.find(level.text);
    same.push_back(found == other.end() ? -1 : found->second);
  }
  node->same_level = std::make_shared<const std::vector<std::int32_t>>(std::move(same));
  return node;
}

ExpressionPtr make_negative(ExpressionPtr operand) {
  if (operand->operation == Operation::number) return make_number(negated(operand->number));
  return make_operation(Operation::multiply, {make_whole(-1), std::move(operand)});
}

ExpressionPtr make_hinge(ExpressionPtr left, ExpressionPtr right) {
  auto above = make_operation(Operation::subtract, {std::move(left), std::move(right)});
  return make_operation(Operation::maximum, {std::move(above), make_whole(0)});
}

table::Number negated(table::Number number) {
  const bool zero = number.mantissa == 0 && number.wide.empty();
  number.value = zero ? 0.0 : -number.value;
  number.mantissa = -number.mantissa;
  if (!number.wide.empty()) {
    number.wide = number.wide[0] == '-' ? number.wide.substr(1) : "-" + number.wide;
  }
  return number;
}

bool is_number(const Expression& expression, std::int64_t value) {
  if (expression.operation != Operation::number) return false;
  return expression.number.value == static_cast<double>(value) &&
         table::compare(expression.number, make_whole(value)->number) == 0;
}

}  // namespace gramproof::design
