// src/exact/cause_text.cpp - the sentence for each cause.
#include <algorithm>
#include <array>
#include <utility>
#include <vector>

#include "base/text.hpp"
#include "exact/cause.hpp"
#include "exact/clock.hpp"

namespace gramproof::exact {
namespace {

using Terms = Sides::Terms;

constexpr std::size_t most_named = 6;
constexpr std::size_t most_sources_named = 3;

/// A longer factor says nothing in a sentence: the equation has it.
constexpr std::size_t most_digits_told = 24;

/// Told and written as a difference: three counts of time, or a column that may be negative.
bool is_difference(const Evidence& e, Cause cause) {
  return (cause == Cause::clock_identity || cause == Cause::other) &&
         is_plain_difference(e.design, e.sides);
}

std::string label(const Evidence& e, const Terms::value_type& term) {
  return name_in_prose(e.design.columns[term.first]);
}

/// "a, b and c"; long lists name the first few and count the others.
std::string listed(const Evidence& e, const Terms& side) {
  std::string text;
  const std::size_t named = side.size() > most_named + 1 ? most_named : side.size();
  for (std::size_t i = 0; i < named; ++i) {
    const bool last = i + 1 == side.size();
    text += (i == 0 ? "" : last ? " and " : ", ") + label(e, side[i]);
  }
  if (named < side.size()) text += " and " + std::to_string(side.size() - named) + " more";
  return text;
}

std::string in_every_row(const Evidence& e) {
  if (!e.where.empty()) return e.where;
  return e.rows == 1 ? "in the only row used" : "in all " + grouped(e.rows) + " rows used";
}

/// The name of the table column whose levels tell the columns of a side apart; empty if none does.
std::string set_name(const Evidence& e, const Terms& side) {
  if (side.size() < 2 || e.design.columns[side[0].first].levels.empty()) return "";
  for (const design::LevelUse& use : e.design.columns[side[0].first].levels) {
    const bool differ = std::all_of(side.begin() + 1, side.end(), [&](const auto& term) {
      const auto& uses = e.design.columns[term.first].levels;
      return std::any_of(uses.begin(), uses.end(), [&](const design::LevelUse& other) {
        return other.set == use.set && other.level != use.level;
      });
    });
    if (!differ) continue;
    const int column = e.design.level_sets[static_cast<std::size_t>(use.set)].column;
    return e.schema.columns[static_cast<std::size_t>(column)].name;
  }
  return "";
}

bool all_zero_one(const Evidence& e, const Terms& side) {
  return std::all_of(side.begin(), side.end(),
                     [&](const auto& term) { return e.design.columns[term.first].zero_one; });
}

std::string of_overlap(const Evidence& e) {
  const Sides& s = e.sides;
  const std::string difference = number_text(abs(s.number));
  return "Counting the ones in a row, " + listed(e, s.left) + " have " +
         (s.number == 0  ? "as many as "
          : s.number > 0 ? difference + " more than "
                         : difference + " fewer than ") +
         listed(e, s.right) + ": these 0/1 columns mark sets of rows that overlap.";
}

std::string of_level_set(const Evidence& e) {
  if (is_overlap(e)) return of_overlap(e);
  const std::string name = set_name(e, e.sides.left);
  if (e.sides.right.size() == 1) {
    return "Each row used has one level of " + name +
           ", so the products with all its levels add up to " + label(e, e.sides.right.front()) +
           ".";
  }
  if (!e.sides.right.empty()) {
    const std::string other = set_name(e, e.sides.right);
    const std::string left = name.empty() ? listed(e, e.sides.left) : "the levels of " + name;
    const std::string right = other.empty() ? listed(e, e.sides.right) : "the levels of " + other;
    return "Each row used has exactly one of " + left + " and exactly one of " + right +
           ": both sets add up to 1.";
  }
  if (!name.empty()) {
    return "Each row used has exactly one level of " + name + ", so the " +
           std::to_string(e.sides.left.size()) +
           " columns made from its levels add up to the constant.";
  }
  return "Exactly one of " + listed(e, e.sides.left) +
         " is 1 in each row used, so together they repeat the constant.";
}

/// The name of the table column of the level that a column has and another has not.
std::string other_set_name(const Evidence& e, const Terms::value_type& term,
                           const Terms::value_type& without) {
  const auto& known = e.design.columns[without.first].levels;
  for (const design::LevelUse& use : e.design.columns[term.first].levels) {
    const bool shared = std::any_of(known.begin(), known.end(),
                                    [&](const design::LevelUse& k) { return k.set == use.set; });
    if (shared) continue;
    const int column = e.design.level_sets[static_cast<std::size_t>(use.set)].column;
    return e.schema.columns[static_cast<std::size_t>(column)].name;
  }
  return "another set";
}

std::string of_nested(const Evidence& e) {
  const Sides& s = e.sides;
  const std::string name = set_name(e, s.left);
  const std::string parts =
      name.empty() ? listed(e, s.left) : std::to_string(s.left.size()) + " levels of " + name;
  if (!all_zero_one(e, s.left)) {
    return "The rows of " + parts + " together are exactly those of one level of " +
           other_set_name(e, s.right.front(), s.left.front()) +
           ", so the products with them add up to " + label(e, s.right.front()) + ".";
  }
  return "The rows of " + parts + " together are exactly those of " + listed(e, s.right) +
         (s.right.size() == 1 ? ": the finer levels lie inside it."
                              : ": the finer levels lie inside them.");
}

std::string of_constant(const Evidence& e) {
  if (e.sides.columns() == 2) {
    return "Neither " + label(e, e.sides.left[0]) + " nor " + label(e, e.sides.right[0]) +
           " changes " + in_every_row(e) +
           ": columns that never change are multiples of each other.";
  }
  return label(e, e.sides.left.front()) + " is " + number_text(e.sides.number) + " " +
         in_every_row(e) + ": a column that never changes repeats the constant.";
}

/// "b is 0.3048 times a", "b is 1.8 times a plus 32". The factor is the one with fewer digits to
/// write; at equal length the one above 1.
std::string of_conversion(const Evidence& e) {
  Terms::value_type from = e.sides.left[0];
  Terms::value_type to = e.sides.right.empty() ? e.sides.left[1] : e.sides.right[0];
  // from.second * from = sign * to.second * to + number
  const int sign = e.sides.right.empty() ? -1 : 1;
  mpq_class factor = sign * from.second / to.second;
  mpq_class offset = -sign * e.sides.number / to.second;
  const mpq_class back_factor = 1 / factor, back_offset = -offset / factor;
  const auto length = [](const mpq_class& f, const mpq_class& o) {
    return number_text(f).size() + number_text(o).size();
  };
  const std::size_t forth = length(factor, offset), back = length(back_factor, back_offset);
  if (back < forth || (back == forth && abs(back_factor) > abs(factor))) {
    std::swap(from, to);
    factor = back_factor;
    offset = back_offset;
  }
  if (number_text(factor).size() > most_digits_told ||
      number_text(offset).size() > most_digits_told) {
    return label(e, to) + " is a fixed multiple of " + label(e, from) +
           (offset == 0 ? " " : ", and a number more, ") + in_every_row(e);
  }
  std::string text = label(e, to) + " is ";
  text += factor == 1    ? label(e, from)
          : factor == -1 ? "minus " + label(e, from)
                         : number_text(factor) + " times " + label(e, from);
  if (offset > 0) text += " plus " + number_text(offset);
  if (offset < 0) text += " minus " + number_text(abs(offset));
  return text + " " + in_every_row(e);
}

std::string of_duplicate(const Evidence& e) {
  const bool marks = all_zero_one(e, e.sides.left) && all_zero_one(e, e.sides.right);
  return label(e, e.sides.left[0]) + " and " + label(e, e.sides.right[0]) + " are equal " +
         in_every_row(e) + (marks ? ": both mark the same rows." : ": the same column twice.");
}

std::string of_fixed_sum(const Evidence& e) {
  const Terms& parts = e.sides.left;
  const std::string sum = number_text(e.sides.number);
  const std::string end = ": any one of them follows from the others and the constant.";
  if (all_zero_one(e, parts)) {
    return "Exactly " + sum + " of " + listed(e, parts) + " are 1 in each row used" + end;
  }
  return listed(e, parts) + " add up to " + sum + " " + in_every_row(e) + end;
}

std::string of_too_few(const Evidence& e) {
  const std::size_t tied = e.sides.columns() + (e.sides.has_constant ? 1 : 0);
  return "Only " + counted(e.rows, "row is", "rows are") + " used: any " + std::to_string(tied) +
         " columns are then tied by an equation, whatever they mean.";
}

/// The names of the table columns that the relation's columns are made of, in the table's order.
std::vector<std::string> source_names(const Evidence& e) {
  std::vector<std::string> names;
  for (const int source : sources_of(e)) {
    names.push_back(e.schema.columns[static_cast<std::size_t>(source)].name);
  }
  return names;
}

std::string of_clock(const Evidence& e) {
  const std::vector<std::string> names = source_names(e);
  return "Time is counted three ways, in " + names[0] + ", " + names[1] + " and " + names[2] +
         ": any two of them give the third.";
}

std::string of_other(const Evidence& e) {
  if (is_difference(e, Cause::other)) {
    const auto& given = e.sides.left.back();
    return label(e, given) + " is " + label(e, e.sides.right[0]) + " less " +
           label(e, e.sides.left[0]) + " " + in_every_row(e) + ".";
  }
  const std::vector<std::string> names = source_names(e);
  if (names.size() < e.sides.columns() && names.size() <= most_sources_named) {
    std::string made_of;
    for (std::size_t i = 0; i < names.size(); ++i) {
      made_of += (i == 0 ? "" : i + 1 == names.size() ? " and " : ", ") + names[i];
    }
    return "All of these columns are made of " + made_of +
           ", and one of them follows from the others by this equation " + in_every_row(e) + ".";
  }
  const bool lone = e.sides.right.size() == 1 && e.sides.right.front().second == 1;
  const std::string which = lone ? label(e, e.sides.right.front()) + " follows from the others"
                                 : "Any one of these columns follows from the others";
  return which + " by this equation " + in_every_row(e) + ".";
}

/// Whose sentences have words of their own for the rows.
bool speaks_of_every_row(Cause cause) {
  return cause == Cause::empty_cell || cause == Cause::level_set || cause == Cause::nested_levels ||
         cause == Cause::clock_identity || cause == Cause::too_few_rows;
}

}  // namespace

std::string sentence_of(const Evidence& e, Cause cause) {
  const Sides& s = e.sides;
  switch (cause) {
    case Cause::zero_column:
      return label(e, s.left[0]) + " is 0 " + in_every_row(e) + ".";
    case Cause::empty_cell:
      return "No row used has a value other than 0 in " + label(e, s.left[0]) +
             ": its levels do not occur together.";
    case Cause::constant_column:
      return of_constant(e);
    case Cause::duplicate:
      return of_duplicate(e);
    case Cause::multiple:
      return of_conversion(e) + ": they say the same.";
    case Cause::unit_conversion:
      return of_conversion(e) + ": the same quantity on two scales.";
    case Cause::level_set:
      return of_level_set(e);
    case Cause::nested_levels:
      return of_nested(e);
    case Cause::parts_and_total:
      return label(e, s.right[0]) + " is the sum of " + listed(e, s.left) + " " + in_every_row(e) +
             ": a total beside all its parts.";
    case Cause::fixed_sum:
      return of_fixed_sum(e);
    case Cause::clock_identity:
      return of_clock(e);
    case Cause::too_few_rows:
      return of_too_few(e);
    case Cause::other:
      break;
  }
  return of_other(e);
}

std::string word_of(Cause cause) {
  constexpr std::array<const char*, 13> words = {
      "zero_column",    "constant_column", "duplicate",  "multiple",        "unit_conversion",
      "level_set",      "nested_levels",   "empty_cell", "parts_and_total", "fixed_sum",
      "clock_identity", "too_few_rows",    "other"};
  return words[static_cast<std::size_t>(cause)];
}

Relation describe(const design::Design& design, const table::Schema& schema,
                  const NullVector& vector, const std::vector<ColumnSummary>& columns,
                  std::uint64_t rows, const std::string& where) {
  const Evidence evidence{design, schema, columns, rows, sides_of(design, vector), where};
  Relation relation;
  relation.coefficients = vector;
  // The constant alone cannot be zero; a relation without columns has no story.
  relation.cause = evidence.sides.columns() == 0 ? Cause::other : cause_of(evidence);
  relation.text = equation_of(design, evidence.sides, is_difference(evidence, relation.cause));
  if (where.empty() || !speaks_of_every_row(relation.cause))
    relation.cause_text = sentence_of(evidence, relation.cause);
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    if (vector[j] != 0) relation.removable.push_back(static_cast<int>(j));
  }
  return relation;
}

}  // namespace gramproof::exact
