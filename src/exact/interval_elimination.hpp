// src/exact/interval_elimination.hpp - Gaussian elimination on enclosures: what it proves.
//   [N90] Neumaier, "Interval Methods for Systems of Equations", Cambridge 1990, 4.5.
#pragma once

#include <cstddef>
#include <cstdint>
#include <utility>
#include <vector>

#include "exact/interval.hpp"

namespace gramproof::exact {

/// A value below 2^-200 of its column's largest is below 60 of its digits (2^-199.3 = 10^-60).
inline constexpr double bits_of_sixty_digits = 200;

struct IntervalElimination {
  enum class Outcome : std::uint8_t {
    independent,  ///< proved: a pivot's enclosure excludes 0, whatever the true entries are
    vanishes,     ///< what the columns before leave of it is below 60 digits on all rows given
    undecided,    ///< neither, at this precision
  };
  std::vector<Outcome> outcomes;  ///< one a column
  /// One a column that vanishes, in order: its coefficients on the independent columns before it,
  /// as enclosures.
  struct Combination {
    std::size_t column = 0;
    std::vector<std::pair<std::size_t, Interval>> on;
  };
  std::vector<Combination> combinations;
};

/// Columns from left to right; in each the row is taken whose enclosure is farthest from 0. The
/// columns found independent are so, jointly. Widths grow with every step, by a bit or two in
/// practice: the caller starts again at a higher precision. `rows` are of one length and of one
/// precision. O(rows * columns^2) operations, fewer where entries are exactly 0.
[[nodiscard]] IntervalElimination eliminate_enclosures(std::vector<std::vector<Interval>> rows);

}  // namespace gramproof::exact
