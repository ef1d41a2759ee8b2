#include <doctest/doctest.h>

#include "exact/matrix.hpp"
#include "exact/modular.hpp"
#include "exact/rank.hpp"

using namespace gramproof;
using exact::Integer;
using exact::NullVector;
using Rows = std::vector<std::vector<Integer>>;

namespace {

/// Row numbers of the rows found, by the product.
std::vector<std::uint64_t> found_rows(const test::Matrix& all, const table::Piece& sample,
                                      exact::SampleRank& rank,
                                      std::vector<std::size_t>& essential) {
  rank = exact::rank_of_sample(all.design, sample, all.order());
  std::vector<std::uint64_t> total(all.design.columns.size() + 1, 0);
  exact::add_random_combination(all.design, all.piece, all.all_rows(), total);
  essential = exact::essential_rows(all.design, sample, rank, total);
  std::vector<std::uint64_t> numbers;
  for (const std::size_t i : essential) numbers.push_back(sample.row[rank.pivot_rows[i]]);
  return numbers;
}

/// The same by taking each row away.
std::vector<std::uint64_t> rows_that_lower_the_rank(const Rows& rows) {
  const std::size_t rank = test::plain_rank(rows);
  std::vector<std::uint64_t> numbers;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    Rows rest = rows;
    rest.erase(rest.begin() + static_cast<std::ptrdiff_t>(i));
    if (test::plain_rank(rest) < rank) numbers.push_back(i + 1);
  }
  return numbers;
}

Integer residual(const NullVector& vector, const std::vector<Integer>& row) {
  Integer sum = 0;
  for (std::size_t j = 0; j < row.size(); ++j) sum += vector[j] * row[j];
  return sum;
}

}  // namespace

TEST_CASE("rows without which the design loses rank, beside exact relations") {
  for (std::uint64_t seed = 1; seed <= 40; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const auto k = static_cast<std::size_t>(random.whole(4, 9));
    const std::size_t corank = seed % 3;
    Rows rows = test::planted(random, 30, k, corank, 5);
    // Relations that all rows but one obey: a column is made a multiple of another but in one row.
    const auto violators = static_cast<std::size_t>(random.whole(0, 2));
    for (std::size_t v = 0; v < violators; ++v) {
      const auto a = static_cast<std::size_t>(random.whole(0, static_cast<std::int64_t>(k) - 1));
      const std::size_t b = (a + 1) % k;
      for (auto& row : rows) row[a] = 2 * row[b];
      rows[static_cast<std::size_t>(random.whole(0, 29))][a] += 530;
    }
    const test::Matrix all = test::matrix_of(rows);
    exact::SampleRank rank;
    std::vector<std::size_t> essential;
    const auto numbers = found_rows(all, all.piece, rank, essential);
    CHECK(numbers == rows_that_lower_the_rank(rows));
    for (std::size_t i = 0; i < essential.size(); ++i) {
      const NullVector vector =
          exact::relation_without_row(all.design, all.piece, rank, essential[i]);
      std::size_t violating = 0;
      for (std::size_t r = 0; r < rows.size(); ++r) {
        if (residual(vector, rows[r]) == 0) continue;
        ++violating;
        CHECK(r + 1 == numbers[i]);
      }
      CHECK(violating == 1);
      CHECK(vector == exact::relation_without_row(exact::exact_rows(all.design, all.piece), rank,
                                                  essential[i]));
    }
  }
}

TEST_CASE("a sample finds the row when the sample holds it") {
  Rows rows;
  for (int i = 0; i < 500; ++i) rows.push_back({1, i, i * i % 17, 2 * i + 1 + (i == 77 ? 530 : 0)});
  const test::Matrix all = test::matrix_of(rows);
  std::vector<std::size_t> chosen;
  for (std::size_t i = 0; i < 500; i += 7) chosen.push_back(i);
  const table::Piece sample = table::gather(all.piece, chosen);
  exact::SampleRank rank;
  std::vector<std::size_t> essential;
  CHECK(found_rows(all, sample, rank, essential) == std::vector<std::uint64_t>{78});
  const NullVector vector = exact::relation_without_row(all.design, sample, rank, essential[0]);
  CHECK(vector == NullVector{1, 2, 0, -1, 0});
}

TEST_CASE("a matrix without rows and one without rank have no such rows") {
  const test::Matrix zero = test::matrix_of({{0, 0}, {0, 0}});
  exact::SampleRank rank;
  std::vector<std::size_t> essential;
  CHECK(found_rows(zero, zero.piece, rank, essential).empty());
  CHECK(rank.null_vectors.size() == 2);
}
