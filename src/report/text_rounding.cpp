// What rounding hides: relations that cannot be proved, and X held as doubles.
#include <fmt/format.h>

#include <string>

#include "base/text.hpp"
#include "report/text_parts.hpp"

namespace gramproof::report {
namespace {

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

void write_rounding(const audit::Audit& audit, Page& page) {
  const std::string doubles = doubles_sentence(audit);
  if (doubles.empty()) return;
  page.heading("What a program that holds doubles makes of it");
  page.paragraph(doubles, 2);
}

}  // namespace gramproof::report
