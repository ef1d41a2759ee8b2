// src/scan/sampler.hpp - the deterministic sample of rows that the exact work starts from.
//
// Drawn by hash of the row number, so that the same rows come out for any number of threads;
// besides, for each design column, the first two used rows where it is not zero: a rare level is
// always in the sample.
#pragma once

#include <atomic>
#include <cstddef>
#include <cstdint>
#include <vector>

#include "design/rows.hpp"
#include "table/piece.hpp"

namespace gramproof::scan {

/// Rows of one piece that may belong to the sample, made in a worker thread.
struct Candidates {
  table::Piece rows;                ///< gathered, ascending
  std::vector<std::uint64_t> hash;  ///< one a row
  std::vector<std::vector<std::uint64_t>>
      first_nonzero;  ///< a design column: row numbers of its first non-zero rows here
};

/// Appends the rows of `more` that the sample does not hold yet, so that what is known by place in
/// the sample stays true. Returns how many.
std::size_t join(table::Piece& sample, const table::Piece& more);

class Sampler {
 public:
  Sampler(std::size_t sample_rows, std::size_t columns);

  /// Thread-safe: reads only a bound that shrinks and flags that rise, which never changes what is
  /// in the sample in the end.
  [[nodiscard]] Candidates candidates(const table::Piece& piece, const design::Block& block) const;

  /// In order of pieces, one call at a time.
  void take(Candidates candidates);

  /// The sample, ascending by row.
  [[nodiscard]] table::Piece finish();

 private:
  void compact();

  std::size_t sample_rows_;
  std::atomic<std::uint64_t> bound_;  ///< hashes above it cannot be among the smallest any more
  std::vector<std::atomic<std::uint8_t>>
      found_;  ///< a column: non-zero rows already taken (at most 2)
  table::Piece pool_;
  std::vector<std::uint64_t> hash_;
  std::vector<std::uint8_t> pinned_;  ///< a row of the pool: kept for a column's sake
};

}  // namespace gramproof::scan
