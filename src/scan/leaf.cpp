#include "scan/leaf.hpp"

#include <algorithm>
#include <limits>
#include <utility>

#include "exact/modular.hpp"

namespace gramproof::scan {
namespace {

LeafSums sums_of(const design::Block& block) {
  const Index columns = block.values.cols();
  const Index rows = block.values.rows();
  LeafSums sums;
  const auto size = static_cast<std::size_t>(columns);
  sums.weighted_sum.assign(size, 0.0L);
  sums.min.assign(size, std::numeric_limits<double>::infinity());
  sums.max.assign(size, -std::numeric_limits<double>::infinity());
  sums.nonzero_rows.assign(size, 0);
  const bool weighted = block.weights.size() > 0;
  for (Index j = 0; j < columns; ++j) {
    const auto at = static_cast<std::size_t>(j);
    const double* column = block.values.col(j).data();
    long double sum = 0.0L;
    std::uint64_t nonzero = 0;
    for (Index r = 0; r < rows; ++r) {
      const double value = column[r];
      sum += weighted ? static_cast<long double>(block.weights[r]) * value : value;
      nonzero += value != 0.0 ? 1 : 0;
    }
    sums.weighted_sum[at] = sum;
    sums.nonzero_rows[at] = nonzero;
    if (rows == 0) continue;
    sums.min[at] = block.values.col(j).minCoeff();
    sums.max[at] = block.values.col(j).maxCoeff();
  }
  if (weighted) {
    for (Index r = 0; r < rows; ++r) sums.weights += block.weights[r];
  } else {
    sums.weights = static_cast<long double>(rows);
  }
  return sums;
}

/// Pairs of 0/1 columns with a common 1: rows as sets of bits, or-ed into the rows of their
/// members.
std::vector<std::vector<std::uint64_t>> pairs_together(const design::Design& design,
                                                       const Matrix& values) {
  const std::size_t columns = design.columns.size();
  const std::size_t words = (columns + 63) / 64;
  std::vector<std::vector<std::uint64_t>> together(columns);
  std::vector<Index> zero_one;
  for (std::size_t j = 0; j < columns; ++j) {
    if (!design.columns[j].zero_one) continue;
    together[j].assign(words, 0);
    zero_one.push_back(static_cast<Index>(j));
  }
  std::vector<std::uint64_t> members(words);
  std::vector<std::size_t> ones;
  for (Index r = 0; r < values.rows(); ++r) {
    ones.clear();
    std::fill(members.begin(), members.end(), 0);
    for (const Index j : zero_one) {
      if (values(r, j) == 0.0) continue;
      const auto at = static_cast<std::size_t>(j);
      members[at / 64] |= std::uint64_t{1} << (at % 64);
      ones.push_back(at);
    }
    for (const std::size_t at : ones) {
      for (std::size_t w = 0; w < words; ++w) together[at][w] |= members[w];
    }
  }
  return together;
}

}  // namespace

Leaf make_leaf(const design::Design& design, const table::Schema& schema, const NoisePlan& plan,
               const Sampler& sampler, ExpandedPiece expanded) {
  design::Block& block = expanded.block;
  Leaf leaf;
  leaf.rows_read = expanded.piece.rows;
  leaf.rows_used = block.rows.size();
  leaf.excluded = std::move(block.excluded);
  leaf.sums = sums_of(block);
  leaf.level_counts = design::start_counts(design, schema);
  design::count_levels(design, schema, expanded.piece, block.rows, leaf.level_counts);
  leaf.noise = plan.sums(expanded.piece, block);
  leaf.together = pairs_together(design, block.values);
  leaf.candidates = sampler.candidates(expanded.piece, block);
  leaf.random_combination.assign(design.columns.size() + 1, 0);
  exact::add_random_combination(design, expanded.piece, block.rows, leaf.random_combination);
  Matrix rows = std::move(block.values);
  rows.conservativeResize(Eigen::NoChange, rows.cols() + 1);
  rows.col(rows.cols() - 1).setOnes();
  leaf.factor = factor::fold(std::move(rows), block.weights);
  return leaf;
}

void add(LeafSums& total, const LeafSums& part) {
  if (total.weighted_sum.empty()) {
    total = part;
    return;
  }
  for (std::size_t j = 0; j < total.weighted_sum.size(); ++j) {
    total.weighted_sum[j] += part.weighted_sum[j];
    total.min[j] = std::min(total.min[j], part.min[j]);
    total.max[j] = std::max(total.max[j], part.max[j]);
    total.nonzero_rows[j] += part.nonzero_rows[j];
  }
  total.weights += part.weights;
}

}  // namespace gramproof::scan
