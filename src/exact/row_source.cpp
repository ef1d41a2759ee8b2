// src/exact/row_source.cpp
#include "exact/row_source.hpp"

#include <algorithm>

#include "design/rows.hpp"
#include "exact/modular.hpp"
#include "exact/modulus.hpp"

namespace gramproof::exact {
namespace {

/// Multiplies by the least common multiple of the denominators.
std::vector<Integer> cleared(const std::vector<mpq_class>& values) {
  Integer multiple = 1;
  for (const mpq_class& value : values) {
    mpz_lcm(multiple.get_mpz_t(), multiple.get_mpz_t(), value.get_den_mpz_t());
  }
  std::vector<Integer> result;
  result.reserve(values.size());
  for (const mpq_class& value : values) {
    result.emplace_back(value.get_num() * (multiple / value.get_den()));
  }
  return result;
}

mpq_class value_at(const design::Design& design, const table::Piece& piece, std::size_t row,
                   std::size_t column) {
  if (column == design.columns.size() || design.columns[column].constant) return 1;
  if (!design.columns[column].exact) return 0;
  // Used rows have defined values: a row with a zero denominator never comes here.
  return design::exact_value(*design.columns[column].definition, piece, row).value_or(0);
}

}  // namespace

ExactRows exact_rows(const design::Design& design, const table::Piece& piece) {
  ExactRows result;
  std::vector<mpq_class> values(design.columns.size() + 1);
  for (std::size_t i = 0; i < piece.rows; ++i) {
    for (std::size_t j = 0; j < values.size(); ++j) values[j] = value_at(design, piece, i, j);
    result.rows.push_back(cleared(values));
    result.number.push_back(piece.row[i]);
  }
  return result;
}

std::vector<std::uint64_t> PieceRows::residues(const std::vector<int>& columns,
                                               std::uint64_t modulus) const {
  return residues_of_columns(design_, piece_, rows_, columns, modulus);
}

std::vector<std::vector<Integer>> PieceRows::integers(const std::vector<std::size_t>& rows,
                                                      const std::vector<int>& columns) const {
  std::vector<std::vector<Integer>> result;
  std::vector<mpq_class> values(columns.size());
  for (const std::size_t row : rows) {
    for (std::size_t j = 0; j < columns.size(); ++j) {
      values[j] = value_at(design_, piece_, rows_[row], static_cast<std::size_t>(columns[j]));
    }
    result.push_back(cleared(values));
  }
  return result;
}

std::vector<bool> PieceRows::vanish(const std::vector<NullVector>& vectors) const {
  std::vector<bool> result;
  for (const RelationTest& test : test_relations(design_, piece_, rows_, vectors, 0)) {
    result.push_back(test.violating == 0);
  }
  return result;
}

std::vector<std::uint64_t> IntegerRows::residues(const std::vector<int>& columns,
                                                 std::uint64_t modulus) const {
  const Modulus field(modulus);
  std::vector<std::uint64_t> result;
  result.reserve(rows_.size() * columns.size());
  for (const std::size_t row : rows_) {
    for (const int column : columns) {
      result.push_back(field.of(all_.rows[row][static_cast<std::size_t>(column)]));
    }
  }
  return result;
}

std::vector<std::vector<Integer>> IntegerRows::integers(const std::vector<std::size_t>& rows,
                                                        const std::vector<int>& columns) const {
  std::vector<std::vector<Integer>> result;
  for (const std::size_t row : rows) {
    std::vector<Integer>& entries = result.emplace_back();
    for (const int column : columns) {
      entries.push_back(all_.rows[rows_[row]][static_cast<std::size_t>(column)]);
    }
  }
  return result;
}

std::vector<bool> IntegerRows::vanish(const std::vector<NullVector>& vectors) const {
  std::vector<bool> result;
  for (const NullVector& vector : vectors) {
    result.push_back(std::all_of(rows_.begin(), rows_.end(), [&](std::size_t row) {
      Integer sum = 0;
      for (std::size_t j = 0; j < vector.size(); ++j) {
        if (vector[j] != 0) sum += vector[j] * all_.rows[row][j];
      }
      return sum == 0;
    }));
  }
  return result;
}

}  // namespace gramproof::exact
