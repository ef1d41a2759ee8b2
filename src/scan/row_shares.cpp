#include "scan/row_shares.hpp"

#include <algorithm>
#include <numeric>
#include <utility>

#include "scan/reading.hpp"

namespace gramproof::scan {
namespace {

/// The largest entries, largest first, ties in order.
std::vector<Index> largest_entries(const Vector& values, std::size_t most) {
  std::vector<Index> order(static_cast<std::size_t>(values.size()));
  std::iota(order.begin(), order.end(), Index{0});
  const std::size_t kept = std::min(most, order.size());
  std::partial_sort(
      order.begin(), order.begin() + static_cast<std::ptrdiff_t>(kept), order.end(),
      [&](Index a, Index b) { return values[a] != values[b] ? values[a] > values[b] : a < b; });
  order.resize(kept);
  return order;
}

std::vector<RowShares> shares_of_piece(const ExpandedPiece& expanded, const Matrix& directions,
                                       std::size_t most) {
  std::vector<RowShares> result(static_cast<std::size_t>(directions.cols()));
  const design::Block& block = expanded.block;
  for (Index d = 0; d < directions.cols(); ++d) {
    RowShares& shares = result[static_cast<std::size_t>(d)];
    Vector squares = (block.values * directions.col(d)).cwiseAbs2();
    if (block.weights.size() > 0) squares = squares.cwiseProduct(block.weights);
    shares.total = squares.sum();
    shares.squares = squares.squaredNorm();
    for (const Index at : largest_entries(squares, most)) {
      const std::size_t row = block.rows[static_cast<std::size_t>(at)];
      shares.largest.push_back({squares[at], table::gather(expanded.piece, {row})});
    }
  }
  return result;
}

void take(RowShares& total, RowShares part, std::size_t most) {
  total.total += part.total;
  total.squares += part.squares;
  for (SharedRow& row : part.largest) total.largest.push_back(std::move(row));
  std::stable_sort(total.largest.begin(), total.largest.end(),
                   [](const SharedRow& a, const SharedRow& b) { return a.share > b.share; });
  if (total.largest.size() > most) total.largest.resize(most);
}

}  // namespace

Result<std::vector<RowShares>> shares_of_rows(table::Source& source, const table::Schema& schema,
                                              const design::Design& design,
                                              const Matrix& directions, std::size_t most,
                                              const PassOptions& options) {
  std::vector<RowShares> totals(static_cast<std::size_t>(directions.cols()));
  Result<void> passed = pass_over<std::vector<RowShares>>(
      source, schema, design, options,
      [&](const ExpandedPiece& expanded) { return shares_of_piece(expanded, directions, most); },
      [&](std::vector<RowShares> part) {
        for (std::size_t d = 0; d < totals.size(); ++d) take(totals[d], std::move(part[d]), most);
      });
  if (!passed) return passed.error();
  for (RowShares& shares : totals) {
    for (SharedRow& row : shares.largest) row.share /= shares.total > 0 ? shares.total : 1;
  }
  return totals;
}

}  // namespace gramproof::scan
