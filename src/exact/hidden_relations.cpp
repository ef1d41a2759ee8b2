// src/exact/hidden_relations.cpp
#include "exact/hidden_relations.hpp"

#include <algorithm>
#include <cmath>
#include <map>
#include <numeric>
#include <set>

#include "exact/elimination.hpp"
#include "exact/few_violations.hpp"
#include "exact/flint_types.hpp"
#include "exact/modular.hpp"
#include "exact/modulus.hpp"
#include "exact/row_source.hpp"

namespace gramproof::exact {
namespace {

constexpr std::size_t reservoir_rows = 4096;
constexpr std::size_t most_samples = 200;
constexpr double most_products = 3e8;
/// Rows drawn beyond the number of columns: a random row set that is short of rank is followed up,
/// and a few spare rows save most of that.
constexpr std::size_t spare_rows = 5;
constexpr std::size_t most_rounds = 30;
/// Violations that are allowed however few rows there are (methods: 2).
constexpr std::size_t very_few = 5;
constexpr std::size_t most_candidates = 100;

/// Positions in the sample of the rows with the smallest hash.
std::vector<std::size_t> reservoir(const table::Piece& sample) {
  std::vector<std::size_t> rows(sample.rows);
  std::iota(rows.begin(), rows.end(), std::size_t{0});
  std::sort(rows.begin(), rows.end(), [&](std::size_t a, std::size_t b) {
    return row_hash(sample.row[a]) < row_hash(sample.row[b]);
  });
  if (rows.size() > reservoir_rows) rows.resize(reservoir_rows);
  std::sort(rows.begin(), rows.end());
  return rows;
}

/// Violations in a reservoir of m of n rows that a relation with the most allowed ones stays below
/// but for a chance of 1e-9 (six standard deviations of a Poisson count, and six more for small
/// means).
std::size_t screening_limit(const HiddenSearch& search, std::size_t rows) {
  const auto most = static_cast<double>(search.most_violating);
  if (rows >= search.rows_used) return search.most_violating;
  const double mean = most * static_cast<double>(rows) / static_cast<double>(search.rows_used);
  return static_cast<std::size_t>(std::min(most, mean + 6 * std::sqrt(mean) + 6));
}

class Searcher {
 public:
  Searcher(const design::Design& design, const table::Piece& sample, const HiddenSearch& search)
      : design_(design),
        sample_(sample),
        search_(search),
        rows_(reservoir(sample)),
        width_(search.columns.size()),
        limit_(screening_limit(search, rows_.size())),
        field_(prime),
        values_(residues_of_columns(design, sample, rows_, search.columns, prime)) {}

  HiddenRelations run() {
    HiddenRelations result;
    if (width_ < 2 || rows_.size() < width_ + spare_rows) return result;
    double missed = 1;
    while (result.samples < most_samples && missed > wanted_chance && spent_ < most_products) {
      const std::size_t drawn = try_set(result.samples++);
      const double bad =
          static_cast<double>(search_.most_violating) / static_cast<double>(search_.rows_used);
      missed *= 1 - std::pow(1 - bad, static_cast<double>(drawn));
    }
    result.chance_of_a_miss = missed;
    result.vectors = lifted();
    return result;
  }

 private:
  /// Draws one set and remembers what is violated in few rows; then lets it grow until only what is
  /// violated in very few is left: beside a column that is zero in all but one row in a hundred, a
  /// relation among such columns does not show before. Returns how many rows it took at first.
  std::size_t try_set(std::size_t trial) {
    const std::vector<std::size_t> order = shuffled(trial);
    std::vector<std::size_t> chosen(
        order.begin(), order.begin() + static_cast<std::ptrdiff_t>(width_ + spare_rows));
    grow(chosen, order, limit_);
    const std::size_t drawn = chosen.size();
    if (very_few < limit_) grow(chosen, order, very_few);
    return drawn;
  }

  /// Adds rows until every null vector left is violated in at most `limit` rows.
  void grow(std::vector<std::size_t>& chosen, const std::vector<std::size_t>& order,
            std::size_t limit) {
    for (std::size_t round = 0; round < most_rounds; ++round) {
      const Elimination eliminated = eliminate_rows(chosen);
      std::vector<SparseViolations> few;
      const std::set<std::size_t> more = judge(eliminated, order, limit, few);
      if (more.empty() || round + 1 == most_rounds) {
        remember(std::move(few));
        return;
      }
      chosen.insert(chosen.end(), more.begin(), more.end());
    }
  }

  [[nodiscard]] std::vector<std::size_t> shuffled(std::size_t trial) const {
    std::vector<std::pair<std::uint64_t, std::size_t>> keyed;
    for (std::size_t i = 0; i < rows_.size(); ++i) {
      const std::uint64_t mixed = row_hash(sample_.row[rows_[i]]) ^ row_hash(trial + 1);
      keyed.emplace_back(row_hash(mixed), i);
    }
    std::sort(keyed.begin(), keyed.end());
    std::vector<std::size_t> order;
    for (const auto& [key, i] : keyed) order.push_back(i);
    return order;
  }

