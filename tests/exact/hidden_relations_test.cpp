// Relations that a few rows break, found in random row sets.
#include <doctest/doctest.h>

#include <algorithm>

#include "exact/hidden_relations.hpp"
#include "exact/matrix.hpp"

using namespace gramproof;
using exact::Integer;
using exact::NullVector;

namespace {

struct Planted {
  std::vector<std::vector<Integer>> rows;
  NullVector relation;
};

/// k columns, the last a combination of three others but in the rows `bad`.
Planted planted_but_for(test::Random& random, std::size_t n, std::size_t k,
                        const std::vector<std::size_t>& bad) {
  Planted made;
  made.relation.resize(k + 1);
  for (std::size_t j = 0; j < 3; ++j) made.relation[j] = random.whole(1, 9);
  made.relation[k - 1] = -1;
  for (std::size_t i = 0; i < n; ++i) {
    std::vector<Integer> row;
    for (std::size_t j = 0; j + 1 < k; ++j) row.emplace_back(random.whole(-500, 500));
    Integer last = 0;
    for (std::size_t j = 0; j < 3; ++j) last += made.relation[j] * row[j];
    if (std::find(bad.begin(), bad.end(), i) != bad.end()) last += random.whole(1, 700);
    row.push_back(last);
    made.rows.push_back(std::move(row));
  }
  return made;
}

exact::HiddenRelations search(const test::Matrix& matrix, std::uint64_t most_violating) {
  const exact::SampleRank rank = exact::rank_of_sample(matrix.design, matrix.piece, matrix.order());
  return exact::hidden_relations(matrix.design, matrix.piece,
                                 {rank.pivot_columns, matrix.piece.rows, most_violating});
}

}  // namespace

TEST_CASE("a relation that several rows break is found") {
  for (std::uint64_t seed = 1; seed <= 25; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const std::size_t n = 150 + 20 * seed, k = 5 + seed % 12;
    std::vector<std::size_t> bad;
    for (std::size_t i = 0; i < 1 + seed % 5; ++i) bad.push_back(7 + 13 * i);
    const Planted made = planted_but_for(random, n, k, bad);
    const exact::HiddenRelations found = search(test::matrix_of(made.rows), 5);
    CHECK(found.chance_of_a_miss <= 1e-6);
    REQUIRE(found.vectors.size() == 1);
    CHECK(found.vectors.front() == made.relation);
  }
}

TEST_CASE("two relations with bad rows of their own come apart") {
  test::Random random(77);
  Planted first = planted_but_for(random, 400, 6, {3, 50, 51});
  // x6 = x3 + x4 but in two other rows.
  for (std::size_t i = 0; i < first.rows.size(); ++i) {
    auto& row = first.rows[i];
    row.emplace_back(row[3] + row[4] + (i == 200 || i == 300 ? 5 : 0));
  }
  const exact::HiddenRelations found = search(test::matrix_of(first.rows), 5);
  first.relation.insert(first.relation.end() - 1, 0);
  const NullVector second = {0, 0, 0, 1, 1, 0, -1, 0};
  for (const NullVector& wanted : {first.relation, second}) {
    CHECK(std::find(found.vectors.begin(), found.vectors.end(), wanted) != found.vectors.end());
  }
}

TEST_CASE("columns without a hidden relation give none") {
  for (std::uint64_t seed = 1; seed <= 10; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    std::vector<std::vector<Integer>> rows;
    for (int i = 0; i < 300; ++i) {
      rows.emplace_back();
      // The last column is rare: zero in all but three rows, which is no relation.
      for (int j = 0; j < 6; ++j) rows.back().emplace_back(random.whole(-9, 9));
      rows.back().emplace_back(i % 100 == 0 ? 1 : 0);
    }
    CHECK(search(test::matrix_of(rows), 5).vectors.empty());
  }
}

TEST_CASE("a relation that more rows break than allowed is none") {
  test::Random random(5);
  std::vector<std::size_t> bad;
  for (std::size_t i = 0; i < 40; ++i) bad.push_back(5 * i);
  CHECK(search(test::matrix_of(planted_but_for(random, 300, 6, bad).rows), 5).vectors.empty());
}
