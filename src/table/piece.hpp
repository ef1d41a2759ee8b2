// src/table/piece.hpp - a run of parsed rows, column by column.
#pragma once

#include <cstddef>
#include <cstdint>
#include <string>
#include <vector>

#include "table/number.hpp"

namespace gramproof::table {

/// How a column is read. The kind is decided on the whole data set (table/survey.hpp), never on a
/// sample.
enum class ColumnKind : std::uint8_t { numeric, text };

/// The mantissa of a cell beyond 18 digits.
struct WideCell {
  std::uint32_t row = 0;  ///< within the piece
  std::string digits;     ///< decimal integer, optional '-'
};

/// The cells of one column in one piece; all vectors have Piece::rows entries when `loaded`, or are
/// empty where the kind does not use them.
struct PieceColumn {
  bool loaded = false;
  ColumnKind kind = ColumnKind::numeric;
  std::vector<std::uint8_t> missing;  ///< 1 where the cell is missing
  std::vector<double> value;          ///< numeric: nearest double; 0 where missing
  std::vector<std::int64_t>
      mantissa;  ///< numeric: exact value = mantissa * 10^-decimals, unless the row is in `wide`
  std::vector<std::int16_t> decimals;  ///< numeric
  std::vector<WideCell> wide;          ///< numeric: sorted by row
  std::vector<std::int32_t> code;  ///< text: index into ColumnFacts::levels; -1 missing, -2 a text
                                   ///< that is no listed level

  /// The exact number in a row (not missing, numeric). O(log wide).
  [[nodiscard]] Number number(std::size_t row) const;
};

/// At most `rows_a_piece` consecutive rows of one file, in file order.
struct Piece {
  std::size_t index = 0;  ///< 0, 1, ... over all files: the leaf number of the merge tree
  std::size_t file = 0;   ///< index into Source::files
  std::size_t rows = 0;
  std::vector<std::uint64_t> row;   ///< row number of each row, from 1 after the header over all
                                    ///< files, excluded ones counted
  std::vector<std::uint64_t> line;  ///< line of its file on which each row starts, from 1
  std::vector<std::uint32_t>
      file_of_row;  ///< empty: all rows are of `file`; else the file of each row (gathered samples)
  std::vector<PieceColumn>
      columns;  ///< one a table column, in the order of the first file's header
};

/// Rows a leaf of the merge tree holds (methods: fixed tree over leaves of 4,096 rows).
inline constexpr std::size_t rows_a_piece = 4096;

/// A piece of the named rows of `from` (indices within it), all loaded columns. O(rows * columns).
[[nodiscard]] Piece gather(const Piece& from, const std::vector<std::size_t>& rows);

/// Appends all rows of `from` to `to` (same columns loaded, same kinds); `to` gets `file_of_row`.
void append(Piece& to, const Piece& from);

}  // namespace gramproof::table
