// src/exact/sides.hpp - a relation as two sums of positive terms.
#pragma once

#include <gmpxx.h>

#include <cstddef>
#include <string>
#include <utility>
#include <vector>

#include "design/design.hpp"
#include "exact/rank.hpp"

namespace gramproof::exact {

/// left = right + number, as it will be written. Columns are in design order; coefficients are
/// positive and may be fractions (a + b = 0.5). The constant is no column here but a number.
struct Sides {
  using Terms = std::vector<std::pair<std::size_t, mpq_class>>;
  Terms left, right;
  mpq_class number = 0;  ///< what the constant adds to the right; may be negative
  bool has_constant = false;

  [[nodiscard]] std::size_t columns() const { return left.size() + right.size(); }
};

/// The sides of a relation: a side with one column of coefficient 1 is the right one, else the
/// shorter. Where all columns have the same factor or stand on one side it is divided out or left.
[[nodiscard]] Sides sides_of(const design::Design& design, const NullVector& vector);

/// The equation in writing. `as_difference`, only where is_plain_difference (clock.hpp):
/// year - age = birth_year.
[[nodiscard]] std::string equation_of(const design::Design& design, const Sides& sides,
                                      bool as_difference);

/// The label as it stands in a sentence. A name that is quoted only because the design language has
/// a word of that spelling ("year") needs no quotes there.
[[nodiscard]] std::string name_in_prose(const design::DesignColumn& column);

/// A decimal where the value is one ("0.3048"), else a fraction ("7/3"); U+2212 for minus.
[[nodiscard]] std::string number_text(const mpq_class& value);

}  // namespace gramproof::exact
