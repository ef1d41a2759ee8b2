#include "report/text_why.hpp"

#include <algorithm>

#include <fmt/format.h>

#include "base/text.hpp"
#include "exact/sides.hpp"
#include "report/number_text.hpp"
#include "report/text_parts.hpp"
#include "report/why_parts.hpp"

namespace gramproof::report {
namespace {

using audit::Why;
using audit::WhyColumn;

constexpr const char* minus = "\u2212";
constexpr const char* dot = "\u00b7";
constexpr std::size_t most_digits_told = 24;

/// A label that is a sum, or a product beside a factor, needs parentheses in a sum.
std::string label_in_sum(const design::DesignColumn& column, bool beside_factor) {
  using design::Operation;
  if (!column.definition) return column.label;
  const Operation operation = column.definition->operation;
  const bool sum = operation == Operation::add || operation == Operation::subtract;
  const bool product = operation == Operation::multiply || operation == Operation::divide;
  return sum || (product && beside_factor) ? "(" + column.label + ")" : column.label;
}

std::string term_text(const audit::Audit& audit, int column, const mpq_class& size) {
  const auto& named = audit.design.columns.at(static_cast<std::size_t>(column));
  if (size == 1) return label_in_sum(named, false);
  const std::string exact = exact::number_text(size);
  // A fraction of a hundred digits tells a reader nothing but its size.
  const std::string shown =
      exact.size() <= most_digits_told ? exact : "\u2248" + rounded(size.get_d(), most_digits);
  return shown + dot + label_in_sum(named, true);
}

void write_contrasts(const Why& why, Page& page) {
  if (why.contrasts.empty()) return;
  page.heading("The sums of coefficients you asked for");
  for (const audit::WhyContrast& contrast : why.contrasts) {
    const std::string read = form_text(why.audit, contrast.on_kept);
    if (contrast.estimable) {
      page.item("-", 2,
                why.choice.without.empty()
                    ? fmt::format("`{}` can be estimated.", contrast.text)
                    : fmt::format("`{}` can be estimated: it is the same whichever columns of the "
                                  "relations go. With {} left out it is read as {}.",
                                  contrast.text, names_of(why.audit, why.choice.without), read),
                2);
      continue;
    }
    page.item("-", 2,
              fmt::format("`{}` cannot be estimated: other values of it fit the data equally well. "
                          "In the way: {}.{}",
                          contrast.text, contrast.blocking_relation,
                          contrast.on_kept.empty()
                              ? ""
                              : fmt::format(" With {} left out, {} would estimate {} instead.",
                                            names_of(why.audit, why.choice.without), read,
                                            form_text(why.audit, contrast.estimates))),
              2);
  }
  const bool proved = standing_at(why.audit, audit::Standing::within_rounding).empty();
  page.paragraph(
      fmt::format("A sum can be estimated if and only if it is orthogonal to every relation "
                  "(Silvey 1969): proved in whole numbers{}.",
                  proved ? "" : " for exact relations, not for those that hold within rounding"),
      2);
}

void write_one(const Why& why, const WhyColumn& asked, Page& page) {
  if (asked.dependence) {
    write_dependence(why, asked, page);
    write_what_could_go(why, asked, page);
    write_estimands(why, asked, page);
    write_habits(why, page);
  } else {
    write_nearness(why, asked, page);
    write_holding_rows(why, asked, page);
  }
}

std::string line_of(const Why& why, const WhyColumn& asked) {
  const std::string name = name_of(why.audit, asked.column);
  if (asked.dependence) {
    return fmt::format(
        "{} is a combination of other columns{}: {}", name,
        asked.dependence->left_out ? " and is left out" : ", kept in place of another",
        asked.dependence->relation.text);
  }
  const audit::Nearness& near = *asked.nearness;
  if (!near.kept) return name + " is left out without a proof.";
  const double known = known_digits_of_squares(why.audit);
  if (!near.inflation || !near.inflation->own_share || known < 1) return name + " can be kept.";
  std::string text = fmt::format("{} can be kept; {} of it is its own", name,
                                 share(*near.inflation->own_share, known));
  if (near.identifying_rows)
    text += fmt::format(
        ", as if spread over {}",
        counted(static_cast<std::uint64_t>(*near.identifying_rows + 0.5), "row", "rows"));
  return text + ".";
}

bool any_dependent(const Why& why) {
  return std::any_of(why.columns.begin(), why.columns.end(),
                     [](const WhyColumn& column) { return column.dependence.has_value(); });
}

void write_several(const Why& why, Page& page) {
  const std::size_t count = why.columns.size() + why.columns_omitted;
  page.paragraph(fmt::format("`{}` {} {} of this design", why.asked,
                             why.asked_for == audit::AskedFor::term ? "makes" : "is a source of",
                             counted(count, "column", "columns")),
                 0, Tone::strong);
  page.blank();
  for (const WhyColumn& column : why.columns) page.item("-", 2, line_of(why, column), 2);
  if (why.columns_omitted > 0)
    page.item("-", 2, fmt::format("and {} more.", grouped(why.columns_omitted)), 2);
  page.blank();
  page.paragraph(
      fmt::format(
          "Ask for one of them to see which column could go instead, what the others then "
          "mean and which rows hold it up: gramproof why '{}' FILE",
          why.audit.design.columns.at(static_cast<std::size_t>(why.columns.front().column)).label),
      2);
  if (any_dependent(why)) write_habits(why, page);
}

void write_caution(const Why& why, Page& page) {
  page.heading("Before you leave out anything");
  page.item("-", 2,
            "Collinearity is a property of the design: of these columns on these rows. Nothing "
            "here says which variables belong in the model.",
            2);
  page.item("-", 2,
            !any_dependent(why)
                ? "Leaving out a variable that belongs in the model can bias every coefficient "
                  "that remains; a wide standard error alone is no reason for it."
                : "A column of an exact relation can go without a change of the fitted values. Any "
                  "other variable that belongs in the model biases the rest when it is left out.",
            2);
  page.item("-", 2,
            "How the columns were made, coded and sampled stands in the documentation of the "
            "survey. Read that first, and ask a qualified statistician.",
            2);
}

}  // namespace

std::string form_text(const audit::Audit& audit, const exact::LinearForm& form) {
  if (form.empty()) return "0";
  std::string text;
  const bool cut = form.size() > most_terms_told + 1;
  const std::size_t told = cut ? most_terms_told : form.size();
  for (std::size_t i = 0; i < told; ++i) {
    const auto& [column, factor] = form[i];
    if (i == 0) {
      text = factor < 0 ? minus : "";
    } else {
      text += factor < 0 ? std::string(" ") + minus + " " : " + ";
    }
    text += term_text(audit, column, abs(factor));
  }
  if (cut) text += fmt::format(" + \u2026 ({} more)", form.size() - told);
  return text;
}

std::string text_why(const Why& why, const TextOptions& options) {
  Page page(static_cast<std::size_t>(std::clamp(options.width, 80, 120)), options.colour);
  if (why.columns.size() == 1) {
    write_one(why, why.columns.front(), page);
  } else {
    write_several(why, page);
  }
  write_contrasts(why, page);
  write_caution(why, page);
  return page.text();
}

}  // namespace gramproof::report
