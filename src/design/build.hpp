// src/design/build.hpp - makes the nodes of expression trees.
#pragma once

#include <vector>

#include "design/expression.hpp"

namespace gramproof::design {

[[nodiscard]] ExpressionPtr make_cell(int column);
[[nodiscard]] ExpressionPtr make_number(table::Number number);
[[nodiscard]] ExpressionPtr make_whole(std::int64_t value);
[[nodiscard]] ExpressionPtr make_row_number();
[[nodiscard]] ExpressionPtr make_operation(Operation operation,
                                           std::vector<ExpressionPtr> operands);
[[nodiscard]] ExpressionPtr make_power(ExpressionPtr base, int exponent);
[[nodiscard]] ExpressionPtr make_compare(ExpressionPtr left, Comparison comparison,
                                         ExpressionPtr right);
[[nodiscard]] ExpressionPtr make_is_level(int column, int level);
[[nodiscard]] ExpressionPtr make_same_text(int column, int other_column,
                                           const table::Schema& schema);

/// -1 times the operand; a number changes its sign instead, so that -2 is one number however it was
/// written.
[[nodiscard]] ExpressionPtr make_negative(ExpressionPtr operand);

/// max(left - right, 0).
[[nodiscard]] ExpressionPtr make_hinge(ExpressionPtr left, ExpressionPtr right);

[[nodiscard]] table::Number negated(table::Number number);

/// True for a number of that value.
[[nodiscard]] bool is_number(const Expression& expression, std::int64_t value);

}  // namespace gramproof::design
