// src/exact/row_choice.cpp
#include "exact/row_choice.hpp"

#include <algorithm>
#include <cmath>

namespace gramproof::exact {

RowChoice::RowChoice(Matrix values, std::size_t always) : left_(std::move(values)) {
  std::vector<Index> free(static_cast<std::size_t>(left_.rows()));
  for (std::size_t i = 0; i < free.size(); ++i) free[i] = static_cast<Index>(i);
  for (Index j = 0; j < left_.cols(); ++j) {
    const double largest = left_.col(j).cwiseAbs().maxCoeff();
    if (largest > 0) left_.col(j) /= largest;
  }
  for (Index j = 0; j < left_.cols(); ++j) {
    const auto best = std::max_element(free.begin(), free.end(), [&](Index a, Index b) {
      return std::abs(left_(a, j)) < std::abs(left_(b, j));
    });
    const bool wanted = static_cast<std::size_t>(j) < always ||
                        (best != free.end() && std::abs(left_(*best, j)) >= smallest_remainder);
    if (best == free.end() || !wanted || left_(*best, j) == 0) {
      rows_.push_back(none);
      continue;
    }
    const Index pivot = *best;
    rows_.push_back(static_cast<std::size_t>(pivot));
    free.erase(best);
    const Index later = left_.cols() - j - 1;
    // The factors of rows that are pivots already are 0, so that one update serves all rows.
    Vector factors = Vector::Zero(left_.rows());
    for (const Index i : free) factors[i] = left_(i, j) / left_(pivot, j);
    const Eigen::RowVectorXd row = left_.row(pivot).tail(later);
    for (Index k = 0; k < later; ++k) {
      if (row[k] != 0) left_.col(j + 1 + k).noalias() -= row[k] * factors;
    }
  }
}

std::vector<std::size_t> RowChoice::support(std::size_t j) const {
  std::vector<std::size_t> pivots, result;
  for (std::size_t p = 0; p < j; ++p) {
    if (rows_[p] != none) pivots.push_back(p);
  }
  Vector coefficients = Vector::Zero(static_cast<Index>(pivots.size()));
  for (std::size_t p = pivots.size(); p-- > 0;) {
    const auto row = static_cast<Index>(rows_[pivots[p]]);
    double value = left_(row, static_cast<Index>(j));
    for (std::size_t q = p + 1; q < pivots.size(); ++q) {
      value -= left_(row, static_cast<Index>(pivots[q])) * coefficients[static_cast<Index>(q)];
    }
    coefficients[static_cast<Index>(p)] = value / left_(row, static_cast<Index>(pivots[p]));
  }
  if (pivots.empty()) return result;
  // A wrong guess costs time only: what is named here is proved or refused by intervals.
  const double floor = 1e-7 * coefficients.cwiseAbs().maxCoeff();
  for (std::size_t p = 0; p < pivots.size(); ++p) {
    if (std::abs(coefficients[static_cast<Index>(p)]) > floor) result.push_back(pivots[p]);
  }
  return result;
}

}  // namespace gramproof::exact
