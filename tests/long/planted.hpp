// tests/long/planted.hpp - integer designs whose null space is known because it was planted.
#pragma once

#include <cstdint>

#include "exact/rank.hpp"
#include "support/plain_elimination.hpp"
#include "support/random_numbers.hpp"

namespace gramproof::test {

struct PlantedDesign {
  IntegerVectors rows;       ///< n x k
  IntegerVectors relations;  ///< independent; they span the null space of the rows
};

/// What may be planted; a design draws its sizes from these.
struct PlantedLimits {
  std::int64_t most_columns = 60;
  std::int64_t most_relations = 8;
  std::int64_t most_in_relation = 60;  ///< columns
  std::int64_t largest = 1'000'000;    ///< coefficient
};

/// Each relation determines one column from others, which may be determined themselves; rows are
/// drawn for the rest and multiplied until all entries are whole. k + 3 to k + 40 rows: that their
/// rank falls short of the free columns has a probability below 1e-9. Columns are shuffled.
[[nodiscard]] PlantedDesign planted_design(Random& random, const PlantedLimits& limits);

/// Rank and null space of its rows by the product.
[[nodiscard]] exact::SampleRank rank_of(const PlantedDesign& planted);

}  // namespace gramproof::test
