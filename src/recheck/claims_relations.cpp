// Relations, what is kept, and what is beyond this checker.
#include <algorithm>
#include <set>

#include "base/text.hpp"
#include "recheck/algebra.hpp"
#include "recheck/claims.hpp"

namespace gramproof::recheck {
namespace {

/// A label for a sum: those that are sums or products themselves stand in parentheses.
std::string operand(const std::string& label) {
  const bool bracket = label.starts_with('[') && label.ends_with(']');
  if (bracket || label.find_first_of(" +-*/^") == std::string::npos) return label;
  return "(" + label + ")";
}

/// The relation from its terms; the document's own sentence is not read.
std::string equation(const Statement& stated, const StatedRelation& relation) {
  constexpr std::size_t most_terms = 12;
  std::string text;
  for (std::size_t i = 0; i < relation.terms.size() && i < most_terms; ++i) {
    const auto& [column, coefficient] = relation.terms[i];
    const mpz_class size = abs(coefficient);
    text += coefficient < 0 ? (i == 0 ? "-" : " - ") : (i == 0 ? "" : " + ");
    if (size != 1) text += size.get_str() + "*";
    text += operand(stated.columns[column].name);
  }
  if (relation.terms.size() > most_terms)
    text += " and " + grouped(relation.terms.size() - most_terms) + " terms more";
  return text + " = 0";
}

bool is_primitive(const StatedRelation& relation) {
  mpz_class divisor;
  std::set<std::size_t> columns;
  for (const auto& [column, coefficient] : relation.terms) {
    if (coefficient == 0 || !columns.insert(column).second) return false;
    divisor = gcd(divisor, coefficient);
  }
  return divisor == 1 && relation.terms.front().second > 0;
}

void claim_violations(const StatedRelation& relation, const FoundRelation& found,
                      const std::string& name, ClaimList& list) {
  std::string fault = found.faults.empty() ? "" : found.faults.front();
  std::set<std::uint64_t> rows;
  for (std::size_t i = 0; i < relation.violations.size(); ++i) {
    const std::string row = "row " + std::to_string(relation.violations[i].row);
    if (fault.empty() && !found.violation_met[i]) fault = row + " is not used";
    if (fault.empty() && !rows.insert(relation.violations[i].row).second)
      fault = row + " is listed twice";
  }
  list.add_on_rows(fault.empty(),
                   name + ": the " +
                       counted(relation.violations.size(), "violation", "violations") +
                       " listed, with file, line, residual and cells",
                   fault);
}

void claim_exception(const StatedRelation& relation, const FoundRelation& found,
                     const std::string& name, const std::string& text, ClaimList& list) {
  list.add_on_rows(
      relation.rows_holding == found.holding && relation.rows_violating == found.violating &&
          found.violating > 0,
      name + ": " + text + " in " + counted(relation.rows_holding, "row", "rows") + " and not in " +
          grouped(relation.rows_violating),
      "it holds in " + grouped(found.holding) + " and not in " + grouped(found.violating));
  list.add_on_rows(relation.largest_residual == found.largest_residual,
                   name + ": its largest residual is " + relation.largest_residual.get_str(),
                   "it is " + found.largest_residual.get_str());
  const bool enough = relation.violations.size() <= relation.rows_violating &&
                      (!relation.violations.empty() || relation.rows_violating == 0);
  list.add(enough, name + ": violations are listed, and not more than there are");
  claim_violations(relation, found, name, list);
}

/// Whether it is shown to hold in all rows used; false for one that has exceptions.
bool claim_relation(const Statement& stated, const StatedRelation& relation,
                    const FoundRelation& found, ClaimList& list) {
  const std::string name = "relation " + std::to_string(relation.number);
  const std::string text = equation(stated, relation);
  if (relation.terms.empty()) return list.add(false, name + " has terms");
  if (!found.rational) {
    list.not_checked(name + ": " + text + ", not rational");
    return false;
  }
  list.add(is_primitive(relation),
           name + ": its coefficients are whole, without common divisor, the first positive");
  if (relation.except) {
    claim_exception(relation, found, name, text, list);
    return false;
  }
  return list.add_on_rows(
      found.violating == 0 && relation.rows_holding == found.holding &&
          relation.rows_violating == 0 && relation.violations.empty() &&
          relation.largest_residual == 0,
      name + ": " + text + " in all " + counted(relation.rows_holding, "row", "rows") + " used",
      found.violating == 0
          ? "it holds in " + grouped(found.holding)
          : "it fails in " + grouped(found.violating) + ", first in " + found.first_violation);
}

/// Coefficients of the exact relations, one row each; `columns`: only these, in this order.
std::vector<std::vector<mpz_class>> coefficients(const Statement& stated,
                                                 const std::vector<std::size_t>& columns) {
  std::vector<std::vector<mpz_class>> rows;
  for (const StatedRelation& relation : stated.relations) {
    if (relation.except) continue;
    std::vector<mpz_class> all(stated.columns.size()), some;
    for (const auto& [column, coefficient] : relation.terms) all[column] += coefficient;
    for (const std::size_t column : columns) some.push_back(all[column]);
    rows.push_back(std::move(some));
  }
  return rows;
}

std::vector<std::size_t> all_columns(const Statement& stated) {
  std::vector<std::size_t> columns(stated.columns.size());
  for (std::size_t i = 0; i < columns.size(); ++i) columns[i] = i;
  return columns;
}

/// `hold`: the exact relations are shown to hold.
void claim_upper_bound(const Statement& stated, bool hold, ClaimList& list) {
  const auto rows = coefficients(stated, all_columns(stated));
  const std::string relations = counted(rows.size(), "exact relation", "exact relations");
  const bool independent = list.add(
      rank_of(rows) == rows.size(),
      "the " + relations + " listed " + (rows.size() == 1 ? "is" : "are") + " independent");
  const bool complete =
      list.add(rows.size() + stated.omitted == stated.nullity,
               relations + " listed and " + grouped(stated.omitted) + " omitted are the nullity",
               "that is " + grouped(stated.nullity));
  const std::string bound = "the rank is at most " + grouped(stated.rank);
  if (stated.omitted > 0) return list.not_checked(bound + ", since relations are omitted");
  list.add_on_rows(
      hold && independent && complete && stated.rank + stated.nullity == stated.columns.size(),
      bound, "what it rests on is not upheld");
}

void claim_lost(const Statement& stated, ClaimList& list) {
  const std::string claim = "coefficients lost are those of the columns in an exact relation";
  if (stated.omitted > 0 || stated.other_relations.contains("within_rounding"))
    return list.not_checked(claim);
  std::set<std::string> names;
  for (const StatedRelation& relation : stated.relations) {
    if (relation.except) continue;
    for (const auto& term : relation.terms) names.insert(stated.columns[term.first].name);
  }
  list.add(names == std::set<std::string>(stated.lost.begin(), stated.lost.end()), claim);
}

/// Places of the named columns; false where a name is unknown or comes twice.
bool places_of(const Statement& stated, const std::vector<std::string>& names,
               std::set<std::size_t>& places) {
  for (const std::string& name : names) {
    const auto found =
        std::find_if(stated.columns.begin(), stated.columns.end(),
                     [&](const StatedColumn& column) { return column.name == name; });
    if (found == stated.columns.end()) return false;
    if (!places.insert(static_cast<std::size_t>(found - stated.columns.begin())).second)
      return false;
  }
  return true;
}

/// All columns kept whose values are rational are among the certificate's.
bool kept_is_certified(const Statement& stated) {
  if (!stated.certificate) return false;
  const auto& columns = stated.certificate->columns;
  const std::set<std::size_t> certified(columns.begin(), columns.end());
  std::set<std::size_t> kept;
  return places_of(stated, stated.kept, kept) &&
         std::all_of(kept.begin(), kept.end(), [&](std::size_t column) {
           return !stated.columns[column].rational() || certified.contains(column);
         });
}

/// With a basis N of the null space, the columns kept are independent if and only if N restricted
/// to those left out has full row rank: else some combination of its rows holds among the kept
/// alone. Where N is not listed in full, the certificate may show it.
void claim_independence(const Statement& stated, bool certified,
                        const std::set<std::size_t>& left_out, ClaimList& list) {
  const bool all_rational =
      std::all_of(stated.columns.begin(), stated.columns.end(),
                  [](const StatedColumn& column) { return column.rational(); });
  std::string claim = std::string("the columns kept") +
                      (all_rational ? "" : " without log, sqrt, exp or asinh") + " are independent";
  if (stated.omitted > 0) {
    if (!certified || !kept_is_certified(stated))
      return list.not_checked(claim + ", since relations are omitted");
    list.add_on_rows(true, claim);
    return;
  }
  if (left_out.size() == stated.nullity) claim += ", and give those left out";
  const auto rows = coefficients(stated, {left_out.begin(), left_out.end()});
  list.add_on_rows(rows.size() == stated.nullity && rank_of(rows) == rows.size(), claim);
}

}  // namespace

void claim_relations(const Statement& stated, const Found& found, ClaimList& list) {
  bool hold = true;
  for (std::size_t i = 0; i < stated.relations.size(); ++i) {
    const bool here = claim_relation(stated, stated.relations[i], found.relations[i], list);
    hold = hold && (here || stated.relations[i].except);
  }
  claim_upper_bound(stated, hold, list);
}

void claim_choice(const Statement& stated, bool certified, ClaimList& list) {
  std::set<std::size_t> both;
  const bool parts = places_of(stated, stated.kept, both) &&
                     places_of(stated, stated.left_out, both) &&
                     both.size() == stated.columns.size();
  list.add(parts && stated.kept.size() == stated.numerical && stated.numerical <= stated.rank,
           counted(stated.kept.size(), "column", "columns") + " kept and " +
               grouped(stated.left_out.size()) +
               " left out are the design, and the kept as many as " +
               (stated.numerical == stated.rank ? "the rank" : "the rank within rounding"));
  std::set<std::size_t> left_out;
  places_of(stated, stated.left_out, left_out);
  claim_independence(stated, certified, left_out, list);
  claim_lost(stated, list);
  const bool fails = stated.identified == "fail", singular = stated.overall == "singular";
  list.add(fails == (stated.nullity > 0) && singular == fails,
           std::string("the design is ") + (singular ? "" : "not ") +
               "singular, and the grade of `identified` is " + stated.identified);
}

void say_what_was_not_checked(const Statement& stated, ClaimList& list) {
  for (const auto& [standing, count] : stated.other_relations)
    list.not_checked(counted(count, "relation", "relations") + " of standing " + standing +
                     ": approximate, or resting on intervals");
  std::string names;
  for (const StatedColumn& column : stated.columns) {
    if (!column.rational()) names += (names.empty() ? "" : ", ") + column.name;
  }
  if (!names.empty())
    list.not_checked("values of columns with log, sqrt, exp or asinh, or without definition: " +
                     names);
  if (stated.numerical != stated.rank) list.not_checked("the rank within rounding");
  if (stated.rank_of_the_doubles) list.not_checked("the rank of the doubles");
  list.not_checked(counted(stated.figures, "figure", "figures") +
                   " in floating point, and every grade, sentence and cause that rests on them");
  list.not_checked(
      "definitions, the row filter and the columns that must be present: taken as given");
}

}  // namespace gramproof::recheck
