#include <cstdio>
#include <numeric>

#include "exact/rank.hpp"
#include "exact/relations.hpp"
#include "long/experiments.hpp"
#include "long/named_columns.hpp"
#include "long/planted.hpp"

namespace gramproof::test {
namespace {

std::size_t nonzero_entries(const IntegerVectors& vectors) {
  std::size_t count = 0;
  for (const auto& vector : vectors) {
    for (const mpz_class& v : vector) count += v != 0;
  }
  return count;
}

}  // namespace

void try_length(std::uint64_t seed, Tally& tally) {
  Random random(seed);
  PlantedLimits limits;
  limits.most_in_relation = 7;
  limits.largest = 12;
  const PlantedDesign planted = planted_design(random, limits);
  const std::size_t k = planted.rows.front().size();
  std::vector<exact::NullVector> vectors = rank_of(planted).null_vectors;
  for (exact::NullVector& vector : vectors) vector.resize(k + 1);
  const std::size_t shown = nonzero_entries(exact::readable_basis(named_columns(k), vectors));
  const std::size_t as_planted = nonzero_entries(planted.relations);
  ++tally.designs;
  tally.right += shown <= as_planted;
  if (shown > as_planted) {
    std::fprintf(stderr, "lengths: seed %llu: k = %zu, corank %zu: %zu coefficients, planted %zu\n",
                 static_cast<unsigned long long>(seed), k, planted.relations.size(), shown,
                 as_planted);
  }
}

}  // namespace gramproof::test
