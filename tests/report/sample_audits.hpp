// tests/report/sample_audits.hpp - audits made by hand, one for each kind of finding a report must
// tell.
//
// The figures are plausible but invented; nothing here is computed from data.
#pragma once

#include <string>
#include <vector>

#include "audit/audit.hpp"

namespace gramproof::sample {

struct Sample {
  std::string name;  ///< also the name of its golden file
  audit::Audit audit;
};

[[nodiscard]] audit::Audit sound();
[[nodiscard]] audit::Audit level_set();  ///< singular: a full set of brackets beside the constant
[[nodiscard]] audit::Audit with_exceptions();  ///< a sum of parts that five rows break
[[nodiscard]] audit::Audit near();             ///< two competing columns and a polynomial
[[nodiscard]] audit::Audit wide();  ///< 300 columns, many relations, notes and exclusions
[[nodiscard]] audit::Audit more_columns_than_rows();
[[nodiscard]] audit::Audit no_constant();
[[nodiscard]] audit::Audit focus();           ///< focused columns, contrasts, a rare level, weights
[[nodiscard]] audit::Audit beyond_doubles();  ///< condition number of which no digit is known
[[nodiscard]] audit::Audit hostile();  ///< names that try to steer the terminal or to break lines
[[nodiscard]] audit::Audit within_rounding();  ///< relations of logarithms that are not proved
[[nodiscard]] audit::Audit within_recorded_precision();  ///< shares that sum to 100, but rounded
[[nodiscard]] audit::Audit held_as_doubles();  ///< another rank once the entries are doubles

[[nodiscard]] std::vector<Sample> all();

}  // namespace gramproof::sample
