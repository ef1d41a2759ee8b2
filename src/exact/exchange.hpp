// src/exact/exchange.hpp - which columns a basis does without, and what each of them is made of.
//   [Oxley11] Oxley, "Matroid Theory", 2nd ed., Oxford 2011, ch. 2: the columns that can be left
//             out together are the bases of the dual, in which the null space is the matrix.
// All of it follows from the exact relations: the data are not needed, and no tolerance is.
#pragma once

#include <gmpxx.h>

#include <utility>
#include <vector>

#include "exact/rank.hpp"

namespace gramproof::exact {

/// Sum of coefficient * column, ascending by column; no coefficient is 0.
using LinearForm = std::vector<std::pair<int, mpq_class>>;

/// A column left out, as the exact combination of columns that stay. Empty: the column is zero.
struct Combination {
  int column = -1;
  LinearForm parts;
};

/// Walks through `preference` (distinct columns) and leaves out each column that is a combination
/// of those that would then stay, given what is left out already; columns that are not named come
/// last. As many are left out as there are relations. The same as keeping, from the other end,
/// every column that is no combination of those kept before. `null_vectors`: independent relations
/// over the design columns, the entry for ones zero. In the order of leaving out. O(nullity^2
/// columns) products of integers as long as the minors of the null space.
[[nodiscard]] std::vector<Combination> leave_out(const std::vector<NullVector>& null_vectors,
                                                 const std::vector<int>& preference);

/// The first column in design order with which `column` becomes dependent: the smallest m such that
/// a relation through `column` uses no column after m. -1 when `column` is in no relation.
[[nodiscard]] int dependent_since(const std::vector<NullVector>& null_vectors, int column);

/// The coefficient of a column in a form, 0 where it has none.
[[nodiscard]] mpq_class coefficient_of(const LinearForm& form, int column);

}  // namespace gramproof::exact
