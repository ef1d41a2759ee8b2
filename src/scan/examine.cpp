#include "scan/examine.hpp"

#include <algorithm>
#include <utility>

#include "scan/reading.hpp"

namespace gramproof::scan {
namespace {

struct Part {
  std::uint64_t rows = 0;
  std::vector<PieceAnswer> answers;
  std::vector<table::Piece> violators;  ///< one a statement
};

Part part_of(const table::Piece& piece, const design::Block& block, const Examiner& examiner) {
  Part part;
  part.rows = block.rows.size();
  part.answers = examiner(piece, block);
  for (const PieceAnswer& answer : part.answers) {
    std::vector<std::size_t> rows;
    for (std::size_t i = 0; i < answer.violating.size() && i < most_violators; ++i) {
      rows.push_back(block.rows[answer.violating[i]]);
    }
    part.violators.push_back(table::gather(piece, rows));
  }
  return part;
}

void take(std::vector<Examined>& totals, Part part) {
  totals.resize(part.answers.size());
  for (std::size_t i = 0; i < totals.size(); ++i) {
    Examined& total = totals[i];
    const std::size_t known = total.violators.rows;
    const std::uint64_t violating = part.answers[i].violating.size();
    total.violating += violating;
    total.holding += part.rows - violating;
    total.largest_residual = std::max(total.largest_residual, part.answers[i].largest_residual);
    if (part.violators[i].rows == 0 || known == most_violators) continue;
    if (known == 0) {
      total.violators = std::move(part.violators[i]);
      continue;
    }
    std::vector<std::size_t> rows;
    for (std::size_t r = 0; r < part.violators[i].rows && known + r < most_violators; ++r) {
      rows.push_back(r);
    }
    table::append(total.violators, table::gather(part.violators[i], rows));
  }
}

}  // namespace

Result<std::vector<Examined>> examine_all_rows(table::Source& source, const table::Schema& schema,
                                               const design::Design& design,
                                               const Examiner& examiner,
                                               const PassOptions& options) {
  std::vector<Examined> totals;
  Result<void> passed = pass_over<Part>(
      source, schema, design, options,
      [&](const ExpandedPiece& expanded) {
        return part_of(expanded.piece, expanded.block, examiner);
      },
      [&](Part part) { take(totals, std::move(part)); });
  if (!passed) return passed.error();
  return totals;
}

Result<std::vector<Examined>> examine_rows(const table::Schema& schema,
                                           const std::vector<std::string>& file_names,
                                           const design::Design& design, const table::Piece& rows,
                                           const Examiner& examiner) {
  Result<design::Block> block = design::expand(design, schema, file_names, rows);
  if (!block) return block.error();
  std::vector<Examined> totals;
  take(totals, part_of(rows, block.value(), examiner));
  return totals;
}

}  // namespace gramproof::scan
