#include "exact/short_relations.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <set>
#include <string>
#include <utility>

#include "exact/flint_types.hpp"
#include "exact/matrix.hpp"
#include "exact/relations.hpp"
#include "support/plain_elimination.hpp"

using namespace gramproof;
using exact::Integer;
using exact::NullVector;
using Vectors = std::vector<NullVector>;

namespace {

std::size_t columns_of(const NullVector& vector) {
  return vector.size() -
         static_cast<std::size_t>(std::count(vector.begin(), vector.end(), Integer(0)));
}

/// Whole combinations of the vectors that span the same space and are longer.
Vectors mixed(const Vectors& vectors) {
  Vectors result = vectors;
  for (std::size_t i = 0; i < vectors.size(); ++i) {
    for (std::size_t l = 0; l < i; ++l) {
      for (std::size_t j = 0; j < vectors[i].size(); ++j) {
        result[i][j] += static_cast<long>(2 * i + l + 1) * vectors[l][j];
      }
    }
  }
  return result;
}

Vectors random_relations(test::Random& random, std::size_t count, std::size_t width) {
  Vectors vectors(count, NullVector(width, 0));
  for (std::size_t i = 0; i < count; ++i) {
    for (int t = 0; t < 4; ++t) {
      const auto j =
          random.whole(static_cast<std::int64_t>(count), static_cast<std::int64_t>(width) - 2);
      vectors[i][static_cast<std::size_t>(j)] = random.whole(-12, 12);
    }
    vectors[i][i] = random.whole(1, 12);
  }
  return vectors;
}

}  // namespace

TEST_CASE("short relations: members, minimal, each once, the planted ones among them") {
  const exact::FlintSession session;
  for (std::uint64_t seed = 1; seed <= 20; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    Vectors planted = random_relations(random, 5, 31);
    const exact::NullSpace space(mixed(planted));
    const Vectors found = exact::short_relations(space, 5);
    for (const NullVector& vector : found) {
      CHECK(columns_of(vector) <= 5);
      CHECK(space.contains(vector));
      // Minimal: on its columns there is one relation only.
      Vectors outside = planted;
      for (NullVector& row : outside) {
        for (std::size_t j = 0; j < row.size(); ++j) {
          if (vector[j] != 0) row[j] = 0;
        }
      }
      CHECK(test::plain_null_space(outside).rank == planted.size() - 1);
    }
    CHECK(std::set<NullVector>(found.begin(), found.end()).size() == found.size());
    for (NullVector& vector : planted) {
      exact::make_primitive(vector);
      CHECK(std::find(found.begin(), found.end(), vector) != found.end());
    }
    CHECK(found == exact::short_relations(exact::NullSpace(planted), 5));
  }
}

TEST_CASE("one relation has no other, and none is longer than asked for") {
  const exact::FlintSession session;
  CHECK(exact::short_relations(exact::NullSpace({{1, 2, -3, 0}}), 9).empty());
  CHECK(exact::short_relations(exact::NullSpace({{1, 1, 1, -1, 0}, {0, 1, 2, 5, 0}}), 1).empty());
}

TEST_CASE("a basis that neither the lattice nor pairs come to") {
  // Seed 120 of tests/long's lengths: without short relations 29 coefficients were shown.
  using Terms = std::vector<std::pair<std::size_t, long>>;
  const std::vector<Terms> relations = {
      {{5, 1}, {6, 1}},
      {{10, 1}, {17, 1}, {18, -10}},
      {{1, 11}, {5, -3}, {9, 2}, {15, 8}, {16, -1}, {18, 6}},
      {{8, 1}, {10, 1}, {13, 3}, {18, 3}},
      {{0, 3}, {8, 1}, {11, 2}},
      {{7, 3}, {13, 10}},
      {{2, -6}, {10, 1}, {12, -10}, {15, -6}, {18, 11}},
  };
  std::vector<std::string> names;
  for (int j = 0; j < 19; ++j) names.push_back("c" + std::to_string(j));
  Vectors planted(relations.size(), NullVector(20, 0));
  for (std::size_t i = 0; i < relations.size(); ++i) {
    for (const auto& [column, coefficient] : relations[i]) planted[i][column] = coefficient;
  }
  const Vectors basis = exact::readable_basis(test::matrix_of(names, {}).design, mixed(planted));
  CHECK(test::same_span(basis, planted));
  std::size_t shown = 0;
  for (const NullVector& vector : basis) shown += columns_of(vector);
  CHECK(shown <= 25);
}
