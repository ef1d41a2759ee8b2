// src/design/decide.hpp - signs and orders of exact trees: by doubles where their error bound
// allows, else by exact arithmetic.
//   Running error analysis: Higham, "Accuracy and Stability of Numerical Algorithms", 2nd ed., SIAM
//   2002, section 3.3.
#pragma once

#include <optional>

#include "design/expression.hpp"
#include "table/piece.hpp"

namespace gramproof::design {

/// True for a cell, a number or the row number.
[[nodiscard]] bool is_leaf(const Expression& expression);

/// True if the double of the tree is zero exactly when its value is: leaves, brackets, and products
/// and powers of such.
[[nodiscard]] bool has_certain_zero(const Expression& expression);

/// -1, 0 or 1: the order of two exact trees in one row; none where one of them is undefined.
[[nodiscard]] std::optional<int> order_of(const Expression& left, const Expression& right,
                                          const table::Piece& piece, std::size_t row);

/// True if doubles prove that the exact tree is not zero in the row.
[[nodiscard]] bool is_certainly_not_zero(const Expression& expression, const table::Piece& piece,
                                         std::size_t row);

/// True if `order`, the sign of left - right, satisfies the comparison.
[[nodiscard]] bool holds(Comparison comparison, int order);

/// The order of two leaves. O(1) but for ties of more than 15 digits.
[[nodiscard]] int order_of_leaves(const Expression& left, const Expression& right,
                                  const table::Piece& piece, std::size_t row);

}  // namespace gramproof::design
