#include <algorithm>
#include <string>

#include <fmt/format.h>

#include "base/text.hpp"
#include "report/text_parts.hpp"

namespace gramproof::report {
namespace {

using audit::Grade;
using audit::Overall;

Tone tone_of(Overall overall) {
  switch (overall) {
    case Overall::sound:
      return Tone::good;
    case Overall::guarded:
      return Tone::warning;
    default:
      return Tone::bad;
  }
}

Tone tone_of(Grade grade) {
  switch (grade) {
    case Grade::pass:
      return Tone::good;
    case Grade::caution:
      return Tone::warning;
    default:
      return Tone::bad;
  }
}

/// How far the rank is known, to follow its number.
std::string how_proved(const audit::Audit& audit) {
  const audit::Rank& rank = audit.rank;
  if (!rank.unsettled.empty()) {
    return fmt::format(". {} {} counted as independent of the others; that is not proved.",
                       names_of(audit, rank.unsettled, 3),
                       rank.unsettled.size() == 1 ? "is" : "are");
  }
  if (rank.numerical < rank.rank) {
    return fmt::format(" if only what is proved counts, and {} to 60 digits.",
                       grouped(rank.numerical));
  }
  const bool all_exact =
      std::all_of(audit.design.columns.begin(), audit.design.columns.end(),
                  [](const design::DesignColumn& column) { return column.exact; });
  return std::string(", counted exactly from the decimals in the file, not judged by a tolerance") +
         (all_exact ? "." : "; log, sqrt, exp and asinh are enclosed between proved bounds.");
}

std::string rank_sentence(const audit::Audit& audit) {
  const audit::Rank& rank = audit.rank;
  const std::string size = fmt::format("X, the table of numbers this design makes, has {} and {}.",
                                       counted(audit.rows_used, "row", "rows"),
                                       counted(rank.columns, "column", "columns"));
  const std::string how = how_proved(audit);
  if (rank.nullity == 0) {
    return fmt::format("{} No column is {}a combination of others: the rank is {}{}", size,
                       rank.proved ? "" : "proved to be ", grouped(rank.rank), how);
  }
  return fmt::format("{} Only {} of the columns are independent: the rank is {}{}", size,
                     grouped(rank.rank), grouped(rank.rank), how);
}

/// Where the data come from and how much of them is used.
std::string data_sentence(const audit::Audit& audit) {
  std::vector<std::string> names;
  for (const auto& file : audit.source.files) names.push_back(file.first);
  std::string text =
      fmt::format("{}, {}", listed(names, 3), counted(audit.rows_read, "row", "rows"));
  if (audit.rows_read == audit.rows_used) {
    text += audit.rows_read == 1 ? ", used." : ", all used.";
  } else {
    text +=
        fmt::format(", {} used (the others are accounted for below).", grouped(audit.rows_used));
  }
  if (audit.design.weight >= 0) {
    text +=
        fmt::format(" Rows are weighted by `{}`.",
                    audit.schema.columns.at(static_cast<std::size_t>(audit.design.weight)).name);
  }
  return text;
}

std::string freedom_sentence(const audit::Audit& audit) {
  if (audit.residual_degrees_of_freedom <= 0) {
    return "No row is left to judge the residuals by: no degrees of freedom remain.";
  }
  return fmt::format("{} for the residuals.",
                     counted(static_cast<std::uint64_t>(audit.residual_degrees_of_freedom),
                             "degree of freedom is left", "degrees of freedom are left"));
}

void write_ground(const audit::Ground& ground, std::string_view question, Page& page) {
  page.item(audit::word_of(ground.grade), 9, question, 2, tone_of(ground.grade));
  page.paragraph(ground.finding, 11);
}

}  // namespace

void write_verdict(const audit::Audit& audit, Page& page) {
  page.paragraph(audit.verdict.summary, 0, tone_of(audit.verdict.overall));
  page.blank();
  page.cut("Design: " + audit.design.text, 5,
           fmt::format("... ({} in all)", counted(audit.design.terms.size(), "term", "terms")), 2);
  page.paragraph("Data: " + data_sentence(audit), 2);
  page.paragraph(rank_sentence(audit) + " " + freedom_sentence(audit), 2);
}

void write_grounds(const audit::Audit& audit, Page& page) {
  const audit::Grounds& grounds = audit.verdict.grounds;
  page.heading("Can X'X be inverted reliably? Four grounds decide");
  page.paragraph(
      "Least squares has to invert X'X, the products of the columns of X with one another. "
      "Each ground is graded pass, caution or fail.",
      2);
  page.blank();
  write_ground(grounds.identified, "Identified: do the columns determine every coefficient?", page);
  if (audit.verdict.overall == Overall::singular) {
    page.blank();
    page.paragraph(fmt::format("The other three grounds are judged on the {} kept:",
                               counted_are(audit.kept.size(), "column that", "columns that")),
                   2);
    page.blank();
  }
  write_ground(grounds.computable, "Computable: does the inverse survive double precision?", page);
  write_ground(grounds.recorded,
               "Recorded: is a singular X farther away than the rounding of the data?", page);
  write_ground(grounds.informative, "Informative: do the coefficients keep usable precision?",
               page);
}

}  // namespace gramproof::report
