// src/report/document_parts.hpp - the parts of the verdict document. Internal.
#pragma once

#include <string>
#include <vector>

#include <nlohmann/json.hpp>

#include "audit/audit.hpp"

namespace gramproof::report {

using Json = nlohmann::ordered_json;

/// Puts `key` and `<key>_state`: finite, infinite (value null) or undefined (value null).
void put_number(Json& object, const std::string& key, double value);
/// The same with an absent value read as undefined.
void put_number(Json& object, const std::string& key, const std::optional<double>& value);
/// An array of numbers with `<key>_state[]` beside it.
void put_numbers(Json& object, const std::string& key, const Vector& values);
/// A number, or null if it is not finite: for places whose state stands elsewhere.
[[nodiscard]] Json finite_or_null(double value);

/// The label of a design column; null for no column.
[[nodiscard]] Json label_of(const audit::Audit& audit, int column);
[[nodiscard]] Json labels_of(const audit::Audit& audit, const std::vector<int>& columns);
/// The name of a table column; null for no column.
[[nodiscard]] Json table_name_of(const audit::Audit& audit, int column);

[[nodiscard]] Json source_part(const audit::Audit& audit);        // document_design.cpp
[[nodiscard]] Json design_part(const audit::Audit& audit);        // document_design.cpp
[[nodiscard]] Json verdict_part(const audit::Audit& audit);       // document_findings.cpp
[[nodiscard]] Json rank_part(const audit::Audit& audit);          // document_findings.cpp
[[nodiscard]] Json relations_part(const audit::Audit& audit);     // document_findings.cpp
[[nodiscard]] Json contrasts_part(const audit::Audit& audit);     // document_findings.cpp
[[nodiscard]] Json rare_levels_part(const audit::Audit& audit);   // document_findings.cpp
[[nodiscard]] Json notes_part(const audit::Audit& audit);         // document_findings.cpp
[[nodiscard]] Json conditioning_part(const audit::Audit& audit);  // document_figures.cpp
[[nodiscard]] Json inflation_part(const audit::Audit& audit);     // document_figures.cpp
[[nodiscard]] Json between_part(const audit::Audit& audit);       // document_figures.cpp
[[nodiscard]] Json recording_part(const audit::Audit& audit);     // document_figures.cpp

}  // namespace gramproof::report
