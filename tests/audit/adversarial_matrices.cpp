#include <functional>
#include <string>

#include "audit/adversarial_cases.hpp"
#include "support/random_numbers.hpp"

namespace gramproof::test {
namespace {

using Entry = std::function<mpq_class(int row, int column)>;

/// Rows and columns from 0.
Numbers matrix(int n, int k, const Entry& entry) {
  Numbers rows;
  for (int i = 0; i < n; ++i) {
    rows.emplace_back();
    for (int j = 0; j < k; ++j) rows.back().push_back(entry(i, j));
  }
  return rows;
}

/// Column `at` becomes the sum of weight * column over the weights.
void replace(Numbers& rows, std::size_t at, const std::vector<std::pair<std::size_t, long>>& by) {
  for (auto& row : rows) {
    mpq_class sum = 0;
    for (const auto& [column, weight] : by) sum += weight * row[column];
    row[at] = sum;
  }
}

/// The matrix without a constant, the constant being set aside by name.
AdversarialCase without_constant(const std::string& name, const Numbers& rows) {
  AdversarialCase made = as_recorded(name, rows);
  made.design = "rest";
  for (auto& row : made.rows) row.erase(row.begin());
  return made;
}

mpq_class whole_power(const mpq_class& base, int exponent) {
  mpq_class result = 1;
  for (int i = 0; i < exponent; ++i) result *= base;
  return result;
}

/// 1 / (i + j - 1), cut to 45 decimals: what someone wrote down, and still of full rank.
mpq_class hilbert(int i, int j) {
  const mpz_class scaled = power_of_ten(45).get_num() / (i + j + 1);
  return scaled * power_of_ten(-45);
}

mpz_class binomial(int n, int k) {
  mpz_class result;
  mpz_bin_uiui(result.get_mpz_t(), static_cast<unsigned long>(n), static_cast<unsigned long>(k));
  return result;
}

void add_hilbert(std::vector<AdversarialCase>& cases) {
  Numbers rows = matrix(12, 12, hilbert);
  cases.push_back(without_constant("12 x 12 Hilbert in decimals", rows));
  replace(rows, 8, {{1, 2}, {4, -5}, {11, 1}});
  cases.push_back(without_constant("Hilbert with a column replaced by a combination", rows));
}

void add_polynomials(std::vector<AdversarialCase>& cases) {
  const auto power = [](int i, int j) { return whole_power(i + 1, j + 1); };
  cases.push_back(as_recorded("powers 1 to 15 of 1 to 30", matrix(30, 15, power)));
  const auto year = [](int i, int j) { return whole_power(1990 + i, j + 1); };
  cases.push_back(as_recorded("a quintic in the calendar year", matrix(30, 5, year)));
  Numbers rows = matrix(30, 6, year);
  // (y - 2000)^2, expanded by nobody: a combination of y^2, y and the constant.
  for (std::size_t i = 0; i < rows.size(); ++i) rows[i][5] = whole_power(rows[i][0] - 2000, 2);
  cases.push_back(as_recorded("the year squared, raw and centred", rows));
  const auto node = [](int i, int j) { return whole_power(mpq_class(i, 20), j + 1); };
  cases.push_back(as_recorded("powers 1 to 12 on twentieths, 21 rows", matrix(21, 12, node)));
  cases.push_back(as_recorded("powers 1 to 12 on 9 rows", matrix(9, 12, node)));
}

void add_triangles(std::vector<AdversarialCase>& cases) {
  const auto wilkinson = [](int i, int j) -> mpq_class { return i == j ? 1 : i < j ? -1 : 0; };
  Numbers rows = matrix(40, 40, wilkinson);
  cases.push_back(without_constant("1 on the diagonal, -1 above it, order 40", rows));
  // Its determinant is 1; this entry makes it 0.
  rows[39][0] = -mpq_class(1, mpz_class(1) << 38);
  cases.push_back(without_constant("the same with -2^-38 in a corner: singular", rows));
  const auto pascal = [](int i, int j) { return mpq_class(binomial(i + j, i)); };
  Numbers squares = matrix(16, 16, pascal);
  cases.push_back(without_constant("Pascal's matrix of order 16", squares));
  // The determinant of the Pascal matrix and of the one without last row and column are both 1.
  squares[15][15] -= 1;
  cases.push_back(without_constant("Pascal's matrix less 1 in a corner: singular", squares));
}

void add_laeuchli(std::vector<AdversarialCase>& cases) {
  const mpq_class small = power_of_ten(-200);
  const auto entry = [&](int i, int j) -> mpq_class {
    return i == 0 ? mpq_class(1) : i == j + 1 ? small : mpq_class(0);
  };
  Numbers rows = matrix(9, 8, entry);
  cases.push_back(without_constant("ones over 1e-200 times the identity", rows));
  replace(rows, 3, {{0, 1}, {5, 1}, {6, -1}});
  cases.push_back(without_constant("the same with a column replaced by a combination", rows));
}

void add_deficient(Random& random, std::vector<AdversarialCase>& cases) {
  const auto any = [&](int, int) { return mpq_class(random.whole(-99, 99)); };
  const Numbers left = matrix(80, 5, any), right = matrix(5, 60, any);
  cases.push_back(without_constant("60 columns of rank 5", matrix(80, 60, [&](int i, int j) {
                                     mpq_class sum = 0;
                                     for (std::size_t c = 0; c < 5; ++c) {
                                       sum += left[static_cast<std::size_t>(i)][c] *
                                              right[c][static_cast<std::size_t>(j)];
                                     }
                                     return sum;
                                   })));
  cases.push_back(without_constant("20 times the same column", matrix(50, 20, [&](int i, int) {
                                     return mpq_class(i * i + 1);
                                   })));
  cases.push_back(as_recorded("differences around a ring of 12", matrix(40, 12, [&](int i, int j) {
                                const auto at = [i](int c) { return (i + 3) * (c * c + 7) % 101; };
                                return mpq_class(at((j + 1) % 12) - at(j));
                              })));
  cases.push_back(without_constant(
      "a magic square of order 8", matrix(8, 8, [](int i, int j) {
        const int count = 8 * i + j + 1;
        return mpq_class((i % 4 == j % 4 || i % 4 + j % 4 == 3) ? 65 - count : count);
      })));
  cases.push_back(as_recorded("12 columns on 8 rows", matrix(8, 12, any)));
  Numbers wide = matrix(10, 14, any);
  replace(wide, 9, {{0, 1}, {1, 1}, {2, 1}});
  cases.push_back(as_recorded("14 columns on 10 rows, one a total", wide));
  cases.push_back(as_recorded("a single row", matrix(1, 4, any)));
  cases.push_back(as_recorded("nothing but zeros", matrix(6, 3, [](int, int) { return 0; })));
}

}  // namespace

std::vector<AdversarialCase> cases_of_matrices(std::uint64_t seed) {
  Random random(seed);
  std::vector<AdversarialCase> cases;
  add_hilbert(cases);
  add_polynomials(cases);
  add_triangles(cases);
  add_laeuchli(cases);
  add_deficient(random, cases);
  return cases;
}

}  // namespace gramproof::test
