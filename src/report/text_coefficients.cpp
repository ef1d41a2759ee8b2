// What each coefficient keeps: the share of its column that the others do not reproduce.
#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "base/text.hpp"
#include "report/number_text.hpp"
#include "report/text_parts.hpp"

namespace gramproof::report {
namespace {

using audit::Inflation;

double factor_of(const Inflation& inflation) {
  if (!inflation.own_share || !(*inflation.own_share > 0)) return 1;
  return 1 / std::sqrt(*inflation.own_share);
}

std::vector<const Inflation*> worst_first(const audit::Audit& audit) {
  std::vector<const Inflation*> order;
  for (const Inflation& inflation : audit.inflation) {
    if (inflation.own_share) order.push_back(&inflation);
  }
  std::stable_sort(order.begin(), order.end(), [](const Inflation* a, const Inflation* b) {
    return *a->own_share < *b->own_share;
  });
  return order;
}

bool is_focus(const audit::Audit& audit, const Inflation& inflation) {
  return audit::is_focused(audit, inflation.column);
}

/// Other kept columns of the family of `column`.
std::size_t relatives(const audit::Audit& audit, int column) {
  const int family = audit.design.columns.at(static_cast<std::size_t>(column)).family;
  if (family < 0) return 0;
  const auto in_family = [&](int other) {
    return other != column &&
           audit.design.columns.at(static_cast<std::size_t>(other)).family == family;
  };
  return static_cast<std::size_t>(std::count_if(audit.kept.begin(), audit.kept.end(), in_family));
}

std::string coefficient_sentence(const audit::Audit& audit, const Inflation& inflation) {
  const double known = known_digits_of_squares(audit);
  if (known < 1) {
    return fmt::format(
        "{}: the own share and the standard error are not known in double precision; "
        "the columns are too close to a relation.",
        name_of(audit, inflation.column));
  }
  std::string text = fmt::format(
      "{}: {} of it is its own; standard error {} as large, that is {} when the residuals have "
      "standard deviation 1.",
      name_of(audit, inflation.column), share(inflation.own_share.value_or(1), known),
      times(factor_of(inflation), known), figure(inflation.standard_error_per_sigma, known));
  const std::size_t others = relatives(audit, inflation.column);
  if (others > 0 && factor_of(inflation) >= 2) {
    text += fmt::format(" Part of that is due to its own family ({}).",
                        counted(others, "further column", "further columns"));
  }
  return text;
}

void write_items(const audit::Audit& audit, const std::vector<const Inflation*>& items,
                 std::size_t most, Page& page) {
  for (std::size_t i = 0; i < std::min(items.size(), most); ++i) {
    page.item("-", 2, coefficient_sentence(audit, *items[i]), 2);
  }
}

void write_rest(const audit::Audit& audit, const std::vector<const Inflation*>& order,
                std::size_t told, Page& page) {
  if (order.size() <= told) return;
  const double known = known_digits_of_squares(audit);
  if (known < 1) return;
  const std::size_t rest = order.size() - told;
  page.paragraph(
      fmt::format("{} standard error{} at most {} as large.",
                  rest == 1 ? "The other coefficient has a"
                            : fmt::format("The {} other coefficients have", grouped(rest)),
                  rest == 1 ? "" : "s", times(factor_of(*order[told]), known)),
      2);
}

/// How many of the worst are told one by one: those that cost something, at least one.
std::size_t worth_telling(const std::vector<const Inflation*>& order) {
  std::size_t number = 1;
  while (number < std::min(order.size(), most_coefficients_told) &&
         factor_of(*order[number]) >= 1.5) {
    ++number;
  }
  return number;
}

/// Families of several columns, judged as a whole (Fox & Monette 1992).
void write_families(const audit::Audit& audit, Page& page) {
  std::vector<audit::FamilyInflation> order;
  for (const audit::FamilyInflation& family : audit.between.inflation) {
    if (family.dimensions >= 2) order.push_back(family);
  }
  if (order.empty()) return;
  std::stable_sort(order.begin(), order.end(),
                   [](const auto& a, const auto& b) { return a.per_dimension > b.per_dimension; });
  const double known = known_digits_of_squares(audit);
  page.blank();
  page.paragraph(
      "A family of several columns is read as a whole. What the other families cost it, as the "
      "factor on "
      "a standard error, averaged over its columns (from the generalised variance inflation factor "
      "of "
      "Fox & Monette 1992):",
      2);
  const std::size_t told = std::min<std::size_t>(order.size(), 4);
  for (std::size_t i = 0; i < told; ++i) {
    const auto& family = audit.design.families.at(static_cast<std::size_t>(order[i].family));
    page.item("-", 2,
              fmt::format("`{}`, {}: {}.", family.name,
                          counted(static_cast<std::uint64_t>(order[i].dimensions), "dimension",
                                  "dimensions"),
                          figure(order[i].per_dimension, std::min(known, 3.0))),
              2);
  }
  if (order.size() == told) return;
  page.paragraph(
      fmt::format("{}: at most {}.", counted(order.size() - told, "other family", "other families"),
                  figure(order[told].per_dimension, std::min(known, 3.0))),
      2);
}

std::string share_sentence(const audit::Audit& audit) {
  const char* basis = audit.centred_by == audit::CentredBy::none
                          ? "its sum of squares (the design has no constant, so nothing is centred)"
                          : "its variation around the mean";
  return fmt::format(
      "What the other columns do not reproduce of a column is its own share, counted in {}; only "
      "that "
      "part tells its coefficient from theirs. The standard error is compared with the one it "
      "would "
      "have if the column shared nothing.",
      basis);
}

void write_lost_focus(const audit::Audit& audit, Page& page) {
  std::vector<int> lost;
  for (const int column : audit.left_out) {
    if (audit::is_focused(audit, column)) lost.push_back(column);
  }
  if (lost.empty()) return;
  page.paragraph(fmt::format("{} {} left out above and ha{} no coefficient of {} own.",
                             names_of(audit, lost), lost.size() == 1 ? "is" : "are",
                             lost.size() == 1 ? "s" : "ve", lost.size() == 1 ? "its" : "their"),
                 2);
}

}  // namespace

void write_coefficients(const audit::Audit& audit, Page& page) {
  const auto order = worst_first(audit);
  std::vector<const Inflation*> focus;
  for (const Inflation* inflation : order) {
    if (is_focus(audit, *inflation)) focus.push_back(inflation);
  }
  if (order.empty()) return;
  page.heading(focus.empty() ? "What the coefficients keep, the worst first"
                             : "What the coefficients in focus keep");
  page.paragraph(share_sentence(audit), 2);
  write_lost_focus(audit, page);
  if (!focus.empty()) {
    write_items(audit, focus, most_focus_told, page);
    write_rest(audit, focus, most_focus_told, page);
    const std::size_t controls = order.size() - focus.size();
    if (controls > 0) {
      page.paragraph(
          fmt::format("{} not in focus; the JSON document has {}.",
                      counted_are(controls, "further coefficient", "further coefficients"),
                      controls == 1 ? "its figures" : "their figures"),
          2);
    }
  } else {
    const std::size_t told = worth_telling(order);
    write_items(audit, order, told, page);
    write_rest(audit, order, told, page);
  }
  write_families(audit, page);
}

void write_contrasts(const audit::Audit& audit, Page& page) {
  if (audit.contrasts.empty()) return;
  page.heading("The sums of coefficients you asked for");
  for (const audit::ContrastFinding& contrast : audit.contrasts) {
    if (!contrast.estimable) {
      page.item(
          "-", 2,
          fmt::format("`{}` cannot be estimated: other values of it fit the data equally well.{}",
                      contrast.text,
                      contrast.blocking_relation.empty()
                          ? ""
                          : fmt::format(" In the way: {}", contrast.blocking_relation)),
          2);
      continue;
    }
    std::string text = fmt::format("`{}` can be estimated", contrast.text);
    if (contrast.standard_error_per_sigma) {
      const double known = known_digits_of_squares(audit);
      text += fmt::format("; its standard error for a residual standard deviation of 1 is {}",
                          figure(*contrast.standard_error_per_sigma, known));
    }
    page.item("-", 2, text + ".", 2);
  }
}

void write_rare_levels(const audit::Audit& audit, Page& page) {
  if (audit.rare_levels.empty()) return;
  page.heading("Levels that rest on very few rows");
  page.paragraph(
      "A coefficient, or a comparison with a level left out, is no better than the rows "
      "behind it. Fewer than 10 rows:",
      2);
  std::vector<std::string> items;
  for (const audit::RareLevel& level : audit.rare_levels) {
    items.push_back(fmt::format("`{}` ({}{})", level.label, counted(level.rows, "row", "rows"),
                                level.column < 0 ? ", the level left out" : ""));
  }
  page.paragraph(listed(items, most_notes_told) + ".", 2);
}

}  // namespace gramproof::report
