// src/exact/elimination.hpp - pivots and null space of a matrix of residues.
#pragma once

#include <cstdint>
#include <vector>

namespace gramproof::exact {

/// Of a matrix with `order` columns: column free[f] = sum over p of
/// coefficients[f * columns.size() + p] * column columns[p], modulo the prime.
struct Elimination {
  std::vector<std::size_t> rows;     ///< pivot rows, ascending
  std::vector<std::size_t> columns;  ///< pivot columns, ascending: each column that is independent
                                     ///< of those before it
  std::vector<std::size_t> free;     ///< the others, ascending
  std::vector<std::uint64_t> coefficients;  ///< free x pivot columns; 0 for pivots after the column
};

/// `values`: rows x columns, row-major. Little more than `columns` rows are eliminated at first;
/// the others are then multiplied by the null space found, and those that do not vanish join in one
/// step: rank(A; B) = rank(A) + rank(B N) for the null space N of A. O(columns^3 + rows columns
/// nullity).
[[nodiscard]] Elimination eliminate(const std::vector<std::uint64_t>& values, std::size_t rows,
                                    std::size_t columns, std::uint64_t modulus);

/// Indices of as many independent rows as there are, first come first taken in the order of
/// elimination; ascending.
[[nodiscard]] std::vector<std::size_t> independent_rows(const std::vector<std::uint64_t>& values,
                                                        std::size_t rows, std::size_t columns,
                                                        std::uint64_t modulus);

}  // namespace gramproof::exact