  [[nodiscard]] Elimination eliminate_rows(const std::vector<std::size_t>& chosen) {
    std::vector<std::uint64_t> values;
    values.reserve(chosen.size() * width_);
    for (const std::size_t i : chosen) {
      const auto first = values_.begin() + static_cast<std::ptrdiff_t>(i * width_);
      values.insert(values.end(), first, first + static_cast<std::ptrdiff_t>(width_));
    }
    spent_ += static_cast<double>(chosen.size()) * static_cast<double>(width_ * width_);
    return eliminate(values, chosen.size(), width_, prime);
  }

  /// Rows that rule out the null vectors violated too often; the others go to `few`.
  std::set<std::size_t> judge(const Elimination& eliminated, const std::vector<std::size_t>& order,
                              std::size_t limit, std::vector<SparseViolations>& few) {
    std::set<std::size_t> more;
    for (std::size_t f = 0; f < eliminated.free.size(); ++f) {
      SparseViolations candidate = null_vector(eliminated, f);
      find_violations(candidate, order, limit);
      if (candidate.violations.size() <= limit) {
        few.push_back(std::move(candidate));
        continue;
      }
      // Another of the violating rows for each vector, so that one round rules out many.
      auto row = candidate.violations.begin();
      std::advance(row, static_cast<std::ptrdiff_t>(f % candidate.violations.size()));
      more.insert(row->first);
    }
    return more;
  }

  [[nodiscard]] SparseViolations null_vector(const Elimination& eliminated, std::size_t f) const {
    SparseViolations result;
    const std::size_t pivots = eliminated.columns.size();
    for (std::size_t p = 0; p < pivots; ++p) {
      const std::uint64_t c = eliminated.coefficients[f * pivots + p];
      if (c != 0) result.coefficients.emplace(eliminated.columns[p], field_.subtract(0, c));
    }
    result.coefficients.emplace(eliminated.free[f], 1);
    return result;
  }

  /// Stops beyond the limit: a vector violated so often is none that is looked for.
  void find_violations(SparseViolations& vector, const std::vector<std::size_t>& order,
                       std::size_t limit) {
    std::size_t looked_at = 0;
    for (const std::size_t i : order) {
      if (vector.violations.size() > limit) break;
      ++looked_at;
      DotProduct sum;
      for (const auto& [column, c] : vector.coefficients) sum.add(c, values_[i * width_ + column]);
      const std::uint64_t residual = sum.residue(field_);
      if (residual != 0) vector.violations.emplace(i, residual);
    }
    spent_ += static_cast<double>(looked_at * vector.coefficients.size());
  }

  void remember(std::vector<SparseViolations> few) {
    combine_to_fewest(few, field_);
    for (SparseViolations& vector : few) {
      if (vector.coefficients.size() < 2 || found_.size() >= most_candidates) continue;
      make_monic(vector, field_);
      found_.emplace(vector.coefficients, std::move(vector));
    }
  }

  /// Integers that hold on the rows that are not violated; the fewest violations first.
  [[nodiscard]] std::vector<NullVector> lifted() const {
    std::vector<const SparseViolations*> by_violations;
    for (const auto& [key, vector] : found_) by_violations.push_back(&vector);
    std::stable_sort(by_violations.begin(), by_violations.end(), [](const auto* a, const auto* b) {
      return std::pair(a->violations.size(), a->coefficients.size()) <
             std::pair(b->violations.size(), b->coefficients.size());
    });
    std::vector<NullVector> result;
    for (const SparseViolations* vector : by_violations) {
      for (NullVector& integer : null_space_where_it_holds(*vector)) {
        if (std::find(result.begin(), result.end(), integer) == result.end())
          result.push_back(std::move(integer));
      }
    }
    return result;
  }

  [[nodiscard]] std::vector<NullVector> null_space_where_it_holds(
      const SparseViolations& vector) const {
    std::vector<std::size_t> holding;
    for (std::size_t i = 0; i < rows_.size(); ++i) {
      if (!vector.violations.contains(i)) holding.push_back(rows_[i]);
    }
    std::vector<int> order;
    for (const auto& [column, c] : vector.coefficients) order.push_back(search_.columns[column]);
    return rank_of_rows(PieceRows(design_, sample_, std::move(holding)), order).null_vectors;
  }

  const design::Design& design_;
  const table::Piece& sample_;
  const HiddenSearch& search_;
  std::vector<std::size_t> rows_;
  std::size_t width_;
  std::size_t limit_;
  Modulus field_;
  std::vector<std::uint64_t> values_;  ///< reservoir rows x columns
  std::map<SparseVector, SparseViolations> found_;
  double spent_ = 0;
};

}  // namespace

HiddenRelations hidden_relations(const design::Design& design, const table::Piece& sample,
                                 const HiddenSearch& search) {
  const FlintSession session;
  return Searcher(design, sample, search).run();
}

}  // namespace gramproof::exact
