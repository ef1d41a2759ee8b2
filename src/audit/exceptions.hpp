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

/// Rows without which X loses rank, and for each the relation that holds in all other rows
/// (methods: 'Finding exact_except', (a)). A relation is reported if it has at least two columns
/// beside those that are zero in all but as many rows as violate it, if it is violated in at most
/// max(5, 1 % of rows) and holds on at least 10 rows a column, and if there are at least five rows
/// a column. A level that rests on the row alone is no relation (see rare_levels).
[[nodiscard]] Result<std::vector<RelationFinding>> relations_but_for_rows(
    const ExceptionSearch& search, Prover& prover);

/// A finding with the terms of an integer vector filled in.
[[nodiscard]] RelationFinding exact_terms(const exact::NullVector& vector, std::size_t columns);

}  // namespace gramproof::audit
