// src/exact/interval_rank.hpp - columns with log, sqrt, exp or asinh: proved independent, or
// related to 60 digits.
#pragma once

#include <gmpxx.h>

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "base/numeric.hpp"
#include "design/design.hpp"
#include "exact/enclosure.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

struct IntervalQuestion {
  const design::Design& design;
  const table::Piece& sample;
  const Matrix& values;    ///< sample rows x design columns in doubles, for choices only
  std::vector<int> exact;  ///< pivot columns of the exact proof, proved independent
  std::vector<std::size_t> exact_rows;   ///< as many rows of the sample on which they are
  std::vector<int> inexact;              ///< the other columns, in the order of keeping
  std::vector<std::size_t> rows_to_use;  ///< further rows of the sample that must be looked at
};

/// A combination of columns that is below 60 digits of its terms: 0 as far as computing can tell.
struct RoundingRelation {
  struct Term {
    int column = -1;
    mpq_class coefficient;  ///< where not simple, a number of at least 60 digits
    bool simple = true;  ///< the only simple fraction within the enclosure, which is far narrower
                         ///< than the distance of simple fractions
  };
  int column = -1;          ///< the one that depends on those kept before it; its coefficient is -1
  std::vector<Term> terms;  ///< the dependent column among them; ascending by column
};

struct IntervalRank {
  std::vector<int> independent;             ///< proved, jointly with the exact columns
  std::vector<RoundingRelation> relations;  ///< candidates: hold on the rows looked at
  std::vector<int> unsettled;               ///< beyond the budget
};

/// Rows are chosen in doubles; then, from the decimals, with every rounding error counted:
/// (a) a proof of regularity in doubles on as many rows as columns (surely_regular), which settles
/// what is well conditioned at any width; (b) else elimination on enclosures of 128, 256, ... 2048
/// bits. A column that doubles cannot set apart is first looked at beside those columns only that
/// it seems to depend on. Budget of (b): 2e7 interval operations of 128 bits, a few seconds, which
/// allows about 150 columns; beyond it columns are unsettled.
[[nodiscard]] IntervalRank interval_rank(const IntervalQuestion& question);

/// What the terms of a relation add up to in one row.
struct RoundingResidual {
  bool holds = false;    ///< surely more than 60 digits below the largest term
  double log2_size = 0;  ///< log2 of a bound on it
};
[[nodiscard]] RoundingResidual residual_of(const RoundingRelation& relation, RowEnclosures& row);

}  // namespace gramproof::exact
