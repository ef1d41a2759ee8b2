// How the data were written, which rows were used, what was noted, and what no tool can know.
#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "base/text.hpp"
#include "report/number_text.hpp"
#include "report/text_parts.hpp"

namespace gramproof::report {
namespace {

using design::Exclusion;

std::string table_name(const audit::Audit& audit, int column) {
  if (column < 0 || static_cast<std::size_t>(column) >= audit.schema.columns.size())
    return "a column";
  return "`" + audit.schema.columns[static_cast<std::size_t>(column)].name + "`";
}

std::string design_name(const audit::Audit& audit, int column) {
  if (column < 0 || static_cast<std::size_t>(column) >= audit.design.columns.size())
    return "a column";
  return name_of(audit, column);
}

std::string exclusion_sentence(const audit::Audit& audit, const Exclusion& exclusion) {
  const std::string rows = counted(exclusion.rows, "row", "rows");
  switch (exclusion.reason) {
    case Exclusion::Reason::filter:
      return fmt::format("{}: not wanted by the condition `{}`.", rows, audit.design.filter_text);
    case Exclusion::Reason::weight_zero:
      return fmt::format("{}: weight 0 in {}.", rows, table_name(audit, audit.design.weight));
    case Exclusion::Reason::undefined:
      if (exclusion.column < 0) {
        return fmt::format("{}: {} has no value there.", rows,
                           audit.design.filter ? "the condition `" + audit.design.filter_text + "`"
                                               : "a product with the level left out");
      }
      return fmt::format(
          "{}: {} has no value there (such as the logarithm of 0, or a division by 0).", rows,
          design_name(audit, exclusion.column));
    case Exclusion::Reason::missing:
      break;
  }
  return fmt::format("{}: {} is missing.", rows, table_name(audit, exclusion.column));
}

double smallest(const Vector& ratios) {
  return ratios.size() == 0 ? std::numeric_limits<double>::infinity() : ratios[0];
}

void write_ratio(const audit::Audit& audit, const Vector& ratios,
                 const std::vector<audit::NoisyDirection>& close, std::string_view reading,
                 Page& page) {
  const double ratio = smallest(ratios);
  if (std::isinf(ratio)) return;
  std::string text =
      fmt::format("{} a singular X is {} as far away as rounding alone moves the columns", reading,
                  times(ratio, known_digits_of_squares(audit)));
  if (!close.empty())
    text += fmt::format("; the nearest one is reached through {}",
                        names_of(audit, close.front().columns));
  page.paragraph(text + ".", 2);
}

void write_attenuation(const audit::Audit& audit, Page& page) {
  const auto& values = audit.recording.attenuation;
  std::size_t worst = values.size();
  for (std::size_t i = 0; i < values.size(); ++i) {
    if (!values[i] || !std::isfinite(*values[i])) continue;
    if (worst == values.size() || *values[i] > *values[worst]) worst = i;
  }
  // Below one part in a thousand no reader of a coefficient would notice.
  if (worst == values.size() || *values[worst] < 1e-3 || worst >= audit.kept.size()) return;
  page.paragraph(
      fmt::format(
          "Rounding can pull the coefficient of {} towards zero by about {}; the other "
          "coefficients less (Davies & Hutton 1975).",
          name_of(audit, audit.kept[worst]),
          share(std::min(*values[worst], 1.0), std::min(known_digits_of_squares(audit), 2.0))),
      2);
}

}  // namespace

void write_recording(const audit::Audit& audit, Page& page) {
  const audit::Recording& recording = audit.recording;
  std::vector<std::string> rounded_columns, binary, whole;
  for (const audit::Step& step : recording.steps) {
    const std::string name = table_name(audit, step.column);
    if (step.how == audit::Step::How::binary) {
      binary.push_back(name);
    } else if (step.how == audit::Step::How::whole) {
      whole.push_back(name);
    } else if (step.step > 0) {
      rounded_columns.push_back(fmt::format("{} to {}", name, rounded(step.step, most_digits)));
    }
  }
  if (rounded_columns.empty() && binary.empty() && whole.empty()) return;
  page.heading("How the data were written down");
  if (!rounded_columns.empty()) {
    page.paragraph(fmt::format("Rounded, as the decimals show: {}.", listed(rounded_columns)), 2);
  }
  if (!whole.empty()) {
    page.paragraph(fmt::format("Whole numbers, which may be counts or rounded measurements: {}. "
                               "They are judged both ways.",
                               listed(whole)),
                   2);
  }
  if (!binary.empty()) {
    page.paragraph(
        fmt::format("With 15 digits or more, so computed by a machine and not recorded by a "
                    "person: {}.",
                    listed(binary)),
        2);
  }
  write_ratio(
      audit, recording.distance_ratios, recording.close,
      recording.whole_numbers_matter ? "Taking whole numbers as exact," : "With these steps,",
      page);
  if (recording.whole_numbers_matter) {
    write_ratio(audit, recording.distance_ratios_whole_rounded, recording.close_whole_rounded,
                "Taking them as rounded,", page);
  }
  write_attenuation(audit, page);
}

void write_rows(const audit::Audit& audit, Page& page) {
  page.heading("Rows");
  if (audit.excluded.empty() && audit.rows_read == audit.rows_used) {
    page.paragraph("No row was excluded.", 2);
    return;
  }
  page.paragraph(fmt::format("{} of {} used; {} excluded:", grouped(audit.rows_used),
                             counted(audit.rows_read, "row", "rows"),
                             grouped(audit.rows_read - audit.rows_used)),
                 2);
  std::vector<Exclusion> order = audit.excluded;
  std::stable_sort(order.begin(), order.end(),
                   [](const Exclusion& a, const Exclusion& b) { return a.rows > b.rows; });
  const std::size_t told = std::min(order.size(), most_notes_told);
  for (std::size_t i = 0; i < told; ++i) page.item("-", 2, exclusion_sentence(audit, order[i]), 2);
  if (order.size() > told) {
    page.item("-", 2,
              fmt::format("{} for fewer rows; the JSON document lists them.",
                          counted(order.size() - told, "further reason", "further reasons")),
              2);
  }
  if (order.size() > 1) {
    page.paragraph("A row that fails for several reasons is counted under each of them.", 2);
  }
}

void write_notes(const audit::Audit& audit, Page& page) {
  if (audit.notes.empty()) return;
  page.heading("Notes");
  const std::size_t told = std::min(audit.notes.size(), most_notes_told);
  for (std::size_t i = 0; i < told; ++i) page.item("-", 2, audit.notes[i].text, 2);
  if (audit.notes.size() == told) return;
  page.item("-", 2,
            fmt::format("{}; the JSON document lists them.",
                        counted(audit.notes.size() - told, "further note", "further notes")),
            2);
}

void write_cautions(Page& page) {
  page.heading("What this report cannot know");
  page.item("-", 2,
            "Collinearity is a property of the design: of these columns on these rows. A sound "
            "verdict does not say that the model is right or that the data are.",
            2);
  page.item("-", 2,
            "Leaving out a variable that belongs in the model can bias every coefficient that "
            "remains. Wide standard errors alone are no reason to leave one out.",
            2);
  page.item("-", 2,
            "Ask the documentation of the survey and a qualified statistician before a tool: they "
            "know how the columns were made, sampled and coded.",
            2);
}

}  // namespace gramproof::report
