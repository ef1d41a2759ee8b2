#include "exact/rank.hpp"

#include <doctest/doctest.h>

#include <map>

#include "exact/matrix.hpp"
#include "exact/modular.hpp"

using namespace gramproof;
using exact::Integer;
using exact::NullVector;
using Rows = std::vector<std::vector<Integer>>;

namespace {

bool vanishes(const NullVector& vector, const Rows& rows) {
  for (const auto& row : rows) {
    Integer sum = 0;
    for (std::size_t j = 0; j < row.size(); ++j) sum += row[j] * vector[j];
    if (sum != 0) return false;
  }
  return true;
}

bool is_zero(const NullVector& vector) {
  for (const Integer& v : vector) {
    if (v != 0) return false;
  }
  return true;
}

/// What the header promises of any result.
void check_promises(const exact::SampleRank& rank, const Rows& rows,
                    const std::vector<int>& order) {
  CHECK(rank.pivot_columns.size() == rank.pivot_rows.size());
  REQUIRE(rank.pivot_columns.size() + rank.null_vectors.size() == order.size());
  std::size_t next_pivot = 0, next_vector = 0;
  for (const int column : order) {
    const bool pivot =
        next_pivot < rank.pivot_columns.size() && rank.pivot_columns[next_pivot] == column;
    if (pivot) {
      ++next_pivot;
      continue;
    }
    const NullVector& vector = rank.null_vectors[next_vector++];
    CHECK(vanishes(vector, rows));
    CHECK_FALSE(is_zero(vector));
    CHECK(vector[static_cast<std::size_t>(column)] != 0);
    NullVector rest = vector;
    rest[static_cast<std::size_t>(column)] = 0;
    for (std::size_t p = 0; p < next_pivot; ++p) {
      rest[static_cast<std::size_t>(rank.pivot_columns[p])] = 0;
    }
    CHECK_MESSAGE(is_zero(rest), "on the column and earlier pivots only");
    NullVector primitive = vector;
    exact::make_primitive(primitive);
    CHECK(primitive == vector);
  }
}

NullVector integers(const std::vector<long>& values) {
  return {values.begin(), values.end()};
}

}  // namespace

TEST_CASE("the first prime is the largest below 2^62") {
  Integer next;
  mpz_nextprime(next.get_mpz_t(), Integer(exact::prime).get_mpz_t());
  CHECK(next > Integer("4611686018427387904"));
  CHECK(mpz_probab_prime_p(Integer(exact::prime).get_mpz_t(), 40) > 0);
  CHECK(Integer(exact::prime) < Integer("4611686018427387904"));
}

TEST_CASE("ranks of small matrices") {
  struct Case {
    std::string why;
    std::vector<std::vector<long>> rows;
    std::vector<int> order;
    std::vector<int> pivots;
    std::vector<std::vector<long>> vectors;
  };
  const std::vector<Case> cases = {
      {"independent", {{1, 0}, {0, 1}}, {0, 1}, {0, 1}, {}},
      {"a zero column", {{1, 0}, {2, 0}}, {0, 1}, {0}, {{0, 1}}},
      {"all zero", {{0, 0}, {0, 0}}, {0, 1}, {}, {{1, 0}, {0, 1}}},
      {"duplicate", {{1, 1}, {2, 2}}, {0, 1}, {0}, {{1, -1}}},
      {"the order decides who is left out", {{1, 3}, {2, 6}}, {1, 0}, {1}, {{3, -1}}},
      {"one row", {{2, 4, 6}}, {0, 1, 2}, {0}, {{2, -1, 0}, {3, 0, -1}}},
      {"a column that is not in the order is not looked at",
       {{1, 1, 5}, {2, 2, 7}},
       {0, 2},
       {0, 2},
       {}},
      {"fractions become whole",
       {{2, 3, 7}, {1, 5, 0}, {4, 1, 21}, {1, -2, 7}},
       {0, 1, 2},
       {0, 1, 2},
       {}},
      {"coefficients 7, -4383, -12",
       {{12, 0, 7}, {0, 4, -1461}, {24, 8, -2908}},
       {0, 1, 2},
       {0, 1},
       {{7, -4383, -12}}},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    Rows rows;
    for (const auto& row : c.rows) rows.push_back(integers(row));
    const exact::SampleRank rank = exact::rank_of_sample(test::integer_rows(rows), c.order);
    check_promises(rank, rows, c.order);
    CHECK(rank.pivot_columns == c.pivots);
    REQUIRE(rank.null_vectors.size() == c.vectors.size());
    for (std::size_t i = 0; i < c.vectors.size(); ++i) {
      CHECK(rank.null_vectors[i] == integers(c.vectors[i]));
    }
  }
}

