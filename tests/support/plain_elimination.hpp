// tests/support/plain_elimination.hpp - rank and null space the slow and plain way, for comparison
// with the program's own: fraction-free elimination in big integers.
//   [Bareiss68] Bareiss, "Sylvester's identity and multistep integer-preserving Gaussian
//               elimination", Math. Comp. 22 (1968) 565-578.
#pragma once

#include <gmpxx.h>

#include <cstddef>
#include <utility>
#include <vector>

namespace gramproof::test {

using IntegerVectors = std::vector<std::vector<mpz_class>>;

struct PlainNullSpace {
  std::size_t rank = 0;
  IntegerVectors vectors;  ///< one a column without pivot, on it and the pivots before it
};

/// One step of [Bareiss68] in the form of Gauss and Jordan: column j becomes 0 but for the pivot.
inline void clear_column(IntegerVectors& rows, std::size_t pivot, std::size_t j,
                         const mpz_class& divisor) {
  const std::vector<mpz_class> by = rows[pivot];
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (i == pivot) continue;
    const mpz_class factor = rows[i][j];
    for (std::size_t c = 0; c < by.size(); ++c) {
      rows[i][c] = rows[i][c] * by[j] - factor * by[c];
      mpz_divexact(rows[i][c].get_mpz_t(), rows[i][c].get_mpz_t(), divisor.get_mpz_t());
    }
  }
}

/// Rows of equal length. O(rows * columns * rank) products of integers as long as the minors.
inline PlainNullSpace plain_null_space(IntegerVectors rows) {
  PlainNullSpace result;
  const std::size_t width = rows.empty() ? 0 : rows.front().size();
  std::vector<std::size_t> pivots, free;
  mpz_class last = 1;
  for (std::size_t j = 0; j < width; ++j) {
    std::size_t found = pivots.size();
    while (found < rows.size() && rows[found][j] == 0) ++found;
    if (found == rows.size()) {
      free.push_back(j);
      continue;
    }
    std::swap(rows[found], rows[pivots.size()]);
    clear_column(rows, pivots.size(), j, last);
    last = rows[pivots.size()][j];
    pivots.push_back(j);
  }
  result.rank = pivots.size();
  for (const std::size_t j : free) {
    std::vector<mpz_class> vector(width, 0);
    vector[j] = last;
    for (std::size_t r = 0; r < pivots.size(); ++r) vector[pivots[r]] = -rows[r][j];
    mpz_class divisor = 0;
    for (const mpz_class& v : vector) divisor = gcd(divisor, v);
    for (mpz_class& v : vector) v /= divisor;
    result.vectors.push_back(std::move(vector));
  }
  return result;
}

/// True if both are independent and span the same space.
inline bool same_span(const IntegerVectors& a, const IntegerVectors& b) {
  if (a.size() != b.size()) return false;
  IntegerVectors both = a;
  both.insert(both.end(), b.begin(), b.end());
  return plain_null_space(a).rank == a.size() && plain_null_space(b).rank == a.size() &&
         plain_null_space(std::move(both)).rank == a.size();
}

/// True if every vector gives 0 on every row.
inline bool annihilate(const IntegerVectors& vectors, const IntegerVectors& rows) {
  for (const auto& vector : vectors) {
    for (const auto& row : rows) {
      mpz_class sum = 0;
      for (std::size_t j = 0; j < row.size(); ++j) sum += vector[j] * row[j];
      if (sum != 0) return false;
    }
  }
  return true;
}

}  // namespace gramproof::test
