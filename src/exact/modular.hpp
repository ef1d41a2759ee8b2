// src/exact/modular.hpp - design values modulo a 62-bit prime.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <optional>
#include <span>
#include <vector>

#include "design/design.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

/// The first prime: the largest below 2^62. Rank bounds hold for any prime; a proof names the one
/// it used.
inline constexpr std::uint64_t prime = 4611686018427387847ULL;

/// Deterministic 62-bit hash of a row number, below the prime and never 0.
[[nodiscard]] std::uint64_t row_hash(std::uint64_t row);

/// Value of a rational modulo a prime; none when the denominator is divisible by it.
[[nodiscard]] std::optional<std::uint64_t> residue_of(const mpq_class& value,
                                                      std::uint64_t modulus = prime);

/// Residues of the named rows of a piece (used rows: every cell present, every value defined): for
/// each design column that is exact its value modulo the prime, 0 for the others, and last a column
/// of ones. rows.size() x (columns + 1), row-major. A row that has no residue, because the prime
/// divides a denominator in it, is 0 throughout, also in the column of ones: it then counts for
/// nothing, which keeps every lower bound of a rank true. O(rows * nodes): plain cells and brackets
/// by machine words, quotients by residues, what is left by exact_value.
[[nodiscard]] std::vector<std::uint64_t> residues(const design::Design& design,
                                                  const table::Piece& piece,
                                                  const std::vector<std::size_t>& rows,
                                                  std::uint64_t modulus = prime);

/// The same for the named design columns only (ones = number of design columns), in that order.
[[nodiscard]] std::vector<std::uint64_t> residues_of_columns(const design::Design& design,
                                                             const table::Piece& piece,
                                                             const std::vector<std::size_t>& rows,
                                                             const std::vector<int>& columns,
                                                             std::uint64_t modulus);

/// total[j] += sum over the rows of row_hash(row number) * value, modulo `prime`; total has an
/// entry a design column (0 for those not exact) and last one for the column of ones. Rows without
/// a residue are left out of the entries that have none. 1 to 2 ns a plain cell.
void add_random_combination(const design::Design& design, const table::Piece& piece,
                            const std::vector<std::size_t>& rows, std::span<std::uint64_t> total);

}  // namespace gramproof::exact
