// src/exact/relations.hpp - exact relations that a person can read: a short basis, causes, what can
// be left out.
//   [LLL82] Lenstra, Lenstra & Lovasz, "Factoring polynomials with rational coefficients", Math.
//           Ann. 261 (1982) 515-534.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "design/design.hpp"
#include "exact/rank.hpp"
#include "table/survey.hpp"

namespace gramproof::exact {

enum class Cause : std::uint8_t {
  zero_column,      ///< a column is 0 in every row
  constant_column,  ///< a column has one value, as the constant has; or two have, without one
  duplicate,        ///< two columns agree
  multiple,         ///< a whole number times the other, either way
  unit_conversion,  ///< another factor, or a factor and an offset
  level_set,        ///< levels that leave no row out: they add up to 1, to another such set, or
                    ///< their products with a column to that column; or 0/1 columns of
                    ///< overlapping sets that count the rows in two ways
  nested_levels,    ///< levels add up to a level of a coarser set, or their products do
  empty_cell,       ///< a product that is 0 because no row has the levels together
  parts_and_total,  ///< a column is the sum of others
  fixed_sum,        ///< columns add up to one value
  clock_identity,   ///< age = period - birth, and the like
  too_few_rows,     ///< fewer rows than columns
  other,
};
/// "level_set", ... as in the document.
[[nodiscard]] std::string word_of(Cause cause);

/// One exact relation, ready to be read.
struct Relation {
  NullVector coefficients;  ///< over the design columns; the entry for the ones column is 0
                            ///< unless the design has no constant
  std::string text;         ///< "heat + light + cooking = total"
  Cause cause = Cause::other;
  std::string cause_text;      ///< a sentence in the analyst's words
  std::vector<int> removable;  ///< design columns any one of which can be left out to end it
};

/// What the causes need to know of each design column on the rows used.
struct ColumnSummary {
  double min = 0, max = 0;
  std::uint64_t nonzero_rows = 0;
};

/// A readable basis of the space of relations spanned by `null_vectors` (on the design columns;
/// vectors that use the ones column are not relations and must not be passed): the cheapest to read
/// among structural relations, the saturated lattice reduced by LLL and the vectors given,
/// shortened in pairs and held against relations of few columns (short_relations.hpp). A column
/// costs 8 and each bit of its coefficient after the first 1, so that a coefficient of three digits
/// weighs as much as one more column. Spans the same space; cheapest first; the same vectors give
/// the same basis. Beyond a budget by bits x nullity^2 the lattice is left out, beyond another
/// shortening ends early.
[[nodiscard]] std::vector<NullVector> readable_basis(const design::Design& design,
                                                     const std::vector<NullVector>& null_vectors);

/// Text, cause and removable columns of one relation. `rows`: rows used. `where`: a phrase for the
/// rows in which it holds, if these are not all ("in all other rows"); a cause that speaks of every
/// row in its own words then has no sentence.
[[nodiscard]] Relation describe(const design::Design& design, const table::Schema& schema,
                                const NullVector& vector, const std::vector<ColumnSummary>& columns,
                                std::uint64_t rows, const std::string& where = "");

/// Only the equation, as a person would write it: positive terms on both sides, a lone column or
/// number to the right; three counts of time as a difference. More than eight terms on a side of a
/// relation of more than twelve columns are cut to the first six and the last.
[[nodiscard]] std::string equation(const design::Design& design, const NullVector& vector);

}  // namespace gramproof::exact
