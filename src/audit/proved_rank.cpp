#include "audit/proved_rank.hpp"

#include <algorithm>

#include "scan/sampler.hpp"

namespace gramproof::audit {
Result<std::vector<scan::TestedVector>> Prover::test(
    const std::vector<exact::NullVector>& vectors) {
  if (sample_is_everything()) return scan::test_on_rows(design_, digest_.sample, vectors);
  ++passes_;
  return test_on_all_rows_(vectors);
}

/// Trivially so where there is no vector.
bool Prover::is_proved_by_fold(const std::vector<exact::NullVector>& vectors) const {
  const scan::SpanProof& proof = digest_.proof;
  return std::all_of(vectors.begin(), vectors.end(), [&](const exact::NullVector& vector) {
    return proof.sample_spans &&
           (proof.all_hold || exact::is_decided_by_prime(vector, proof.bounds));
  });
}

Result<exact::SampleRank> Prover::rank_of(const std::vector<int>& order) {
  while (true) {
    exact::SampleRank rank = exact::rank_of_sample(design_, digest_.sample, order);
    if (sample_is_everything() || is_proved_by_fold(rank.null_vectors)) return rank;
    Result<std::vector<scan::TestedVector>> tested = test(rank.null_vectors);
    if (!tested) return tested.error();
    std::size_t joined = 0;
    for (const scan::TestedVector& vector : tested.value()) {
      if (vector.violating > 0) joined += scan::join(digest_.sample, vector.violators);
    }
    const bool all_hold =
        std::all_of(tested.value().begin(), tested.value().end(),
                    [](const scan::TestedVector& vector) { return vector.violating == 0; });
    if (all_hold) return rank;
    if (joined == 0) {
      return Error{ErrorKind::internal, "",
                   "a row violates a relation that holds on the sample it is part of",
                   "please report this"};
    }
  }
}

}  // namespace gramproof::audit
