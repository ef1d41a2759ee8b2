// src/audit/recorded_relations.hpp - near relations that are no more than the rounding of the
// recorded numbers.
#pragma once

#include <vector>

#include "audit/audit.hpp"
#include "audit/every_row.hpp"
#include "base/result.hpp"

namespace gramproof::audit {

/// The residual test (methods: 5): a near relation whose residual stays, in every used row, within
/// what the rounding of its cells can make, gets the standing within_recorded_precision. The bound
/// of a row is the sum over source cells of half a step times |sum_j a_j dx_j/dcell|, and the
/// uncertainty of the coefficients besides: three standard errors each, and never more than the
/// rounding itself. Whole numbers are read as exact. Asked of the sample first; a pass over the
/// data, counted by `rows`, only if a relation passes there. Errors: those of the pass. O(rows *
/// (columns of the relations + their sources)).
[[nodiscard]] Result<void> judge_recorded_precision(EveryRow& rows, Audit& audit);

}  // namespace gramproof::audit
