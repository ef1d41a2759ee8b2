#include <algorithm>
#include <optional>
#include <utility>

#include "base/ordered_work.hpp"
#include "exact/modular.hpp"
#include "scan/fold_proof.hpp"
#include "scan/leaf.hpp"
#include "scan/pass.hpp"

namespace gramproof::scan {
namespace {

void add_exclusions(std::vector<design::Exclusion>& total,
                    const std::vector<design::Exclusion>& part) {
  for (const design::Exclusion& entry : part) {
    const auto same = std::find_if(total.begin(), total.end(), [&](const design::Exclusion& known) {
      return known.reason == entry.reason && known.column == entry.column;
    });
    if (same == total.end()) {
      total.push_back(entry);
    } else {
      same->rows += entry.rows;
    }
  }
}

void add_counts(design::LevelCounts& total, const design::LevelCounts& part) {
  for (std::size_t s = 0; s < total.size(); ++s) {
    for (std::size_t i = 0; i < total[s].size(); ++i) total[s][i] += part[s][i];
  }
}

/// Takes leaves in, in order, and becomes the digest.
class Collector {
 public:
  Collector(const design::Design& design, const table::Schema& schema) : design_(design) {
    digest_.level_counts = design::start_counts(design, schema);
    digest_.random_combination.assign(design.columns.size() + 1, 0);
    together_.resize(design.columns.size());
  }

  void take(Leaf leaf) {
    digest_.rows_read += leaf.rows_read;
    digest_.rows_used += leaf.rows_used;
    add_exclusions(digest_.excluded, leaf.excluded);
    add_counts(digest_.level_counts, leaf.level_counts);
    for (std::size_t j = 0; j < digest_.random_combination.size(); ++j) {
      const std::uint64_t sum = digest_.random_combination[j] + leaf.random_combination[j];
      digest_.random_combination[j] = sum >= exact::prime ? sum - exact::prime : sum;
    }
    for (std::size_t j = 0; j < together_.size(); ++j) {
      if (together_[j].empty()) together_[j].assign(leaf.together[j].size(), 0);
      for (std::size_t w = 0; w < together_[j].size(); ++w) together_[j][w] |= leaf.together[j][w];
    }
    if (leaf.rows_used == 0) return;
    add(sums_, leaf.sums);
    add(digest_.noise, leaf.noise);
    tree_.add(std::move(leaf.factor));
  }

  Digest finish(table::Piece sample) {
    const std::size_t columns = design_.columns.size();
    digest_.sample = std::move(sample);
    digest_.sum_of_weights = static_cast<double>(sums_.weights);
    digest_.factor = tree_.finish(static_cast<Index>(columns) + 1);
    digest_.columns.resize(columns);
    for (std::size_t j = 0; j < columns && !sums_.weighted_sum.empty(); ++j) {
      digest_.columns[j] = {static_cast<double>(sums_.weighted_sum[j] / sums_.weights),
                            sums_.min[j], sums_.max[j], sums_.nonzero_rows[j]};
    }
    digest_.never_together.assign(columns, std::vector<bool>(columns, false));
    for (std::size_t a = 0; a < columns; ++a) {
      for (std::size_t b = 0; b < columns; ++b) {
        if (a == b || together_[a].empty() || together_[b].empty()) continue;
        digest_.never_together[a][b] = ((together_[a][b / 64] >> (b % 64)) & 1) == 0;
      }
    }
    return std::move(digest_);
  }

 private:
  const design::Design& design_;
  Digest digest_;
  LeafSums sums_;
  std::vector<std::vector<std::uint64_t>> together_;
  factor::MergeTree tree_;
};

std::vector<std::uint64_t> selected(const std::vector<std::uint64_t>& values,
                                    const std::vector<int>& columns) {
  std::vector<std::uint64_t> result;
  for (const int column : columns) result.push_back(values[static_cast<std::size_t>(column)]);
  return result;
}

struct ProvedLeaf {
  Leaf leaf;
  PieceProof proof;
};

/// Lets the first piece be looked at before the pass hands it out.
class FirstPiece {
 public:
  explicit FirstPiece(table::Source& source) : source_(source) {}

