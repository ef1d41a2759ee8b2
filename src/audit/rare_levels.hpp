// src/audit/rare_levels.hpp - levels, and what is left beside levels, that rest on very few rows.
#pragma once

#include <cstdint>
#include <vector>

#include "audit/audit.hpp"
#include "design/design.hpp"
#include "scan/digest.hpp"
#include "table/survey.hpp"

namespace gramproof::audit {

/// Rows below which a level counts as rare (our own choice).
inline constexpr std::uint64_t rare_below = 10;

/// 0/1 columns that are 1 in fewer than 10 rows; levels left out of a set that occur in so few;
/// and, where the constant is in the span, the rows that are 0 in a 0/1 column or in all of a set
/// of them that never meet: those coefficients compare with them. O(columns^2).
[[nodiscard]] std::vector<RareLevel> rare_levels(const design::Design& design,
                                                 const table::Schema& schema,
                                                 const scan::Digest& digest,
                                                 const std::vector<int>& left_out_levels,
                                                 bool constant_in_span);

/// The members of a family that are 0/1 columns coded by hand of which no two are ever 1 together;
/// empty unless there are at least two.
[[nodiscard]] std::vector<int> set_by_hand(const design::Design& design, const scan::Digest& digest,
                                           const design::Family& family);

}  // namespace gramproof::audit
