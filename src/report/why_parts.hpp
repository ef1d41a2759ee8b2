// src/report/why_parts.hpp - the parts of the answer to `gramproof why`, one function a question.
// Internal.
#pragma once

#include <string>

#include "audit/why.hpp"
#include "exact/exchange.hpp"
#include "report/page.hpp"

namespace gramproof::report {

inline constexpr std::size_t most_estimands_told = 24;
inline constexpr std::size_t most_terms_told = 12;

/// "heat − 2.5·light + 1/3·(a + b)": labels as they are, without backticks; "0" for nothing.
[[nodiscard]] std::string form_text(const audit::Audit& audit, const exact::LinearForm& form);

// text_why_dependence.cpp: a column in an exact relation
void write_dependence(const audit::Why& why, const audit::WhyColumn& asked, Page& page);
void write_what_could_go(const audit::Why& why, const audit::WhyColumn& asked, Page& page);
void write_estimands(const audit::Why& why, const audit::WhyColumn& asked, Page& page);
void write_habits(const audit::Why& why, Page& page);

// text_why_nearness.cpp: a column in none
void write_nearness(const audit::Why& why, const audit::WhyColumn& asked, Page& page);
void write_holding_rows(const audit::Why& why, const audit::WhyColumn& asked, Page& page);

}  // namespace gramproof::report
