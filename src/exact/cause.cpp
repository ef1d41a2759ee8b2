// src/exact/cause.cpp
#include "exact/cause.hpp"

#include <algorithm>
#include <optional>
#include <set>

#include "exact/clock.hpp"

namespace gramproof::exact {
namespace {

using Terms = Sides::Terms;

const design::DesignColumn& column_of(const Evidence& e, const Terms::value_type& term) {
  return e.design.columns[term.first];
}

bool all_ones(const Terms& side) {
  return std::all_of(side.begin(), side.end(), [](const auto& term) { return term.second == 1; });
}

template <class Test>
bool all_columns(const Evidence& e, const Terms& side, Test&& test) {
  return std::all_of(side.begin(), side.end(),
                     [&](const auto& term) { return test(column_of(e, term)); });
}

bool all_zero_one(const Evidence& e, const Terms& side) {
  return all_columns(e, side, [](const design::DesignColumn& c) { return c.zero_one; });
}

std::uint64_t ones_of(const Evidence& e, const Terms& side) {
  std::uint64_t rows = 0;
  for (const auto& term : side) rows += e.columns[term.first].nonzero_rows;
  return rows;
}

/// The levels of a column but for those of one set.
std::set<std::pair<int, int>> others_of(const design::DesignColumn& column, int set) {
  std::set<std::pair<int, int>> others;
  for (const design::LevelUse& use : column.levels) {
    if (use.set != set) others.emplace(use.set, use.level);
  }
  return others;
}

/// The set whose levels tell the columns of a side apart, each with the same other levels; -1:
/// none.
int common_set(const Evidence& e, const Terms& side) {
  if (side.size() < 2) return -1;
  for (const design::LevelUse& candidate : column_of(e, side.front()).levels) {
    std::set<int> levels;
    std::set<std::set<std::pair<int, int>>> others;
    for (const auto& term : side) {
      for (const design::LevelUse& use : column_of(e, term).levels) {
        if (use.set == candidate.set) levels.insert(use.level);
      }
      others.insert(others_of(column_of(e, term), candidate.set));
    }
    if (levels.size() == side.size() && others.size() == 1) return candidate.set;
  }
  return -1;
}

/// The table columns that a column is made of, but for that of a set.
std::vector<int> sources_without(const Evidence& e, const design::DesignColumn& column, int set) {
  std::vector<int> sources = column.sources;
  std::erase(sources, e.design.level_sets[static_cast<std::size_t>(set)].column);
  return sources;
}

/// True if a side's columns are the products of a full set of levels with the other side's column.
bool products_with_full_set(const Evidence& e) {
  const int set = common_set(e, e.sides.left);
  if (set < 0 || e.sides.right.size() != 1 || e.sides.number != 0) return false;
  const design::DesignColumn& part = column_of(e, e.sides.left.front());
  const design::DesignColumn& whole = column_of(e, e.sides.right.front());
  return others_of(part, set) == others_of(whole, set) &&
         sources_without(e, part, set) == whole.sources;
}

/// True if a side's columns are products of finer levels, and the other side the product of the
/// level they lie in with the same column.
bool products_with_nested_levels(const Evidence& e) {
  const int fine = common_set(e, e.sides.left);
  if (fine < 0 || e.sides.right.size() != 1) return false;
  const design::DesignColumn& part = column_of(e, e.sides.left.front());
  const design::DesignColumn& whole = column_of(e, e.sides.right.front());
  return std::any_of(whole.levels.begin(), whole.levels.end(), [&](const design::LevelUse& use) {
    return others_of(part, fine) == others_of(whole, use.set) &&
           sources_without(e, part, fine) == sources_without(e, whole, use.set);
  });
}

bool is_level_set(const Evidence& e) {
  const Sides& s = e.sides;
  if (!all_ones(s.left) || !all_ones(s.right) || s.left.size() < 2) return false;
  if (products_with_full_set(e)) return true;
  if (!all_zero_one(e, s.left) || !all_zero_one(e, s.right)) return false;
  if (s.right.empty()) return s.number == 1;
  // Two full sets: each row counts once on each side.
  return s.number == 0 && s.right.size() >= 2 && ones_of(e, s.left) == e.rows &&
         ones_of(e, s.right) == e.rows;
}

/// The rows of the left columns are those of the right one; or levels of a finer set are levels of
/// a coarser one.
bool is_nested(const Evidence& e) {
  const Sides& s = e.sides;
  if (s.number != 0 || s.left.size() < 2 || s.right.empty() || !all_ones(s.left) ||
      !all_ones(s.right)) {
    return false;
  }
  if (products_with_nested_levels(e)) return true;
  if (!all_zero_one(e, s.left) || !all_zero_one(e, s.right)) return false;
  return s.right.size() == 1 || (common_set(e, s.left) >= 0 && common_set(e, s.right) >= 0);
}

bool looks_like_year(const Evidence& e, const Terms::value_type& term) {
  const design::DesignColumn& column = column_of(e, term);
  const ColumnSummary& seen = e.columns[term.first];
  if (seen.min < 1800 || seen.max > 2200 || column.sources.size() != 1) return false;
  return e.schema.columns[static_cast<std::size_t>(column.sources.front())].all_whole;
}

bool is_clock(const Evidence& e) {
  const Sides& s = e.sides;
  if (!is_sum_of_plain_columns(e.design, s)) return false;
  if (is_clock_by_name(e.design, s)) return true;
  return looks_like_year(e, s.left[0]) + looks_like_year(e, s.left[1]) +
             looks_like_year(e, s.right[0]) >=
         2;
}

/// Age, period and birth as sets of levels, or some of them: the coefficients are the years.
bool is_clock_of_levels(const Evidence& e) {
  std::set<int> sources;
  bool levels = false;
  for (const Terms* side : {&e.sides.left, &e.sides.right}) {
    for (const auto& term : *side) {
      const design::DesignColumn& column = column_of(e, term);
      if (column.sources.size() != 1 || column.levels.size() > 1) return false;
      const bool plain = column.definition->operation == design::Operation::cell;
      if (column.levels.empty() && !plain) return false;
      levels = levels || !plain;
      sources.insert(column.sources.front());
    }
  }
  return levels && sources.size() == 3 &&
         std::count_if(sources.begin(), sources.end(), [&](int source) {
           return named_for_time(e.schema.columns[static_cast<std::size_t>(source)].name);
         }) >= 2;
}

std::optional<Cause> cause_of_one(const Evidence& e) {
  const Sides& s = e.sides;
  if (s.columns() != 1) return std::nullopt;
  if (s.number != 0) return e.rows == 1 ? Cause::too_few_rows : Cause::constant_column;
  const design::DesignColumn& column = column_of(e, s.left.front());
  const bool crossed =
      column.levels.size() >= 2 || (!column.levels.empty() && column.sources.size() >= 2);
  return crossed ? Cause::empty_cell : Cause::zero_column;
}

bool never_changes(const Evidence& e, const Terms::value_type& term) {
  return e.columns[term.first].min == e.columns[term.first].max;
}

std::optional<Cause> cause_of_two(const Evidence& e) {
  const Sides& s = e.sides;
  if (s.columns() != 2) return std::nullopt;
  if (s.right.empty() && s.number != 0) {
    return all_ones(s.left) ? Cause::fixed_sum : Cause::unit_conversion;
  }
  if (s.number != 0) return Cause::unit_conversion;
  if (s.right.empty()) return Cause::multiple;  // a + 2 b = 0
  const mpq_class &a = s.left[0].second, &b = s.right[0].second;
  if (a == b) return Cause::duplicate;
  if (never_changes(e, s.left[0]) && never_changes(e, s.right[0])) return Cause::constant_column;
  return a == 1 || b == 1 ? Cause::multiple : Cause::unit_conversion;
}

/// Of three columns that may be negative any one is as much a difference as another is a sum. What
/// is made of the same table columns by arithmetic is no total of parts.
bool is_total(const Evidence& e) {
  const Sides& s = e.sides;
  if (sources_of(e).size() < s.columns()) return false;
  if (s.number != 0 || s.right.size() != 1 || !all_ones(s.right) || !all_ones(s.left)) return false;
  return s.left.size() > 2 ||
         (s.left.size() == 2 && std::all_of(s.left.begin(), s.left.end(), [&](const auto& term) {
            return e.columns[term.first].min >= 0;
          }));
}

}  // namespace

std::set<int> sources_of(const Evidence& e) {
  std::set<int> sources;
  for (const Terms* side : {&e.sides.left, &e.sides.right}) {
    for (const auto& term : *side) {
      const std::vector<int>& own = e.design.columns[term.first].sources;
      sources.insert(own.begin(), own.end());
    }
  }
  return sources;
}

bool is_overlap(const Evidence& e) {
  const Sides& s = e.sides;
  return s.left.size() >= 2 && !s.right.empty() && all_ones(s.left) && all_ones(s.right) &&
         all_zero_one(e, s.left) && all_zero_one(e, s.right) && !is_level_set(e) && !is_nested(e);
}

Cause cause_of(const Evidence& e) {
  if (const auto cause = cause_of_one(e)) return *cause;
  if (is_level_set(e)) return Cause::level_set;
  if (is_nested(e)) return Cause::nested_levels;
  // Any m columns are dependent on fewer than m rows, whatever they mean: no story is told then.
  if (e.rows < e.sides.columns() + (e.sides.has_constant ? 1 : 0)) return Cause::too_few_rows;
  if (is_overlap(e)) return Cause::level_set;
  if (const auto cause = cause_of_two(e)) return *cause;
  if (is_clock(e) || is_clock_of_levels(e)) return Cause::clock_identity;
  if (is_total(e)) return Cause::parts_and_total;
  const bool one_side = e.sides.right.empty() && e.sides.number != 0;
  if (one_side && all_ones(e.sides.left)) return Cause::fixed_sum;
  return Cause::other;
}

}  // namespace gramproof::exact
