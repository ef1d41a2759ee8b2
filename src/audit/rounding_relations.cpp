#include "audit/rounding_relations.hpp"

#include "audit/doubles_rank.hpp"

namespace gramproof::audit {

Result<void> judge_rounding(EveryRow& every_row, Identification& found) {
  const Result<std::uint64_t> doubles = rank_of_the_doubles(every_row, found.rank.rank);
  if (!doubles) return doubles.error();
  found.rank.rank_of_the_doubles = doubles.value();
  found.rank.numerical = found.rank.rank;
  found.passes += every_row.passes();
  return {};
}

}  // namespace gramproof::audit
