// Relations that the rounding of the recorded numbers explains.
#include <fmt/format.h>

#include <algorithm>
#include <vector>

#include "base/text.hpp"
#include "report/number_text.hpp"
#include "report/text_parts.hpp"

namespace gramproof::report {

void write_relations_within_recorded_precision(const audit::Audit& audit, Page& page) {
  const auto relations = standing_at(audit, audit::Standing::within_recorded_precision);
  if (relations.empty()) return;
  page.heading(relations.size() == 1 ? "A relation that only rounding breaks"
                                     : "Relations that only rounding breaks");
  page.paragraph(
      "Were these numbers written with more digits, the relation might be exact and X'X singular: "
      "no row says otherwise. X'X can be inverted because of the rounding alone, and the "
      "coefficients would be made of it.",
      2);
  const std::size_t told = std::min(relations.size(), most_relations_told);
  for (std::size_t i = 0; i < told; ++i) {
    const audit::RelationFinding& relation = *relations[i];
    write_equation(relation, i + 1, page);
    std::string text = fmt::format(
        "In each of the {} the two sides differ by no more than the steps in which the numbers are "
        "recorded can make, at most by {}.",
        counted(relation.rows_holding, "row used", "rows used"),
        rounded(relation.largest_residual_value, 2));
    if (!relation.cause_text.empty()) text += " " + relation.cause_text;
    page.paragraph(text, 5);
    page.paragraph(removable_sentence(audit, relation), 5);
  }
  if (relations.size() == told) return;
  page.blank();
  page.paragraph(not_shown(relations.size() - told, "further relation", "further relations"), 2);
}

}  // namespace gramproof::report
