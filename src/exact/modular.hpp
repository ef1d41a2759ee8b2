// src/exact/modular.hpp - arithmetic modulo one 62-bit prime, and design values modulo it.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <span>
#include <vector>

#include "base/numeric.hpp"
#include "design/design.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

/// The first prime: the largest below 2^62. Rank bounds below hold for any prime; a proof names the one it used.
inline constexpr std::uint64_t prime = 4611686018427387847ULL;

/// Deterministic 62-bit hash of a row number, below the prime and never 0 (a mixing function of our own choice of constants).
[[nodiscard]] std::uint64_t row_hash(std::uint64_t row);

/// Value of a rational modulo the prime; none when the denominator is divisible by it.
[[nodiscard]] std::uint64_t residue_of(const mpq_class& value);

/// Residues of the named rows of a piece: for each design column that is exact its value modulo the prime, 0 for the others, and
/// last a column of ones. rows.size() x (columns + 1), row-major. Fast for plain cells and brackets, by exact_value otherwise.
[[nodiscard]] std::vector<std::uint64_t> residues(const design::Design& design, const table::Piece& piece,
                                                  const std::vector<std::size_t>& rows);

/// total[j] += sum over the rows of row_hash(row number) * residue, modulo the prime.
void add_random_combination(const design::Design& design, const table::Piece& piece, const std::vector<std::size_t>& rows,
                            std::span<std::uint64_t> total);

}  // namespace gramproof::exact
