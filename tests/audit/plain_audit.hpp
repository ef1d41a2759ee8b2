// tests/audit/plain_audit.hpp - an audit without a fault, to be spoilt one thing at a time.
#pragma once

#include <string>
#include <vector>

#include "audit/audit.hpp"

namespace gramproof::test {

/// Columns constant, a, b over two numeric table columns; 1,000 rows; three families; nothing to
/// complain of.
inline audit::Audit plain_audit() {
  audit::Audit audit;
  audit.rows_read = audit.rows_used = 1'000;
  audit.residual_degrees_of_freedom = 997;
  audit.rank.rank = audit.rank.columns = audit.rank.numerical = 3;
  const std::vector<std::string> labels = {"constant", "a", "b"};
  for (std::size_t j = 0; j < labels.size(); ++j) {
    design::DesignColumn column;
    column.label = labels[j];
    column.term = column.family = static_cast<int>(j);
    column.constant = j == 0;
    if (j > 0) column.sources = {static_cast<int>(j) - 1};
    audit.design.columns.push_back(column);
    audit.design.terms.push_back({labels[j], {static_cast<int>(j)}});
    audit.design.families.push_back({labels[j], column.sources, {static_cast<int>(j)}, true});
    audit.kept.push_back(static_cast<int>(j));
  }
  audit.centred_by = audit::CentredBy::column;
  audit.conditioning.condition_number = 12;
  audit.conditioning.digits = {14.9, 13.8, 6.1, 5.0};
  audit.between.families = {1, 2};
  audit.between.indices = Vector(2);
  audit.between.indices << 1, 1.5;
  audit.between.proportions = Matrix(2, 2);
  audit.between.proportions << 0.4, 0.4, 0.6, 0.6;
  audit.between.inflation = {{1, 1, 1.2, 1.1}, {2, 1, 1.2, 1.1}};
  audit.recording.distance_ratios = Vector::Constant(1, 40.0);
  audit.recording.close = {{1.0, {1, 2}}};
  return audit;
}

}  // namespace gramproof::test
