// src/audit/doubles_rank.hpp - the rank that X has once its entries are doubles.
#pragma once

#include <cstdint>

#include "audit/every_row.hpp"
#include "base/result.hpp"

namespace gramproof::audit {

/// Exact rank of the matrix of doubles that the program itself folds (design::expand): cells are
/// the doubles nearest to their decimals, and sums, products, quotients and functions of them are
/// rounded operation by operation, as any program that computes in doubles does it. No tolerance
/// enters: doubles are dyadic numbers. Counted on the sample; where that shows fewer than all
/// columns, its null vectors are tested on every row, by a further pass unless all values they
/// involve are whole numbers that doubles hold exactly, and violating rows join the sample.
/// `exact_rank`: that of the decimals, which is the answer where nothing is rounded. Cost: that of
/// rank_of_sample, and at most a few passes.
[[nodiscard]] Result<std::uint64_t> rank_of_the_doubles(EveryRow& every_row,
                                                        std::uint64_t exact_rank);

}  // namespace gramproof::audit
