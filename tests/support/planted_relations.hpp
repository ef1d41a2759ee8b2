// tests/support/planted_relations.hpp - designs of whole numbers with relations planted by a seed,
// and choices of columns by their definition: ranks by plain elimination.
#pragma once

#include <algorithm>
#include <cstddef>
#include <numeric>
#include <utility>
#include <vector>

#include "support/plain_elimination.hpp"
#include "support/random_numbers.hpp"

namespace gramproof::test {

/// Rows of whole numbers with `planted` columns that are combinations of earlier ones, in places
/// chosen by the seed.
inline IntegerVectors with_planted_relations(Random& random, std::size_t columns,
                                             std::size_t planted) {
  IntegerVectors rows(columns + 3, std::vector<mpz_class>(columns));
  for (auto& row : rows) {
    for (auto& entry : row) entry = static_cast<long>(random.whole(-9, 9));
  }
  for (std::size_t p = 0; p < planted; ++p) {
    const auto target = static_cast<std::size_t>(random.whole(1, static_cast<long>(columns) - 1));
    const auto a = static_cast<std::size_t>(random.whole(0, static_cast<long>(target) - 1));
    const auto b = static_cast<std::size_t>(random.whole(0, static_cast<long>(target) - 1));
    const long times_a = random.whole(-4, 4), times_b = random.whole(-4, 4);
    for (auto& row : rows) row[target] = times_a * row[a] + times_b * row[b];
  }
  return rows;
}

inline std::size_t rank_of(const IntegerVectors& rows, const std::vector<int>& columns) {
  IntegerVectors part(rows.size());
  for (std::size_t i = 0; i < rows.size(); ++i) {
    for (const int column : columns) part[i].push_back(rows[i][static_cast<std::size_t>(column)]);
  }
  return plain_null_space(part).rank;
}

/// Greedy, by the rank of what was kept so far: the definition.
inline std::vector<int> left_out_by_ranks(const IntegerVectors& rows, std::vector<int> preference) {
  std::reverse(preference.begin(), preference.end());
  std::vector<int> kept, left_out;
  for (const int column : preference) {
    kept.push_back(column);
    if (rank_of(rows, kept) == kept.size()) continue;
    kept.pop_back();
    left_out.push_back(column);
  }
  std::sort(left_out.begin(), left_out.end());
  return left_out;
}

inline std::vector<int> shuffled(Random& random, std::size_t columns) {
  std::vector<int> order(columns);
  std::iota(order.begin(), order.end(), 0);
  for (std::size_t i = columns; i > 1; --i)
    std::swap(order[i - 1],
              order[static_cast<std::size_t>(random.whole(0, static_cast<long>(i) - 1))]);
  return order;
}

}  // namespace gramproof::test
