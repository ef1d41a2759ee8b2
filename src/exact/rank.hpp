// src/exact/rank.hpp - the rank of the data as recorded, as a theorem about a sample and then about every row.
//   [Wang81] Wang, "A p-adic algorithm for univariate partial fractions", SYMSAC 1981 (rational reconstruction).
//   [Dixon82] Dixon, "Exact solution of linear equations using p-adic expansions", Numer. Math. 40 (1982) 137-141.
// Elimination modulo a prime, lifting and lattice reduction are FLINT's.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "base/result.hpp"
#include "design/design.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

using Integer = mpz_class;

/// A vector v of integers, one a design column and last one for the column of ones, with sum v_j x_j = 0: primitive, first
/// non-zero entry positive.
using NullVector = std::vector<Integer>;

/// Rows of the design matrix (exact columns, then ones) as integers: each row multiplied by the least common multiple of its
/// denominators, which changes neither rank nor null space. Columns that are not exact hold 0.
struct ExactRows {
  std::vector<std::vector<Integer>> rows;
  std::vector<std::uint64_t> number;  ///< row number of each
};
[[nodiscard]] ExactRows exact_rows(const design::Design& design, const table::Piece& piece);

struct SampleRank {
  std::vector<int> pivot_columns;        ///< greedy basis in the given order, ascending in that order
  std::vector<std::size_t> pivot_rows;   ///< indices into the sample, as many; their minor on pivot_columns is non-zero mod prime
  std::uint64_t prime = 0;
  std::vector<NullVector> null_vectors;  ///< one a column of `order` that is no pivot: on it and earlier pivots only; hold on every sample row
};

/// Exact rank and null space of the sample rows on the columns `order` (indices into the design columns; ones = number of design
/// columns), each non-pivot as combination of earlier pivots. Every null vector is multiplied back on every row in integers.
/// More primes are taken until that holds. O(rows k^2) word operations plus the lifting.
[[nodiscard]] SampleRank rank_of_sample(const ExactRows& sample, const std::vector<int>& order);

/// Determinant of the named rows and columns modulo SampleRank::prime, of the *values* (10^-d as an inverse), in the order listed.
[[nodiscard]] std::uint64_t minor_residue(const design::Design& design, const table::Piece& sample,
                                          const std::vector<std::size_t>& rows, const std::vector<int>& columns,
                                          std::uint64_t prime);

/// Result of testing one vector on rows.
struct RelationTest {
  std::uint64_t holding = 0, violating = 0;
  struct Violation { std::size_t row_in_piece; std::uint64_t row; mpq_class residual; };
  std::vector<Violation> first;  ///< the first `most` violations
  mpq_class largest_residual = 0;     ///< of all violations, absolute value
};

/// Tests vectors on the named rows of a piece in integer arithmetic: machine words where a bound proves that they suffice, big
/// integers otherwise. One result a vector. O(rows * non-zero coefficients).
[[nodiscard]] std::vector<RelationTest> test_relations(const design::Design& design, const table::Piece& piece,
                                                       const std::vector<std::size_t>& rows,
                                                       const std::vector<NullVector>& vectors, std::size_t most);

/// Rows without which X loses rank, all of them: with basis rows B solve c B = sum over the rows outside B of hash(row) * row
/// modulo the prime; c_i = 0 marks row i (a false mark has probability 2^-62 a row and is found out by the test on all rows).
/// `random_combination`: see scan::Digest. Returns indices into sample.pivot_rows.
[[nodiscard]] std::vector<std::size_t> essential_rows(const design::Design& design, const table::Piece& sample,
                                                      const SampleRank& rank,
                                                      const std::vector<std::uint64_t>& random_combination);

/// The relation among pivot columns that holds on all basis rows but the one named: primitive integers, lifted by FLINT.
[[nodiscard]] NullVector relation_without_row(const ExactRows& sample, const SampleRank& rank, std::size_t basis_row);

}  // namespace gramproof::exact
