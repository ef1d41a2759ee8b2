// src/exact/interval_rank.cpp
#include "exact/interval_rank.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <set>
#include <utility>

#include "design/rows.hpp"
#include "exact/interval_elimination.hpp"
#include "exact/row_choice.hpp"
#include "exact/surely_regular.hpp"

namespace gramproof::exact {
namespace {

using Outcome = IntervalElimination::Outcome;

constexpr mpfr_prec_t lowest_precision = 128, highest_precision = 2048;
/// Interval operations of 128 bits, 0.1 to 0.2 microseconds each.
constexpr double budget = 2e7;
/// Rows beyond the pivots', so that one unlucky choice does not decide.
constexpr std::size_t spare_rows = 8;

/// Rows offered to the choice: those of the exact proof, those asked for, and evenly spaced others.
std::vector<std::size_t> rows_offered(const IntervalQuestion& question, std::size_t columns) {
  std::set<std::size_t> rows(question.exact_rows.begin(), question.exact_rows.end());
  rows.insert(question.rows_to_use.begin(), question.rows_to_use.end());
  const std::size_t wanted = std::min(question.sample.rows, columns / 2 + 400);
  for (std::size_t i = 0; i < wanted; ++i) rows.insert(i * question.sample.rows / wanted);
  return {rows.begin(), rows.end()};
}

Matrix selected(const Matrix& values, const std::vector<std::size_t>& rows,
                const std::vector<int>& columns) {
  std::vector<Index> at(rows.begin(), rows.end());
  return values(at, columns);
}

struct Known {
  double middle = 0, radius = 0;
};

/// An entry as a double and a bound on its error.
Known known(const IntervalQuestion& question, const Enclosures& enclosures, int column,
            std::size_t row) {
  const design::DesignColumn& wanted = question.design.columns[static_cast<std::size_t>(column)];
  if (wanted.constant) return {1, 0};
  if (!wanted.exact) {
    const Interval value = enclosures.value(column, question.sample, row, lowest_precision);
    if (!value.is_bounded()) return {0, std::numeric_limits<double>::infinity()};
    const Interval::Disc disc = value.disc();
    return {disc.middle, disc.radius};
  }
  const mpq_class value =
      design::exact_value(*wanted.definition, question.sample, row).value_or(mpq_class(0));
  const double middle = value.get_d();
  // get_d cuts off: less than one unit in the last place, 2u.
  return {middle, value == middle ? 0 : 2 * unit_roundoff * std::abs(middle)};
}

/// A term of a relation from its enclosure; none where it is too wide to be read. `size`: log2 of
/// the largest term, against which a coefficient counts as 0.
std::optional<RoundingRelation::Term> read_term(int column, const Interval& enclosure,
                                                double column_size, double size) {
  if (!enclosure.is_bounded()) return std::nullopt;
  const double width = enclosure.log2_width();
  RoundingRelation::Term term;
  term.column = column;
  if (enclosure.holds_zero()) {
    if (width + column_size > size - bits_of_sixty_digits) return std::nullopt;
    return term;
  }
  const double known_bits = enclosure.log2_largest() - width;
  const mpq_class simple = enclosure.simplest().value();
  const auto bits = static_cast<double>(mpz_sizeinbase(simple.get_num_mpz_t(), 2) +
                                        mpz_sizeinbase(simple.get_den_mpz_t(), 2));
  // About 2^bits fractions are as simple: a number that is none of them has one in an interval this
  // narrow with a probability below 2^-64.
  if (known_bits >= bits + 64) {
    term.coefficient = simple;
    return term;
  }
  // 30 bits to spare, so that the coefficient's error is no part of a residual of 60 digits.
  if (known_bits < bits_of_sixty_digits + 30) return std::nullopt;
  term.coefficient = enclosure.middle();
  term.simple = false;
  return term;
}

class Solver {
 public:
  explicit Solver(const IntervalQuestion& question)
      : question_(question), enclosures_(question.design) {}

