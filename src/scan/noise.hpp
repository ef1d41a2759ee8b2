// src/scan/noise.hpp - sums of products of derivatives: how errors of the cells move the design
// columns (methods: 5).
#pragma once

#include <vector>

#include "design/design.hpp"
#include "design/rows.hpp"
#include "scan/digest.hpp"
#include "table/piece.hpp"
#include "table/survey.hpp"

namespace gramproof::scan {

/// Which design columns depend on which table column, and by what derivative. Built once a pass.
class NoisePlan {
 public:
  NoisePlan(const design::Design& design, const table::Schema& schema);

  /// The sums over one block. O(rows d^2) for each source with d dependents.
  [[nodiscard]] std::vector<SourceNoise> sums(const table::Piece& piece,
                                              const design::Block& block) const;

 private:
  struct Source {
    int column = -1;
    std::vector<int> dependents;
    std::vector<design::ExpressionPtr> derivatives;
    bool relative = false;  ///< cells of 15 or more significant digits occur: errors proportional
                            ///< to the cell are needed too
  };
  std::vector<Source> sources_;
};

/// total += part; both from the same plan. Brought to common powers of two first.
void add(std::vector<SourceNoise>& total, const std::vector<SourceNoise>& part);

/// The dependents that are kept, renumbered: provisional[new] = old.
[[nodiscard]] std::vector<SourceNoise> select(const std::vector<SourceNoise>& noise,
                                              const std::vector<int>& provisional);

}  // namespace gramproof::scan
