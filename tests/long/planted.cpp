#include "long/planted.hpp"

#include <algorithm>
#include <numeric>

namespace gramproof::test {
namespace {

/// Small and large coefficients alike: the number of digits is drawn, then the number.
mpz_class coefficient(Random& random, std::int64_t largest) {
  std::int64_t bound = 1;
  while (bound < largest && random.whole(0, 3) != 0) bound *= 4;
  const std::int64_t size = random.whole(1, std::min(bound, largest));
  return random.whole(0, 1) == 0 ? size : -size;
}

std::vector<std::size_t> shuffled(Random& random, std::size_t count) {
  std::vector<std::size_t> places(count);
  std::iota(places.begin(), places.end(), 0);
  for (std::size_t j = count; j > 1; --j) {
    const auto other = static_cast<std::size_t>(random.whole(0, static_cast<std::int64_t>(j) - 1));
    std::swap(places[j - 1], places[other]);
  }
  return places;
}

/// Relation i: on columns before `own` and on it.
std::vector<mpz_class> relation(Random& random, std::size_t own, std::size_t k,
                                const PlantedLimits& limits) {
  std::vector<mpz_class> vector(k, 0);
  const auto others =
      random.whole(1, std::min(limits.most_in_relation - 1, static_cast<std::int64_t>(own)));
  const std::vector<std::size_t> order = shuffled(random, own);
  for (std::int64_t i = 0; i < others; ++i) {
    vector[order[static_cast<std::size_t>(i)]] = coefficient(random, limits.largest);
  }
  vector[own] = coefficient(random, limits.largest);
  mpz_class divisor = 0;
  for (const mpz_class& v : vector) divisor = gcd(divisor, v);
  for (mpz_class& v : vector) v /= divisor;
  return vector;
}

/// Values of the free columns, then of each determined one, over a common denominator.
std::vector<mpz_class> row(Random& random, std::size_t k, const IntegerVectors& relations) {
  const std::size_t free = k - relations.size();
  std::vector<mpz_class> values(k, 0);
  for (std::size_t j = 0; j < free; ++j) values[j] = random.whole(-1000, 1000);
  for (std::size_t i = 0; i < relations.size(); ++i) {
    mpz_class sum = 0;
    for (std::size_t j = 0; j < free + i; ++j) sum += relations[i][j] * values[j];
    const mpz_class& own = relations[i][free + i];
    const mpz_class factor = own / gcd(own, sum);
    for (mpz_class& value : values) value *= factor;
    values[free + i] = -sum * factor / own;
  }
  return values;
}

void permute(IntegerVectors& vectors, const std::vector<std::size_t>& places) {
  for (auto& vector : vectors) {
    std::vector<mpz_class> moved(vector.size());
    for (std::size_t j = 0; j < vector.size(); ++j) moved[places[j]] = vector[j];
    vector = std::move(moved);
  }
}

}  // namespace

PlantedDesign planted_design(Random& random, const PlantedLimits& limits) {
  const auto corank = static_cast<std::size_t>(random.whole(1, limits.most_relations));
  const auto k = static_cast<std::size_t>(
      random.whole(static_cast<std::int64_t>(corank) + 2, limits.most_columns));
  PlantedDesign design;
  for (std::size_t i = 0; i < corank; ++i) {
    design.relations.push_back(relation(random, k - corank + i, k, limits));
  }
  const auto n = k + static_cast<std::size_t>(random.whole(3, 40));
  for (std::size_t i = 0; i < n; ++i) design.rows.push_back(row(random, k, design.relations));
  const std::vector<std::size_t> places = shuffled(random, k);
  permute(design.rows, places);
  permute(design.relations, places);
  return design;
}

exact::SampleRank rank_of(const PlantedDesign& planted) {
  exact::ExactRows sample;
  sample.rows = planted.rows;
  sample.number.resize(planted.rows.size());
  std::iota(sample.number.begin(), sample.number.end(), 1);
  std::vector<int> order(planted.rows.front().size());
  std::iota(order.begin(), order.end(), 0);
  return exact::rank_of_sample(sample, order);
}

}  // namespace gramproof::test
