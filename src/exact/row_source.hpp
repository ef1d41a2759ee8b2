// src/exact/row_source.hpp - rows of an exact matrix, wherever they come from.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <vector>

#include "design/design.hpp"
#include "exact/rank.hpp"
#include "table/piece.hpp"

namespace gramproof::exact {

/// Rows are counted 0 .. rows() - 1, columns by their own index. Each row is known up to a factor
/// that is not 0, which suits rank and null space.
class RowSource {
 public:
  virtual ~RowSource() = default;
  [[nodiscard]] virtual std::size_t rows() const = 0;
  /// Length of a null vector.
  [[nodiscard]] virtual std::size_t width() const = 0;
  /// rows() x columns, row-major. A row that has no residue is 0 throughout.
  [[nodiscard]] virtual std::vector<std::uint64_t> residues(const std::vector<int>& columns,
                                                            std::uint64_t modulus) const = 0;
  /// The named entries as integers.
  [[nodiscard]] virtual std::vector<std::vector<Integer>> integers(
      const std::vector<std::size_t>& rows, const std::vector<int>& columns) const = 0;
  /// For each vector: is it 0 on every row, in integers.
  [[nodiscard]] virtual std::vector<bool> vanish(const std::vector<NullVector>& vectors) const = 0;
};

class PieceRows : public RowSource {
 public:
  PieceRows(const design::Design& design, const table::Piece& piece, std::vector<std::size_t> rows)
      : design_(design), piece_(piece), rows_(std::move(rows)) {}
  [[nodiscard]] std::size_t rows() const override { return rows_.size(); }
  [[nodiscard]] std::size_t width() const override { return design_.columns.size() + 1; }
  [[nodiscard]] std::vector<std::uint64_t> residues(const std::vector<int>& columns,
                                                    std::uint64_t modulus) const override;
  [[nodiscard]] std::vector<std::vector<Integer>> integers(
      const std::vector<std::size_t>& rows, const std::vector<int>& columns) const override;
  [[nodiscard]] std::vector<bool> vanish(const std::vector<NullVector>& vectors) const override;

 private:
  const design::Design& design_;
  const table::Piece& piece_;
  std::vector<std::size_t> rows_;
};

class IntegerRows : public RowSource {
 public:
  IntegerRows(const ExactRows& all, std::size_t width, std::vector<std::size_t> rows)
      : all_(all), width_(width), rows_(std::move(rows)) {}
  [[nodiscard]] std::size_t rows() const override { return rows_.size(); }
  [[nodiscard]] std::size_t width() const override { return width_; }
  [[nodiscard]] std::vector<std::uint64_t> residues(const std::vector<int>& columns,
                                                    std::uint64_t modulus) const override;
  [[nodiscard]] std::vector<std::vector<Integer>> integers(
      const std::vector<std::size_t>& rows, const std::vector<int>& columns) const override;
  [[nodiscard]] std::vector<bool> vanish(const std::vector<NullVector>& vectors) const override;

 private:
  const ExactRows& all_;
  std::size_t width_;
  std::vector<std::size_t> rows_;
};

/// Rank and null space of all rows of a source; a FlintSession must be open.
[[nodiscard]] SampleRank rank_of_rows(const RowSource& source, const std::vector<int>& order);

}  // namespace gramproof::exact
