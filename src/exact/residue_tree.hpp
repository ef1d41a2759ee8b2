// src/exact/residue_tree.hpp - the values of one tree modulo a prime, row by row.
#pragma once

#include <cstdint>
#include <limits>
#include <vector>

#include "design/design.hpp"
#include "exact/modulus.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

/// Stands for a value that has no residue: the prime divides its denominator.
inline constexpr std::uint64_t no_residue = std::numeric_limits<std::uint64_t>::max();

/// Residues of a design column on the named rows. Quotients use inverses modulo the prime; a row
/// where a divisor vanishes modulo the prime is decided by its exact value.
[[nodiscard]] std::vector<std::uint64_t> column_residues(const design::DesignColumn& column,
                                                         const table::Piece& piece,
                                                         const std::vector<std::size_t>& rows,
                                                         const Modulus& modulus);

}  // namespace gramproof::exact
