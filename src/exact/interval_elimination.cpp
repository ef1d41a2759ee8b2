// src/exact/interval_elimination.cpp
#include "exact/interval_elimination.hpp"

#include <algorithm>
#include <limits>

namespace gramproof::exact {
namespace {

using Rows = std::vector<std::vector<Interval>>;
constexpr std::size_t nowhere = std::numeric_limits<std::size_t>::max();
constexpr double nothing = -std::numeric_limits<double>::infinity();

class Eliminator {
 public:
  explicit Eliminator(Rows rows)
      : rows_(std::move(rows)), columns_(rows_.empty() ? 0 : rows_.front().size()) {}

  IntervalElimination run() {
    for (std::size_t j = 0; j < columns_; ++j) scales_.push_back(largest(j, 0));
    for (std::size_t j = 0; j < columns_; ++j) take(j);
    return std::move(result_);
  }

 private:
  using Outcome = IntervalElimination::Outcome;

  /// Rows from pivots_.size() on are free; pivot rows stand before them in order.
  void take(std::size_t j) {
    const std::size_t row = best_row(j);
    if (row != nowhere) {
      std::swap(rows_[row], rows_[pivots_.size()]);
      clear_below(pivots_.size(), j);
      pivots_.push_back(j);
      result_.outcomes.push_back(Outcome::independent);
      return;
    }
    const bool any_row = pivots_.size() < rows_.size();
    if (!any_row || largest(j, pivots_.size()) > scales_[j] - bits_of_sixty_digits) {
      result_.outcomes.push_back(Outcome::undecided);
      return;
    }
    result_.outcomes.push_back(Outcome::vanishes);
    result_.combinations.push_back(combination(j));
  }

  [[nodiscard]] std::size_t best_row(std::size_t j) const {
    std::size_t best = nowhere;
    double size = nothing;
    for (std::size_t i = pivots_.size(); i < rows_.size(); ++i) {
      const double here = rows_[i][j].log2_smallest();
      if (here <= size) continue;
      best = i;
      size = here;
    }
    return best;
  }

  [[nodiscard]] double largest(std::size_t j, std::size_t from) const {
    double size = nothing;
    for (std::size_t i = from; i < rows_.size(); ++i) {
      size = std::max(size, rows_[i][j].is_bounded() ? rows_[i][j].log2_largest()
                                                     : std::numeric_limits<double>::infinity());
    }
    return size;
  }

  void clear_below(std::size_t pivot, std::size_t j) {
    Interval space(rows_[pivot][j].precision());
    for (std::size_t i = pivot + 1; i < rows_.size(); ++i) {
      if (rows_[i][j].is_zero()) continue;
      Interval factor = rows_[i][j];
      factor /= rows_[pivot][j];
      for (std::size_t k = j + 1; k < columns_; ++k) {
        if (rows_[pivot][k].is_zero()) continue;
        rows_[i][k].subtract_product(factor, rows_[pivot][k], space);
      }
    }
  }

  /// Back substitution in the pivot rows.
  [[nodiscard]] IntervalElimination::Combination combination(std::size_t j) const {
    IntervalElimination::Combination found;
    found.column = j;
    for (std::size_t p = pivots_.size(); p-- > 0;) {
      Interval value = rows_[p][j];
      Interval space(value.precision());
      for (const auto& [column, coefficient] : found.on) {
        if (rows_[p][column].is_zero()) continue;
        value.subtract_product(rows_[p][column], coefficient, space);
      }
      value /= rows_[p][pivots_[p]];
      found.on.emplace_back(pivots_[p], std::move(value));
    }
    std::reverse(found.on.begin(), found.on.end());
    return found;
  }

  Rows rows_;
  std::size_t columns_;
  std::vector<double> scales_;       ///< log2 of each column's largest value
  std::vector<std::size_t> pivots_;  ///< columns
  IntervalElimination result_;
};

}  // namespace

IntervalElimination eliminate_enclosures(std::vector<std::vector<Interval>> rows) {
  return Eliminator(std::move(rows)).run();
}

}  // namespace gramproof::exact
