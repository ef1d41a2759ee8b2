// The null space of a few rows held against all others.
#include <doctest/doctest.h>

#include "exact/matrix.hpp"
#include "exact/residual_span.hpp"

using namespace gramproof;
using exact::Integer;
using exact::NullVector;

TEST_CASE("the rows of the residual span decide the null space of all rows") {
  for (std::uint64_t seed = 1; seed <= 40; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const std::size_t k = 4 + seed % 9;
    const auto rows = test::planted(random, 80, k, 1 + seed % 3, 20);
    const test::Matrix all = test::matrix_of(rows);
    // So few rows that most null vectors are false.
    const std::size_t few = 1 + seed % k;
    const test::Matrix first =
        test::matrix_of({rows.begin(), rows.begin() + static_cast<long>(few)});
    const exact::SampleRank start = exact::rank_of_sample(first.design, first.piece, first.order());
    const exact::ResidualRows found =
        exact::residual_rows(all.design, all.piece, all.all_rows(), start.null_vectors);
    std::vector<std::vector<Integer>> deciding(rows.begin(), rows.begin() + static_cast<long>(few));
    for (const std::size_t i : found.rows) deciding.push_back(rows[i]);
    CHECK(deciding.size() <= few + k);
    CHECK(test::plain_rank(deciding) == test::plain_rank(rows));
    CHECK(found.all_hold == found.rows.empty());
  }
}

TEST_CASE("vectors that hold everywhere are proved without a residual") {
  test::Random random(3);
  const auto rows = test::planted(random, 60, 7, 2, 9);
  const test::Matrix all = test::matrix_of(rows);
  const exact::SampleRank rank = exact::rank_of_sample(all.design, all.piece, all.order());
  const exact::ResidualRows found =
      exact::residual_rows(all.design, all.piece, all.all_rows(), rank.null_vectors);
  CHECK(found.all_hold);
  CHECK(found.rows.empty());
}

TEST_CASE("the prime decides what cannot reach it, and nothing else") {
  struct Case {
    std::string why;
    NullVector vector;
    std::vector<exact::EntryBound> bounds;
    bool decided;
  };
  const Integer large("1000000000000");
  const std::vector<Case> cases = {
      {"small entries", {1, -1, 0}, {{true, 2, 1e6}, {true, 2, 1e6}}, true},
      {"entries of twenty digits", {1, -1, 0}, {{true, 0, 1e19}, {true, 0, 1}}, false},
      {"many decimals", {1, -1, 0}, {{true, 18, 5}, {true, 0, 1}}, false},
      {"large coefficients", {large, -1, 0}, {{true, 0, 1e7}, {true, 0, 1}}, false},
      {"a column that is no plain decimal", {1, -1, 0}, {{false, 0, 1}, {true, 0, 1}}, false},
      {"such a column with no part in it", {0, 1, -5}, {{false, 0, 1}, {true, 0, 5}}, true},
  };
  for (const Case& row : cases) {
    CAPTURE(row.why);
    CHECK(exact::is_decided_by_prime(row.vector, row.bounds) == row.decided);
  }
}

TEST_CASE("bounds of two pieces are the larger of both") {
  std::vector<exact::EntryBound> total;
  exact::add(total, {{true, 2, 5}, {true, 0, 1}});
  exact::add(total, {});
  exact::add(total, {{true, 1, 9}, {false, 0, 0}});
  REQUIRE(total.size() == 2);
  CHECK(total[0].decimals == 2);
  CHECK(total[0].largest == 9);
  CHECK(total[0].known);
  CHECK_FALSE(total[1].known);
}
