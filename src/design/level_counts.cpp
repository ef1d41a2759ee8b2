#include <algorithm>
#include <unordered_map>

#include "design/rows.hpp"

namespace gramproof::design {
namespace {

/// Finds the level of a number: by its double first, then, among levels that share it, by the
/// decimals.
class NumberLevels {
 public:
  explicit NumberLevels(const table::ColumnFacts& facts) : facts_(facts) {
    for (std::size_t i = 0; i < facts.levels.size(); ++i)
      by_value_.emplace(facts.levels[i].value.value, i);
  }

  [[nodiscard]] int level_of(const table::PieceColumn& column, std::size_t row) const {
    const auto [first, last] = by_value_.equal_range(column.value[row]);
    if (first == last) return -1;
    if (std::next(first) == last && column.wide.empty()) return static_cast<int>(first->second);
    const table::Number number = column.number(row);
    for (auto entry = first; entry != last; ++entry) {
      if (table::compare(facts_.levels[entry->second].value, number) == 0)
        return static_cast<int>(entry->second);
    }
    return -1;
  }

 private:
  const table::ColumnFacts& facts_;
  std::unordered_multimap<double, std::size_t> by_value_;
};

}  // namespace

LevelCounts start_counts(const Design& design, const table::Schema& schema) {
  LevelCounts counts;
  for (const LevelSet& set : design.level_sets) {
    counts.emplace_back(schema.columns[static_cast<std::size_t>(set.column)].levels.size(), 0);
  }
  return counts;
}

void count_levels(const Design& design, const table::Schema& schema, const table::Piece& piece,
                  const std::vector<std::size_t>& rows, LevelCounts& counts) {
  for (std::size_t s = 0; s < design.level_sets.size(); ++s) {
    const auto at = static_cast<std::size_t>(design.level_sets[s].column);
    const table::PieceColumn& column = piece.columns[at];
    if (schema.columns[at].kind == table::ColumnKind::text) {
      for (const std::size_t row : rows) {
        if (column.code[row] >= 0) ++counts[s][static_cast<std::size_t>(column.code[row])];
      }
      continue;
    }
    const NumberLevels levels(schema.columns[at]);
    for (const std::size_t row : rows) {
      const int level = levels.level_of(column, row);
      if (level >= 0) ++counts[s][static_cast<std::size_t>(level)];
    }
  }
}

}  // namespace gramproof::design
