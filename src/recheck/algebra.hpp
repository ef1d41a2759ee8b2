// src/recheck/algebra.hpp - the two computations a proof of rank needs.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <optional>
#include <vector>

namespace gramproof::recheck {

/// The value modulo a prime, a fraction as numerator times inverse denominator; none where the
/// prime divides the denominator.
[[nodiscard]] std::optional<std::uint64_t> modulo(const mpq_class& value, std::uint64_t prime);

/// Determinant of a square matrix (rows of residues) modulo a prime below 2^63, by Gaussian
/// elimination. O(n^3).
[[nodiscard]] std::uint64_t determinant(std::vector<std::vector<std::uint64_t>> matrix,
                                        std::uint64_t prime);

/// Rank of integer rows, by elimination in rationals: slow and plain.
[[nodiscard]] std::size_t rank_of(const std::vector<std::vector<mpz_class>>& rows);

}  // namespace gramproof::recheck
