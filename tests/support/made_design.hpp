// tests/support/made_design.hpp - a design that was never parsed: labels, families and no more.
#pragma once

#include <string>
#include <utility>
#include <vector>

#include "design/design.hpp"

namespace gramproof::test {

struct MadeFamily {
  std::string name;
  std::vector<int> sources;         ///< table columns
  std::vector<std::string> labels;  ///< its design columns, which follow those of the family before
  bool products_only = true;
};

/// Columns in the order given; a column labelled `constant` is the constant.
inline design::Design made_design(const std::vector<MadeFamily>& families) {
  design::Design design;
  for (const MadeFamily& made : families) {
    design::Family family{made.name, made.sources, {}, made.products_only};
    for (const std::string& label : made.labels) {
      design::DesignColumn column;
      column.label = label;
      column.family = static_cast<int>(design.families.size());
      column.sources = made.sources;
      column.constant = label == "constant";
      family.columns.push_back(static_cast<int>(design.columns.size()));
      design.columns.push_back(std::move(column));
    }
    design.families.push_back(std::move(family));
  }
  return design;
}

}  // namespace gramproof::test
