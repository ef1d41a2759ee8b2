// src/audit/rounding_relations.hpp - what exact arithmetic on decimals cannot settle: columns with
// log, sqrt, exp or asinh, and what becomes of X when its entries are doubles.
#pragma once

#include "audit/every_row.hpp"
#include "audit/identification.hpp"
#include "base/result.hpp"

namespace gramproof::audit {

/// Completes an identification (methods: 2, items 4 and 5). A column that depends on others within
/// rounding leaves `kept`, since no figure of a matrix with it would mean anything, and its
/// relation is listed; Rank::rank goes on counting exact relations only. Rank::proved, unsettled,
/// numerical and rank_of_the_doubles are filled. Errors: those of the passes it asks for, which
/// `every_row` counts.
[[nodiscard]] Result<void> judge_rounding(EveryRow& every_row, Identification& found);

}  // namespace gramproof::audit
