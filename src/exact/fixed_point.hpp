// src/exact/fixed_point.hpp - exact trees as columns of machine integers with one power of ten.
//
// Nearly all real columns are such: cells with a few decimals, brackets, products, squares. What
// does not fit is left to residues and to rational numbers.
#pragma once

#include <cstdint>
#include <optional>
#include <vector>

#include "design/design.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

/// Value in the i-th named row = mantissa[i] * 10^-decimals.
struct FixedColumn {
  std::vector<std::int64_t> mantissa;
  std::int32_t decimals = 0;
  std::int64_t largest = 0;  ///< the largest absolute mantissa, below 2^61
};

/// The exact values of a tree on the named rows (none of whose cells are missing); none where a
/// mantissa or an intermediate one could reach 2^61, or the tree has a node that is not closed on
/// decimals (a quotient by a column, log, ...). O(rows * nodes).
[[nodiscard]] std::optional<FixedColumn> fixed_point(const design::Expression& expression,
                                                     const table::Piece& piece,
                                                     const std::vector<std::size_t>& rows);

/// The same for a design column; the constant is 1.
[[nodiscard]] std::optional<FixedColumn> fixed_point(const design::DesignColumn& column,
                                                     const table::Piece& piece,
                                                     const std::vector<std::size_t>& rows);

}  // namespace gramproof::exact
