// src/scan/leaf.hpp - what one piece contributes to the digest.
#pragma once

#include <cstdint>
#include <vector>

#include "base/result.hpp"
#include "design/design.hpp"
#include "factor/factor.hpp"
#include "scan/digest.hpp"
#include "scan/noise.hpp"
#include "scan/reading.hpp"
#include "scan/sampler.hpp"

namespace gramproof::scan {

/// Sums in long double: no overflow at 1e305 times the rows, and on x86-64 eleven bits more for the
/// means.
struct LeafSums {
  std::vector<long double> weighted_sum;  ///< a design column: sum w x
  std::vector<double> min, max;
  std::vector<std::uint64_t> nonzero_rows;
  long double weights = 0;
};

struct Leaf {
  std::uint64_t rows_read = 0, rows_used = 0;
  std::vector<design::Exclusion> excluded;
  factor::Factor factor;
  LeafSums sums;
  design::LevelCounts level_counts;
  std::vector<SourceNoise> noise;
  /// Bit b of word together[a][b / 64]: some row has a 1 in both 0/1 columns a and b.
  std::vector<std::vector<std::uint64_t>> together;
  Candidates candidates;
  std::vector<std::uint64_t> random_combination;
};

/// O(rows k^2). Thread-safe; the expanded piece is used up.
[[nodiscard]] Leaf make_leaf(const design::Design& design, const table::Schema& schema,
                             const NoisePlan& plan, const Sampler& sampler, ExpandedPiece expanded);

/// total += part, in order of pieces.
void add(LeafSums& total, const LeafSums& part);

}  // namespace gramproof::scan
