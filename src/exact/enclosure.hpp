// src/exact/enclosure.hpp - values of trees with log, sqrt, exp and asinh, enclosed from the exact
// decimals.
#pragma once

#include <cstddef>
#include <map>
#include <unordered_set>
#include <utility>

#include "design/design.hpp"
#include "exact/interval.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

/// Encloses the values of design columns in used rows. Exact subtrees are evaluated as rationals
/// and rounded once; a comparison is the 0 or 1 that the design row has, which where its operands
/// are not exact is decided by their doubles (design::exact_value). Reads only: may be shared by
/// threads.
class Enclosures {
 public:
  explicit Enclosures(const design::Design& design);

  /// At a precision in bits; `row` is an index within the piece. The whole line where an inner
  /// enclosure is too wide to be decided, which a higher precision mends. O(nodes) operations.
  [[nodiscard]] Interval value(int column, const table::Piece& piece, std::size_t row,
                               mpfr_prec_t precision) const;

 private:
  [[nodiscard]] Interval of(const design::Expression& expression, const table::Piece& piece,
                            std::size_t row, mpfr_prec_t precision) const;
  void find_exact(const design::Expression& expression);

  const design::Design& design_;
  std::unordered_set<const design::Expression*> rational_;  ///< decided by exact_value
};

/// The enclosures of one row, each made once.
class RowEnclosures {
 public:
  RowEnclosures(const Enclosures& enclosures, const table::Piece& piece, std::size_t row)
      : enclosures_(enclosures), piece_(piece), row_(row) {}
  [[nodiscard]] const Interval& value(int column, mpfr_prec_t precision);

 private:
  const Enclosures& enclosures_;
  const table::Piece& piece_;
  std::size_t row_;
  std::map<std::pair<int, mpfr_prec_t>, Interval> known_;
};

}  // namespace gramproof::exact
