// src/scan/row_shares.hpp - a further pass: on which rows a combination of columns rests.
#pragma once

#include <cstdint>
#include <vector>

#include "base/numeric.hpp"
#include "base/result.hpp"
#include "scan/pass.hpp"
#include "table/source.hpp"
#include "table/survey.hpp"

namespace gramproof::scan {

/// A used row with its cells.
struct SharedRow {
  double share = 0;     ///< w r^2, over the sum of them
  table::Piece record;  ///< the one row
};

struct RowShares {
  double total = 0;                ///< sum of w r^2
  double squares = 0;              ///< sum of (w r^2)^2
  std::vector<SharedRow> largest;  ///< largest share first, ties in order of rows
};

/// For each column d of `directions` (design columns x directions) and each used row x with weight
/// w: r = sum d_j x_j. Choose directions with a total near 1: squares of squares are summed, so
/// that |r| below 1e-75 counts as nothing and beyond 1e75 as infinite. At most `most` rows are kept
/// a direction. The same bytes for any number of threads. O(rows * columns * directions).
[[nodiscard]] Result<std::vector<RowShares>> shares_of_rows(
    table::Source& source, const table::Schema& schema, const design::Design& design,
    const Matrix& directions, std::size_t most, const PassOptions& options);

}  // namespace gramproof::scan