TEST_CASE("random designs with planted relations") {
  for (std::uint64_t seed = 1; seed <= 100; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const auto k = static_cast<std::size_t>(random.whole(2, seed % 10 == 0 ? 60 : 24));
    const auto corank = static_cast<std::size_t>(
        random.whole(0, std::min<std::int64_t>(8, static_cast<std::int64_t>(k) - 1)));
    const auto n = static_cast<std::size_t>(random.whole(1, 120));
    const std::int64_t largest = seed % 3 == 0 ? 1'000'000 : 3;
    const Rows rows = test::planted(random, n, k, corank, largest);
    std::vector<int> order(k);
    for (std::size_t j = 0; j < k; ++j) order[j] = static_cast<int>(j);
    const exact::SampleRank rank = exact::rank_of_sample(test::integer_rows(rows), order);
    check_promises(rank, rows, order);
    CHECK(rank.pivot_columns.size() == test::plain_rank(rows));
  }
}

TEST_CASE("coefficients beyond 62 bits need the lifting") {
  // x_{j+1} = 99991 x_j + small: the last column on the first alone needs 99991^7, 117 bits.
  test::Random random(7);
  Rows rows;
  for (int i = 0; i < 40; ++i) {
    Integer first = random.whole(1, 1000), power = 1;
    for (int j = 0; j < 7; ++j) power *= 99991;
    rows.push_back({first, random.whole(-9, 9), Integer(power * first)});
    rows.back().push_back(power * rows.back()[1] + first);
  }
  const std::vector<int> order = {0, 1, 2, 3};
  const exact::SampleRank rank = exact::rank_of_sample(test::integer_rows(rows), order);
  check_promises(rank, rows, order);
  REQUIRE(rank.null_vectors.size() == 2);
  CHECK(mpz_sizeinbase(rank.null_vectors[0][0].get_mpz_t(), 2) == 117);
}

TEST_CASE("a matrix that is singular modulo the first prime only") {
  const Integer p(exact::prime);
  const Rows rows = {{1, 1}, {1, p + 1}};
  const exact::SampleRank rank = exact::rank_of_sample(test::integer_rows(rows), {0, 1});
  CHECK(rank.pivot_columns == std::vector<int>{0, 1});
  CHECK(rank.prime < exact::prime);
  const Rows related = {{1, p, p + 1}, {2, p, p + 2}, {3, 5 * p, 3 + 5 * p}};
  const exact::SampleRank second = exact::rank_of_sample(test::integer_rows(related), {0, 1, 2});
  check_promises(second, related, {0, 1, 2});
  CHECK(second.pivot_columns == std::vector<int>{0, 1});
}

TEST_CASE("Hilbert's matrix in decimals has full rank") {
  // 1/(i + j + 1) to 40 digits: another matrix than Hilbert's, but as ill-conditioned (1.7e16).
  std::vector<std::string> names;
  std::vector<std::vector<std::string>> cells(12);
  Integer scale;
  mpz_ui_pow_ui(scale.get_mpz_t(), 10, 40);
  for (int i = 0; i < 12; ++i) {
    names.push_back("h" + std::to_string(i));
    for (int j = 0; j < 12; ++j) {
      cells[static_cast<std::size_t>(i)].push_back(Integer(scale / (i + j + 1)).get_str() + "e-40");
    }
  }
  const test::Matrix matrix = test::matrix_of(names, cells);
  const auto rank = exact::rank_of_sample(matrix.design, matrix.piece, matrix.order());
  CHECK(rank.pivot_columns.size() == 12);
  CHECK(exact::minor_residue(matrix.design, matrix.piece, rank.pivot_rows, rank.pivot_columns,
                             rank.prime) != 0);
}

TEST_CASE("powers of a decimal are independent, and one too many for the rows is not") {
  // Powers 1 .. 10 of abscissae near -5, as in a polynomial calibration.
  std::vector<std::vector<std::string>> cells;
  for (int i = 0; i < 82; ++i)
    cells.push_back({"-" + std::to_string(300 + 7 * i) + ".00" + std::to_string(i % 10) + "e-2"});
  test::Matrix matrix = test::matrix_of({"x"}, cells);
  for (int power = 2; power <= 10; ++power) {
    test::add_column(matrix, "x^" + std::to_string(power),
                     test::tree(design::Operation::power, {test::cell(0)}, power));
  }
  const auto rank = exact::rank_of_sample(matrix.design, matrix.piece, matrix.order());
  CHECK(rank.pivot_columns.size() == 10);
  CHECK(rank.null_vectors.empty());
}

