// tests/long/named_columns.hpp - design columns that have a name and nothing else.
#pragma once

#include <string>

#include "design/design.hpp"

namespace gramproof::test {

/// "c0", "c1", ...: no word of time, no common prefix, nothing that a relation could be guessed
/// from.
[[nodiscard]] inline std::string column_name(std::size_t j) {
  return "c" + std::to_string(j);
}

[[nodiscard]] inline design::Design named_columns(std::size_t k) {
  design::Design design;
  for (std::size_t j = 0; j < k; ++j) {
    design::DesignColumn column;
    column.label = column_name(j);
    column.term = static_cast<int>(j);
    column.sources = {static_cast<int>(j)};
    design.columns.push_back(column);
  }
  return design;
}

}  // namespace gramproof::test
