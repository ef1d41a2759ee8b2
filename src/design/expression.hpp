// src/design/expression.hpp - what one number of a row is made of: a tree over cells and exact
// numbers.
//
// Every design column, row condition and derivative is such a tree. Trees are immutable and shared.
// Sets of columns (levels, products of sets) are expanded before: a tree gives one number a row.
#pragma once

#include <cstdint>
#include <memory>
#include <string>
#include <vector>

#include "table/number.hpp"
#include "table/survey.hpp"

namespace gramproof::design {

enum class Operation : std::uint8_t {
  cell,        ///< the number in table column `column`
  number,      ///< `number`, exact
  row_number,  ///< from 1 over all files
  add,         ///< two operands, as the four below
  subtract,
  multiply,
  divide,
  power,     ///< operand ^ `exponent`, a whole number from -64 to 64
  absolute,  ///< one operand
  minimum,   ///< two or more operands
  maximum,
  log,  ///< natural logarithm; this and the three below are not rational: columns that hold them
        ///< are not `exact`
  sqrt,
  exp,
  asinh,
  compare,    ///< 1 where `left comparison right` holds, else 0; two numeric operands
  is_level,   ///< 1 where text column `column` has level `level` (index into its
              ///< ColumnFacts::levels), else 0; -1: never
  same_text,  ///< 1 where text columns `column` and `other_column` hold the same text, else 0
  both,       ///< logical and of two 0/1 operands
  either,
  negation,
};

enum class Comparison : std::uint8_t { equal, not_equal, less, less_equal, greater, greater_equal };

struct Expression;
using ExpressionPtr = std::shared_ptr<const Expression>;

struct Expression {
  Operation operation = Operation::number;
  std::vector<ExpressionPtr> operands;
  int column = -1;
  int other_column = -1;
  int level = -1;
  int exponent = 1;
  Comparison comparison = Comparison::equal;
  table::Number number;
  /// same_text: for each level of `column` the level of `other_column` with the same text, or -1.
  std::shared_ptr<const std::vector<std::int32_t>> same_level;
};

/// Table columns the tree reads, ascending, each once. O(nodes).
[[nodiscard]] std::vector<int> columns_of(const Expression& expression);

/// True if no log, sqrt, exp or asinh occurs: the value is then a rational function of the cells'
/// decimals.
[[nodiscard]] bool is_exact(const Expression& expression);

/// True if the value is 0 or 1 by construction: brackets, their products, powers, minima; sums over
/// different levels of a column.
[[nodiscard]] bool is_zero_one(const Expression& expression);

/// The partial derivative with respect to the cell of one table column, almost everywhere: brackets
/// give 0, |x| gives the sign, min and max that of the operand chosen (the first in a tie), sqrt 0
/// at 0; a tree again, null where it is identically zero.
[[nodiscard]] ExpressionPtr derivative(const ExpressionPtr& expression, int column);

/// Canonical text of the tree with the names of `schema`; parses back to the same tree.
[[nodiscard]] std::string canonical_text(const Expression& expression, const table::Schema& schema);

}  // namespace gramproof::design
