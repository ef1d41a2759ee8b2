// tests/report/sample_parts.hpp - pieces from which the sample audits are put together.
#pragma once

#include <string>
#include <utility>
#include <vector>

#include "audit/audit.hpp"

namespace gramproof::sample {

/// A sound design of the named columns as recorded ("constant" is the constant), all grounds
/// passed.
[[nodiscard]] audit::Audit numeric_design(const std::vector<std::string>& names,
                                          std::uint64_t rows);

/// Adds a text column and one bracket a level.
void add_levels(audit::Audit& audit, const std::string& name,
                const std::vector<std::string>& levels);
/// Adds the square of a design column, in its family.
void add_square(audit::Audit& audit, int column);
/// Moves a kept column to those left out and adjusts rank, nullity and degrees of freedom.
void leave_out(audit::Audit& audit, int column);

/// Condition indices, ascending, and the figures that follow from them.
void set_indices(audit::Audit& audit, const std::vector<double>& indices);
/// Own shares of the kept columns; 0 for a constant, whose share is undefined.
void set_shares(audit::Audit& audit, const std::vector<double>& shares);
void set_between(audit::Audit& audit, const std::vector<std::pair<std::string, int>>& families,
                 const std::vector<double>& indices);

[[nodiscard]] design::ExpressionPtr cell(int column);
[[nodiscard]] design::ExpressionPtr number(const std::string& text);
[[nodiscard]] design::ExpressionPtr node(design::Operation operation,
                                         std::vector<design::ExpressionPtr> operands);

}  // namespace gramproof::sample
