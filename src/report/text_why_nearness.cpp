// A column that can be kept: how near it is to the others, through which, held up by which rows.
#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "base/text.hpp"
#include "report/number_text.hpp"
#include "report/text_parts.hpp"
#include "report/why_parts.hpp"

namespace gramproof::report {
namespace {

using audit::Nearness;
using audit::RelationFinding;
using audit::Standing;
using audit::Why;
using audit::WhyColumn;

std::string named_families(const audit::Audit& audit, const std::vector<int>& families) {
  std::vector<std::string> names;
  for (const int family : families)
    names.push_back("`" + audit.design.families.at(static_cast<std::size_t>(family)).name + "`");
  return listed(names);
}

std::string share_sentence(const audit::Audit& audit, const audit::Inflation& inflation) {
  const double known = known_digits_of_squares(audit);
  if (!inflation.own_share)
    return "It has one value in every row, so that no share of it can be told from the mean.";
  if (known < 1) {
    return "How much of it is its own is not known in double precision: the columns are too close "
           "to a relation.";
  }
  const bool centred = audit.centred_by != audit::CentredBy::none;
  const double factor = std::sqrt(1 / *inflation.own_share);
  return fmt::format(
      "{} of its {} is its own, the rest is reproduced by the other columns. Its variance "
      "inflation factor is {}{}: the standard error is {} as large as if it shared nothing.",
      share(*inflation.own_share, known), centred ? "variation around the mean" : "sum of squares",
      figure(1 / *inflation.own_share, known), centred ? "" : " (uncentred, without a constant)",
      times(factor, known));
}

std::string family_sentence(const audit::Audit& audit, const audit::FamilyInflation& inflation) {
  const auto& family = audit.design.families.at(static_cast<std::size_t>(inflation.family));
  const double known = std::min(known_digits_of_squares(audit), 3.0);
  if (known < 1) return "";
  return fmt::format(
      "Its family `{}` ({}) is read as a whole: what the other families cost it is a factor of {} "
      "on a standard error, averaged over its dimensions (Fox & Monette 1992).",
      family.name, counted(family.columns.size(), "column", "columns"),
      figure(inflation.per_dimension, known));
}

std::string standing_sentence(const RelationFinding& relation) {
  switch (relation.standing) {
    case Standing::exact_except:
      return fmt::format("holds on {}; {} it, and that alone keeps the column apart:",
                         counted(relation.rows_holding, "row", "rows"),
                         relation.rows_violating == 1
                             ? "one row breaks"
                             : fmt::format("{} rows break", grouped(relation.rows_violating)));
    case Standing::within_rounding:
      return "holds as far as it can be computed, but is no relation of whole numbers and is not "
             "proved.";
    case Standing::within_recorded_precision:
      return "holds in every row within the rounding of the data: the column may be apart from the "
             "others by rounding alone.";
    default:
      break;
  }
  return "nearly; the coefficients are fitted by least squares.";
}

std::string cells_text(const std::vector<std::pair<std::string, std::string>>& cells) {
  std::string text;
  for (const auto& [column, cell] : cells)
    text += fmt::format("{}{} = {}", text.empty() ? "" : ", ", column, cell);
  return text;
}

void write_violations(const RelationFinding& relation, Page& page) {
  const std::size_t told = std::min(relation.violations.size(), most_rows_told);
  for (std::size_t i = 0; i < told; ++i) {
    const audit::Violation& violation = relation.violations[i];
    page.item("-", 2,
              fmt::format("{}:{} (row {}): {}", violation.file, violation.line,
                          grouped(violation.row), cells_text(violation.cells)),
              5);
  }
  if (relation.rows_violating > told)
    page.item("-", 2, fmt::format("and {} more.", grouped(relation.rows_violating - told)), 5);
}

std::vector<int> columns_of(const RelationFinding& relation) {
  std::vector<int> columns;
  for (const audit::RelationTerm& term : relation.terms) columns.push_back(term.column);
  std::sort(columns.begin(), columns.end());
  return columns;
}

/// A relation that few rows break is near as well: it is told once, by its proof.
bool told_before(const std::vector<RelationFinding>& relations, std::size_t at) {
  return std::any_of(relations.begin(), relations.begin() + static_cast<std::ptrdiff_t>(at),
                     [&](const RelationFinding& earlier) {
                       return columns_of(earlier) == columns_of(relations[at]);
                     });
}

void write_relations(const Nearness& near, Page& page) {
  for (std::size_t i = 0; i < near.relations.size(); ++i) {
    if (told_before(near.relations, i)) continue;
    const RelationFinding& relation = near.relations[i];
    page.blank();
    page.cut(relation.text, most_lines_of_an_equation,
             fmt::format("... ({} in all)", counted(relation.terms.size(), "column", "columns")), 5,
             3);
    page.paragraph(standing_sentence(relation), 5);
    if (relation.standing == Standing::exact_except) write_violations(relation, page);
  }
}

void write_competitions(const audit::Audit& audit, const Nearness& near, Page& page) {
  const double known = std::min(known_digits_of_squares(audit), 3.0);
  if (known < 1) return;
  for (const audit::Competition& competition : near.between_families) {
    if (competition.with.empty()) continue;
    page.paragraph(
        fmt::format("Its family competes with {} (index between families {}).",
                    named_families(audit, competition.with), figure(competition.index, known)),
        2);
  }
  for (const audit::Competition& competition : near.between_columns) {
    page.paragraph(
        fmt::format(
            "At the scaled condition index {} more than half of the variance of its coefficient "
            "arises{}.",
            figure(competition.index, known),
            competition.with.empty() ? ", of that of no other column"
                                     : ", as it does for " + names_of(audit, competition.with)),
        2);
  }
}

/// Columns with logarithms and the like are proved independent by intervals, or not at all.
std::string proof_sentence(const audit::Audit& audit, const WhyColumn& asked) {
  const std::vector<int>& unsettled = audit.rank.unsettled;
  const bool beside_kept_only = !standing_at(audit, Standing::within_rounding).empty();
  const std::string rows = counted(audit.rows_used, "row", "rows");
  if (unsettled.empty()) {
    return fmt::format(
        "It is no combination of the other columns{}: proved from the decimals of the {} used, "
        "with no tolerance.",
        beside_kept_only ? " that are kept" : "", rows);
  }
  if (std::find(unsettled.begin(), unsettled.end(), asked.column) != unsettled.end()) {
    return "It counts as independent of the other columns. That is not proved: logarithms, roots "
           "and the like are no decimals, and enclosing their rounding errors did not settle it.";
  }
  return fmt::format(
      "It is no combination of the other columns, but for {}, of which no independence is proved: "
      "shown from the decimals of the {} used, with no tolerance.",
      names_of(audit, unsettled), rows);
}

std::string not_kept_sentence(const audit::Audit& audit, const WhyColumn& asked) {
  if (!asked.nearness->relations.empty()) {
    return "It is left out although no relation through it is proved in whole numbers, which "
           "logarithms and roots do not allow:";
  }
  return fmt::format("It is left out for want of rows: {} cannot determine the coefficients of {}.",
                     counted(audit.rows_used, "row", "rows"),
                     counted(audit.design.columns.size(), "column", "columns"));
}

void write_row(const audit::HoldingRow& row, bool with_share, Page& page) {
  std::string text = fmt::format("{}:{} (row {}): ", row.file, row.line, grouped(row.row));
  if (with_share) text += fmt::format("{} of it; ", share(row.share, 2));
  page.item("-", 2, text + cells_text(row.cells), 5);
}

/// Rows with less than a hundredth of the largest share hold nothing up.
void write_largest_rows(const Nearness& near, Page& page) {
  if (near.rows.empty()) return;
  page.paragraph("The rows with the largest shares of its sum of squares:", 2);
  for (const audit::HoldingRow& row : near.rows) {
    if (row.share >= near.rows.front().share / 100) write_row(row, true, page);
  }
}

void write_rare(const WhyColumn& asked, Page& page) {
  for (const audit::RareLevel& rare : asked.nearness->rare) {
    page.paragraph(
        rare.column == asked.column
            ? fmt::format("It is 1 in {} only.", counted(rare.rows, "row", "rows"))
            : fmt::format("It is compared with `{}`, of which there {} only {}.", rare.label,
                          rare.rows == 1 ? "is" : "are", counted(rare.rows, "row", "rows")),
        2);
  }
  for (const audit::HoldingRow& row : asked.nearness->rare_rows) write_row(row, false, page);
}

}  // namespace

void write_nearness(const Why& why, const WhyColumn& asked, Page& page) {
  const audit::Audit& audit = why.audit;
  const Nearness& near = *asked.nearness;
  const std::string name = name_of(audit, asked.column);
  page.paragraph(near.kept ? fmt::format("{} can be kept", name)
                           : fmt::format("{} is left out, without a proof", name),
                 0, Tone::strong);
  page.blank();
  if (!near.kept) {
    page.paragraph(not_kept_sentence(audit, asked), 2);
    write_relations(near, page);
    return;
  }
  page.paragraph(proof_sentence(audit, asked), 2);
  if (!audit.left_out.empty()) {
    const bool one = audit.left_out.size() == 1;
    page.paragraph(
        fmt::format("The figures are those of the {} kept; {} {} left out as {} of them.",
                    counted(audit.kept.size(), "column", "columns"),
                    names_of(audit, audit.left_out), one ? "is" : "are",
                    one ? "a combination" : "combinations"),
        2);
  }
  page.heading("How near it is to the others, and through which");
  if (near.inflation) page.paragraph(share_sentence(audit, *near.inflation), 2);
  if (near.family && near.family->dimensions >= 2)
    page.paragraph(family_sentence(audit, *near.family), 2);
  write_competitions(audit, near, page);
  if (near.relations.empty() && near.between_columns.empty() && near.between_families.empty()) {
    page.paragraph(
        "It is near no combination of them: no scaled condition index from 10 on takes more than "
        "half of the variance of its coefficient.",
        2);
  }
  write_relations(near, page);
}

void write_holding_rows(const Why& why, const WhyColumn& asked, Page& page) {
  const Nearness& near = *asked.nearness;
  if (!near.kept || (!near.identifying_rows && near.rare.empty())) return;
  page.heading("Which rows hold it up");
  if (near.identifying_rows) {
    page.paragraph(
        fmt::format(
            "Its coefficient rests on what of it the other columns do not reproduce (Frisch & "
            "Waugh 1933, Lovell 1963). By one more pass over the data, that residual is spread as "
            "if over {} of the {} used.",
            counted(static_cast<std::uint64_t>(std::llround(*near.identifying_rows)), "row",
                    "rows"),
            grouped(why.audit.rows_used)),
        2);
    if (near.rare_rows.empty()) write_largest_rows(near, page);
  }
  write_rare(asked, page);
}

}  // namespace gramproof::report
