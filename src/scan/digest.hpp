// src/scan/digest.hpp - all that a pass over the data leaves behind.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "base/numeric.hpp"
#include "design/bind.hpp"
#include "design/rows.hpp"
#include "exact/residual_span.hpp"
#include "factor/factor.hpp"
#include "table/piece.hpp"

namespace gramproof::scan {

/// Weighted summary of one design column over the rows used.
struct ColumnRecord {
  double mean = 0;  ///< sum w x / sum w
  double min = 0, max = 0;
  std::uint64_t nonzero_rows = 0;
};

/// Sum over rows of w g g' for the derivatives g_j = d x_ij / d cell of the design columns that
/// depend on one table column. `absolute` is for steps common to the column, `relative` (with w
/// cell^2) for steps proportional to the cell. Entry (a, b) is to be read times 2^(exponents[a] +
/// exponents[b]), and `relative` besides times 4^cell_exponent.
struct SourceNoise {
  int column = -1;              ///< table column
  std::vector<int> dependents;  ///< design columns
  Matrix absolute, relative;    ///< dependents x dependents
  std::vector<int> exponents;
  int cell_exponent = 0;
};

/// What the fold has proved about the null space of the sample (methods: 2, item 2).
struct SpanProof {
  /// The sample's rows span those of all rows, modulo the prime, over the exact columns and ones.
  bool sample_spans = false;
  /// Then every null vector of the sample vanishes on every row: exactly if `all_hold`, else modulo
  /// the prime, which decides it for vectors within the bounds (exact::is_decided_by_prime).
  bool all_hold = false;
  std::vector<exact::EntryBound> bounds;  ///< a design column
};

struct Digest {
  std::uint64_t rows_read = 0;
  std::uint64_t rows_used = 0;
  std::vector<design::Exclusion> excluded;
  double sum_of_weights = 0;  ///< rows used when unweighted
  factor::Factor factor;      ///< of the design columns, then one column of ones
  std::vector<ColumnRecord> columns;
  design::LevelCounts level_counts;
  std::vector<SourceNoise> noise;
  std::vector<std::vector<bool>>
      never_together;  ///< design columns a, b both zero_one: no used row has both 1
  /// A deterministic sample of used rows: those with the smallest hash of their number, and for
  /// each design column the first two rows where it is not zero. Ascending row number, each row
  /// once.
  /// Besides, where the fold could prove the null space, the rows that decide it. Rows that later
  /// violate what the sample suggests are appended.
  table::Piece sample;
  SpanProof proof;
  /// Sum over used rows of hash(row) * x_row modulo exact::prime, a design column each (0 for
  /// columns that are not exact), the ones column last: for the rows without which X is singular.
  std::vector<std::uint64_t> random_combination;
};

}  // namespace gramproof::scan
