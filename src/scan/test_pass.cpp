#include <algorithm>
#include <numeric>
#include <utility>

#include "scan/pass.hpp"
#include "scan/reading.hpp"

namespace gramproof::scan {
namespace {

/// Result of testing the vectors on one piece, with the violating rows it may contribute.
struct PieceTest {
  std::vector<exact::RelationTest> tests;
  std::vector<table::Piece> violators;
};

PieceTest test_piece(const design::Design& design, const table::Piece& piece,
                     const std::vector<std::size_t>& rows,
                     const std::vector<exact::NullVector>& vectors) {
  PieceTest result;
  result.tests = exact::test_relations(design, piece, rows, vectors, most_violators);
  for (const exact::RelationTest& test : result.tests) {
    std::vector<std::size_t> violating;
    for (const auto& violation : test.first) violating.push_back(violation.row_in_piece);
    result.violators.push_back(table::gather(piece, violating));
  }
  return result;
}

void take(TestedVector& total, const exact::RelationTest& test, const table::Piece& violators) {
  total.holding += test.holding;
  total.violating += test.violating;
  total.speaking += test.speaking;
  total.largest_residual = std::max(total.largest_residual, test.largest_residual);
  if (total.residuals.size() >= most_violators || test.first.empty()) return;
  const std::size_t room = most_violators - total.residuals.size();
  std::vector<std::size_t> rows;
  for (std::size_t i = 0; i < test.first.size() && i < room; ++i) {
    rows.push_back(i);
    total.residuals.push_back(test.first[i].residual);
  }
  if (total.violators.columns.empty()) {
    total.violators = table::gather(violators, rows);
  } else {
    table::append(total.violators, table::gather(violators, rows));
  }
}

}  // namespace

std::vector<TestedVector> test_on_rows(const design::Design& design, const table::Piece& rows,
                                       const std::vector<exact::NullVector>& vectors) {
  std::vector<std::size_t> all(rows.rows);
  std::iota(all.begin(), all.end(), std::size_t{0});
  const PieceTest part = test_piece(design, rows, all, vectors);
  std::vector<TestedVector> totals(vectors.size());
  for (std::size_t i = 0; i < totals.size(); ++i) take(totals[i], part.tests[i], part.violators[i]);
  return totals;
}

Result<std::vector<TestedVector>> test_on_all_rows(table::Source& source,
                                                   const table::Schema& schema,
                                                   const design::Design& design,
                                                   const std::vector<exact::NullVector>& vectors,
                                                   const PassOptions& options) {
  std::vector<TestedVector> totals(vectors.size());
  Result<void> passed = pass_over<PieceTest>(
      source, schema, design, options,
      [&](const ExpandedPiece& expanded) {
        return test_piece(design, expanded.piece, expanded.block.rows, vectors);
      },
      [&](const PieceTest& part) {
        for (std::size_t i = 0; i < totals.size(); ++i)
          take(totals[i], part.tests[i], part.violators[i]);
      });
  if (!passed) return passed.error();
  return totals;
}

}  // namespace gramproof::scan
