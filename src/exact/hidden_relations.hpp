// src/exact/hidden_relations.hpp - relations that hold in all but a few rows: typing errors and
// one-off recodings hide here.
//   [P62] Prange, "The use of information sets in decoding cyclic codes", IRE Trans. Inform. Theory
//         8 (1962) S5-S9: a random small set of rows is free of the few bad ones often enough, and
//         its null space then holds the relation.
#pragma once

#include <cstddef>
#include <cstdint>
#include <vector>

#include "design/design.hpp"
#include "exact/rank.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

/// The search ends when a relation is missed with no more than this probability (methods: 2).
inline constexpr double wanted_chance = 1e-6;

struct HiddenSearch {
  std::vector<int> columns;          ///< independent exact design columns to search among
  std::uint64_t rows_used = 0;       ///< in the whole data
  std::uint64_t most_violating = 0;  ///< rows of the whole data that a relation may be violated in
};

struct HiddenRelations {
  /// Primitive integers, each violated in few rows of the sample; the fewest violations first.
  /// Single columns that are zero in all but a few rows are not listed, nor added to others.
  std::vector<NullVector> vectors;
  std::size_t samples = 0;  ///< random row sets drawn
  /// That a relation violated in `most_violating` rows met a bad row in every set; at most
  /// wanted_chance unless the work had to be cut.
  double chance_of_a_miss = 0;
};

/// Searches the 4,096 rows of the sample with the smallest hash. Each random set of rows (by hash
/// of row and trial: the same for any thread) grows until the null vectors left are violated in few
/// rows only; among these the combinations with the fewest violations are looked for, and lifted to
/// integers. At most 200 sets and 3e8 products modulo the prime (about a second). Nothing is proved
/// here: the caller tests each vector on every row.
[[nodiscard]] HiddenRelations hidden_relations(const design::Design& design,
                                               const table::Piece& sample,
                                               const HiddenSearch& search);

}  // namespace gramproof::exact
