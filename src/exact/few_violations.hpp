// src/exact/few_violations.hpp - vectors modulo a prime with the few rows that they do not vanish
// on.
#pragma once

#include <cstddef>
#include <cstdint>
#include <map>
#include <vector>

#include "exact/modulus.hpp"

namespace gramproof::exact {

/// Non-zero residues by position.
using SparseVector = std::map<std::size_t, std::uint64_t>;

struct SparseViolations {
  SparseVector coefficients;  ///< by column
  SparseVector violations;    ///< by row: the residual
};

/// Scales so that the first coefficient is 1.
void make_monic(SparseViolations& vector, const Modulus& field);

/// Replaces each vector by its combination with another that is violated in fewer rows, as long as
/// there is one: of two relations with bad rows of their own, a sum is violated on both sets of
/// rows. A column that is zero in all but a few rows takes those rows' residuals up where they fit.
/// The span stays. O(vectors^2 * violations) a round; the violations fall in each.
void combine_to_fewest(std::vector<SparseViolations>& vectors, const Modulus& field);

}  // namespace gramproof::exact
