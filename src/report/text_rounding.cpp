// What rounding hides: relations that cannot be proved, and X held as doubles.
#include <fmt/format.h>

#include <algorithm>
#include <string>
#include <vector>

#include "base/text.hpp"
#include "report/text_parts.hpp"

namespace gramproof::report {
namespace {

using audit::RelationFinding;

std::string doubles_sentence(const audit::Audit& audit) {
  const audit::Rank& rank = audit.rank;
  if (!rank.rank_of_the_doubles) return "";
  const std::uint64_t doubles = *rank.rank_of_the_doubles;
  if (doubles == rank.rank || doubles == rank.numerical) return "";
  const std::string ranks = fmt::format("Once its entries are doubles, X has rank {} and not {}",
                                        grouped(doubles), grouped(rank.rank));
  if (doubles < rank.rank) {
    return ranks +
           ": what sets the columns apart lies beyond the 16 digits that a double holds. A program "
           "that reads the file into doubles cannot see it.";
  }
  return ranks +
         ": the last digits of decimals such as 0.1 are rounded away, and columns that depend on "
         "one another in the file no longer do so exactly. A program that holds doubles must "
         "decide by a tolerance, and may keep or drop a column as its tolerance has it.";
}

}  // namespace

void write_relations_within_rounding(const audit::Audit& audit, Page& page) {
  const auto relations = standing_at(audit, audit::Standing::within_rounding);
  if (relations.empty()) return;
  page.heading(relations.size() == 1 ? "A relation that holds to 60 digits"
                                     : "Relations that hold to 60 digits");
  page.paragraph(
      "Values of log, sqrt, exp and asinh are no fractions: they were computed from the decimals "
      "in the file between proved bounds. What follows holds to more than 60 digits in every row, "
      "so that in all likelihood it is true and X'X singular; but it is not proved, and is not "
      "counted in the rank.",
      2);
  const std::size_t told = std::min(relations.size(), most_relations_told);
  for (std::size_t i = 0; i < told; ++i) {
    const RelationFinding& relation = *relations[i];
    write_equation(relation, i + 1, page);
    const std::string residual = relation.largest_residual_value == 0
                                     ? "agree to the last bit computed"
                                     : "differ by less than " + relation.largest_residual;
    page.paragraph(
        fmt::format("On all {} the two sides {}. {}", counted(relation.rows_holding, "row", "rows"),
                    residual, relation.cause_text),
        5);
    page.paragraph(removable_sentence(audit, relation), 5);
  }
  if (relations.size() == told) return;
  page.blank();
  page.paragraph(not_shown(relations.size() - told, "further relation", "further relations"), 2);
}

void write_doubles(const audit::Audit& audit, Page& page) {
  const std::string doubles = doubles_sentence(audit);
  if (doubles.empty()) return;
  page.heading("What a program that holds doubles makes of it");
  page.paragraph(doubles, 2);
}

}  // namespace gramproof::report
