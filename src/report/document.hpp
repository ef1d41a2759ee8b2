// src/report/document.hpp - the audit as the verdict document: JSON (RFC 8259), schema_version 1.
//
// Keys are fixed; a number that is infinite or undefined is null with `<key>_state` beside it.
// Exact values are strings. Columns are named by their labels, places in arrays count from 0, rows
// from 1.
#pragma once

#include <string>
#include <string_view>

#include <nlohmann/json.hpp>

#include "audit/audit.hpp"

namespace gramproof::report {

/// The document as a tree, keys in the order in which a person would read them. Pure function; cost
/// linear in the findings and in the written-out definitions.
[[nodiscard]] nlohmann::ordered_json verdict_document(const audit::Audit& audit,
                                                      std::string_view program_version);

/// The bytes of a document, with a final line break: an object a block of lines, an array of plain
/// values one line. The same document gives the same bytes; doubles round-trip; bytes that are no
/// UTF-8 (they can only come from file names) become U+FFFD.
[[nodiscard]] std::string to_json_text(const nlohmann::ordered_json& document);

}  // namespace gramproof::report
