// src/exact/lifting.cpp
#include "exact/lifting.hpp"

#include "exact/flint_types.hpp"
#include "exact/modulus.hpp"

namespace gramproof::exact {
namespace {

std::uint64_t coefficient(const Elimination& eliminated, std::size_t f, std::size_t pivot) {
  return eliminated.coefficients[f * eliminated.columns.size() + pivot];
}

std::size_t column_index(const std::vector<int>& order, std::size_t place) {
  return static_cast<std::size_t>(order[place]);
}

}  // namespace

NullVector reconstructed(std::size_t width, const std::vector<int>& order,
                         const Elimination& eliminated, std::size_t f, std::uint64_t modulus) {
  const Modulus field(modulus);
  NullVector vector(width, 0);
  FlintInteger numerator, denominator, residue, whole;
  fmpz_set_ui(whole.get(), modulus);
  Integer common = 1;
  for (std::size_t p = 0; p < eliminated.columns.size(); ++p) {
    const std::uint64_t c = coefficient(eliminated, f, p);
    if (c == 0) continue;
    // Times the denominator so far: what is left of the fraction is smaller, often an integer.
    fmpz_set_ui(residue.get(), field.multiply(c, field.of(common)));
    if (_fmpq_reconstruct_fmpz(numerator.get(), denominator.get(), residue.get(), whole.get()) ==
        0) {
      return NullVector(width, 0);
    }
    const Integer more = denominator.to_mpz();
    if (more != 1) {
      for (Integer& v : vector) v *= more;
      common *= more;
    }
    vector[column_index(order, eliminated.columns[p])] = numerator.to_mpz();
  }
  vector[column_index(order, eliminated.free[f])] = -common;
  make_primitive(vector);
  return vector;
}

NullVector solved(const RowSource& source, const std::vector<int>& order,
                  const Elimination& eliminated, std::size_t f, std::uint64_t modulus) {
  std::vector<int> columns;
  for (std::size_t p = 0; p < eliminated.columns.size(); ++p) {
    if (coefficient(eliminated, f, p) != 0) columns.push_back(order[eliminated.columns[p]]);
  }
  const std::size_t size = columns.size();
  NullVector vector(source.width(), 0);
  const int target = order[eliminated.free[f]];
  if (size == 0) {
    vector[static_cast<std::size_t>(target)] = 1;
    return vector;
  }
  std::vector<std::uint64_t> residues;
  const std::vector<std::uint64_t> all = source.residues(columns, modulus);
  for (const std::size_t row : eliminated.rows) {
    const auto first = all.begin() + static_cast<std::ptrdiff_t>(row * size);
    residues.insert(residues.end(), first, first + static_cast<std::ptrdiff_t>(size));
  }
  std::vector<std::size_t> rows;
  for (const std::size_t i : independent_rows(residues, eliminated.rows.size(), size, modulus)) {
    rows.push_back(eliminated.rows[i]);
  }
  if (rows.size() != size) return {};
  columns.push_back(target);
  const auto entries = source.integers(rows, columns);
  FlintMatrix matrix(size, size), right(size, 1), solution(size, 1);
  for (std::size_t i = 0; i < size; ++i) {
    for (std::size_t j = 0; j < size; ++j) matrix.set(i, j, entries[i][j]);
    right.set(i, 0, entries[i][size]);
  }
  FlintInteger denominator;
  if (fmpz_mat_solve_dixon_den(solution.get(), denominator.get(), matrix.get(), right.get()) == 0) {
    return {};
  }
  for (std::size_t j = 0; j < size; ++j) {
    vector[static_cast<std::size_t>(columns[j])] = solution.at(j, 0);
  }
  vector[static_cast<std::size_t>(target)] = -denominator.to_mpz();
  make_primitive(vector);
  return vector;
}

}  // namespace gramproof::exact
