#include "audit/exceptions.hpp"

#include <algorithm>
#include <optional>
#include <set>

#include "audit/rare_levels.hpp"
#include "audit/violations.hpp"
#include "exact/hidden_relations.hpp"
#include "exact/relations.hpp"

namespace gramproof::audit {
namespace {

using exact::NullVector;

/// Vectors that one pass tests: far more than a report lists.
constexpr std::size_t most_tested = 100;

std::uint64_t most_violating(std::uint64_t rows) {
  return std::max<std::uint64_t>(5, rows / 100);
}

/// What is left of a relation once columns that are zero in all but `rows` rows are set aside: the
/// columns that really relate.
std::vector<int> relating_columns(const ExceptionSearch& search, const NullVector& vector,
                                  std::uint64_t rows) {
  std::vector<int> result;
  for (std::size_t j = 0; j < search.design.columns.size(); ++j) {
    if (vector[j] != 0 && search.digest.columns[j].nonzero_rows > rows)
      result.push_back(static_cast<int>(j));
  }
  return result;
}

/// The constant against 0/1 columns that all have the same coefficient: the violating rows are
/// those of a level left out.
bool is_complement_of_columns(const ExceptionSearch& search, const NullVector& vector,
                              const std::vector<int>& columns, const scan::TestedVector& tested) {
  const mpz_class* constant = nullptr;
  for (const int j : columns) {
    if (search.design.columns[static_cast<std::size_t>(j)].constant)
      constant = &vector[static_cast<std::size_t>(j)];
  }
  if (constant == nullptr) return false;
  // In a row of a level left out every 0/1 column is 0, so that only the constant is left.
  const auto is_constant_alone = [&](const mpq_class& residual) { return residual == *constant; };
  if (!std::all_of(tested.residuals.begin(), tested.residuals.end(), is_constant_alone))
    return false;
  return std::all_of(columns.begin(), columns.end(), [&](int j) {
    const auto at = static_cast<std::size_t>(j);
    const design::DesignColumn& column = search.design.columns[at];
    return column.constant || (column.zero_one && vector[at] == -*constant);
  });
}

bool uses_set(const design::DesignColumn& column, int set) {
  return std::any_of(column.levels.begin(), column.levels.end(),
                     [set](const design::LevelUse& use) { return use.set == set; });
}

/// Levels of the set that no column of the design carries.
std::vector<std::size_t> levels_without_column(const ExceptionSearch& search, std::size_t set) {
  std::set<int> carried;
  for (const design::DesignColumn& column : search.design.columns) {
    for (const design::LevelUse& use : column.levels) {
      if (use.set == static_cast<int>(set)) carried.insert(use.level);
    }
  }
  std::vector<std::size_t> levels;
  for (std::size_t level = 0; level < search.digest.level_counts[set].size(); ++level) {
    if (!carried.contains(static_cast<int>(level))) levels.push_back(level);
  }
  return levels;
}

/// A column that is the sum of its products with the levels of one set, but for the rows of the
/// level left out.
struct Complement {
  int column = -1;
  std::size_t set = 0;
};

std::optional<Complement> complement_of_levels(const ExceptionSearch& search,
                                               const NullVector& vector,
                                               const std::vector<int>& columns) {
  for (std::size_t set = 0; set < search.design.level_sets.size(); ++set) {
    std::vector<int> with, without;
    for (const int j : columns) {
      const auto& column = search.design.columns[static_cast<std::size_t>(j)];
      (uses_set(column, static_cast<int>(set)) ? with : without).push_back(j);
    }
    if (without.size() != 1 || with.empty()) continue;
    const mpz_class& whole = vector[static_cast<std::size_t>(without.front())];
    const bool same = std::all_of(with.begin(), with.end(), [&](int j) {
      return vector[static_cast<std::size_t>(j)] == -whole;
    });
    if (same) return Complement{without.front(), set};
  }
  return std::nullopt;
}

/// The cell as a rare level; none where the level left out is rare altogether and told of already.
std::optional<RareLevel> rare_cell(const ExceptionSearch& search, const Complement& complement,
                                   const std::vector<int>& columns, std::uint64_t rows) {
  const std::vector<std::size_t> levels = levels_without_column(search, complement.set);
  std::uint64_t in_all = 0;
  for (const std::size_t level : levels)
    in_all += search.digest.level_counts[complement.set][level];
  if (in_all < rare_below) return std::nullopt;
  const auto column = static_cast<std::size_t>(search.design.level_sets[complement.set].column);
  const table::ColumnFacts& facts = search.schema.columns[column];
  std::string label = search.design.columns[static_cast<std::size_t>(complement.column)].label;
  label += levels.size() == 1
               ? " * [" + facts.name + " = " + facts.levels[levels.front()].text + "]"
               : " in the levels of " + facts.name + " without a column";
  return RareLevel{label, -1, rows, columns};
}

bool is_relation(const ExceptionSearch& search, const NullVector& vector,
                 const scan::TestedVector& tested) {
  if (tested.violating == 0 || tested.violating > most_violating(tested.speaking)) return false;
  const std::vector<int> columns = relating_columns(search, vector, tested.violating);
  if (columns.size() < 2 || tested.speaking - tested.violating < 10 * columns.size()) return false;
  return !is_complement_of_columns(search, vector, columns, tested);
}

std::vector<NullVector> resting_on_one_row(const ExceptionSearch& search) {
  std::vector<NullVector> vectors;
  for (const std::size_t row : exact::essential_rows(
           search.design, search.digest.sample, search.rank, search.digest.random_combination)) {
    NullVector vector =
        exact::relation_without_row(search.design, search.digest.sample, search.rank, row);
    // A level that rests on this row alone needs no pass: the vector is that column.
    if (relating_columns(search, vector, 1).size() >= 2) vectors.push_back(std::move(vector));
  }
  return vectors;
}

std::size_t columns_in(const NullVector& vector) {
  return exact::support_of(vector).size();
}

/// Fewer columns by adding exact relations, which changes no residual: `total = parts` where
/// another column repeats a part.
NullVector shortened(NullVector vector, const std::vector<NullVector>& null_space) {
  bool changed = true;
  while (changed) {
    changed = false;
    for (const NullVector& relation : null_space) {
      for (std::size_t j = 0; j < vector.size(); ++j) {
        if (vector[j] == 0 || relation[j] == 0) continue;
        NullVector next(vector.size());
        for (std::size_t i = 0; i < vector.size(); ++i)
          next[i] = vector[i] * relation[j] - relation[i] * vector[j];
        if (columns_in(next) >= columns_in(vector)) continue;
        exact::make_primitive(next);
        vector = std::move(next);
        changed = true;
      }
    }
  }
  return vector;
}

/// Positions of the vectors that do not follow from the exact relations and from those before them,
/// columns that are zero in all but a few rows set aside.
std::vector<std::size_t> independent_ones(const ExceptionSearch& search,
                                          const std::vector<NullVector>& vectors) {
  const std::size_t known = search.null_space.size();
  std::vector<NullVector> all = search.null_space;
  all.insert(all.end(), vectors.begin(), vectors.end());
  exact::ExactRows entries;
  for (std::size_t j = 0; j < search.design.columns.size(); ++j) {
    if (search.digest.columns[j].nonzero_rows <= most_violating(search.digest.rows_used)) continue;
    std::vector<exact::Integer> row;
    for (const NullVector& vector : all) row.push_back(vector[j]);
    entries.rows.push_back(std::move(row));
    entries.number.push_back(j);
  }
  std::vector<int> order;
  for (std::size_t i = 0; i < all.size(); ++i) order.push_back(static_cast<int>(i));
  std::vector<std::size_t> result;
  for (const int i : exact::rank_of_sample(entries, order).pivot_columns) {
    if (static_cast<std::size_t>(i) >= known) result.push_back(static_cast<std::size_t>(i) - known);
  }
  return result;
}

/// Adds the vectors that are not there yet and have two columns that really relate.
void add_fresh(const ExceptionSearch& search, std::vector<NullVector> more,
               std::vector<NullVector>& vectors) {
  for (NullVector& vector : more) {
    if (vectors.size() == most_tested) return;
    NullVector shorter = shortened(std::move(vector), search.null_space);
    if (relating_columns(search, shorter, 1).size() < 2) continue;
    if (std::find(vectors.begin(), vectors.end(), shorter) == vectors.end())
      vectors.push_back(std::move(shorter));
  }
}

/// What the single rows and the random row sets suggest, and the readable combinations of it: null
/// vectors come in a form that mixes two relations.
std::vector<NullVector> candidates(const ExceptionSearch& search, Exceptions& result) {
  exact::HiddenSearch hidden;
  hidden.columns = search.rank.pivot_columns;
  hidden.rows_used = search.digest.rows_used;
  hidden.most_violating = most_violating(search.digest.rows_used);
  exact::HiddenRelations found =
      exact::hidden_relations(search.design, search.digest.sample, hidden);
  result.chance_of_a_miss = found.chance_of_a_miss;
  std::vector<NullVector> vectors;
  add_fresh(search, resting_on_one_row(search), vectors);
  add_fresh(search, std::move(found.vectors), vectors);
  std::vector<NullVector> independent;
  for (const std::size_t i : independent_ones(search, vectors)) independent.push_back(vectors[i]);
  if (independent.size() > 1)
    add_fresh(search, exact::readable_basis(search.design, independent), vectors);
  return vectors;
}

RelationFinding finding_of(const ExceptionSearch& search, const NullVector& vector,
                           const scan::TestedVector& test) {
  RelationFinding finding = exact_terms(vector, search.design.columns.size());
  finding.standing = Standing::exact_except;
  const exact::Relation relation =
      exact::describe(search.design, search.schema, vector, summaries_of(search.digest.columns),
                      test.holding, "in all other rows");
  finding.text = relation.text;
  finding.cause_kind = exact::word_of(relation.cause);
  finding.cause_text = relation.cause_text;
  finding.rows_holding = test.holding;
  finding.rows_violating = test.violating;
  finding.largest_residual = residual_text(test.largest_residual);
  finding.largest_residual_value = test.largest_residual.get_d();
  for (const RelationTerm& term : finding.terms) finding.removable.push_back(term.column);
  finding.violations = violations_of(search.design, search.schema, search.file_names, vector, test);
  return finding;
}

}  // namespace

RelationFinding exact_terms(const NullVector& vector, std::size_t columns) {
  RelationFinding finding;
  for (std::size_t j = 0; j < columns; ++j) {
    if (vector[j] == 0) continue;
    finding.terms.push_back({static_cast<int>(j), vector[j].get_str(), vector[j].get_d()});
  }
  return finding;
}

Result<Exceptions> relations_but_for_rows(const ExceptionSearch& search, Prover& prover) {
  Exceptions result;
  if (search.digest.rows_used < 5 * search.design.columns.size()) return result;
  const std::vector<NullVector> tried = candidates(search, result);
  if (tried.empty()) return result;
  Result<std::vector<scan::TestedVector>> tested = prover.test(tried);
  if (!tested) return tested.error();
  std::vector<std::size_t> worth;
  for (std::size_t i = 0; i < tried.size(); ++i) {
    const scan::TestedVector& test = tested.value()[i];
    if (!is_relation(search, tried[i], test)) continue;
    const std::vector<int> columns = relating_columns(search, tried[i], test.violating);
    const auto complement = complement_of_levels(search, tried[i], columns);
    if (!complement || test.violating >= rare_below) {
      worth.push_back(i);
      continue;
    }
    if (auto cell = rare_cell(search, *complement, columns, test.violating))
      result.rare_cells.push_back(std::move(*cell));
  }
  std::stable_sort(worth.begin(), worth.end(), [&](std::size_t a, std::size_t b) {
    return std::pair(tested.value()[a].violating, columns_in(tried[a])) <
           std::pair(tested.value()[b].violating, columns_in(tried[b]));
  });
  std::vector<NullVector> sorted;
  for (const std::size_t i : worth) sorted.push_back(tried[i]);
  for (const std::size_t i : independent_ones(search, sorted))
    result.relations.push_back(finding_of(search, sorted[i], tested.value()[worth[i]]));
  std::stable_sort(result.relations.begin(), result.relations.end(),
                   [](const RelationFinding& a, const RelationFinding& b) {
                     const auto key = [](const RelationFinding& f) {
                       std::vector<int> columns;
                       for (const RelationTerm& term : f.terms) columns.push_back(term.column);
                       return std::pair(f.terms.size(), columns);
                     };
                     return key(a) < key(b);
                   });
  return result;
}

}  // namespace gramproof::audit
