// src/audit/inexact_columns.hpp - columns with log, sqrt, exp or asinh: independent, related within
// rounding, or not settled.
#pragma once

#include <cstdint>
#include <vector>

#include "audit/every_row.hpp"
#include "audit/identification.hpp"
#include "base/result.hpp"
#include "exact/interval_rank.hpp"

namespace gramproof::audit {

struct InexactColumns {
  struct Related {
    exact::RoundingRelation relation;
    double largest_residual = 0;  ///< bound over all used rows
  };
  std::vector<Related> related;  ///< hold to 60 digits on every used row
  std::vector<int> unsettled;
};

/// Settles the kept columns that are not exact (methods: 2, item 4). Independence is proved on rows
/// of the sample; a relation found there is tested in interval arithmetic on every used row, by a
/// further pass, and rows that violate it join the sample. Errors: those of the passes. Cost: see
/// exact::interval_rank; a pass takes some 20 microseconds a row and column of a relation.
[[nodiscard]] Result<InexactColumns> settle_inexact_columns(EveryRow& every_row,
                                                            const Identification& found);

}  // namespace gramproof::audit
