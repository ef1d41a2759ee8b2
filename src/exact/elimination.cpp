// src/exact/elimination.cpp
#include "exact/elimination.hpp"

#include <algorithm>

#include "exact/flint_types.hpp"
#include "exact/modulus.hpp"

namespace gramproof::exact {
namespace {

/// Rows beyond the number of columns that the first elimination takes: a random row misses the
/// span of fewer rows often, so a few more than needed save most second steps.
constexpr std::size_t spare_rows = 32;

void fill(ResidueMatrix& matrix, const std::vector<std::uint64_t>& values,
          const std::vector<std::size_t>& rows, std::size_t columns) {
  for (std::size_t i = 0; i < rows.size(); ++i) {
    for (std::size_t j = 0; j < columns; ++j) matrix.at(i, j) = values[rows[i] * columns + j];
  }
}

std::vector<std::size_t> independent_among(const std::vector<std::uint64_t>& values,
                                           const std::vector<std::size_t>& rows,
                                           std::size_t columns, std::uint64_t modulus) {
  if (rows.empty() || columns == 0) return {};
  ResidueMatrix matrix(rows.size(), columns, modulus);
  fill(matrix, values, rows, columns);
  std::vector<slong> permutation(rows.size());
  for (std::size_t i = 0; i < rows.size(); ++i) permutation[i] = static_cast<slong>(i);
  const slong rank = nmod_mat_lu(permutation.data(), matrix.get(), 0);
  std::vector<std::size_t> chosen;
  for (std::size_t i = 0; i < static_cast<std::size_t>(rank); ++i) {
    chosen.push_back(rows[static_cast<std::size_t>(permutation[i])]);
  }
  std::sort(chosen.begin(), chosen.end());
  return chosen;
}

/// Fills pivot columns, free columns and coefficients from the independent rows.
void reduce(const std::vector<std::uint64_t>& values, std::size_t columns, std::uint64_t modulus,
            Elimination& result) {
  const std::size_t rank = result.rows.size();
  ResidueMatrix matrix(rank, columns, modulus);
  fill(matrix, values, result.rows, columns);
  if (rank > 0 && columns > 0) nmod_mat_rref(matrix.get());
  result.columns.clear();
  result.free.clear();
  for (std::size_t j = 0; j < columns; ++j) {
    const std::size_t found = result.columns.size();
    const bool pivot = found < rank && matrix.at(found, j) != 0;
    (pivot ? result.columns : result.free).push_back(j);
  }
  result.coefficients.assign(result.free.size() * rank, 0);
  for (std::size_t f = 0; f < result.free.size(); ++f) {
    for (std::size_t p = 0; p < rank; ++p) {
      result.coefficients[f * rank + p] = matrix.at(p, result.free[f]);
    }
  }
}

/// The rows named times the null space: rows x free columns.
std::vector<std::uint64_t> residuals(const std::vector<std::uint64_t>& values, std::size_t columns,
                                     const std::vector<std::size_t>& rows,
                                     const Elimination& eliminated, std::uint64_t modulus) {
  const Modulus field(modulus);
  const std::size_t rank = eliminated.columns.size(), nullity = eliminated.free.size();
  ResidueMatrix left(rows.size(), rank, modulus), right(rank, nullity, modulus);
  ResidueMatrix product(rows.size(), nullity, modulus);
  for (std::size_t i = 0; i < rows.size(); ++i) {
    for (std::size_t p = 0; p < rank; ++p) {
      left.at(i, p) = values[rows[i] * columns + eliminated.columns[p]];
    }
  }
  for (std::size_t p = 0; p < rank; ++p) {
    for (std::size_t f = 0; f < nullity; ++f) {
      right.at(p, f) = eliminated.coefficients[f * rank + p];
    }
  }
  if (rank > 0) nmod_mat_mul(product.get(), left.get(), right.get());
  std::vector<std::uint64_t> result(rows.size() * nullity);
  for (std::size_t i = 0; i < rows.size(); ++i) {
    for (std::size_t f = 0; f < nullity; ++f) {
      result[i * nullity + f] =
          field.subtract(values[rows[i] * columns + eliminated.free[f]], product.at(i, f));
    }
  }
  return result;
}

}  // namespace

std::vector<std::size_t> independent_rows(const std::vector<std::uint64_t>& values,
                                          std::size_t rows, std::size_t columns,
                                          std::uint64_t modulus) {
  std::vector<std::size_t> all(rows);
  for (std::size_t i = 0; i < rows; ++i) all[i] = i;
  return independent_among(values, all, columns, modulus);
}

Elimination eliminate(const std::vector<std::uint64_t>& values, std::size_t rows,
                      std::size_t columns, std::uint64_t modulus) {
  const std::size_t taken = std::min(rows, columns + spare_rows);
  std::vector<std::size_t> first, rest;
  for (std::size_t i = 0, next = 0; i < rows; ++i) {
    // Evenly spread over the sample: neighbours in a file often repeat each other.
    if (next < taken && i == next * rows / taken) {
      first.push_back(i);
      ++next;
    } else {
      rest.push_back(i);
    }
  }
  Elimination result;
  result.rows = independent_among(values, first, columns, modulus);
  reduce(values, columns, modulus, result);
  if (result.free.empty() || rest.empty()) return result;
  const std::size_t nullity = result.free.size();
  const std::vector<std::uint64_t> remaining = residuals(values, columns, rest, result, modulus);
  const std::vector<std::size_t> joining =
      independent_rows(remaining, rest.size(), nullity, modulus);
  if (joining.empty()) return result;
  for (const std::size_t i : joining) result.rows.push_back(rest[i]);
  std::sort(result.rows.begin(), result.rows.end());
  reduce(values, columns, modulus, result);
  return result;
}

}  // namespace gramproof::exact
