// src/audit/violations.hpp - the rows that break a relation, as a reader finds them in the file.
#pragma once

#include <gmpxx.h>

#include <string>
#include <vector>

#include "audit/audit.hpp"
#include "design/design.hpp"
#include "exact/rank.hpp"
#include "scan/pass.hpp"
#include "table/survey.hpp"

namespace gramproof::audit {

/// The violating rows that a test kept: file, line, row, exact residual, and the cells of the table
/// columns that the relation is made of.
[[nodiscard]] std::vector<Violation> violations_of(const design::Design& design,
                                                   const table::Schema& schema,
                                                   const std::vector<std::string>& file_names,
                                                   const exact::NullVector& vector,
                                                   const scan::TestedVector& tested);

/// Exact decimal of a rational when it has one, else the fraction.
[[nodiscard]] std::string residual_text(const mpq_class& value);

}  // namespace gramproof::audit
