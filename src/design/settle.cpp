#include <algorithm>
#include <set>
#include <utility>

#include "base/text.hpp"
#include "design/bind.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

std::uint64_t rows_of(const std::vector<std::uint64_t>& counts, int level) {
  const auto at = static_cast<std::size_t>(level);
  return at < counts.size() ? counts[at] : 0;
}

/// The most frequent level, ties to the first in listing order; -1 if no level has a row.
int most_frequent(const LevelSet& set, const std::vector<std::uint64_t>& counts) {
  int best = -1;
  for (const int level : set.order) {
    const std::uint64_t rows = rows_of(counts, level);
    if (rows > 0 && (best < 0 || rows > rows_of(counts, best))) best = level;
  }
  return best;
}

/// Decides what a set leaves out and says what a reader would not expect.
int level_left_out(const LevelSet& set, const table::ColumnFacts& facts,
                   const std::vector<std::uint64_t>& counts, std::vector<Note>& notes) {
  if (!set.leave_one_out) return -1;
  const int frequent = most_frequent(set, counts);
  const auto name_of = [&](int level) {
    return in_quotes(facts.levels[static_cast<std::size_t>(level)].text);
  };
  const auto present = std::count_if(set.order.begin(), set.order.end(),
                                     [&](int level) { return rows_of(counts, level) > 0; });
  const std::string column = in_quotes(facts.name);
  if (present == 1) {
    notes.push_back({"single_level",
                     column + " has one level on the rows used, " + name_of(frequent) +
                         ": levels() gives no column.",
                     {facts.name}});
  }
  if (set.against < 0 || rows_of(counts, set.against) > 0)
    return set.against < 0 ? frequent : set.against;
  if (frequent < 0) return set.against;
  notes.push_back({"level_against_absent",
                   "No row used has the level " + name_of(set.against) + " of " + column +
                       " to compare against; " + name_of(frequent) + " is left out instead.",
                   {facts.name}});
  return frequent;
}

bool stays(const DesignColumn& column, const LevelCounts& counts,
           const std::vector<int>& left_out) {
  return std::all_of(column.levels.begin(), column.levels.end(), [&](const LevelUse& use) {
    const auto set = static_cast<std::size_t>(use.set);
    return rows_of(counts[set], use.level) > 0 && left_out[set] != use.level;
  });
}

}  // namespace

Settled settle(const Design& provisional, const table::Schema& schema, const LevelCounts& counts) {
  Settled settled;
  settled.design = provisional;
  Design& design = settled.design;
  for (std::size_t s = 0; s < design.level_sets.size(); ++s) {
    const LevelSet& set = design.level_sets[s];
    const table::ColumnFacts& facts = schema.columns[static_cast<std::size_t>(set.column)];
    settled.left_out.push_back(level_left_out(set, facts, counts[s], design.notes));
  }
  design.columns.clear();
  for (Term& term : design.terms) {
    std::vector<int> kept;
    for (const int j : term.columns) {
      const DesignColumn& column = provisional.columns[static_cast<std::size_t>(j)];
      if (!stays(column, counts, settled.left_out)) continue;
      kept.push_back(static_cast<int>(design.columns.size()));
      design.columns.push_back(column);
      settled.provisional.push_back(j);
    }
    term.columns = std::move(kept);
  }
  return settled;
}

}  // namespace gramproof::design
