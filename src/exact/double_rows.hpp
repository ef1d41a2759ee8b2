// src/exact/double_rows.hpp - a matrix of doubles as what it is: exact dyadic numbers.
//
// A decimal fraction is no double, so that X held in doubles is another matrix than the one
// recorded, and may have another rank. No tolerance enters here: 0.1 is
// 3602879701896397 * 2^-55.
#pragma once

#include <cstdint>
#include <vector>

#include "base/numeric.hpp"
#include "exact/rank.hpp"
#include "exact/row_source.hpp"

namespace gramproof::exact {

/// Rows of finite doubles, each known up to a power of two.
class DoubleRows : public RowSource {
 public:
  explicit DoubleRows(const Matrix& values) : values_(values) {}
  [[nodiscard]] std::size_t rows() const override;
  [[nodiscard]] std::size_t width() const override;
  [[nodiscard]] std::vector<std::uint64_t> residues(const std::vector<int>& columns,
                                                    std::uint64_t modulus) const override;
  [[nodiscard]] std::vector<std::vector<Integer>> integers(
      const std::vector<std::size_t>& rows, const std::vector<int>& columns) const override;
  [[nodiscard]] std::vector<bool> vanish(const std::vector<NullVector>& vectors) const override;

 private:
  const Matrix& values_;
};

/// Exact rank and null space of a matrix of finite doubles, rows x design columns; null vectors
/// have no entry for ones. Cost as rank_of_sample.
[[nodiscard]] SampleRank rank_of_doubles(const Matrix& values, const std::vector<int>& order);

/// For each vector the rows on which sum v_j * x_ij, taken exactly over the doubles, is not 0;
/// ascending. 128-bit words where a bound proves that they suffice, big integers otherwise.
/// O(rows * non-zero coefficients).
[[nodiscard]] std::vector<std::vector<std::size_t>> rows_off(
    const Matrix& values, const std::vector<NullVector>& vectors);

}  // namespace gramproof::exact
