// Doubles as exact dyadic numbers: their rank is another question than that of the decimals.
#include "exact/double_rows.hpp"

#include <doctest/doctest.h>

#include <cmath>
#include <limits>
#include <numeric>
#include <string>

#include "exact/matrix.hpp"

using namespace gramproof;
using exact::NullVector;

namespace {

std::vector<int> all_columns(const Matrix& values) {
  std::vector<int> order(static_cast<std::size_t>(values.cols()));
  std::iota(order.begin(), order.end(), 0);
  return order;
}

std::size_t rank(const Matrix& values) {
  return exact::rank_of_doubles(values, all_columns(values)).pivot_columns.size();
}

}  // namespace

TEST_CASE("ranks of doubles") {
  struct Case {
    std::string why;
    std::vector<std::vector<double>> rows;
    std::size_t rank;
  };
  const double smallest = std::numeric_limits<double>::denorm_min();
  const std::vector<Case> cases = {
      {"0.1 + 0.2 is not 0.3 once they are doubles", {{1, 2, 3}, {0.1, 0.2, 0.3}}, 2},
      {"... which one more row shows", {{1, 2, 3}, {0.1, 0.2, 0.3}, {5, 0, 5}}, 3},
      {"halves and quarters are doubles", {{1, 2, 3}, {0.5, 0.25, 0.75}, {5, 0, 5}}, 2},
      {"a multiple by a power of two stays one", {{0.1, 0.4}, {0.7, 2.8}, {1e-300, 4e-300}}, 1},
      {"a triple does not", {{0.1, 0.3}, {0.7, 2.1}, {1, 3}}, 2},
      {"the smallest and the largest double in one row",
       {{smallest, 1e305, 1}, {smallest, 1e305, 1}, {0, 1, 1}},
       2},
      {"they differ in the last bit", {{1, 1}, {1, 1 + 0x1p-52}}, 2},
      {"zeros and signs", {{0, -3.5, 3.5}, {0, -0.1, 0.1}}, 1},
      {"nothing but zeros", {{0, 0}, {0, 0}}, 0},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    Matrix values(static_cast<Index>(c.rows.size()), static_cast<Index>(c.rows[0].size()));
    for (std::size_t i = 0; i < c.rows.size(); ++i) {
      for (std::size_t j = 0; j < c.rows[i].size(); ++j) {
        values(static_cast<Index>(i), static_cast<Index>(j)) = c.rows[i][j];
      }
    }
    CHECK(rank(values) == c.rank);
  }
}

TEST_CASE("rows off a vector are those a rational sum finds") {
  for (std::uint64_t seed = 1; seed <= 200; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const Index rows = 12, columns = 4;
    Matrix values(rows, columns);
    // Exponents far apart now and then, so that both ways of adding are taken.
    const int spread = seed % 3 == 0 ? 200 : 4;
    for (Index i = 0; i < rows; ++i) {
      for (Index j = 0; j + 1 < columns; ++j) {
        values(i, j) = std::ldexp(static_cast<double>(random.whole(-1000, 1000)),
                                  static_cast<int>(random.whole(-spread, spread)));
      }
      values(i, columns - 1) = values(i, 0) + (random.whole(0, 2) == 0 ? values(i, 1) : 0);
    }
    NullVector vector = {1, 0, 0, -1};
    if (seed % 5 == 0) vector = {exact::Integer("1000000000000000000000"), 3, -7, 2};
    std::vector<std::size_t> expected;
    for (Index i = 0; i < rows; ++i) {
      mpq_class sum = 0;
      for (Index j = 0; j < columns; ++j) {
        sum += mpq_class(vector[static_cast<std::size_t>(j)]) * mpq_class(values(i, j));
      }
      if (sum != 0) expected.push_back(static_cast<std::size_t>(i));
    }
    CHECK(exact::rows_off(values, {vector}).front() == expected);
  }
}

TEST_CASE("the rank of random doubles is that of the same rationals") {
  for (std::uint64_t seed = 1; seed <= 60; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const std::size_t columns = 5, rows = 9;
    Matrix values(rows, columns);
    std::vector<std::vector<mpq_class>> rationals(rows, std::vector<mpq_class>(columns));
    for (std::size_t i = 0; i < rows; ++i) {
      for (std::size_t j = 0; j < columns; ++j) {
        double value = static_cast<double>(random.whole(1, 99)) / 100;
        if (j == 3) value = rationals[i][0].get_d() + rationals[i][1].get_d();  // rounded
        if (j == 4 && seed % 2 == 0) value = -4 * rationals[i][2].get_d();      // not rounded
        values(static_cast<Index>(i), static_cast<Index>(j)) = value;
        rationals[i][j] = mpq_class(value);
      }
    }
    CHECK(rank(values) == test::plain_rank(rationals));
  }
}
