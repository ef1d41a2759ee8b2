// src/design/rest.hpp - the columns of `rest`: all that have no other part.
#pragma once

#include <string>
#include <vector>

#include "design/binder.hpp"
#include "design/design.hpp"

namespace gramproof::design {

/// Table columns that `rest` takes, in table order; `has_part` has one entry a table column. What
/// is left out and what a reader may take for a code is entered into `notes`. Errors (to the
/// binder): a column that is at least 90 % numbers but not all, a number out of range. O(columns).
[[nodiscard]] std::vector<int> columns_of_rest(Binder& binder, const std::vector<bool>& has_part,
                                               std::vector<Note>& notes);

}  // namespace gramproof::design
