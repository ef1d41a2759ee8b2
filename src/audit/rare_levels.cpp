#include "audit/rare_levels.hpp"

#include <algorithm>
#include <string>

#include "audit/verdict.hpp"

namespace gramproof::audit {
namespace {

bool is_rare(std::uint64_t rows) {
  return rows > 0 && rows < rare_below;
}

/// 0/1 columns written by the analyst, not made by levels() or all_levels().
bool is_by_hand(const design::DesignColumn& column) {
  return column.zero_one && column.levels.empty();
}

void add_ones(const design::Design& design, const scan::Digest& digest,
              std::vector<RareLevel>& rare) {
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    const std::uint64_t ones = digest.columns[j].nonzero_rows;
    const int column = static_cast<int>(j);
    if (design.columns[j].zero_one && is_rare(ones))
      rare.push_back({design.columns[j].label, column, ones, {column}});
  }
}

void add_levels_left_out(const design::Design& design, const table::Schema& schema,
                         const scan::Digest& digest, const std::vector<int>& left_out,
                         std::vector<RareLevel>& rare) {
  for (std::size_t s = 0; s < design.level_sets.size(); ++s) {
    if (left_out[s] < 0) continue;
    const auto level = static_cast<std::size_t>(left_out[s]);
    const std::uint64_t rows = digest.level_counts[s][level];
    if (!is_rare(rows)) continue;
    const auto& facts = schema.columns[static_cast<std::size_t>(design.level_sets[s].column)];
    RareLevel entry{"[" + facts.name + " = " + facts.levels[level].text + "]", -1, rows, {}};
    for (std::size_t j = 0; j < design.columns.size(); ++j) {
      const auto& uses = design.columns[j].levels;
      if (std::any_of(uses.begin(), uses.end(),
                      [&](const auto& use) { return use.set == static_cast<int>(s); }))
        entry.involves.push_back(static_cast<int>(j));
    }
    rare.push_back(std::move(entry));
  }
}

/// Rows in which none of the columns is 1, given that no two meet.
std::uint64_t rows_of_none(const scan::Digest& digest, const std::vector<int>& columns) {
  std::uint64_t ones = 0;
  for (const int j : columns) ones += digest.columns[static_cast<std::size_t>(j)].nonzero_rows;
  return digest.rows_used - ones;
}

void add_left_over(const design::Design& design, const scan::Digest& digest,
                   std::vector<RareLevel>& rare) {
  std::vector<bool> in_a_set(design.columns.size(), false);
  for (const design::Family& family : design.families) {
    const std::vector<int> set = set_by_hand(design, digest, family);
    if (set.empty()) continue;
    std::vector<std::string> names;
    for (const int j : set) {
      in_a_set[static_cast<std::size_t>(j)] = true;
      names.push_back(design.columns[static_cast<std::size_t>(j)].label);
    }
    const std::uint64_t rows = rows_of_none(digest, set);
    if (is_rare(rows)) rare.push_back({"none of " + names_in_words(names), -1, rows, set});
  }
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    if (in_a_set[j] || !is_by_hand(design.columns[j])) continue;
    const std::uint64_t rows = digest.rows_used - digest.columns[j].nonzero_rows;
    const int column = static_cast<int>(j);
    if (is_rare(rows)) rare.push_back({"not " + design.columns[j].label, -1, rows, {column}});
  }
}

}  // namespace

std::vector<int> set_by_hand(const design::Design& design, const scan::Digest& digest,
                             const design::Family& family) {
  std::vector<int> set;
  for (const int j : family.columns) {
    const auto at = static_cast<std::size_t>(j);
    if (!is_by_hand(design.columns[at])) continue;
    const bool meets_none = std::all_of(set.begin(), set.end(), [&](int member) {
      return digest.never_together[at][static_cast<std::size_t>(member)];
    });
    if (!meets_none) return {};
    set.push_back(j);
  }
  return set.size() < 2 ? std::vector<int>{} : set;
}

std::vector<RareLevel> rare_levels(const design::Design& design, const table::Schema& schema,
                                   const scan::Digest& digest,
                                   const std::vector<int>& left_out_levels, bool constant_in_span) {
  std::vector<RareLevel> rare;
  add_ones(design, digest, rare);
  add_levels_left_out(design, schema, digest, left_out_levels, rare);
  if (constant_in_span) add_left_over(design, digest, rare);
  return rare;
}

}  // namespace gramproof::audit
