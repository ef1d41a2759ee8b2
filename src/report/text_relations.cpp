#include <algorithm>

#include <fmt/format.h>

#include "base/text.hpp"
#include "report/text_parts.hpp"

namespace gramproof::report {
namespace {

using audit::RelationFinding;
using audit::Standing;

/// The text with a full stop, whether or not it has one.
std::string sentence(std::string text) {
  if (!text.empty() && text.back() != '.') text += '.';
  return text;
}

std::string lines_of(const audit::Violation& violation) {
  std::string text =
      fmt::format("{}:{} (row {}): ", violation.file, violation.line, grouped(violation.row));
  const bool negative = !violation.residual.empty() && violation.residual.front() == '-';
  text += fmt::format("the two sides differ by {}", violation.residual.substr(negative ? 1 : 0));
  if (violation.cells.empty()) return text;
  text += ";";
  const char* between = " ";
  for (const auto& [column, cell] : violation.cells) {
    text += fmt::format("{}{} = {}", between, column, cell);
    between = ", ";
  }
  return text;
}

void write_violations(const RelationFinding& relation, Page& page) {
  const std::size_t told = std::min(relation.violations.size(), most_rows_told);
  for (std::size_t i = 0; i < told; ++i) page.item("-", 2, lines_of(relation.violations[i]), 5);
  const std::uint64_t rest =
      relation.rows_violating - std::min<std::uint64_t>(told, relation.rows_violating);
  if (rest == 0) return;
  std::string text = fmt::format("and {}", counted(rest, "further row", "further rows"));
  if (relation.violations.size() > told) {
    text += fmt::format("; the JSON document lists {}",
                        relation.violations.size() == relation.rows_violating
                            ? "all of them"
                            : fmt::format("the first {}", relation.violations.size()));
  }
  page.item("-", 2, text + ".", 5);
}

}  // namespace

void write_exact_relations(const audit::Audit& audit, Page& page) {
  const auto relations = standing_at(audit, Standing::exact);
  if (relations.empty()) return;
  page.heading(relations.size() == 1 ? "The relation that makes X'X singular"
                                     : "The relations that make X'X singular");
  page.paragraph(
      "Where columns obey an exact relation, many sets of coefficients fit equally well and no "
      "amount of data or precision can choose among them.",
      2);
  const std::size_t told = std::min(relations.size(), most_relations_told);
  for (std::size_t i = 0; i < told; ++i) {
    const RelationFinding& relation = *relations[i];
    write_equation(relation, i + 1, page);
    page.paragraph(fmt::format("Holds on all {}. {}", counted(relation.rows_holding, "row", "rows"),
                               sentence(relation.cause_text)),
                   5);
    page.paragraph(removable_sentence(audit, relation), 5);
  }
  const std::uint64_t listed_only = relations.size() - told;
  const std::uint64_t rest = listed_only + audit.relations_omitted;
  if (rest == 0) return;
  std::string text = counted_are(rest, "further relation", "further relations") + " not shown here";
  if (listed_only > 0) {
    text += fmt::format("; the JSON document lists {}",
                        audit.relations_omitted == 0 ? "all" : grouped(listed_only) + " of them");
  }
  page.blank();
  page.paragraph(text + ".", 2);
}

void write_left_out(const audit::Audit& audit, Page& page) {
  if (audit.left_out.empty()) return;
  page.heading("What is left out here, and what that does to the others");
  page.paragraph(
      fmt::format("This report goes on without {}. The fitted values are the same whichever column "
                  "of a relation is left out. Kept are first the columns that are protected, then "
                  "those in focus, the constant and the others as written, each unless it follows "
                  "from those before it; the most frequent of a full set of levels comes last.",
                  names_of(audit, audit.left_out)),
      2);
  std::vector<int> changed;
  for (const int column : audit.verdict.coefficients_lost) {
    if (std::find(audit.left_out.begin(), audit.left_out.end(), column) == audit.left_out.end()) {
      changed.push_back(column);
    }
  }
  if (!changed.empty()) {
    page.paragraph(
        fmt::format(
            "The choice does decide how {} read, which also carr{} what the columns left out would "
            "have told: {}.",
            changed.size() == 1 ? "one coefficient is" : "these coefficients are",
            changed.size() == 1 ? "ies" : "y", names_of(audit, changed)),
        2);
  }
  std::size_t untouched = 0;
  for (const int column : audit.kept) {
    if (std::find(changed.begin(), changed.end(), column) == changed.end()) ++untouched;
  }
  if (untouched > 0) {
    page.paragraph(
        fmt::format(
            "{} in no exact relation: the coefficient{} the same whichever column is left out.",
            counted_are(untouched, "other column", "other columns"),
            untouched == 1 ? " is" : "s are"),
        2);
  }
}

void write_relations_with_exceptions(const audit::Audit& audit, Page& page) {
  const auto relations = standing_at(audit, Standing::exact_except);
  if (relations.empty()) return;
  page.heading(relations.size() == 1 ? "A relation that only a few rows break"
                                     : "Relations that only a few rows break");
  page.paragraph(
      "X'X is invertible only because of these rows. Typing errors and one-off recodings hide in "
      "such places; if the rows are right, what they say about these columns is all there is.",
      2);
  const std::size_t told = std::min(relations.size(), most_relations_told);
  for (std::size_t i = 0; i < told; ++i) {
    const RelationFinding& relation = *relations[i];
    write_equation(relation, i + 1, page);
    page.paragraph(fmt::format("Holds on {}, is violated on {}. {}",
                               counted(relation.rows_holding, "row", "rows"),
                               grouped(relation.rows_violating), sentence(relation.cause_text)),
                   5);
    write_violations(relation, page);
    if (!relation.removable.empty()) {
      page.paragraph(fmt::format("If these rows are errors, the relation is exact once they are "
                                 "corrected, and one column has to go: {}.",
                                 alternatives(audit, relation.removable)),
                     5);
    }
  }
  if (relations.size() == told) return;
  page.blank();
  page.paragraph(not_shown(relations.size() - told, "further relation", "further relations"), 2);
}

}  // namespace gramproof::report
