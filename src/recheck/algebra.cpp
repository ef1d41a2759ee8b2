#include "recheck/algebra.hpp"

#include <algorithm>
#include <utility>

namespace gramproof::recheck {
namespace {

using Wide = unsigned __int128;

std::uint64_t times(std::uint64_t left, std::uint64_t right, std::uint64_t prime) {
  return static_cast<std::uint64_t>(static_cast<Wide>(left) * right % prime);
}

/// By Fermat: value^(prime - 2).
std::uint64_t inverse(std::uint64_t value, std::uint64_t prime) {
  std::uint64_t result = 1;
  for (std::uint64_t exponent = prime - 2; exponent > 0; exponent >>= 1) {
    if ((exponent & 1) != 0) result = times(result, value, prime);
    value = times(value, value, prime);
  }
  return result;
}

std::uint64_t residue(const mpz_class& value, std::uint64_t prime) {
  return mpz_fdiv_ui(value.get_mpz_t(), prime);
}

}  // namespace

std::optional<std::uint64_t> modulo(const mpq_class& value, std::uint64_t prime) {
  const std::uint64_t above = residue(value.get_num(), prime);
  if (value.get_den() == 1) return above;
  const std::uint64_t below = residue(value.get_den(), prime);
  if (below == 0) return std::nullopt;
  return times(above, inverse(below, prime), prime);
}

std::uint64_t determinant(std::vector<std::vector<std::uint64_t>> matrix, std::uint64_t prime) {
  std::uint64_t product = 1 % prime;
  for (std::size_t step = 0; step < matrix.size(); ++step) {
    std::size_t pivot = step;
    while (pivot < matrix.size() && matrix[pivot][step] == 0) ++pivot;
    if (pivot == matrix.size()) return 0;
    if (pivot != step) {
      std::swap(matrix[pivot], matrix[step]);
      product = product == 0 ? 0 : prime - product;
    }
    product = times(product, matrix[step][step], prime);
    const std::uint64_t scale = inverse(matrix[step][step], prime);
    for (std::size_t row = step + 1; row < matrix.size(); ++row) {
      const std::uint64_t factor = times(matrix[row][step], scale, prime);
      if (factor == 0) continue;
      for (std::size_t column = step; column < matrix.size(); ++column) {
        const std::uint64_t part = times(factor, matrix[step][column], prime);
        std::uint64_t& entry = matrix[row][column];
        entry = entry >= part ? entry - part : entry + (prime - part);
      }
    }
  }
  return product;
}

std::size_t rank_of(const std::vector<std::vector<mpz_class>>& rows) {
  std::vector<std::vector<mpq_class>> matrix;
  for (const auto& row : rows) matrix.emplace_back(row.begin(), row.end());
  const std::size_t columns = matrix.empty() ? 0 : matrix.front().size();
  std::size_t rank = 0;
  for (std::size_t column = 0; column < columns && rank < matrix.size(); ++column) {
    const auto pivot =
        std::find_if(matrix.begin() + static_cast<std::ptrdiff_t>(rank), matrix.end(),
                     [&](const auto& row) { return row[column] != 0; });
    if (pivot == matrix.end()) continue;
    std::swap(*pivot, matrix[rank]);
    for (std::size_t row = rank + 1; row < matrix.size(); ++row) {
      if (matrix[row][column] == 0) continue;
      const mpq_class factor = matrix[row][column] / matrix[rank][column];
      for (std::size_t i = column; i < columns; ++i) matrix[row][i] -= factor * matrix[rank][i];
    }
    ++rank;
  }
  return rank;
}

}  // namespace gramproof::recheck
