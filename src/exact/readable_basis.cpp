// src/exact/readable_basis.cpp
#include <algorithm>
#include <optional>
#include <utility>

#include "exact/echelon.hpp"
#include "exact/flint_types.hpp"
#include "exact/modular.hpp"
#include "exact/null_space.hpp"
#include "exact/relations.hpp"
#include "exact/short_relations.hpp"
#include "exact/structural.hpp"

namespace gramproof::exact {
namespace {

/// How hard a relation is to read: each column counts 8, each further bit of its coefficient 1, so
/// that a coefficient of three digits weighs as much as one more column.
struct Cost {
  std::size_t reading = 0, columns = 0;
  Integer size = 0;
  auto key() const { return std::tie(reading, columns, size); }
  bool operator<(const Cost& other) const { return key() < other.key(); }
};

Cost cost_of(const NullVector& vector) {
  Cost cost;
  for (const Integer& v : vector) {
    if (v == 0) continue;
    ++cost.columns;
    cost.reading += 7 + mpz_sizeinbase(v.get_mpz_t(), 2);
    cost.size += abs(v);
  }
  return cost;
}

/// By cost, then by place in the design: a total order, so that the result never depends on the
/// order in which vectors were found. At equal cost what adds up to the constant comes first: of
/// a + b + c = 1, a + d + e = 1 and b + c = d + e the first two are told.
void sort_by_cost(const design::Design& design, std::vector<NullVector>& vectors) {
  struct Entry {
    Cost cost;
    bool without_constant;
    std::vector<std::size_t> support;
    NullVector vector;
    auto key() const { return std::tie(cost.reading, cost.columns, without_constant, cost.size); }
  };
  const auto uses_constant = [&](const std::vector<std::size_t>& support) {
    return std::any_of(support.begin(), support.end(), [&](std::size_t j) {
      return j < design.columns.size() && design.columns[j].constant;
    });
  };
  std::vector<Entry> entries;
  for (NullVector& vector : vectors) {
    std::vector<std::size_t> support = support_of(vector);
    const bool without_constant = !uses_constant(support);
    entries.push_back({cost_of(vector), without_constant, std::move(support), std::move(vector)});
  }
  std::sort(entries.begin(), entries.end(), [](const Entry& a, const Entry& b) {
    if (a.key() != b.key()) return a.key() < b.key();
    if (a.support != b.support) return a.support < b.support;
    return a.vector > b.vector;
  });
  vectors.clear();
  for (Entry& entry : entries) vectors.push_back(std::move(entry.vector));
}

/// The cheapest basis that the pool holds: taking independent vectors in order of cost is optimal,
/// linear independence being a matroid.
std::vector<NullVector> cheapest_basis(const design::Design& design, const NullSpace& space,
                                       std::vector<NullVector> pool) {
  const Modulus field(prime);
  Echelon independence;
  sort_by_cost(design, pool);
  std::vector<NullVector> basis;
  for (NullVector& vector : pool) {
    if (basis.size() == space.basis().size()) break;
    if (independence.accept(space.coordinates(vector, field))) basis.push_back(std::move(vector));
  }
  // Only a prime that divides a coordinate could leave one out.
  return basis.size() == space.basis().size() ? basis : space.basis();
}

/// Big-integer products that pairwise shortening may spend, counted in machine words: a second or
/// less. Counted, not timed, so that the same vectors give the same basis on any machine.
constexpr std::size_t shortening_budget = 10'000'000;

/// The cheapest of v - t w where t makes a common column vanish, if it is cheaper than v.
std::optional<NullVector> shortened(const NullVector& v, const NullVector& w, std::size_t& spent) {
  std::optional<NullVector> best;
  Cost least = cost_of(v);
  std::vector<mpq_class> tried;
  for (std::size_t j = 0; j < v.size(); ++j) {
    if (v[j] == 0 || w[j] == 0) continue;
    mpq_class factor(v[j], w[j]);
    factor.canonicalize();
    if (std::find(tried.begin(), tried.end(), factor) != tried.end()) continue;
    tried.push_back(factor);
    const Integer times_v = factor.get_den(), times_w = factor.get_num();
    NullVector next(v.size());
    for (std::size_t i = 0; i < v.size(); ++i) {
      if (v[i] != 0) next[i] = v[i] * times_v;
      if (w[i] != 0) next[i] -= w[i] * times_w;
    }
    spent += v.size() * (1 + mpz_size(v[j].get_mpz_t()) + mpz_size(w[j].get_mpz_t()));
    make_primitive(next);
    const Cost cost = cost_of(next);
    if (!(cost < least)) continue;
    least = cost;
    best = std::move(next);
  }
  return best;
}

/// Replaces vectors by cheaper combinations of two until none is cheaper or the budget is spent.
/// The span stays: the replaced vector has a factor that is not 0. Ends, for the costs fall.
void shorten_pairwise(std::vector<NullVector>& basis) {
  std::size_t spent = 0;
  bool changed = true;
  while (changed) {
    changed = false;
    for (std::size_t a = 0; a < basis.size(); ++a) {
      for (std::size_t b = 0; b < basis.size(); ++b) {
        if (a == b) continue;
        if (spent > shortening_budget) return;
        auto shorter = shortened(basis[a], basis[b], spent);
        if (!shorter) continue;
        basis[a] = std::move(*shorter);
        changed = true;
      }
    }
  }
}

std::size_t most_columns_of(const std::vector<NullVector>& basis) {
  std::size_t most = 0;
  for (const NullVector& vector : basis) most = std::max(most, cost_of(vector).columns);
  return most;
}

}  // namespace

std::vector<NullVector> readable_basis(const design::Design& design,
                                       const std::vector<NullVector>& null_vectors) {
  if (null_vectors.empty()) return {};
  const FlintSession session;
  const NullSpace space(null_vectors);
  std::vector<NullVector> pool = structural_relations(design, space);
  pool.insert(pool.end(), space.basis().begin(), space.basis().end());
  if (space.affordable()) {
    for (NullVector& vector : space.reduced_lattice()) pool.push_back(std::move(vector));
  }
  std::vector<NullVector> basis = cheapest_basis(design, space, std::move(pool));
  shorten_pairwise(basis);
  pool = short_relations(space, most_columns_of(basis));
  pool.insert(pool.end(), basis.begin(), basis.end());
  basis = cheapest_basis(design, space, std::move(pool));
  shorten_pairwise(basis);
  sort_by_cost(design, basis);
  return basis;
}

}  // namespace gramproof::exact
