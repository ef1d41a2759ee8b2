// Relations that the rounding of the recorded numbers explains.
#include <fmt/format.h>

#include <algorithm>
#include <vector>

#include "base/text.hpp"
#include "report/text_parts.hpp"

namespace gramproof::report {

void write_relations_within_recorded_precision(const audit::Audit& audit, Page& page) {
  std::vector<const audit::RelationFinding*> relations;
  for (const audit::RelationFinding& relation : audit.relations) {
    if (relation.standing == audit::Standing::within_recorded_precision)
      relations.push_back(&relation);
  }
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
    page.blank();
    page.cut(fmt::format("{}. {}", i + 1, relation.text), most_lines_of_an_equation,
             fmt::format("... ({} in all)", counted(relation.terms.size(), "column", "columns")), 2,
             3);
    std::string text = fmt::format(
        "In each of the {} the two sides differ by no more than the steps in which the numbers are "
        "recorded can make, at most by {}.",
        counted(relation.rows_holding, "row used", "rows used"), relation.largest_residual);
    if (!relation.cause_text.empty()) text += " " + relation.cause_text;
    page.paragraph(text, 5);
    page.paragraph(removable_sentence(audit, relation), 5);
  }
  if (relations.size() == told) return;
  page.blank();
  page.paragraph(not_shown(relations.size() - told, "further relation", "further relations"), 2);
}

}  // namespace gramproof::report
