#include "exact/modular.hpp"

#include <doctest/doctest.h>

#include <set>

#include "design/rows.hpp"
#include "exact/matrix.hpp"

using namespace gramproof;
using design::Operation;
using test::cell;
using test::number;
using test::tree;

namespace {

std::uint64_t plain_residue(const mpq_class& value) {
  const mpz_class p(exact::prime);
  mpz_class inverse, result;
  REQUIRE(mpz_invert(inverse.get_mpz_t(), value.get_den_mpz_t(), p.get_mpz_t()) != 0);
  const mpz_class product = value.get_num() * inverse;
  mpz_mod(result.get_mpz_t(), product.get_mpz_t(), p.get_mpz_t());
  return result.get_ui();
}

design::ExpressionPtr comparison(design::Comparison how, design::ExpressionPtr left,
                                 design::ExpressionPtr right) {
  design::Expression expression;
  expression.operation = Operation::compare;
  expression.comparison = how;
  expression.operands = {std::move(left), std::move(right)};
  return std::make_shared<design::Expression>(expression);
}

/// Two columns that hold every kind of cell: plain, mixed decimals, negative, wide, far scales.
test::Matrix mixed_cells() {
  return test::matrix_of({"x", "y"}, {{"1.25", "3"},
                                      {"-7", "0.001"},
                                      {"0", "1e-300"},
                                      {"123456789012345678901234567890", "-2"},
                                      {"1e300", "4"},
                                      {"0.00", "12.50"},
                                      {"999999999999999999", "999999999999999999"},
                                      {"4611686018427387847", "1"},
                                      {"-4611686018427387848", "1"}});
}

std::vector<std::pair<std::string, design::ExpressionPtr>> trees() {
  const auto x = cell(0), y = cell(1);
  using C = design::Comparison;
  return {
      {"cell", x},
      {"sum", tree(Operation::add, {x, y})},
      {"difference", tree(Operation::subtract, {x, y})},
      {"product", tree(Operation::multiply, {x, y})},
      {"quotient", tree(Operation::divide, {x, y})},
      {"quotient by a number", tree(Operation::divide, {x, number("-0.25")})},
      {"quotient by three", tree(Operation::divide, {x, number("3")})},
      {"wide number", tree(Operation::add, {x, number("123456789012345678901.5")})},
      {"power", tree(Operation::power, {x}, 5)},
      {"first power", tree(Operation::power, {x}, 1)},
      {"negative power", tree(Operation::power, {y}, -2)},
      {"power of a sum", tree(Operation::power, {tree(Operation::add, {x, y})}, 2)},
      {"absolute", tree(Operation::absolute, {x})},
      {"absolute quotient", tree(Operation::absolute, {tree(Operation::divide, {x, y})})},
      {"minimum of three", tree(Operation::minimum, {x, y, number("2")})},
      {"maximum", tree(Operation::maximum, {x, number("40")})},
      {"less", comparison(C::less, x, y)},
      {"less or equal", comparison(C::less_equal, x, y)},
      {"greater", comparison(C::greater, x, number("1.2"))},
      {"greater or equal", comparison(C::greater_equal, y, number("3.0"))},
      {"equal", comparison(C::equal, x, y)},
      {"not equal", comparison(C::not_equal, x, y)},
      {"both",
       tree(Operation::both, {comparison(C::less, x, y), comparison(C::greater, y, number("0"))})},
      {"either",
       tree(Operation::either, {comparison(C::less, x, y), comparison(C::greater, x, y)})},
      {"negation", tree(Operation::negation, {comparison(C::less, x, y)})},
      {"row number", tree(Operation::row_number, {})},
  };
}

/// Values of all trees, each row apart (words may suffice) and together (they do not).
void check_residues(const test::Matrix& matrix, const std::vector<std::size_t>& rows) {
  const auto residues = exact::residues(matrix.design, matrix.piece, rows);
  const std::size_t width = matrix.design.columns.size() + 1;
  REQUIRE(residues.size() == rows.size() * width);
  for (std::size_t i = 0; i < rows.size(); ++i) {
    CAPTURE(rows[i]);
    for (std::size_t j = 0; j + 1 < width; ++j) {
      CAPTURE(matrix.design.columns[j].label);
      const auto value =
          design::exact_value(*matrix.design.columns[j].definition, matrix.piece, rows[i]);
      REQUIRE(value.has_value());
      CHECK(residues[i * width + j] == plain_residue(*value));
    }
    CHECK(residues[i * width + width - 1] == 1);
  }
}

}  // namespace

