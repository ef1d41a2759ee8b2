// src/audit/why_names.hpp - what the analyst means by COLUMN.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "audit/why.hpp"
#include "base/result.hpp"
#include "design/bind.hpp"
#include "table/survey.hpp"

namespace gramproof::audit {

struct Meaning {
  AskedFor asked_for = AskedFor::column;
  std::vector<int> columns;  ///< design columns, in design order; empty for a level left out
  std::string label;         ///< level left out: as the design language calls its column
  int after = -1;            ///< level left out: the design column behind which it belongs
};

/// A label, or an expression that is one in other words; a term; a column of the data that design
/// columns are made of; the level that levels() leaves out, and products with it
/// (`left_out_levels`: design::Settled::left_out). Errors: an unknown name, with the nearest.
[[nodiscard]] Result<Meaning> meaning_of(const std::string& asked, const design::Design& design,
                                         const table::Schema& schema,
                                         const std::vector<int>& left_out_levels);

}  // namespace gramproof::audit