  IntervalRank run() {
    std::vector<int> columns = question_.exact;
    columns.insert(columns.end(), question_.inexact.begin(), question_.inexact.end());
    const std::vector<std::size_t> offered = rows_offered(question_, columns.size());
    const RowChoice choice(selected(question_.values, offered, columns), question_.exact.size());
    std::vector<int> clear, suspect, standing = question_.exact;
    for (std::size_t j = question_.exact.size(); j < columns.size(); ++j) {
      (choice.rows()[j] == RowChoice::none ? suspect : clear).push_back(columns[j]);
    }
    for (std::size_t j = question_.exact.size(); j < columns.size(); ++j) {
      if (choice.rows()[j] != RowChoice::none) continue;
      std::vector<int> few;
      for (const std::size_t p : choice.support(j)) few.push_back(columns[p]);
      look_closer(std::move(few), columns[j]);
    }
    standing.insert(standing.end(), clear.begin(), clear.end());
    if (proved_in_doubles(standing, choice, columns, offered)) {
      result_.independent = clear;
    } else {
      open_.insert(clear.begin(), clear.end());
    }
    settle_together(columns, choice, offered);
    return std::move(result_);
  }

 private:
  [[nodiscard]] bool proved_in_doubles(const std::vector<int>& standing, const RowChoice& choice,
                                       const std::vector<int>& columns,
                                       const std::vector<std::size_t>& offered) const {
    std::vector<std::size_t> rows;
    for (std::size_t j = 0; j < columns.size(); ++j) {
      if (choice.rows()[j] != RowChoice::none) rows.push_back(offered[choice.rows()[j]]);
    }
    if (rows.size() != standing.size()) return false;
    const auto n = static_cast<Index>(rows.size());
    Matrix middle(n, n), radius(n, n);
    for (Index j = 0; j < n; ++j) {
      for (Index i = 0; i < n; ++i) {
        const Known entry = known(question_, enclosures_, standing[static_cast<std::size_t>(j)],
                                  rows[static_cast<std::size_t>(i)]);
        middle(i, j) = entry.middle;
        radius(i, j) = entry.radius;
      }
    }
    return surely_regular(middle, radius);
  }

  /// One column that doubles cannot tell from a combination of a few others.
  void look_closer(std::vector<int> few, int suspect) {
    few.push_back(suspect);
    const std::vector<std::size_t> offered = rows_offered(question_, few.size());
    const RowChoice choice(selected(question_.values, offered, few), few.size());
    const std::set<int> wanted = {suspect};
    if (!eliminate(few, rows_of(choice, offered), wanted) || !related(suspect)) {
      open_.insert(suspect);
    }
  }

  /// What is left open, beside all other columns.
  void settle_together(const std::vector<int>& columns, const RowChoice& choice,
                       const std::vector<std::size_t>& offered) {
    if (open_.empty()) return;
    std::vector<int> all;
    for (const int column : columns) {
      if (!related(column)) all.push_back(column);
    }
    std::set<std::size_t> rows(question_.exact_rows.begin(), question_.exact_rows.end());
    for (const std::size_t row : rows_of(choice, offered)) rows.insert(row);
    const std::vector<int> before = std::exchange(result_.independent, {});
    const std::set<int> wanted(question_.inexact.begin(), question_.inexact.end());
    if (eliminate(all, {rows.begin(), rows.end()}, wanted)) return;
    result_.independent = before;
    result_.unsettled.assign(open_.begin(), open_.end());
  }

  [[nodiscard]] bool related(int column) const {
    return std::any_of(result_.relations.begin(), result_.relations.end(),
                       [&](const RoundingRelation& found) { return found.column == column; });
  }

  /// The rows chosen, those that must be looked at and a few more.
  [[nodiscard]] std::vector<std::size_t> rows_of(const RowChoice& choice,
                                                 const std::vector<std::size_t>& offered) const {
    std::set<std::size_t> rows(question_.rows_to_use.begin(), question_.rows_to_use.end());
    for (const std::size_t row : choice.rows()) {
      if (row != RowChoice::none) rows.insert(offered[row]);
    }
    const std::size_t enough = choice.rows().size() + spare_rows + question_.rows_to_use.size();
    for (std::size_t i = 0; i < offered.size() && rows.size() < enough; ++i) {
      rows.insert(offered[(i * 7919) % offered.size()]);
    }
    return {rows.begin(), rows.end()};
  }

