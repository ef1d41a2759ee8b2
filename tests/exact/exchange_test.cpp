// What a basis does without: identities checked in integers, choices against ranks by plain
// elimination.
#include <doctest/doctest.h>

#include <algorithm>
#include <string>
#include <vector>

#include "exact/exchange.hpp"
#include "support/planted_relations.hpp"

namespace gramproof::exact {
namespace {

using test::IntegerVectors;
using test::left_out_by_ranks;
using test::Random;
using test::rank_of;
using test::shuffled;
using test::with_planted_relations;

/// Null vectors with the entry for the column of ones behind them.
std::vector<NullVector> null_vectors_of(const IntegerVectors& rows) {
  std::vector<NullVector> vectors = test::plain_null_space(rows).vectors;
  for (NullVector& vector : vectors) vector.emplace_back(0);
  return vectors;
}

std::vector<int> columns_of(const std::vector<Combination>& combinations) {
  std::vector<int> columns;
  for (const Combination& combination : combinations) columns.push_back(combination.column);
  std::sort(columns.begin(), columns.end());
  return columns;
}

bool holds(const IntegerVectors& rows, const Combination& combination) {
  return std::all_of(rows.begin(), rows.end(), [&](const auto& row) {
    mpq_class sum = 0;
    for (const auto& [column, factor] : combination.parts)
      sum += factor * row[static_cast<std::size_t>(column)];
    return sum == row[static_cast<std::size_t>(combination.column)];
  });
}

int since_by_ranks(const IntegerVectors& rows, int column) {
  const int columns = static_cast<int>(rows.front().size());
  for (int last = column; last < columns; ++last) {
    std::vector<int> with, without;
    for (int j = 0; j <= last; ++j) {
      with.push_back(j);
      if (j != column) without.push_back(j);
    }
    if (rank_of(rows, with) == rank_of(rows, without)) return last;
  }
  return -1;
}

}  // namespace

TEST_CASE("small relations by hand") {
  // c0 + c1 = c2 and 2 c3 = 5 c0.
  const std::vector<NullVector> vectors = {{1, 1, -1, 0, 0}, {5, 0, 0, -2, 0}};
  struct Case {
    std::string why;
    std::vector<int> preference, left_out;
    LinearForm first;  ///< what the first of the preference is
  };
  const std::vector<Case> cases = {
      {"the last of each relation", {3, 2, 1, 0}, {2, 3}, {{0, mpq_class(5, 2)}}},
      {"a column of both takes one relation with it", {0, 1, 2, 3}, {0, 1}, {{3, mpq_class(2, 5)}}},
      {"two columns of one relation cannot go both",
       {2, 1, 0, 3},
       {0, 2},
       {{1, 1}, {3, mpq_class(2, 5)}}},
      {"who is not named comes last, in design order", {2}, {0, 2}, {{1, 1}, {3, mpq_class(2, 5)}}},
  };
  for (const Case& test : cases) {
    CAPTURE(test.why);
    const std::vector<Combination> found = leave_out(vectors, test.preference);
    CHECK(columns_of(found) == test.left_out);
    REQUIRE_FALSE(found.empty());
    CHECK(found.front().column == test.preference.front());
    CHECK(found.front().parts == test.first);
  }
  CHECK(dependent_since(vectors, 0) == 2);
  CHECK(dependent_since(vectors, 3) == 3);
  CHECK(dependent_since({{0, 0, 3, 0}}, 2) == 2);
  CHECK(dependent_since(vectors, 4) == -1);
  CHECK(leave_out({}, {0, 1}).empty());
  CHECK(leave_out({{0, 1, 0}}, {0, 1}).front().parts.empty());
}

TEST_CASE("random designs: the combinations hold, the choices are the greedy ones") {
  for (std::uint64_t seed = 1; seed <= 200; ++seed) {
    CAPTURE(seed);
    Random random(seed);
    const auto columns = static_cast<std::size_t>(random.whole(2, 9));
    const IntegerVectors rows =
        with_planted_relations(random, columns, static_cast<std::size_t>(random.whole(1, 4)));
    const std::vector<NullVector> vectors = null_vectors_of(rows);
    const std::vector<int> preference = shuffled(random, columns);
    const std::vector<Combination> found = leave_out(vectors, preference);
    REQUIRE(found.size() == vectors.size());
    CHECK(columns_of(found) == left_out_by_ranks(rows, preference));
    for (const Combination& combination : found) {
      CHECK(holds(rows, combination));
      for (const Combination& other : found)
        CHECK(coefficient_of(combination.parts, other.column) == 0);
    }
    for (int j = 0; j < static_cast<int>(columns); ++j) {
      CAPTURE(j);
      CHECK(dependent_since(vectors, j) == since_by_ranks(rows, j));
    }
  }
}

}  // namespace gramproof::exact
