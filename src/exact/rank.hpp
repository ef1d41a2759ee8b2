// src/exact/rank.hpp - the rank of the data as recorded, as a theorem about a sample and then about
// every row.
//   [Wang81] Wang, "A p-adic algorithm for univariate partial fractions", SYMSAC 1981 (rational
//            reconstruction).
//   [Dixon82] Dixon, "Exact solution of linear equations using p-adic expansions", Numer. Math. 40
//            (1982) 137-141.
// Elimination modulo a prime, lifting and reconstruction are FLINT's.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <string>
#include <vector>

#include "design/design.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

using Integer = mpz_class;

/// A vector v of integers, one a design column and last one for the column of ones, with
/// sum v_j x_j = 0: primitive, first non-zero entry positive.
using NullVector = std::vector<Integer>;

/// Divides by the greatest common divisor and makes the first non-zero entry positive.
void make_primitive(NullVector& vector);

/// Places of the non-zero entries, ascending.
[[nodiscard]] std::vector<std::size_t> support_of(const NullVector& vector);

/// Rows of the design matrix (exact columns, then ones) as integers: each row multiplied by the
/// least common multiple of its denominators, which changes neither rank nor null space. Columns
/// that are not exact hold 0. For small matrices: every entry is a big integer.
struct ExactRows {
  std::vector<std::vector<Integer>> rows;
  std::vector<std::uint64_t> number;  ///< row number of each
};
[[nodiscard]] ExactRows exact_rows(const design::Design& design, const table::Piece& piece);

struct SampleRank {
  std::vector<int> pivot_columns;       ///< greedy basis, in the given order
  std::vector<std::size_t> pivot_rows;  ///< indices into the sample, as many, ascending; their
                                        ///< minor on pivot_columns is non-zero modulo `prime`
  std::uint64_t prime = 0;
  std::vector<NullVector> null_vectors;  ///< one a column of `order` that is no pivot, in that
                                         ///< order: on it and earlier pivots only
};

/// Exact rank and null space of the sample rows on the columns `order` (indices into the design
/// columns, exact ones only; ones = number of design columns), each non-pivot as combination of
/// earlier pivots. Every null vector is multiplied back on every row in integers; smaller primes
/// are taken until that holds, so that the result is exact on the sample. O(k^3 + rows k nullity)
/// word operations for k columns, plus the lifting of coefficients beyond 30 bits.
[[nodiscard]] SampleRank rank_of_sample(const design::Design& design, const table::Piece& sample,
                                        const std::vector<int>& order);
/// The same for integer rows that are at hand; `order` indexes their entries.
[[nodiscard]] SampleRank rank_of_sample(const ExactRows& sample, const std::vector<int>& order);

/// Determinant of the named rows and columns modulo SampleRank::prime, of the *values* (10^-d as an
/// inverse), in the order listed.
[[nodiscard]] std::uint64_t minor_residue(const design::Design& design, const table::Piece& sample,
                                          const std::vector<std::size_t>& rows,
                                          const std::vector<int>& columns, std::uint64_t modulus);

/// Result of testing one vector on rows.
struct RelationTest {
  std::uint64_t holding = 0, violating = 0;
  std::uint64_t speaking = 0;  ///< rows in which some term is not 0: elsewhere it holds idly
  struct Violation {
    std::size_t row_in_piece;
    std::uint64_t row;
    mpq_class residual;
  };
  std::vector<Violation> first;    ///< the first `most` violations
  mpq_class largest_residual = 0;  ///< of all violations, absolute value
};

/// Tests vectors on the named rows of a piece in integer arithmetic: machine words where a bound
/// proves that they suffice, big integers otherwise. One result a vector. O(rows * non-zero
/// coefficients).
[[nodiscard]] std::vector<RelationTest> test_relations(const design::Design& design,
                                                       const table::Piece& piece,
                                                       const std::vector<std::size_t>& rows,
                                                       const std::vector<NullVector>& vectors,
                                                       std::size_t most);

/// Rows without which X loses rank, all of them: with basis rows B solve c B = sum over the rows
/// outside B of hash(row) * row modulo the prime; c_i = 0 marks row i. A row that is no such row is
/// marked with probability 2^-62, which the test of its relation on all rows finds out.
/// `random_combination`: the sum over all used rows (add_random_combination). Returns indices into
/// sample.pivot_rows. Empty, too, when the minor vanishes modulo `prime` and SampleRank::prime had
/// to be another: information-set sampling is then what is left.
[[nodiscard]] std::vector<std::size_t> essential_rows(
    const design::Design& design, const table::Piece& sample, const SampleRank& rank,
    const std::vector<std::uint64_t>& random_combination);

/// The relation among pivot columns that holds on all basis rows but the one named (an index into
/// rank.pivot_rows): primitive integers.
[[nodiscard]] NullVector relation_without_row(const design::Design& design,
                                              const table::Piece& sample, const SampleRank& rank,
                                              std::size_t basis_row);
[[nodiscard]] NullVector relation_without_row(const ExactRows& sample, const SampleRank& rank,
                                              std::size_t basis_row);

}  // namespace gramproof::exact
