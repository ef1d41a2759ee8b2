// src/exact/short_relations.hpp - relations of few columns, found by chance and proved.
//   [Prange62] Prange, "The use of information sets in decoding cyclic codes", IRE Trans. Inform.
//              Theory IT-8 (1962) S5-S9.
#pragma once

#include <cstddef>
#include <vector>

#include "exact/null_space.hpp"

namespace gramproof::exact {

/// Relations of at most `most_columns` columns that cannot be had with fewer of the same columns,
/// primitive, each once; none of a single relation. The null vectors are reduced with the columns
/// in a shuffled order [Prange62]: each then has all but one of the first independent columns at 0,
/// so that a relation that only one of those columns is in comes out as it is. A few hundred
/// orders, fewer where the space is large: 2e7 word operations or 0.1 s at most. The orders are
/// fixed: the same space gives the same relations. Every vector is a proved member; those with
/// entries beyond 2^30 are not found. A FlintSession must be open.
[[nodiscard]] std::vector<NullVector> short_relations(const NullSpace& space,
                                                      std::size_t most_columns);

}  // namespace gramproof::exact
