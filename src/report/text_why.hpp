// src/report/text_why.hpp - the answer of `gramproof why`, for a reader who has never seen it.
#pragma once

#include <string>

#include "audit/why.hpp"
#include "report/text_report.hpp"

namespace gramproof::report {

/// Lines no wider than the page (80 to 120 columns); control characters of labels, file names and
/// cells are made visible. O(length).
[[nodiscard]] std::string text_why(const audit::Why& why, const TextOptions& options);

}  // namespace gramproof::report
