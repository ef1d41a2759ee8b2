// src/exact/row_choice.hpp - rows on which columns stand apart, chosen in doubles. Proves nothing.
#pragma once

#include <cstddef>
#include <vector>

#include "base/numeric.hpp"

namespace gramproof::exact {

/// Gaussian elimination with row interchanges on a tall matrix, columns from left to right.
class RowChoice {
 public:
  /// Columns before `always` get a row in any case; a later one whose remainder is below
  /// `smallest_remainder` of its largest entry gets none. O(rows * columns^2).
  RowChoice(Matrix values, std::size_t always);

  /// Index of the row of each column, `none` for those set aside.
  [[nodiscard]] const std::vector<std::size_t>& rows() const { return rows_; }
  /// The columns, among those with a row before column j, on which it depends for all that doubles
  /// tell.
  [[nodiscard]] std::vector<std::size_t> support(std::size_t j) const;

  static constexpr std::size_t none = static_cast<std::size_t>(-1);
  /// Far above the rounding of well-conditioned designs (1e-13) and below what data leave.
  static constexpr double smallest_remainder = 1e-8;

 private:
  Matrix left_;  ///< the rows of U in place, the columns scaled to a largest entry of about 1
  std::vector<std::size_t> rows_;
};

}  // namespace gramproof::exact
