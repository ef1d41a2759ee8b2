// src/exact/lifting.hpp - from residues of null vectors to integers.
//   [Wang81], [Dixon82]: see rank.hpp.
#pragma once

#include <cstdint>
#include <vector>

#include "exact/elimination.hpp"
#include "exact/row_source.hpp"

namespace gramproof::exact {

/// Null vector of the f-th free column by rational reconstruction from one residue: right whenever
/// numerators and denominators stay below 2^30, which nearly all relations in data do; the caller
/// multiplies it back. All zero where some coefficient has no such form.
[[nodiscard]] NullVector reconstructed(std::size_t width, const std::vector<int>& order,
                                       const Elimination& eliminated, std::size_t f,
                                       std::uint64_t modulus);

/// The same by p-adic lifting, for coefficients of any size, on the columns whose coefficient does
/// not vanish modulo the prime and as many independent rows. Empty where the system has no
/// solution. s^3 + s^2 * (bits of the solution) for s columns.
[[nodiscard]] NullVector solved(const RowSource& source, const std::vector<int>& order,
                                const Elimination& eliminated, std::size_t f,
                                std::uint64_t modulus);

}  // namespace gramproof::exact