TEST_CASE("residues are the exact values modulo the prime") {
  test::Matrix matrix = mixed_cells();
  for (const auto& [label, definition] : trees()) test::add_column(matrix, label, definition);
  check_residues(matrix, matrix.all_rows());
  for (std::size_t i = 0; i < matrix.piece.rows; ++i) check_residues(matrix, {i});
  check_residues(matrix, {0, 1, 5});
}

TEST_CASE("residue of a rational") {
  CHECK(exact::residue_of(mpq_class(5)) == 5);
  CHECK(exact::residue_of(mpq_class(-1)) == exact::prime - 1);
  CHECK(exact::residue_of(mpq_class(1, 2)) == (exact::prime + 1) / 2);
  CHECK_FALSE(exact::residue_of(mpq_class(mpz_class(1), mpz_class(exact::prime))).has_value());
}

TEST_CASE("a row whose denominator the prime divides counts for nothing") {
  test::Matrix matrix = test::matrix_of(
      {"x", "y"},
      {{"6", "3"}, {"1", "4611686018427387847"}, {"4611686018427387847", "4611686018427387847"}});
  test::add_column(matrix, "x / y", tree(Operation::divide, {cell(0), cell(1)}));
  const auto residues = exact::residues(matrix.design, matrix.piece, {0, 1, 2});
  CHECK(residues[2] == 2);
  for (std::size_t j = 4; j < 8; ++j) CHECK(residues[j] == 0);
  CHECK_MESSAGE(residues[10] == 1, "p / p is 1, by its exact value");
  std::vector<std::uint64_t> total(4, 0);
  exact::add_random_combination(matrix.design, matrix.piece, {0, 1, 2}, total);
  std::vector<std::uint64_t> without(4, 0);
  exact::add_random_combination(matrix.design, matrix.piece, {0, 2}, without);
  CHECK(total == without);
}

TEST_CASE("the random combination is the sum of hash times value, in any partition") {
  test::Random random(3);
  std::vector<std::vector<std::string>> cells;
  for (int i = 0; i < 400; ++i) {
    cells.push_back(
        {std::to_string(random.whole(-1'000'000'000'000, 1'000'000'000'000)) + "e-2",
         std::to_string(random.whole(1, 9)) + "e" + std::to_string(random.whole(-3, 3))});
  }
  test::Matrix matrix = test::matrix_of({"x", "y"}, cells);
  test::add_column(matrix, "x / y", tree(Operation::divide, {cell(0), cell(1)}));
  test::add_column(matrix, "log(y)", tree(Operation::log, {cell(1)}));
  std::vector<mpz_class> expected(5, 0);
  for (std::size_t i = 0; i < 400; ++i) {
    const mpz_class hash(exact::row_hash(matrix.piece.row[i]));
    for (std::size_t j = 0; j < 3; ++j) {
      const auto value = design::exact_value(*matrix.design.columns[j].definition, matrix.piece, i);
      expected[j] += hash * plain_residue(*value);
    }
    expected[4] += hash;
  }
  std::vector<std::uint64_t> whole(5, 0), parts(5, 0);
  const std::vector<std::size_t> rows = matrix.all_rows();
  exact::add_random_combination(matrix.design, matrix.piece, rows, whole);
  const std::vector<std::size_t> first(rows.begin(), rows.begin() + 123);
  const std::vector<std::size_t> second(rows.begin() + 123, rows.end());
  exact::add_random_combination(matrix.design, matrix.piece, first, parts);
  exact::add_random_combination(matrix.design, matrix.piece, second, parts);
  CHECK(whole == parts);
  for (std::size_t j = 0; j < 5; ++j) {
    CAPTURE(j);
    CHECK(mpz_class(whole[j]) == expected[j] % mpz_class(exact::prime));
  }
  CHECK_MESSAGE(whole[3] == 0, "a column that is not exact");
}

TEST_CASE("row hashes are residues, never 0, and differ") {
  std::set<std::uint64_t> seen;
  for (std::uint64_t row = 0; row < 100'000; ++row) {
    const std::uint64_t hash = exact::row_hash(row);
    CHECK_UNARY(hash > 0 && hash < exact::prime);
    seen.insert(hash);
  }
  CHECK(seen.size() == 100'000);
  CHECK(exact::row_hash(1) == exact::row_hash(1));
}
