#include <doctest/doctest.h>

#include "design/rows.hpp"
#include "exact/matrix.hpp"
#include "exact/rank.hpp"

using namespace gramproof;
using design::Operation;
using exact::NullVector;
using test::cell;
using test::tree;

namespace {

mpq_class residual_of(const test::Matrix& matrix, const NullVector& vector, std::size_t row) {
  mpq_class sum = vector.back();
  for (std::size_t j = 0; j < matrix.design.columns.size(); ++j) {
    if (vector[j] == 0) continue;
    sum +=
        vector[j] * *design::exact_value(*matrix.design.columns[j].definition, matrix.piece, row);
  }
  return sum;
}

void check_test(const test::Matrix& matrix, const NullVector& vector, std::size_t most) {
  const auto tests =
      exact::test_relations(matrix.design, matrix.piece, matrix.all_rows(), {vector}, most);
  REQUIRE(tests.size() == 1);
  std::uint64_t holding = 0, violating = 0, listed = 0;
  mpq_class largest = 0;
  for (std::size_t i = 0; i < matrix.piece.rows; ++i) {
    const mpq_class residual = residual_of(matrix, vector, i);
    if (residual == 0) {
      ++holding;
      continue;
    }
    ++violating;
    largest = std::max(largest, mpq_class(abs(residual)));
    if (listed == most) continue;
    REQUIRE(tests[0].first.size() > listed);
    CHECK(tests[0].first[listed].row_in_piece == i);
    CHECK(tests[0].first[listed].row == matrix.piece.row[i]);
    CHECK(tests[0].first[listed].residual == residual);
    ++listed;
  }
  CHECK(tests[0].holding == holding);
  CHECK(tests[0].violating == violating);
  CHECK(tests[0].first.size() == listed);
  CHECK(tests[0].largest_residual == largest);
}

NullVector integers(const std::vector<std::string>& values) {
  NullVector vector;
  for (const std::string& value : values) vector.emplace_back(value);
  return vector;
}

}  // namespace

TEST_CASE("relations on rows, in words and beyond") {
  struct Case {
    std::string why;
    std::vector<std::vector<std::string>> rows;
    std::vector<std::string> vector;
  };
  const std::vector<Case> cases = {
      {"holds", {{"1", "2", "3"}, {"4", "5", "9"}}, {"1", "1", "-1", "0"}},
      {"cents", {{"0.10", "0.20", "0.30"}, {"0.1", "0.7", "0.80"}}, {"1", "1", "-1", "0"}},
      {"one cent off", {{"0.10", "0.20", "0.31"}, {"4", "5", "9"}}, {"1", "1", "-1", "0"}},
      {"with the column of ones",
       {{"0.5", "0.5", "0"}, {"0.25", "0.75", "1"}},
       {"1", "1", "0", "-1"}},
      {"128 bits",
       {{"999999999999999999", "1", "999999999999999999e9"}, {"5", "1", "5e9"}},
       {"1000000000", "0", "-1", "0"}},
      {"128 bits, violated by one",
       {{"999999999999999999", "1", "999999999999999998e9"}, {"5", "1", "5e9"}},
       {"1000000000", "0", "-1", "0"}},
      {"a large ones coefficient",
       {{"1e17", "3e17", "1"}, {"-1e17", "3e17", "1"}},
       {"40", "0", "0", "-4000000000000000000"}},
      {"an offset beyond one word",
       {{"100000000000000000", "0", "1"}},
       {"100000000000000000000", "0", "0", "-10000000000000000000000000000000000000"}},
      {"negative offset beyond one word",
       {{"-100000000000000000", "0", "1"}},
       {"1000000000000000000", "0", "0", "100000000000000000000000000000000001"}},
      {"thirty digits",
       {{"123456789012345678901234567890", "1", "123456789012345678901234567891"}, {"5", "1", "7"}},
       {"1", "1", "-1", "0"}},
      {"300 decimals",
       {{"-27e-300", "-987e-300", "-1014e-300"}, {"1e-300", "0", "2e-300"}},
       {"1", "1", "-1", "0"}},
      {"both ends of the scale",
       {{"1e300", "1e-300", "1e300"}, {"1e-300", "1e300", "0"}},
       {"1", "-1", "1", "0"}},
      {"zeros with many decimals",
       {{"0.000000000000000000", "1e5", "1e5"}, {"0e-300", "7", "8"}},
       {"1", "1", "-1", "0"}},
      {"all coefficients zero", {{"1", "2", "3"}}, {"0", "0", "0", "0"}},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const test::Matrix matrix = test::matrix_of({"a", "b", "c"}, c.rows);
    for (const std::size_t most : {0U, 1U, 50U}) check_test(matrix, integers(c.vector), most);
  }
}

TEST_CASE("random relations agree with rational arithmetic") {
  for (std::uint64_t seed = 1; seed <= 60; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const std::int64_t size = seed % 3 == 0 ? 900'000'000'000'000'000 : 50;
    std::vector<std::vector<std::string>> cells;
    for (int i = 0; i < 30; ++i) {
      const std::int64_t a = random.whole(-size, size), b = random.whole(-50, 50);
      const std::int64_t slip = random.whole(0, 5) == 0 ? 1 : 0;
      cells.push_back(
          {std::to_string(a) + "e-" + std::to_string(random.whole(0, seed % 2 == 0 ? 4 : 0)),
           std::to_string(b), mpz_class(mpz_class(a) * 3 - b + slip).get_str()});
    }
    test::Matrix matrix = test::matrix_of({"a", "b", "c"}, cells);
    test::add_column(matrix, "a * b", tree(Operation::multiply, {cell(0), cell(1)}));
    test::add_column(matrix, "a / 3", tree(Operation::divide, {cell(0), test::number("3")}));
    check_test(matrix, integers({"3", "-1", "-1", "0", "0", "0"}), 5);
    check_test(matrix, integers({"3000000007", "-1", "-1", "1", "0", "2"}), 5);
    check_test(matrix, integers({"0", "-1", "-1", "0", "9", "0"}), 5);
    check_test(matrix, integers({"1", "0", "0", "0", "-3", "0"}), 5);
  }
}

TEST_CASE("several vectors at once, more rows than one turn takes") {
  std::vector<std::vector<std::string>> cells;
  for (int i = 0; i < 2500; ++i) {
    cells.push_back({std::to_string(i), std::to_string(i == 2400 ? 7 : 2 * i), "1"});
  }
  const test::Matrix matrix = test::matrix_of({"a", "b", "constant"}, cells);
  const auto tests =
      exact::test_relations(matrix.design, matrix.piece, matrix.all_rows(),
                            {integers({"2", "-1", "0", "0"}), integers({"0", "0", "1", "-1"})}, 3);
  CHECK(tests[0].holding == 2499);
  REQUIRE(tests[0].first.size() == 1);
  CHECK(tests[0].first[0].row == 2401);
  CHECK(tests[0].first[0].residual == 4793);
  CHECK(tests[1].holding == 2500);
  CHECK(exact::test_relations(matrix.design, matrix.piece, {}, {}, 3).empty());
}
