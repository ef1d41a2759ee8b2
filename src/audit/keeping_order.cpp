#include <algorithm>
#include <cstdint>

#include "audit/identification.hpp"
#include "audit/rare_levels.hpp"

namespace gramproof::audit {
namespace {

/// The most frequent level of each level set on the rows used, ties to the first in listing order;
/// -1 when one is left out already.
std::vector<int> most_frequent_levels(const design::Design& design, const scan::Digest& digest) {
  std::vector<int> result;
  for (std::size_t s = 0; s < design.level_sets.size(); ++s) {
    int best = -1;
    std::uint64_t rows = 0;
    for (const int level : design.level_sets[s].order) {
      const std::uint64_t here = digest.level_counts[s][static_cast<std::size_t>(level)];
      if (best >= 0 && here <= rows) continue;
      best = level;
      rows = here;
    }
    result.push_back(design.level_sets[s].leave_one_out ? -1 : best);
  }
  return result;
}

/// Most frequent member of each set of 0/1 columns coded by hand that never meet.
std::vector<bool> most_frequent_by_hand(const design::Design& design, const scan::Digest& digest) {
  std::vector<bool> result(design.columns.size(), false);
  for (const design::Family& family : design.families) {
    int best = -1;
    for (const int j : set_by_hand(design, digest, family)) {
      const bool more = best < 0 || digest.columns[static_cast<std::size_t>(j)].nonzero_rows >
                                        digest.columns[static_cast<std::size_t>(best)].nonzero_rows;
      if (more) best = j;
    }
    if (best >= 0) result[static_cast<std::size_t>(best)] = true;
  }
  return result;
}

}  // namespace

int place_of_role(const design::DesignColumn& column) {
  if (column.role == design::Role::protect) return 0;
  if (column.role == design::Role::focus) return 1;
  return column.constant ? 2 : 3;
}

std::vector<int> keeping_order(const design::Design& design, const scan::Digest& digest) {
  const std::vector<int> frequent = most_frequent_levels(design, digest);
  const std::vector<bool> by_hand = most_frequent_by_hand(design, digest);
  std::vector<std::pair<int, int>> keyed;
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    const design::DesignColumn& column = design.columns[j];
    if (!column.exact) continue;
    int key = place_of_role(column);
    if (key == 3) {
      const bool last =
          by_hand[j] ||
          std::any_of(column.levels.begin(), column.levels.end(), [&](const auto& use) {
            return frequent[static_cast<std::size_t>(use.set)] == use.level;
          });
      if (last) key = 4;
    }
    keyed.emplace_back(key, static_cast<int>(j));
  }
  std::stable_sort(keyed.begin(), keyed.end(),
                   [](const auto& a, const auto& b) { return a.first < b.first; });
  std::vector<int> order;
  for (const auto& [key, column] : keyed) order.push_back(column);
  return order;
}

}  // namespace gramproof::audit
