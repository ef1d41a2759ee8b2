// A column that is a combination of others: of which, since when, what could go instead, and what
// leaving it out makes of the other coefficients.
#include <algorithm>

#include <fmt/format.h>

#include "base/text.hpp"
#include "report/text_parts.hpp"
#include "report/why_parts.hpp"

namespace gramproof::report {
namespace {

using audit::Dependence;
using audit::Habit;
using audit::Why;
using audit::WhyColumn;

bool contains(const std::vector<int>& columns, int column) {
  return std::find(columns.begin(), columns.end(), column) != columns.end();
}

std::vector<int> without(std::vector<int> columns, int column) {
  std::erase(columns, column);
  return columns;
}

void write_relation(const std::string& text, std::size_t columns, Page& page) {
  page.blank();
  page.cut(text, most_lines_of_an_equation,
           fmt::format("... ({} in all)", counted(columns, "column", "columns")), 5, 3);
  page.blank();
}

std::string since_sentence(const audit::Audit& audit, int column, int since) {
  const std::string position =
      fmt::format("column {} of {}", grouped(static_cast<std::uint64_t>(since) + 1),
                  grouped(audit.design.columns.size()));
  if (since == column) {
    return fmt::format(
        "In the order written, the columns before it already determine it: {} ({}) is a "
        "combination of them from the moment it comes.",
        name_of(audit, column), position);
  }
  return fmt::format(
      "In the order written, {} is no combination of what has come so far until {} ({}) joins: "
      "since then it is one.",
      name_of(audit, column), name_of(audit, since), position);
}

void write_further(const Dependence& found, Page& page) {
  if (found.further.empty()) return;
  page.paragraph(found.further.size() + found.further_omitted == 1
                     ? "It takes part in another relation too:"
                     : "It takes part in other relations too:",
                 2);
  for (const audit::RelationFinding& relation : found.further)
    page.cut(relation.text, 2, fmt::format("... ({} columns)", relation.terms.size()), 5, 3);
  if (found.further_omitted > 0)
    page.paragraph(fmt::format("and {} more.", grouped(found.further_omitted)), 5);
}

std::string verdict_sentence(const Why& why, const WhyColumn& asked) {
  const std::string name = name_of(why.audit, asked.column);
  const Dependence& found = *asked.dependence;
  if (why.asked_for == audit::AskedFor::level_left_out)
    return fmt::format("{} cannot be added: it is a combination of the columns there are", name);
  if (found.left_out) return fmt::format("{} cannot be kept beside the other columns", name);
  return fmt::format("{} cannot be kept beside all the other columns", name);
}

std::string proof_sentence(const audit::RelationFinding& relation) {
  std::string text = fmt::format(
      "This holds on all {} used. It is proved in whole numbers from the decimals as they are "
      "written, with no tolerance.",
      counted(relation.rows_holding, "row", "rows"));
  if (!relation.cause_text.empty()) text += " " + relation.cause_text;
  return text.back() == '.' ? text : text + ".";
}

std::string own_choice_sentence(const Why& why, const WhyColumn& asked) {
  const std::string name = name_of(why.audit, asked.column);
  if (why.asked_for == audit::AskedFor::level_left_out) {
    return fmt::format(
        "The design as written makes no column of this level: levels() leaves one level out for "
        "just this reason, and every other level is then compared with it. For this answer {} was "
        "added to the design.",
        name);
  }
  if (asked.dependence->left_out) return "`gramproof check` leaves it out.";
  // What is left out within rounding or for want of rows has no part in this.
  std::vector<int> instead;
  for (const int column : why.audit.left_out) {
    const bool here = contains(asked.dependence->choice.without, column);
    if (!here && audit::in_exact_relation(why.audit, column)) instead.push_back(column);
  }
  return fmt::format("`gramproof check` keeps it and leaves out {} instead.",
                     names_of(why.audit, instead));
}

std::string habit_name(Habit habit) {
  switch (habit) {
    case Habit::first_kept:
      return "first come, first kept";
    case Habit::last_kept:
      return "last come, first kept";
    case Habit::largest_raw:
      return "largest remainder next";
    case Habit::largest_unit:
      return "the same, unit length";
    case Habit::gramproof:
      break;
  }
  return "gramproof check";
}

std::string estimand_text(const audit::Audit& audit, const audit::Estimand& estimand) {
  exact::LinearForm whole = estimand.carries;
  whole.insert(whole.begin(), {estimand.column, 1});
  return form_text(audit, whole);
}

void write_estimand(const audit::Audit& audit, const audit::Estimand& estimand,
                    std::size_t label_width, Page& page) {
  const std::string& label =
      audit.design.columns.at(static_cast<std::size_t>(estimand.column)).label;
  page.item(label, label_width, "estimates " + estimand_text(audit, estimand), 5);
}

std::size_t width_of_labels(const audit::Audit& audit,
                            const std::vector<const audit::Estimand*>& estimands) {
  std::size_t width = 0;
  for (const audit::Estimand* estimand : estimands) {
    width = std::max(
        width, display_width(visible(
                   audit.design.columns.at(static_cast<std::size_t>(estimand->column)).label)));
  }
  return std::min<std::size_t>(width, 32) + 2;
}

/// Those that carry the column asked for come first.
std::vector<const audit::Estimand*> in_order(const Dependence& found, int column) {
  std::vector<const audit::Estimand*> order;
  for (const audit::Estimand& estimand : found.choice.changed) order.push_back(&estimand);
  std::stable_partition(order.begin(), order.end(), [column](const audit::Estimand* estimand) {
    return exact::coefficient_of(estimand->carries, column) != 0;
  });
  return order;
}

}  // namespace

void write_dependence(const Why& why, const WhyColumn& asked, Page& page) {
  const audit::Audit& audit = why.audit;
  const Dependence& found = *asked.dependence;
  page.paragraph(verdict_sentence(why, asked), 0, Tone::strong);
  page.blank();
  if (contains(why.always, asked.column)) {
    page.paragraph(
        fmt::format("{} is 0 in every one of the {} used: no data can tell its "
                    "coefficient, whatever else is in the design.",
                    name_of(audit, asked.column), counted(audit.rows_used, "row", "rows")),
        2);
    return;
  }
  page.paragraph(
      fmt::format("{} is an exact combination of other columns:", name_of(audit, asked.column)), 2);
  write_relation(found.relation.text, found.relation.terms.size(), page);
  page.paragraph(proof_sentence(found.relation), 2);
  write_further(found, page);
  page.paragraph(since_sentence(audit, asked.column, found.since), 2);
  page.paragraph(own_choice_sentence(why, asked), 2);
}

void write_what_could_go(const Why& why, const WhyColumn& asked, Page& page) {
  const audit::Audit& audit = why.audit;
  const Dependence& found = *asked.dependence;
  page.heading("Which column could go instead");
  const std::vector<int> beside = without(found.choice.without, asked.column);
  if (found.instead.empty()) {
    const bool any_protected =
        std::any_of(audit.design.columns.begin(), audit.design.columns.end(),
                    [](const design::DesignColumn& c) { return c.role == design::Role::protect; });
    page.paragraph(fmt::format("None: {} goes under every choice{}.", name_of(audit, asked.column),
                               any_protected ? " that keeps as many of the protected columns" : ""),
                   2);
  } else {
    page.paragraph(fmt::format("{}. The fitted values are the same whichever goes; what the "
                               "remaining coefficients mean is not.",
                               alternatives(audit, found.instead)),
                   2);
  }
  if (!beside.empty()) {
    page.paragraph(fmt::format("There are {} relations, so that {} columns must go in all. Here {} "
                               "{} left out as well.",
                               grouped(audit.null_space.size()), grouped(audit.null_space.size()),
                               names_of(audit, beside), beside.size() == 1 ? "is" : "are"),
                   2);
  }
  page.paragraph(
      fmt::format("In the whole design {} in no exact relation and never {} to go; {} can go or "
                  "stay, as one chooses{}.",
                  counted_are(why.never_removable.size(), "column", "columns"),
                  why.never_removable.size() == 1 ? "has" : "have",
                  counted(why.sometimes.size(), "column", "columns"),
                  why.always.empty() ? ""
                                     : fmt::format("; {} {} zero throughout and always go{}",
                                                   names_of(audit, why.always),
                                                   why.always.size() == 1 ? "is" : "are",
                                                   why.always.size() == 1 ? "es" : "")),
      2);
}

void write_estimands(const Why& why, const WhyColumn& asked, Page& page) {
  const audit::Audit& audit = why.audit;
  const Dependence& found = *asked.dependence;
  page.heading(
      fmt::format("What the other coefficients mean without {}", name_of(audit, asked.column)));
  if (found.choice.changed.empty()) {
    page.paragraph("What they meant before: no coefficient changes.", 2);
    return;
  }
  const std::vector<int> beside = without(found.choice.without, asked.column);
  page.paragraph(
      fmt::format(
          "Left out: {}{}. On the left stands the coefficient that is estimated, on the "
          "right what it then tells, where a name stands for the coefficient in the "
          "equation with all columns.",
          name_of(audit, asked.column),
          beside.empty() ? "" : " and, because of other relations, " + names_of(audit, beside)),
      2);
  page.blank();
  const std::vector<const audit::Estimand*> order = in_order(found, asked.column);
  const std::size_t told = std::min(order.size(), most_estimands_told);
  const std::size_t width =
      width_of_labels(audit, {order.begin(), order.begin() + static_cast<std::ptrdiff_t>(told)});
  for (std::size_t i = 0; i < told; ++i) write_estimand(audit, *order[i], width, page);
  if (order.size() > told)
    page.paragraph(fmt::format("and {} more.", grouped(order.size() - told)), 5);
  page.blank();
  if (found.choice.untouched.empty()) {
    page.paragraph("No other coefficient is left as it was.", 2);
    return;
  }
  page.paragraph(fmt::format("Untouched, with the meaning {} in the equation with all columns: {}.",
                             found.choice.untouched.size() == 1 ? "it has" : "they have",
                             names_of(audit, found.choice.untouched)),
                 2);
}

void write_habits(const Why& why, Page& page) {
  if (why.habits.empty()) return;
  page.heading("What programs leave out, by their habits");
  for (const audit::HabitOutcome& outcome : why.habits) {
    page.item(habit_name(outcome.habit), 25, names_of(why.audit, outcome.left_out), 5);
  }
  page.paragraph(
      "The largest remainder is that of QR with column pivoting (Businger & Golub 1965): the "
      "column of which most is left beside those chosen comes next, of equal ones the first, in "
      "its "
      "own units or with all columns scaled to unit length. A program that finds relations by a "
      "tolerance may also miss one, or leave out a column that could stay.",
      2);
  const auto& doubles = why.audit.rank.rank_of_the_doubles;
  if (!doubles || *doubles <= why.audit.rank.rank) return;
  page.paragraph(
      fmt::format("Rounded to doubles, these columns have rank {} and not {}: a program that holds "
                  "doubles sees a relation or not as its tolerance has it.",
                  grouped(*doubles), grouped(why.audit.rank.rank)),
      2);
}

}  // namespace gramproof::report
