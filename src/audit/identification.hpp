// src/audit/identification.hpp - do the columns determine every coefficient? Rank and relations,
// proved on every row.
#pragma once

#include <functional>
#include <string>
#include <vector>

#include "audit/audit.hpp"
#include "base/result.hpp"
#include "design/design.hpp"
#include "exact/rank.hpp"
#include "exact/relations.hpp"
#include "scan/digest.hpp"
#include "scan/pass.hpp"
#include "table/survey.hpp"

namespace gramproof::audit {

/// Asks for a further pass: every vector on every used row. Only called when the sample does not
/// hold all used rows.
using RowTester =
    std::function<Result<std::vector<scan::TestedVector>>(const std::vector<exact::NullVector>&)>;

struct Identification {
  Rank rank;
  std::vector<int> kept, left_out;  ///< design columns, in design order
  std::vector<RelationFinding>
      relations;  ///< exact, then exact_except; at most `most_relations` of each
  std::uint64_t relations_omitted = 0;
  std::vector<int>
      coefficients_lost;  ///< design columns with a non-zero coefficient in an exact relation
  std::vector<exact::NullVector>
      null_space;             ///< relations among design columns (entry for ones zero), canonical
  bool too_few_rows = false;  ///< columns that are not exact had to be left out for want of rows
  bool constant_in_span = false;
  std::vector<int> constant_support;  ///< design columns whose exact combination is the constant
  std::vector<RareLevel> rare_cells;  ///< see Exceptions
  double chance_of_a_miss = 0;        ///< see Exceptions
  int passes = 0;                     ///< further passes over the data
};

inline constexpr std::size_t most_relations = 50;

/// Exact rank of the settled design on all used rows, and the relations (methods: 2). `rare_rows`:
/// see rare_levels. A vector found on the sample is tested on every row; violating rows join the
/// sample; and again, until all hold. Errors: those of the passes. Time O(sample k^2) and, where
/// there is a relation, a pass over the data.
[[nodiscard]] Result<Identification> identify(const design::Design& design,
                                              const table::Schema& schema,
                                              const std::vector<std::string>& file_names,
                                              scan::Digest& digest,
                                              const RowTester& test_on_all_rows);

/// What causes need to know of each design column.
[[nodiscard]] std::vector<exact::ColumnSummary> summaries_of(
    const std::vector<scan::ColumnRecord>& records);

/// Columns with a lower place are kept before others: 0 protected, 1 focus, 2 constant, 3 the rest.
[[nodiscard]] int place_of_role(const design::DesignColumn& column);

/// The order in which columns are kept (methods: 'Kept and left out'): protected, focus, constant,
/// the rest as written; the most frequent level of a full level set goes to the end. Columns that
/// are not exact are left out of it.
[[nodiscard]] std::vector<int> keeping_order(const design::Design& design,
                                             const scan::Digest& digest);

}  // namespace gramproof::audit
