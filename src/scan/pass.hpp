// src/scan/pass.hpp - passes over the data: pieces are parsed and expanded in parallel and taken in
// in order.
#pragma once

#include <functional>
#include <string>
#include <vector>

#include "base/result.hpp"
#include "design/bind.hpp"
#include "exact/rank.hpp"
#include "scan/digest.hpp"
#include "table/source.hpp"
#include "table/survey.hpp"

namespace gramproof::scan {

struct PassOptions {
  unsigned threads = 1;
  std::function<void(const table::Progress&)> on_progress;  ///< at most once a piece; may be empty
};

/// Rows of the deterministic sample drawn by hash (the rows with rare non-zeros come besides).
inline constexpr std::size_t sample_rows = 4096;

/// The main pass: folds every used row of a provisional design into a digest. The result has the
/// same bytes for any number of threads. Errors: those of reading, parsing and design::expand. Time
/// O(rows k^2), memory O(k^2 log(rows / 4096) + sample).
[[nodiscard]] Result<Digest> scan(table::Source& source, const table::Schema& schema,
                                  const design::Design& design, const PassOptions& options);

/// The digest of the settled design: provisional columns that were taken out are left out of every
/// part. O(k^3).
[[nodiscard]] Digest settle(const Digest& digest, const design::Settled& settled);

/// What a pass says about one integer vector.
struct TestedVector {
  std::uint64_t holding = 0, violating = 0;
  std::uint64_t speaking = 0;        ///< rows in which some term is not 0
  mpq_class largest_residual = 0;    ///< absolute value
  table::Piece violators;            ///< the first `most_violators` violating rows
  std::vector<mpq_class> residuals;  ///< one a row of `violators`
};

/// Violating rows kept a vector: the report lists 50.
inline constexpr std::size_t most_violators = 50;

/// A further pass: every vector on every used row, in integers.
[[nodiscard]] Result<std::vector<TestedVector>> test_on_all_rows(
    table::Source& source, const table::Schema& schema, const design::Design& design,
    const std::vector<exact::NullVector>& vectors, const PassOptions& options);

/// The same on rows that are at hand: all rows of a sample.
[[nodiscard]] std::vector<TestedVector> test_on_rows(const design::Design& design,
                                                     const table::Piece& rows,
                                                     const std::vector<exact::NullVector>& vectors);

}  // namespace gramproof::scan
