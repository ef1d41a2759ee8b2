#include "scan/sampler.hpp"

#include <algorithm>
#include <limits>
#include <numeric>
#include <unordered_set>

#include "exact/modular.hpp"

namespace gramproof::scan {
namespace {

constexpr std::uint8_t rows_a_column = 2;

/// Indices (into block.rows) of the first non-zero entries of a column, at most two.
std::vector<Index> first_nonzero_rows(const design::Block& block, Index column) {
  std::vector<Index> found;
  for (Index r = 0; r < block.values.rows() && found.size() < rows_a_column; ++r) {
    if (block.values(r, column) != 0.0) found.push_back(r);
  }
  return found;
}

}  // namespace

Sampler::Sampler(std::size_t sample_rows, std::size_t columns)
    : sample_rows_(sample_rows),
      bound_(std::numeric_limits<std::uint64_t>::max()),
      found_(columns) {
  for (auto& count : found_) count.store(0, std::memory_order_relaxed);
}

Candidates Sampler::candidates(const table::Piece& piece, const design::Block& block) const {
  Candidates result;
  const std::uint64_t bound = bound_.load(std::memory_order_relaxed);
  std::vector<std::uint8_t> wanted(block.rows.size(), 0);
  std::vector<std::uint64_t> hashes(block.rows.size());
  for (std::size_t i = 0; i < block.rows.size(); ++i) {
    hashes[i] = exact::row_hash(piece.row[block.rows[i]]);
    wanted[i] = hashes[i] <= bound ? 1 : 0;
  }
  result.first_nonzero.resize(found_.size());
  for (std::size_t j = 0; j < found_.size(); ++j) {
    if (found_[j].load(std::memory_order_relaxed) >= rows_a_column) continue;
    for (const Index r : first_nonzero_rows(block, static_cast<Index>(j))) {
      const auto i = static_cast<std::size_t>(r);
      wanted[i] = 1;
      result.first_nonzero[j].push_back(piece.row[block.rows[i]]);
    }
  }
  std::vector<std::size_t> rows;
  for (std::size_t i = 0; i < wanted.size(); ++i) {
    if (!wanted[i]) continue;
    rows.push_back(block.rows[i]);
    result.hash.push_back(hashes[i]);
  }
  result.rows = table::gather(piece, rows);
  return result;
}

void Sampler::take(Candidates candidates) {
  std::unordered_set<std::uint64_t> pinned;
  for (std::size_t j = 0; j < found_.size(); ++j) {
    std::uint8_t count = found_[j].load(std::memory_order_relaxed);
    for (const std::uint64_t row : candidates.first_nonzero[j]) {
      if (count >= rows_a_column) break;
      pinned.insert(row);
      ++count;
    }
    found_[j].store(count, std::memory_order_relaxed);
  }
  for (const std::uint64_t row : candidates.rows.row)
    pinned_.push_back(pinned.contains(row) ? 1 : 0);
  hash_.insert(hash_.end(), candidates.hash.begin(), candidates.hash.end());
  if (pool_.columns.empty()) {
    pool_ = std::move(candidates.rows);
  } else {
    table::append(pool_, candidates.rows);
  }
  if (hash_.size() > 2 * sample_rows_) compact();
}

/// Keeps the pinned rows and the sample_rows_ rows of smallest hash.
void Sampler::compact() {
  if (hash_.size() <= sample_rows_) return;
  std::vector<std::uint64_t> sorted = hash_;
  const auto nth = sorted.begin() + static_cast<std::ptrdiff_t>(sample_rows_ - 1);
  std::nth_element(sorted.begin(), nth, sorted.end());
  const std::uint64_t bound = *nth;
  std::vector<std::size_t> keep;
  for (std::size_t i = 0; i < hash_.size(); ++i) {
    if (hash_[i] <= bound || pinned_[i]) keep.push_back(i);
  }
  std::vector<std::uint64_t> hash;
  std::vector<std::uint8_t> pinned;
  for (const std::size_t i : keep) {
    hash.push_back(hash_[i]);
    pinned.push_back(pinned_[i]);
  }
  pool_ = table::gather(pool_, keep);
  hash_ = std::move(hash);
  pinned_ = std::move(pinned);
  bound_.store(bound, std::memory_order_relaxed);
}

table::Piece Sampler::finish() {
  compact();
  return std::move(pool_);
}

std::size_t join(table::Piece& sample, const table::Piece& more) {
  const std::unordered_set<std::uint64_t> known(sample.row.begin(), sample.row.end());
  std::vector<std::size_t> fresh;
  for (std::size_t i = 0; i < more.rows; ++i) {
    if (!known.contains(more.row[i])) fresh.push_back(i);
  }
  if (!fresh.empty()) table::append(sample, table::gather(more, fresh));
  return fresh.size();
}

}  // namespace gramproof::scan
