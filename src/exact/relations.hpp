// src/exact/relations.hpp - exact relations that a person can read: a short basis, causes, what can be left out.
//   [LLL82] Lenstra, Lenstra & Lovasz, "Factoring polynomials with rational coefficients", Math. Ann. 261 (1982) 515-534.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "design/design.hpp"
#include "exact/rank.hpp"
#include "table/survey.hpp"

namespace gramproof::exact {

enum class Cause : std::uint8_t {
  zero_column, constant_column, duplicate, multiple, unit_conversion, level_set, nested_levels, empty_cell, parts_and_total,
  fixed_sum, clock_identity, too_few_rows, other,
};
/// "level_set", ... as in the document.
[[nodiscard]] std::string word_of(Cause cause);

/// One exact relation, ready to be read.
struct Relation {
  NullVector coefficients;      ///< over the design columns; the entry for the ones column is 0 unless the design has no constant
  std::string text;             ///< "heat + light + cooking = total", "9·celsius + 160 = 5·fahrenheit"
  Cause cause = Cause::other;
  std::string cause_text;       ///< a sentence in the analyst's words
  std::vector<int> removable;   ///< design columns any one of which can be left out to end it
};

/// What the causes need to know of each design column on the rows used.
struct ColumnSummary {
  double min = 0, max = 0;
  std::uint64_t nonzero_rows = 0;
};

/// A readable basis of the lattice of integer relations spanned by `null_vectors` (on the design columns; vectors that use the
/// ones column are not relations and must not be passed): structural relations first (level sets, parts and totals, clock
/// identities), then the saturated lattice reduced by LLL, then pairwise shortening. Spans the same space. Budget by bits x nullity.
[[nodiscard]] std::vector<NullVector> readable_basis(const design::Design& design, const table::Schema& schema,
                                                     const std::vector<NullVector>& null_vectors);

/// Text, cause and removable columns of one relation. `rows`: rows used.
[[nodiscard]] Relation describe(const design::Design& design, const table::Schema& schema, const NullVector& vector,
                                const std::vector<ColumnSummary>& columns, std::uint64_t rows);

/// Only the equation, as a person would write it.
[[nodiscard]] std::string equation(const design::Design& design, const NullVector& vector);

}  // namespace gramproof::exact
