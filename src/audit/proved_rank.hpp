// src/audit/proved_rank.hpp - from the rank of a sample to the rank of every row.
#pragma once

#include <cstdint>
#include <vector>

#include "audit/identification.hpp"
#include "base/result.hpp"
#include "design/design.hpp"
#include "exact/rank.hpp"
#include "scan/digest.hpp"

namespace gramproof::audit {

/// Tests vectors on every used row: on the sample where it holds them all or the fold has proved
/// that it spans them, else by a further pass, which is counted.
class Prover {
 public:
  Prover(const design::Design& design, scan::Digest& digest, const RowTester& test_on_all_rows)
      : design_(design), digest_(digest), test_on_all_rows_(test_on_all_rows) {}

  /// Rank and null space on all used rows of the columns `order`; every null vector holds on every
  /// row. The sample grows by rows that violate what the sample alone suggested.
  [[nodiscard]] Result<exact::SampleRank> rank_of(const std::vector<int>& order);

  [[nodiscard]] Result<std::vector<scan::TestedVector>> test(
      const std::vector<exact::NullVector>& vectors);

  [[nodiscard]] int passes() const { return passes_; }

 private:
  [[nodiscard]] bool sample_is_everything() const {
    return digest_.sample.rows == digest_.rows_used;
  }

  [[nodiscard]] bool is_proved_by_fold(const std::vector<exact::NullVector>& vectors) const;

  const design::Design& design_;
  scan::Digest& digest_;
  const RowTester& test_on_all_rows_;
  int passes_ = 0;
};

}  // namespace gramproof::audit
