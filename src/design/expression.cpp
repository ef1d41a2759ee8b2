#include "design/expression.hpp"

#include <algorithm>
#include <set>

namespace gramproof::design {
namespace {

void add_columns(const Expression& expression, std::vector<int>& columns) {
  if (expression.column >= 0) columns.push_back(expression.column);
  if (expression.other_column >= 0) columns.push_back(expression.other_column);
  for (const ExpressionPtr& operand : expression.operands) add_columns(*operand, columns);
}

/// Collects the levels of a sum of brackets over one text column; false if the tree is anything
/// else or a level comes twice.
bool is_sum_of_levels(const Expression& expression, int& column, std::set<int>& levels) {
  if (expression.operation == Operation::add) {
    return is_sum_of_levels(*expression.operands[0], column, levels) &&
           is_sum_of_levels(*expression.operands[1], column, levels);
  }
  if (expression.operation != Operation::is_level) return false;
  if (column >= 0 && column != expression.column) return false;
  column = expression.column;
  return levels.insert(expression.level).second;
}

/// The same for a numeric column: [grade = 2] + [grade = 3].
bool is_sum_of_values(const Expression& expression, int& column,
                      std::vector<table::Number>& values) {
  if (expression.operation == Operation::add) {
    return is_sum_of_values(*expression.operands[0], column, values) &&
           is_sum_of_values(*expression.operands[1], column, values);
  }
  const bool bracket = expression.operation == Operation::compare &&
                       expression.comparison == Comparison::equal &&
                       expression.operands[0]->operation == Operation::cell &&
                       expression.operands[1]->operation == Operation::number;
  if (!bracket) return false;
  const int here = expression.operands[0]->column;
  if (column >= 0 && column != here) return false;
  column = here;
  const table::Number& value = expression.operands[1]->number;
  const bool again = std::any_of(values.begin(), values.end(), [&](const table::Number& known) {
    return table::compare(known, value) == 0;
  });
  values.push_back(value);
  return !again;
}

}  // namespace

std::vector<int> columns_of(const Expression& expression) {
  std::vector<int> columns;
  add_columns(expression, columns);
  std::sort(columns.begin(), columns.end());
  columns.erase(std::unique(columns.begin(), columns.end()), columns.end());
  return columns;
}

bool is_exact(const Expression& expression) {
  switch (expression.operation) {
    case Operation::log:
    case Operation::sqrt:
    case Operation::exp:
    case Operation::asinh:
      return false;
    default:
      return std::all_of(expression.operands.begin(), expression.operands.end(),
                         [](const ExpressionPtr& operand) { return is_exact(*operand); });
  }
}

bool is_zero_one(const Expression& expression) {
  switch (expression.operation) {
    case Operation::compare:
    case Operation::is_level:
    case Operation::same_text:
    case Operation::both:
    case Operation::either:
    case Operation::negation:
      return true;
    case Operation::multiply:
    case Operation::minimum:
    case Operation::maximum:
      return std::all_of(expression.operands.begin(), expression.operands.end(),
                         [](const ExpressionPtr& operand) { return is_zero_one(*operand); });
    case Operation::power:
      return expression.exponent > 0 && is_zero_one(*expression.operands[0]);
    case Operation::add: {
      int column = -1;
      std::set<int> levels;
      if (is_sum_of_levels(expression, column, levels)) return true;
      column = -1;
      std::vector<table::Number> values;
      return is_sum_of_values(expression, column, values);
    }
    default:
      return false;
  }
}

}  // namespace gramproof::design