  /// True when every wanted column was settled: proved independent, or related.
  bool eliminate(const std::vector<int>& columns, const std::vector<std::size_t>& rows,
                 const std::set<int>& wanted) {
    for (mpfr_prec_t bits = lowest_precision; bits <= highest_precision; bits *= 2) {
      const auto size = static_cast<double>(columns.size());
      spent_ += size * size * static_cast<double>(rows.size()) / 2 * static_cast<double>(bits) /
                lowest_precision;
      if (spent_ > budget) return false;
      if (read(eliminate_enclosures(enclosed(columns, rows, bits)), columns, wanted)) return true;
    }
    return false;
  }

  [[nodiscard]] std::vector<std::vector<Interval>> enclosed(const std::vector<int>& columns,
                                                            const std::vector<std::size_t>& rows,
                                                            mpfr_prec_t bits) const {
    std::vector<std::vector<Interval>> result;
    for (const std::size_t row : rows) {
      std::vector<Interval>& entries = result.emplace_back();
      entries.reserve(columns.size());
      for (const int column : columns) {
        entries.push_back(enclosures_.value(column, question_.sample, row, bits));
      }
    }
    return result;
  }

  /// Takes in what an elimination settles, if that is everything wanted.
  bool read(const IntervalElimination& done, const std::vector<int>& columns,
            const std::set<int>& wanted) {
    std::vector<int> independent;
    std::vector<RoundingRelation> relations;
    for (std::size_t j = 0; j < columns.size(); ++j) {
      if (done.outcomes[j] == Outcome::undecided) return false;
      if (done.outcomes[j] == Outcome::vanishes && !wanted.contains(columns[j])) return false;
      if (done.outcomes[j] == Outcome::independent && wanted.contains(columns[j])) {
        independent.push_back(columns[j]);
      }
    }
    for (const IntervalElimination::Combination& combination : done.combinations) {
      std::optional<RoundingRelation> relation = relation_of(combination, columns);
      if (!relation) return false;
      relations.push_back(std::move(*relation));
    }
    result_.independent.insert(result_.independent.end(), independent.begin(), independent.end());
    for (RoundingRelation& relation : relations) result_.relations.push_back(std::move(relation));
    return true;
  }

  [[nodiscard]] double log2_size(int column) const {
    const double largest = question_.values.col(column).cwiseAbs().maxCoeff();
    return largest == 0 ? -std::numeric_limits<double>::infinity() : std::log2(largest);
  }

  [[nodiscard]] std::optional<RoundingRelation> relation_of(
      const IntervalElimination::Combination& combination, const std::vector<int>& columns) const {
    RoundingRelation relation;
    relation.column = columns[combination.column];
    relation.terms.push_back({relation.column, -1, true});
    for (const auto& [place, enclosure] : combination.on) {
      const std::optional<RoundingRelation::Term> term = read_term(
          columns[place], enclosure, log2_size(columns[place]), log2_size(relation.column));
      if (!term) return std::nullopt;
      if (term->coefficient != 0) relation.terms.push_back(*term);
    }
    std::sort(relation.terms.begin(), relation.terms.end(),
              [](const auto& a, const auto& b) { return a.column < b.column; });
    return relation;
  }

  const IntervalQuestion& question_;
  Enclosures enclosures_;
  std::set<int> open_;  ///< columns not settled yet
  double spent_ = 0;
  IntervalRank result_;
};

}  // namespace

IntervalRank interval_rank(const IntervalQuestion& question) {
  IntervalRank result = Solver(question).run();
  mpfr_free_cache();
  return result;
}

RoundingResidual residual_of(const RoundingRelation& relation, RowEnclosures& row) {
  RoundingResidual result;
  for (mpfr_prec_t bits = 2 * lowest_precision; bits <= highest_precision; bits *= 2) {
    Interval sum(bits);
    double largest = -std::numeric_limits<double>::infinity();
    for (const RoundingRelation::Term& term : relation.terms) {
      Interval part = row.value(term.column, bits);
      part *= Interval(term.coefficient, bits);
      if (part.is_bounded()) largest = std::max(largest, part.log2_largest());
      sum += part;
    }
    if (!sum.is_bounded()) continue;
    const double limit = largest - bits_of_sixty_digits;
    result.log2_size = sum.log2_largest();
    result.holds = sum.is_zero() || result.log2_size <= limit;
    if (result.holds || sum.log2_smallest() > limit) return result;
  }
  result.holds = false;
  return result;
}

}  // namespace gramproof::exact