  [[nodiscard]] Result<std::optional<table::RawPiece>> peek() {
    Result<std::optional<table::RawPiece>> first = source_.next();
    if (first) held_ = first.value();
    return first;
  }
  [[nodiscard]] Result<std::optional<table::RawPiece>> next() {
    if (!held_) return source_.next();
    return std::exchange(held_, std::nullopt);
  }

 private:
  table::Source& source_;
  std::optional<table::RawPiece> held_;
};

/// Where one piece holds all rows, the sample is everything and nothing is left to prove.
Result<FoldProof> start_proof(FirstPiece& first, const table::Schema& schema,
                              const design::Design& design, const PieceExpander& expander) {
  if (schema.rows <= table::rows_a_piece) return FoldProof();
  Result<std::optional<table::RawPiece>> raw = first.peek();
  if (!raw) return raw.error();
  if (!raw.value()) return FoldProof();
  Result<ExpandedPiece> expanded = expander.expand(*raw.value());
  if (!expanded) return expanded.error();
  return FoldProof(design, expanded.value());
}

}  // namespace

Result<Digest> scan(table::Source& source, const table::Schema& schema,
                    const design::Design& design, const PassOptions& options) {
  if (Result<void> start = source.rewind(); !start) return start.error();
  const PieceExpander expander(source, schema, design);
  const NoisePlan plan(design, schema);
  Sampler sampler(sample_rows, design.columns.size());
  Collector collector(design, schema);
  FirstPiece first(source);
  Result<FoldProof> started = start_proof(first, schema, design, expander);
  if (!started) return started.error();
  FoldProof& proof = started.value();
  const auto work = [&](table::RawPiece raw) -> Result<ProvedLeaf> {
    Result<ExpandedPiece> expanded = expander.expand(raw);
    if (!expanded) return expanded.error();
    ProvedLeaf result;
    result.proof = proof.examine(design, expanded.value());
    result.leaf = make_leaf(design, schema, plan, sampler, std::move(expanded.value()));
    return result;
  };
  const auto consume = [&](ProvedLeaf part) -> Result<void> {
    sampler.take(std::move(part.leaf.candidates));
    collector.take(std::move(part.leaf));
    proof.take(std::move(part.proof));
    if (options.on_progress) options.on_progress(source.progress());
    return {};
  };
  Result<void> run = run_ordered<table::RawPiece, ProvedLeaf>(
      options.threads, [&] { return first.next(); }, work, consume);
  if (!run) return run.error();
  Digest digest = collector.finish(sampler.finish());
  proof.finish(digest);
  return digest;
}

Digest settle(const Digest& digest, const design::Settled& settled) {
  const std::vector<int>& from = settled.provisional;
  const int ones = static_cast<int>(digest.columns.size());
  std::vector<int> with_ones = from;
  with_ones.push_back(ones);
  Digest result;
  result.rows_read = digest.rows_read;
  result.rows_used = digest.rows_used;
  for (design::Exclusion entry : digest.excluded) {
    if (entry.reason == design::Exclusion::Reason::undefined) {
      const auto now = std::find(from.begin(), from.end(), entry.column);
      entry.column = now == from.end() ? -1 : static_cast<int>(now - from.begin());
    }
    result.excluded.push_back(entry);
  }
  result.sum_of_weights = digest.sum_of_weights;
  result.factor = factor::select(digest.factor, with_ones);
  for (const int column : from)
    result.columns.push_back(digest.columns[static_cast<std::size_t>(column)]);
  result.level_counts = digest.level_counts;
  result.noise = select(digest.noise, from);
  for (const int a : from) {
    std::vector<bool> row;
    for (const int b : from) {
      row.push_back(
          digest.never_together[static_cast<std::size_t>(a)][static_cast<std::size_t>(b)]);
    }
    result.never_together.push_back(std::move(row));
  }
  result.sample = digest.sample;
  result.proof = digest.proof;
  result.proof.bounds.clear();
  if (!digest.proof.bounds.empty()) {
    for (const int column : from)
      result.proof.bounds.push_back(digest.proof.bounds[static_cast<std::size_t>(column)]);
  }
  result.random_combination = selected(digest.random_combination, with_ones);
  return result;
}

}  // namespace gramproof::scan
