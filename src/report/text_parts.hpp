// src/report/text_parts.hpp - the parts of the text report, one function a question of the reader.
// Internal.
#pragma once

#include <cstddef>
#include <optional>
#include <string>
#include <vector>

#include "audit/audit.hpp"
#include "report/page.hpp"

namespace gramproof::report {

// How much of a wide design is told before the rest is counted.
inline constexpr std::size_t most_names = 8;
inline constexpr std::size_t most_lines_of_an_equation = 6;
inline constexpr std::size_t most_relations_told = 6;
inline constexpr std::size_t most_rows_told = 10;
inline constexpr std::size_t most_coefficients_told = 6;
inline constexpr std::size_t most_focus_told = 12;
inline constexpr std::size_t most_notes_told = 6;

/// The label of a design column in backticks.
[[nodiscard]] std::string name_of(const audit::Audit& audit, int column);

/// "`a`, `b` and `c`", or "`a`, `b` and 5 more"; "" for none.
[[nodiscard]] std::string names_of(const audit::Audit& audit, const std::vector<int>& columns,
                                   std::size_t most = most_names);
[[nodiscard]] std::string listed(const std::vector<std::string>& items,
                                 std::size_t most = most_names);

/// The relations of one standing, in the audit's order.
[[nodiscard]] std::vector<const audit::RelationFinding*> standing_at(const audit::Audit& audit,
                                                                     audit::Standing standing);
/// "2. heat + light = total", cut after so many lines, behind a blank line.
void write_equation(const audit::RelationFinding& relation, std::size_t number, Page& page,
                    std::size_t most_lines = most_lines_of_an_equation);

/// "`a`", "`a` or `b`": any one of them.
[[nodiscard]] std::string alternatives(const audit::Audit& audit, const std::vector<int>& columns);
/// "To end it, leave out `a` or `b`."; empty if nothing can be left out.
[[nodiscard]] std::string removable_sentence(const audit::Audit& audit,
                                             const audit::RelationFinding& relation);

/// "1 column is", "3 columns are".
[[nodiscard]] std::string counted_are(std::size_t number, std::string_view singular,
                                      std::string_view plural);

/// "1 further relation is not shown here; the JSON document lists it."
[[nodiscard]] std::string not_shown(std::size_t number, std::string_view singular,
                                    std::string_view plural);

/// Digits that hold in a condition index. The error of a singular value is the same for all of them
/// (Weyl), so a smaller index is known to more digits than the condition number.
[[nodiscard]] double known_digits_of_index(const audit::Audit& audit, double index);
/// Digits that hold in own shares, variance inflation factors and standard errors: a square loses
/// a factor of two, log10 2 = 0.3 of a digit.
[[nodiscard]] double known_digits_of_squares(const audit::Audit& audit);
/// 1 / (64 k u), the largest condition number whose size double precision can tell.
[[nodiscard]] double largest_known_condition(const audit::Audit& audit);

void write_verdict(const audit::Audit& audit, Page& page);                    // text_verdict.cpp
void write_grounds(const audit::Audit& audit, Page& page);                    // text_verdict.cpp
void write_exact_relations(const audit::Audit& audit, Page& page);            // text_relations.cpp
void write_left_out(const audit::Audit& audit, Page& page);                   // text_relations.cpp
void write_relations_within_rounding(const audit::Audit& audit, Page& page);  // text_rounding.cpp
void write_doubles(const audit::Audit& audit, Page& page);                    // text_rounding.cpp
void write_relations_with_exceptions(const audit::Audit& audit, Page& page);  // text_relations.cpp
void write_relations_within_recorded_precision(const audit::Audit& audit,
                                               Page& page);      // text_recorded.cpp
void write_competing(const audit::Audit& audit, Page& page);     // text_competing.cpp
void write_digits(const audit::Audit& audit, Page& page);        // text_competing.cpp
void write_coefficients(const audit::Audit& audit, Page& page);  // text_coefficients.cpp
void write_contrasts(const audit::Audit& audit, Page& page);     // text_coefficients.cpp
void write_rare_levels(const audit::Audit& audit, Page& page);   // text_coefficients.cpp
void write_recording(const audit::Audit& audit, Page& page);     // text_rows.cpp
void write_rows(const audit::Audit& audit, Page& page);          // text_rows.cpp
void write_notes(const audit::Audit& audit, Page& page);         // text_rows.cpp
void write_cautions(Page& page);                                 // text_rows.cpp

}  // namespace gramproof::report
