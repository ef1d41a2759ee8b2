#include "scan/fold_proof.hpp"

#include <algorithm>
#include <numeric>
#include <utility>

#include "scan/sampler.hpp"

namespace gramproof::scan {
namespace {

constexpr std::size_t most_columns = 300;
constexpr std::size_t most_nonzeros_a_column = 64;
/// Below the prime, so that no coefficient is divisible by it.
constexpr std::size_t word_bits = 61;

std::vector<int> exact_columns_and_ones(const design::Design& design) {
  std::vector<int> order;
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    if (design.columns[j].exact) order.push_back(static_cast<int>(j));
  }
  order.push_back(static_cast<int>(design.columns.size()));
  return order;
}

bool are_cheap(const std::vector<exact::NullVector>& vectors, std::size_t columns) {
  std::size_t nonzeros = 0;
  for (const exact::NullVector& vector : vectors) {
    for (const exact::Integer& v : vector) {
      if (v == 0) continue;
      ++nonzeros;
      if (mpz_sizeinbase(v.get_mpz_t(), 2) > word_bits) return false;
    }
  }
  return nonzeros <= most_nonzeros_a_column * columns;
}

void sort_by_row(table::Piece& sample) {
  std::vector<std::size_t> order(sample.rows);
  std::iota(order.begin(), order.end(), std::size_t{0});
  std::sort(order.begin(), order.end(),
            [&](std::size_t a, std::size_t b) { return sample.row[a] < sample.row[b]; });
  sample = table::gather(sample, order);
}

}  // namespace

FoldProof::FoldProof(const design::Design& design, const ExpandedPiece& first) {
  if (design.columns.size() > most_columns || first.block.rows.empty()) return;
  const table::Piece rows = table::gather(first.piece, first.block.rows);
  exact::SampleRank rank = exact::rank_of_sample(design, rows, exact_columns_and_ones(design));
  if (!are_cheap(rank.null_vectors, design.columns.size() + 1)) return;
  attempted_ = true;
  vectors_ = std::move(rank.null_vectors);
  joining_ = table::gather(rows, rank.pivot_rows);
}

PieceProof FoldProof::examine(const design::Design& design, const ExpandedPiece& piece) const {
  PieceProof result;
  if (vectors_.empty()) return result;
  result.residual = exact::residual_rows(design, piece.piece, piece.block.rows, vectors_);
  result.rows = table::gather(piece.piece, result.residual.rows);
  return result;
}

void FoldProof::take(PieceProof part) {
  if (part.residual.all_hold) return;
  all_hold_ = false;
  exact::add(bounds_, part.residual.bounds);
  std::vector<std::size_t> fresh;
  for (std::size_t i = 0; i < part.residual.residuals.size(); ++i) {
    if (span_.accept(std::move(part.residual.residuals[i]))) fresh.push_back(i);
  }
  if (!fresh.empty()) table::append(joining_, table::gather(part.rows, fresh));
}

void FoldProof::finish(Digest& digest) const {
  if (!attempted_) return;
  join(digest.sample, joining_);
  sort_by_row(digest.sample);
  digest.proof.sample_spans = true;
  digest.proof.all_hold = all_hold_;
  digest.proof.bounds = bounds_;
}

}  // namespace gramproof::scan
