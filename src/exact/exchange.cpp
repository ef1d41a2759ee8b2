#include "exact/exchange.hpp"

#include <algorithm>
#include <numeric>

#include "exact/flint_types.hpp"

namespace gramproof::exact {
namespace {

/// The preference, then every column it does not name.
std::vector<int> completed(const std::vector<int>& preference, std::size_t columns) {
  std::vector<int> order = preference;
  std::vector<bool> named(columns, false);
  for (const int column : preference) named[static_cast<std::size_t>(column)] = true;
  for (std::size_t j = 0; j < columns; ++j) {
    if (!named[j]) order.push_back(static_cast<int>(j));
  }
  return order;
}

mpq_class quotient(const mpz_class& numerator, const mpz_class& denominator) {
  mpq_class value(numerator, denominator);
  value.canonicalize();
  return value;
}

}  // namespace

std::vector<Combination> leave_out(const std::vector<NullVector>& null_vectors,
                                   const std::vector<int>& preference) {
  if (null_vectors.empty()) return {};
  const FlintSession session;
  // The last entry of a null vector belongs to the column of ones, which no relation uses.
  const std::vector<int> order = completed(preference, null_vectors.front().size() - 1);
  FlintMatrix matrix(null_vectors.size(), order.size());
  for (std::size_t i = 0; i < null_vectors.size(); ++i) {
    for (std::size_t p = 0; p < order.size(); ++p)
      matrix.set(i, p, null_vectors[i][static_cast<std::size_t>(order[p])]);
  }
  FlintInteger common;
  // Reduced echelon form: the pivots are the earliest columns of the order that can all go, and no
  // pivot occurs in the row of another, so that each row gives its pivot by what stays.
  const auto rank =
      static_cast<std::size_t>(fmpz_mat_rref(matrix.get(), common.get(), matrix.get()));
  const mpz_class denominator = common.to_mpz();
  std::vector<Combination> result;
  std::size_t pivot = 0;
  for (std::size_t i = 0; i < rank; ++i, ++pivot) {
    while (matrix.at(i, pivot) == 0) ++pivot;
    Combination combination;
    combination.column = order[pivot];
    for (std::size_t p = pivot + 1; p < order.size(); ++p) {
      const mpz_class entry = matrix.at(i, p);
      if (entry != 0) combination.parts.emplace_back(order[p], quotient(-entry, denominator));
    }
    std::sort(combination.parts.begin(), combination.parts.end(),
              [](const auto& a, const auto& b) { return a.first < b.first; });
    result.push_back(std::move(combination));
  }
  return result;
}

int dependent_since(const std::vector<NullVector>& null_vectors, int column) {
  if (null_vectors.empty()) return -1;
  std::vector<int> from_the_end(null_vectors.front().size() - 1);
  std::iota(from_the_end.rbegin(), from_the_end.rend(), 0);
  // Each combination ends in the column that it gives, and these ends differ: the relations on the
  // first m columns are spanned by those combinations that end there or before.
  int since = -1;
  for (const Combination& combination : leave_out(null_vectors, from_the_end)) {
    const bool involved =
        combination.column == column || coefficient_of(combination.parts, column) != 0;
    if (involved && (since < 0 || combination.column < since)) since = combination.column;
  }
  return since;
}

mpq_class coefficient_of(const LinearForm& form, int column) {
  for (const auto& [at, coefficient] : form) {
    if (at == column) return coefficient;
  }
  return 0;
}

}  // namespace gramproof::exact
