#include "design/marginality.hpp"

#include <algorithm>
#include <set>
#include <string>

#include "design/words.hpp"

namespace gramproof::design {
namespace {

void add_factors(const Expression& expression, std::vector<const Expression*>& factors) {
  const bool scaled =
      expression.operation == Operation::divide && columns_of(*expression.operands[1]).empty();
  const bool product =
      expression.operation == Operation::multiply || expression.operation == Operation::both;
  if (scaled || expression.operation == Operation::power) {
    std::vector<const Expression*> inside;
    add_factors(*expression.operands[0], inside);
    // The power of a single factor is itself a factor: age^2, not age.
    if (scaled || inside.size() > 1) {
      factors.insert(factors.end(), inside.begin(), inside.end());
      return;
    }
  } else if (product) {
    for (const ExpressionPtr& operand : expression.operands) add_factors(*operand, factors);
    return;
  }
  if (!columns_of(expression).empty()) factors.push_back(&expression);
}

/// The set whose bracket the factor is, or -1.
int set_of_factor(const Design& design, const DesignColumn& column, const Expression& factor) {
  for (const LevelUse& use : column.levels) {
    const int over = design.level_sets[static_cast<std::size_t>(use.set)].column;
    const bool text = factor.operation == Operation::is_level && factor.column == over &&
                      factor.level == use.level;
    const bool number = factor.operation == Operation::compare &&
                        factor.operands[0]->operation == Operation::cell &&
                        factor.operands[0]->column == over;
    if (text || number) return use.set;
  }
  return -1;
}

/// What the columns of the other terms give by themselves: texts of single columns, and level sets
/// as "levels of" a column.
struct MainEffects {
  std::set<std::string> labels;
  std::set<int> columns_by_level;
};

MainEffects main_effects(const Design& design) {
  MainEffects known;
  for (const DesignColumn& column : design.columns) {
    if (column.sources.size() != 1) continue;
    known.labels.insert(column.label);
    if (column.levels.size() != 1) continue;
    known.columns_by_level.insert(
        design.level_sets[static_cast<std::size_t>(column.levels[0].set)].column);
  }
  return known;
}

std::set<std::string> absent_factors(const Design& design, const table::Schema& schema,
                                     const DesignColumn& column, const MainEffects& known) {
  const auto factors = factors_of(*column.definition);
  std::set<std::string> absent;
  for (const Expression* factor : factors) {
    const int set = set_of_factor(design, column, *factor);
    const bool beside_all_levels =
        std::any_of(factors.begin(), factors.end(), [&](const Expression* other) {
          const int other_set = set_of_factor(design, column, *other);
          return other != factor && other_set >= 0 &&
                 !design.level_sets[static_cast<std::size_t>(other_set)].leave_one_out;
        });
    if (beside_all_levels) continue;
    if (set < 0) {
      const std::string text = canonical_text(*factor, schema);
      if (known.labels.count(text) == 0) absent.insert(text);
      continue;
    }
    const int over = design.level_sets[static_cast<std::size_t>(set)].column;
    if (known.columns_by_level.count(over) > 0) continue;
    absent.insert("levels(" +
                  quoted_if_needed(schema.columns[static_cast<std::size_t>(over)].name) + ")");
  }
  return absent;
}

}  // namespace

std::vector<const Expression*> factors_of(const Expression& expression) {
  std::vector<const Expression*> factors;
  add_factors(expression, factors);
  return factors;
}

void note_absent_main_effects(Design& design, const table::Schema& schema) {
  const MainEffects known = main_effects(design);
  for (const Term& term : design.terms) {
    std::set<std::string> absent;
    for (const int j : term.columns) {
      const DesignColumn& column = design.columns[static_cast<std::size_t>(j)];
      const bool product = column.definition->operation == Operation::multiply;
      if (!product || column.sources.size() < 2) continue;
      absent.merge(absent_factors(design, schema, column, known));
    }
    if (absent.empty()) continue;
    std::string names;
    for (const std::string& name : absent) names += (names.empty() ? "" : " and ") + name;
    design.notes.push_back({"main_effect_absent",
                            term.text + " stands without " + names +
                                ": its coefficients also take up what " + names +
                                " alone would explain.",
                            {absent.begin(), absent.end()}});
  }
}

}  // namespace gramproof::design
