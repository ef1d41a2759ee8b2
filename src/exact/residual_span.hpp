// src/exact/residual_span.hpp - null vectors of a few rows held against all others in one pass:
// rank(A; B) = rank(A) + rank(B N) for a basis N of the null space of A.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "design/design.hpp"
#include "exact/rank.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

/// How large the entries of a column can be as integers: value * 10^decimals.
struct EntryBound {
  bool known = true;  ///< false: the column is no plain decimal in some row
  std::int32_t decimals = 0;
  double largest = 0;  ///< of the absolute values, rounded up
};

/// What the rows of one piece, or of all so far, add to the null vectors of earlier rows.
struct ResidualRows {
  bool all_hold = true;           ///< every vector holds on every row: proved in integers
  std::vector<std::size_t> rows;  ///< rows of the piece, independent of those before
  std::vector<std::vector<std::uint64_t>> residuals;  ///< of `rows`: x N modulo the prime
  std::vector<EntryBound> bounds;  ///< a design column; filled where not all vectors hold
};

/// Tests the vectors on the named rows: in integers; where one is violated, the residuals of all
/// rows modulo the prime are spanned. O(rows * non-zero coefficients), and as much again where a
/// vector is violated.
[[nodiscard]] ResidualRows residual_rows(const design::Design& design, const table::Piece& piece,
                                         const std::vector<std::size_t>& rows,
                                         const std::vector<NullVector>& vectors);

/// total += part, for bounds of the same columns.
void add(std::vector<EntryBound>& total, const std::vector<EntryBound>& part);

/// A vector that vanishes modulo the prime on rows within the bounds vanishes exactly:
/// sum |v_j| max|m_j| < p.
[[nodiscard]] bool is_decided_by_prime(const NullVector& vector,
                                       const std::vector<EntryBound>& bounds);

}  // namespace gramproof::exact
