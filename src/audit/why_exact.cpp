// What follows from the exact relations: integers and fractions only.
#include <algorithm>
#include <cmath>
#include <numeric>

#include "audit/why.hpp"
#include "design/bind.hpp"
#include "design/rows.hpp"
#include "exact/relations.hpp"
#include "factor/spectrum.hpp"

namespace gramproof::audit {
namespace {

constexpr std::size_t most_further_relations = 5;

bool contains(const std::vector<int>& columns, int column) {
  return std::find(columns.begin(), columns.end(), column) != columns.end();
}

bool by_column(const std::pair<int, mpq_class>& a, const std::pair<int, mpq_class>& b) {
  return a.first < b.first;
}

bool is_left_out_unproved(const Audit& audit, int column) {
  return contains(audit.left_out, column) && !in_exact_relation(audit, column);
}

bool is_through(const RelationFinding& relation, int column) {
  return std::any_of(relation.terms.begin(), relation.terms.end(),
                     [column](const RelationTerm& term) { return term.column == column; });
}

std::vector<int> columns_of(const std::vector<exact::Combination>& combinations) {
  std::vector<int> columns;
  for (const exact::Combination& combination : combinations) columns.push_back(combination.column);
  std::sort(columns.begin(), columns.end());
  return columns;
}

/// The relation of a vector that is not among those listed, which are at most 50.
RelationFinding unlisted(const Audit& audit, const exact::NullVector& vector) {
  RelationFinding finding;
  finding.text = exact::equation(audit.design, vector);
  for (std::size_t j = 0; j < audit.design.columns.size(); ++j) {
    if (vector[j] == 0) continue;
    finding.terms.push_back({static_cast<int>(j), vector[j].get_str(), vector[j].get_d()});
    if (audit.design.columns[j].role != design::Role::protect)
      finding.removable.push_back(static_cast<int>(j));
  }
  finding.rows_holding = audit.rows_used;
  finding.largest_residual = "0";
  return finding;
}

RelationFinding from_null_space(const Audit& audit, int column) {
  for (const exact::NullVector& vector : exact::readable_basis(audit.design, audit.null_space)) {
    if (vector[static_cast<std::size_t>(column)] != 0) return unlisted(audit, vector);
  }
  return {};  // not reached: a basis of the relations has one through every column involved
}

/// Listed relations are ordered by number of columns: the first is the shortest.
void fill_relations(const Audit& audit, int column, Dependence& found) {
  std::vector<const RelationFinding*> through;
  for (const RelationFinding& relation : audit.relations) {
    if (relation.standing == Standing::exact && is_through(relation, column))
      through.push_back(&relation);
  }
  found.relation = through.empty() ? from_null_space(audit, column) : *through.front();
  for (std::size_t i = 1; i < through.size(); ++i) {
    if (found.further.size() < most_further_relations) {
      found.further.push_back(*through[i]);
    } else {
      ++found.further_omitted;
    }
  }
}

/// First the column itself, then those that gramproof keeps last.
std::vector<int> leaving_first(int column, const std::vector<int>& keeping) {
  std::vector<int> preference = {column};
  for (auto at = keeping.rbegin(); at != keeping.rend(); ++at) {
    if (*at != column) preference.push_back(*at);
  }
  return preference;
}

Choice choice_of(const Audit& audit, const std::vector<exact::Combination>& combinations) {
  Choice choice;
  choice.without = columns_of(combinations);
  for (std::size_t j = 0; j < audit.design.columns.size(); ++j) {
    const int column = static_cast<int>(j);
    // A column left out for another reason is in no exact relation that could tell what takes its
    // place.
    if (contains(choice.without, column) || is_left_out_unproved(audit, column)) continue;
    Estimand estimand{column, {}};
    for (const exact::Combination& combination : combinations) {
      const mpq_class factor = exact::coefficient_of(combination.parts, column);
      if (factor != 0) estimand.carries.emplace_back(combination.column, factor);
    }
    if (estimand.carries.empty()) {
      choice.untouched.push_back(column);
      continue;
    }
    std::sort(estimand.carries.begin(), estimand.carries.end(), by_column);
    choice.changed.push_back(std::move(estimand));
  }
  return choice;
}

/// What a sum over kept coefficients estimates: each of them stands for itself and what it carries.
exact::LinearForm estimated_by(const exact::LinearForm& on_kept,
                               const std::vector<Estimand>& changed, std::size_t columns) {
  std::vector<mpq_class> sum(columns, 0);
  for (const auto& [column, factor] : on_kept) {
    sum[static_cast<std::size_t>(column)] += factor;
    const auto at = std::find_if(changed.begin(), changed.end(),
                                 [c = column](const Estimand& e) { return e.column == c; });
    if (at == changed.end()) continue;
    for (const auto& [carried, times] : at->carries)
      sum[static_cast<std::size_t>(carried)] += factor * times;
  }
  exact::LinearForm form;
  for (std::size_t j = 0; j < columns; ++j) {
    if (sum[j] != 0) form.emplace_back(static_cast<int>(j), sum[j]);
  }
  return form;
}

mpq_class along(const exact::LinearForm& form, const exact::NullVector& relation) {
  mpq_class product = 0;
  for (const auto& [column, factor] : form)
    product += factor * relation[static_cast<std::size_t>(column)];
  return product;
}

/// A relation that is not orthogonal to the sum, "" if there is none: one that is listed before one
/// that nobody made readable.
std::string blocking_relation(const Audit& audit, const exact::LinearForm& asked) {
  const auto in_the_way = [&](const exact::NullVector& relation) {
    return along(asked, relation) != 0;
  };
  const auto any = std::find_if(audit.null_space.begin(), audit.null_space.end(), in_the_way);
  if (any == audit.null_space.end()) return "";
  for (const RelationFinding& listed : audit.relations) {
    if (listed.standing != Standing::exact) continue;
    exact::NullVector relation(audit.design.columns.size() + 1, 0);
    for (const RelationTerm& term : listed.terms)
      relation[static_cast<std::size_t>(term.column)] = exact::Integer(term.exact);
    if (in_the_way(relation)) return listed.text;
  }
  return exact::equation(audit.design, *any);
}

/// Remainders that differ by less than a part in 10^9 tie, as those of a and b beside a + b do, and
/// all columns of unit length at the start: of equal ones the first as written comes first.
/// Rounding moves a remainder by 2^-53 of the column, which could decide only where less than 10^-7
/// of the column is left.
void favour_the_first(Matrix& columns) {
  for (Index j = 0; j < columns.cols(); ++j) columns.col(j) *= 1 - 0x1p-30 * static_cast<double>(j);
}

/// Design columns by what each adds, in the columns' own units or with unit length.
std::vector<int> pivots_of(const factor::Factor& factor, std::size_t columns, bool unit_length) {
  std::vector<int> all(columns);
  std::iota(all.begin(), all.end(), 0);
  const factor::Factor design = factor::select(factor, all);
  Matrix scaled = unit_length ? factor::unit_length(design) : design.r;
  if (!unit_length) {
    // One shift for all columns keeps their sizes against each other; what is 2^1000 times smaller
    // than the rest may become 0, and comes last either way.
    const int largest = *std::max_element(design.exponents.begin(), design.exponents.end());
    for (Index j = 0; j < scaled.cols(); ++j) {
      const int exponent = design.exponents[static_cast<std::size_t>(j)] - largest;
      for (Index i = 0; i < scaled.rows(); ++i) scaled(i, j) = std::ldexp(scaled(i, j), exponent);
    }
  }
  favour_the_first(scaled);
  return factor::pivot_order(scaled);
}

HabitOutcome outcome(const Audit& audit, Habit habit, std::vector<int> keep_first) {
  std::reverse(keep_first.begin(), keep_first.end());
  return {habit, columns_of(exact::leave_out(audit.null_space, keep_first))};
}

}  // namespace

bool in_exact_relation(const Audit& audit, int column) {
  return std::any_of(audit.null_space.begin(), audit.null_space.end(),
                     [column](const auto& v) { return v[static_cast<std::size_t>(column)] != 0; });
}

Dependence dependence_of(const Audit& audit, int column, const std::vector<int>& keeping) {
  Dependence found;
  fill_relations(audit, column, found);
  found.since = exact::dependent_since(audit.null_space, column);
  found.left_out = contains(audit.left_out, column);
  const std::vector<exact::Combination> combinations =
      exact::leave_out(audit.null_space, leaving_first(column, keeping));
  found.choice = choice_of(audit, combinations);
  found.parts = combinations.front().parts;
  for (const auto& [part, factor] : found.parts) {
    if (audit.design.columns[static_cast<std::size_t>(part)].role != design::Role::protect)
      found.instead.push_back(part);
  }
  return found;
}

Choice own_choice(const Audit& audit, const std::vector<int>& keeping) {
  return choice_of(audit, exact::leave_out(audit.null_space, {keeping.rbegin(), keeping.rend()}));
}

Result<WhyContrast> contrast_under(const Audit& audit, const Choice& choice,
                                   const std::string& text) {
  Result<std::vector<design::ContrastPart>> parts =
      design::parse_contrast(text, audit.design, audit.schema);
  if (!parts) return parts.error();
  exact::LinearForm asked;
  for (const design::ContrastPart& part : parts.value()) {
    const mpq_class factor = design::exact_number(part.number);
    if (factor != 0) asked.emplace_back(part.column, factor);
  }
  std::sort(asked.begin(), asked.end(), by_column);
  WhyContrast contrast;
  contrast.text = text;
  contrast.blocking_relation = blocking_relation(audit, asked);
  contrast.estimable = contrast.blocking_relation.empty();
  for (const auto& term : asked) {
    if (!contains(choice.without, term.first)) contrast.on_kept.push_back(term);
  }
  contrast.estimates = estimated_by(contrast.on_kept, choice.changed, audit.design.columns.size());
  return contrast;
}

std::vector<HabitOutcome> outcomes_of_habits(const Audit& audit, const std::vector<int>& keeping,
                                             const factor::Factor& factor) {
  const std::size_t columns = audit.design.columns.size();
  std::vector<int> as_written(columns);
  std::iota(as_written.begin(), as_written.end(), 0);
  const std::vector<int> backwards(as_written.rbegin(), as_written.rend());
  return {outcome(audit, Habit::first_kept, as_written),
          outcome(audit, Habit::last_kept, backwards),
          outcome(audit, Habit::largest_raw, pivots_of(factor, columns, false)),
          outcome(audit, Habit::largest_unit, pivots_of(factor, columns, true)),
          outcome(audit, Habit::gramproof, keeping)};
}

}  // namespace gramproof::audit
