// src/exact/cause.hpp - how a relation came about, decided on its form.
#pragma once

#include <set>
#include <string>
#include <vector>

#include "exact/relations.hpp"
#include "exact/sides.hpp"

namespace gramproof::exact {

/// All that a cause is decided on.
struct Evidence {
  const design::Design& design;
  const table::Schema& schema;
  const std::vector<ColumnSummary>& columns;
  std::uint64_t rows = 0;
  Sides sides;
  std::string where;  ///< for the rows in which the relation holds; empty: all used
};

[[nodiscard]] Cause cause_of(const Evidence& evidence);

/// 0/1 columns that count the rows in two ways, though no set of them is full and none lies in
/// another: a + b = either + both. A level_set, told in other words.
[[nodiscard]] bool is_overlap(const Evidence& evidence);

/// The table columns that the columns of the relation are made of.
[[nodiscard]] std::set<int> sources_of(const Evidence& evidence);

/// One sentence, with full stop, in the analyst's words.
[[nodiscard]] std::string sentence_of(const Evidence& evidence, Cause cause);

}  // namespace gramproof::exact
