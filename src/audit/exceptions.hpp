// src/audit/exceptions.hpp - relations that hold but for a few rows: typing errors and one-off
// recodes hide here.
#pragma once

#include <string>
#include <vector>

#include "audit/audit.hpp"
#include "audit/proved_rank.hpp"
#include "base/result.hpp"
#include "design/design.hpp"
#include "exact/rank.hpp"
#include "scan/digest.hpp"
#include "table/survey.hpp"

namespace gramproof::audit {

struct ExceptionSearch {
  const design::Design& design;
  const table::Schema& schema;
  const std::vector<std::string>& file_names;
  const scan::Digest& digest;
  const exact::SampleRank& rank;
  const std::vector<exact::NullVector>& null_space;
};

struct Exceptions {
  std::vector<RelationFinding> relations;  ///< fewest columns first, then design order
  /// Rows that have a column but none of its products with levels: a level left out is rare there.
  std::vector<RareLevel> rare_cells;
  /// That a relation broken in as many rows as allowed was not met: above 1e-6 only where the
  /// search had to be cut for its cost.
  double chance_of_a_miss = 0;
};

/// Relations broken in few rows (methods: 'Finding exact_except'): those that rest on a single row,
/// all of them, and those that random row sets show. Each is tested on every row, by one further
/// pass if there is any. A relation is reported if it has at least two columns beside those that
/// are zero in all but as many rows as violate it, if it is violated in at most max(5, 1 %) of the
/// rows in which any of its terms is not zero and holds on at least 10 of these a column, if there
/// are at least five rows a column, and if it does not follow from others that are violated in
/// fewer rows. (Rows in which all terms are zero are not counted: by them a cell of an interaction
/// would be nearly empty wherever one of its levels is uncommon.) A level, or a cell, that rests on
/// these rows is no relation (see rare_levels).
[[nodiscard]] Result<Exceptions> relations_but_for_rows(const ExceptionSearch& search,
                                                        Prover& prover);

/// A finding with the terms of an integer vector filled in.
[[nodiscard]] RelationFinding exact_terms(const exact::NullVector& vector, std::size_t columns);

}  // namespace gramproof::audit
