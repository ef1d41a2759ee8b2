#include <doctest/doctest.h>

#include <algorithm>

#include "exact/flint_types.hpp"
#include "exact/matrix.hpp"
#include "exact/modular.hpp"
#include "exact/null_space.hpp"
#include "exact/relations.hpp"

using namespace gramproof;
using exact::Integer;
using exact::NullVector;
using Vectors = std::vector<NullVector>;

namespace {

test::Matrix columns_named(std::size_t k) {
  std::vector<std::string> names;
  for (std::size_t j = 0; j < k; ++j) names.push_back("x" + std::to_string(j));
  return test::matrix_of(names, {});
}

/// Same span, by plain elimination; each vector primitive with a positive first entry.
void check_basis(const Vectors& basis, const Vectors& given) {
  REQUIRE(basis.size() == given.size());
  CHECK(test::plain_rank(basis) == basis.size());
  Vectors both = given;
  both.insert(both.end(), basis.begin(), basis.end());
  CHECK(test::plain_rank(both) == given.size());
  for (const NullVector& vector : basis) {
    NullVector primitive = vector;
    exact::make_primitive(primitive);
    CHECK(primitive == vector);
  }
}

/// What the header calls cheap to read: columns count 8, each further bit of a coefficient 1.
std::size_t reading(const Vectors& vectors) {
  std::size_t cost = 0;
  for (const NullVector& vector : vectors) {
    for (const Integer& v : vector) cost += v == 0 ? 0 : 7 + mpz_sizeinbase(v.get_mpz_t(), 2);
  }
  return cost;
}

Vectors null_vectors_of(const std::vector<std::vector<Integer>>& rows, std::size_t k) {
  std::vector<int> order(k);
  for (std::size_t j = 0; j < k; ++j) order[j] = static_cast<int>(j);
  Vectors vectors = exact::rank_of_sample(test::integer_rows(rows), order).null_vectors;
  for (NullVector& vector : vectors) vector.resize(k + 1);
  return vectors;
}

}  // namespace

TEST_CASE("a readable basis spans the same space") {
  for (std::uint64_t seed = 1; seed <= 60; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const auto k = static_cast<std::size_t>(random.whole(4, seed % 10 == 0 ? 40 : 16));
    const auto corank = static_cast<std::size_t>(
        random.whole(1, std::min<std::int64_t>(8, static_cast<std::int64_t>(k) - 2)));
    const auto rows = test::planted(random, 60, k, corank, seed % 4 == 0 ? 1'000'000 : 3);
    const Vectors given = null_vectors_of(rows, k);
    const test::Matrix matrix = columns_named(k);
    const Vectors basis = exact::readable_basis(matrix.design, given);
    check_basis(basis, given);
    CHECK(reading(basis) <= reading(given));
  }
}

TEST_CASE("the basis reads as well however the space is given") {
  for (std::uint64_t seed = 1; seed <= 20; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const auto rows = test::planted(random, 60, 12, 4, 3);
    const Vectors given = null_vectors_of(rows, 12);
    Vectors mixed = given;
    for (std::size_t i = 0; i < mixed.size(); ++i) {
      for (std::size_t j = 0; j < mixed[i].size(); ++j) {
        mixed[i][j] = 3 * given[i][j] - 2 * given[(i + 1) % given.size()][j];
      }
      exact::make_primitive(mixed[i]);
    }
    std::reverse(mixed.begin(), mixed.end());
    const test::Matrix matrix = columns_named(12);
    const Vectors one = exact::readable_basis(matrix.design, given);
    check_basis(exact::readable_basis(matrix.design, mixed), given);
    CHECK(one == exact::readable_basis(matrix.design, given));
    CHECK(reading(one) == reading(exact::readable_basis(matrix.design, mixed)));
  }
}

TEST_CASE("planted short relations come back from long combinations of them") {
  struct Case {
    std::string why;
    std::vector<std::vector<long>> planted;
  };
  const std::vector<Case> cases = {
      {"sums", {{1, 1, -1, 0, 0, 0}, {0, 0, 1, 1, -1, 0}}},
      {"duplicates of one column", {{1, -1, 0, 0, 0, 0}, {1, 0, -1, 0, 0, 0}}},
      {"a multiple and a sum", {{12, -1, 0, 0, 0, 0}, {0, 0, 1, 1, 1, -1}}},
      {"half sums need the saturated lattice", {{1, 1, -2, 0, 0, 0}, {1, -1, 0, -2, 0, 0}}},
      {"a difference and an odd one", {{1, -1, -1, 0, 0, 0}, {0, 0, 7, -4383, -12, 0}}},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    Vectors planted;
    for (const auto& vector : c.planted) planted.emplace_back(vector.begin(), vector.end());
    for (NullVector& vector : planted) vector.push_back(0);
    Vectors mixed = planted;
    for (std::size_t j = 0; j < 7; ++j) {
      mixed[0][j] = 5 * planted[0][j] + 7 * planted[1][j];
      mixed[1][j] = 2 * planted[0][j] - 3 * planted[1][j];
    }
    const test::Matrix matrix = columns_named(6);
    const Vectors basis = exact::readable_basis(matrix.design, mixed);
    check_basis(basis, mixed);
    CHECK(reading(basis) <= reading(planted));
  }
}

TEST_CASE("the lattice of a null space is saturated") {
  const exact::FlintSession session;
  // (1, 1, 0) and (1, -1, 2): their half sum (1, 0, 1) is whole, but no whole combination of them.
  const exact::NullSpace space({{2, 0, 2}, {1, -1, 2}});
  for (const NullVector& vector :
       {NullVector{1, 0, 1}, NullVector{1, 1, 0}, NullVector{0, 5, -5}}) {
    CHECK(space.contains(vector));
  }
  CHECK_FALSE(space.contains({1, 0, 0}));
  const Vectors lattice = space.reduced_lattice();
  REQUIRE(lattice.size() == 2);
  // The 2 x 2 minors of a saturated basis have no common divisor.
  Integer divisor = 0;
  for (std::size_t a = 0; a < 3; ++a) {
    for (std::size_t b = a + 1; b < 3; ++b) {
      divisor =
          gcd(divisor, Integer(lattice[0][a] * lattice[1][b] - lattice[0][b] * lattice[1][a]));
    }
  }
  CHECK(divisor == 1);
}

TEST_CASE("fingerprints vanish on relations and on nothing else") {
  const exact::FlintSession session;
  const exact::NullSpace space({{1, 1, -1, 0, 0}, {0, 2, 0, -5, 0}});
  const exact::Modulus field(exact::prime);
  const auto prints = space.fingerprints(field);
  const auto value = [&](const std::vector<long>& vector) {
    std::uint64_t sum = 0;
    for (std::size_t j = 0; j < vector.size(); ++j) {
      sum = field.add(sum, field.multiply(field.of(Integer(vector[j])), prints[j][0]));
    }
    return sum;
  };
  CHECK(value({1, 1, -1, 0, 0}) == 0);
  CHECK(value({2, 0, -2, 5, 0}) == 0);
  CHECK(value({1, 1, 1, 0, 0}) != 0);
  CHECK(value({0, 0, 0, 0, 1}) != 0);
}

TEST_CASE("no relations, no basis") {
  const test::Matrix matrix = columns_named(3);
  CHECK(exact::readable_basis(matrix.design, {}).empty());
}
