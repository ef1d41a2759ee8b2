#include "report/text_report.hpp"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "base/text.hpp"
#include "report/text_parts.hpp"

namespace gramproof::report {

std::string name_of(const audit::Audit& audit, int column) {
  return "`" + audit.design.columns.at(static_cast<std::size_t>(column)).label + "`";
}

std::string listed(const std::vector<std::string>& items, std::size_t most) {
  if (items.empty()) return "";
  // "and 1 more" takes no less room than the name itself.
  const std::size_t told = items.size() <= most + 1 ? items.size() : most;
  const std::size_t rest = items.size() - told;
  std::string text = items[0];
  for (std::size_t i = 1; i < told; ++i) {
    text += (i + 1 == told && rest == 0) ? " and " : ", ";
    text += items[i];
  }
  if (rest > 0) text += fmt::format(" and {} more", grouped(rest));
  return text;
}

std::string names_of(const audit::Audit& audit, const std::vector<int>& columns, std::size_t most) {
  std::vector<std::string> names;
  names.reserve(columns.size());
  for (const int column : columns) names.push_back(name_of(audit, column));
  return listed(names, most);
}

std::vector<const audit::RelationFinding*> standing_at(const audit::Audit& audit,
                                                       audit::Standing standing) {
  std::vector<const audit::RelationFinding*> found;
  for (const audit::RelationFinding& relation : audit.relations) {
    if (relation.standing == standing) found.push_back(&relation);
  }
  return found;
}

void write_equation(const audit::RelationFinding& relation, std::size_t number, Page& page,
                    std::size_t most_lines) {
  page.blank();
  page.cut(fmt::format("{}. {}", number, relation.text), most_lines,
           fmt::format("... ({} in all)", counted(relation.terms.size(), "column", "columns")), 2,
           3);
}

std::string alternatives(const audit::Audit& audit, const std::vector<int>& columns) {
  const std::string text = names_of(audit, columns);
  if (columns.size() < 2 || columns.size() > most_names + 1) return text;
  const std::size_t last = text.rfind(" and ");
  return text.substr(0, last) + " or " + text.substr(last + 5);
}

std::string removable_sentence(const audit::Audit& audit, const audit::RelationFinding& relation) {
  if (relation.removable.empty()) return "";
  return fmt::format("To end it, leave out {}.", alternatives(audit, relation.removable));
}

std::string counted_are(std::size_t number, std::string_view singular, std::string_view plural) {
  return counted(number, singular, plural) + (number == 1 ? " is" : " are");
}

std::string not_shown(std::size_t number, std::string_view singular, std::string_view plural) {
  return fmt::format("{} not shown here; the JSON document lists {}.",
                     counted_are(number, singular, plural), number == 1 ? "it" : "them");
}

double largest_known_condition(const audit::Audit& audit) {
  const auto columns = static_cast<double>(std::max<std::size_t>(audit.kept.size(), 1));
  return 1 / (64 * columns * unit_roundoff);
}

double known_digits_of_index(const audit::Audit& audit, double index) {
  const audit::Conditioning& conditioning = audit.conditioning;
  // Where not one digit holds, known_digits stops at 0 and no longer states the error.
  if (!std::isfinite(conditioning.condition_number) || !(conditioning.known_digits > 0)) {
    return std::log10(largest_known_condition(audit) / index);
  }
  return conditioning.known_digits + std::log10(conditioning.condition_number / index);
}

double known_digits_of_squares(const audit::Audit& audit) {
  return audit.conditioning.known_digits - std::log10(2.0);
}

std::string text_report(const audit::Audit& audit, const TextOptions& options) {
  Page page(static_cast<std::size_t>(std::clamp(options.width, 80, 120)), options.colour);
  write_verdict(audit, page);
  write_grounds(audit, page);
  write_exact_relations(audit, page);
  write_relations_within_rounding(audit, page);
  write_left_out(audit, page);
  write_doubles(audit, page);
  write_relations_with_exceptions(audit, page);
  write_rare_levels(audit, page);
  write_relations_within_recorded_precision(audit, page);
  write_competing(audit, page);
  write_coefficients(audit, page);
  write_contrasts(audit, page);
  write_digits(audit, page);
  write_recording(audit, page);
  write_rows(audit, page);
  write_notes(audit, page);
  write_cautions(page);
  return page.text();
}

}  // namespace gramproof::report