TEST_CASE("designs of cells give what integer rows give") {
  for (std::uint64_t seed = 1; seed <= 25; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const auto k = static_cast<std::size_t>(random.whole(2, 12));
    const Rows rows = test::planted(random, 40, k, k / 3, 50);
    std::vector<std::string> names;
    std::vector<std::vector<std::string>> cells(rows.size());
    for (std::size_t j = 0; j < k; ++j) {
      names.push_back("x" + std::to_string(j));
      const std::string exponent = "e" + std::to_string(random.whole(-6, 6));
      for (std::size_t i = 0; i < rows.size(); ++i)
        cells[i].push_back(rows[i][j].get_str() + exponent);
    }
    const test::Matrix matrix = test::matrix_of(names, cells);
    const auto rank = exact::rank_of_sample(matrix.design, matrix.piece, matrix.order());
    const auto again =
        exact::rank_of_sample(exact::exact_rows(matrix.design, matrix.piece), matrix.order());
    CHECK(rank.pivot_columns == again.pivot_columns);
    CHECK(rank.null_vectors == again.null_vectors);
    CHECK(rank.pivot_columns.size() == test::plain_rank(rows));
    check_promises(rank, exact::exact_rows(matrix.design, matrix.piece).rows, matrix.order());
  }
}

TEST_CASE("the column of ones can stand in the order") {
  const test::Matrix matrix = test::matrix_of({"a", "b"}, {{"1", "0"}, {"0", "1"}, {"1", "0"}});
  const auto rank = exact::rank_of_sample(matrix.design, matrix.piece, {0, 1, 2});
  REQUIRE(rank.null_vectors.size() == 1);
  CHECK(rank.null_vectors[0] == integers({1, 1, -1}));
}

TEST_CASE("constructed cases agree with the exact rational elimination") {
  struct Truth {
    std::size_t rank = 0;
    std::map<int, std::map<std::string, Integer>> vectors;
  };
  std::map<std::string, Truth> truths;
  for (const auto& row : test::read_csv("known/adversarial/null_spaces.csv").rows) {
    Truth& truth = truths[row[0]];
    truth.rank = std::stoul(row[1]);
    if (!row[2].empty()) truth.vectors[std::stoi(row[2])][row[3]] = Integer(row[4]);
  }
  REQUIRE(truths.size() == 44);
  for (const auto& [name, truth] : truths) {
    CAPTURE(name);
    const test::Csv csv = test::read_csv("known/adversarial/" + name + ".csv");
    const test::Matrix matrix = test::matrix_of(csv.names, csv.rows);
    const auto rank = exact::rank_of_sample(matrix.design, matrix.piece, matrix.order());
    CHECK(rank.pivot_columns.size() == truth.rank);
    REQUIRE(rank.null_vectors.size() == truth.vectors.size());
    for (const auto& [index, terms] : truth.vectors) {
      NullVector expected(csv.names.size() + 1, 0);
      for (std::size_t j = 0; j < csv.names.size(); ++j) {
        if (terms.count(csv.names[j]) != 0) expected[j] = terms.at(csv.names[j]);
      }
      exact::make_primitive(expected);
      CHECK(rank.null_vectors[static_cast<std::size_t>(index)] == expected);
    }
  }
}

TEST_CASE("quotients: ranks by residues, relations by rationals; an undefined row is no row") {
  using design::Operation;
  test::Matrix matrix = test::matrix_of(
      {"a", "b"}, {{"1", "3"}, {"2", "7"}, {"5", "-2"}, {"4", "0.5"}, {"9", "11"}, {"3", "0"}});
  const auto a = test::cell(0), b = test::cell(1);
  test::add_column(matrix, "a / b", test::tree(Operation::divide, {a, b}));
  test::add_column(matrix, "(a + b) / b",
                   test::tree(Operation::divide, {test::tree(Operation::add, {a, b}), b}));
  const auto rank = exact::rank_of_sample(matrix.design, matrix.piece, {0, 1, 2, 3, 4});
  CHECK(rank.pivot_columns == std::vector<int>{0, 1, 2, 3});
  REQUIRE(rank.null_vectors.size() == 1);
  CHECK(rank.null_vectors[0] == integers({0, 0, 1, -1, 1}));
  const auto tests =
      exact::test_relations(matrix.design, matrix.piece, matrix.all_rows(), rank.null_vectors, 5);
  CHECK(tests[0].holding == 5);
  CHECK(tests[0].violating == 0);
}
