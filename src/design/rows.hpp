// src/design/rows.hpp - rows of the design matrix from a piece of the table: in doubles, and
// exactly.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "base/numeric.hpp"
#include "base/result.hpp"
#include "design/bind.hpp"
#include "design/design.hpp"
#include "table/piece.hpp"

namespace gramproof::design {

/// Why rows were excluded. A row that fails for several columns is counted once in each of them.
struct Exclusion {
  enum class Reason : std::uint8_t { filter, missing, undefined, weight_zero };
  Reason reason = Reason::missing;
  int column = -1;  ///< missing: table column; undefined: design column, -1 for --rows; else -1
  std::uint64_t rows = 0;
};

struct Block {
  std::vector<std::size_t> rows;    ///< indices within the piece of the rows used, ascending
  Matrix values;                    ///< rows used x design columns
  Vector weights;                   ///< rows used; empty without weights
  std::vector<Exclusion> excluded;  ///< for this piece; at most one entry a (reason, column)
  std::uint64_t rows_excluded = 0;  ///< rows, each once
};

/// Expands a piece: filter, missing cells, weight 0, then undefined values (log of a number <= 0, a
/// zero denominator) take rows out. Comparisons and zero denominators are decided on exact
/// decimals, not on doubles. Errors: an undefined value under Undefined::stop; a design value that
/// is not zero and outside 1e-305 .. 1e305; a negative or non-finite weight; each with file, line
/// and term. O(rows * nodes).
[[nodiscard]] Result<Block> expand(const Design& design, const table::Schema& schema,
                                   const std::vector<std::string>& file_names,
                                   const table::Piece& piece);

/// Adds the levels of the used rows of a piece to `counts` (sized by start_counts).
[[nodiscard]] LevelCounts start_counts(const Design& design, const table::Schema& schema);
void count_levels(const Design& design, const table::Schema& schema, const table::Piece& piece,
                  const std::vector<std::size_t>& rows, LevelCounts& counts);

/// The values of one tree on the named rows of a piece, in doubles (used for derivatives). NaN
/// where undefined.
[[nodiscard]] Vector evaluate(const Expression& expression, const table::Piece& piece,
                              const std::vector<std::size_t>& rows);

/// The exact value of an exact tree in one row; none where a denominator is zero. A comparison of
/// trees that hold log, sqrt, exp or asinh is decided by their doubles.
[[nodiscard]] std::optional<mpq_class> exact_value(const Expression& expression,
                                                   const table::Piece& piece, std::size_t row);

/// The exact value of a cell or of a number written in a design.
[[nodiscard]] mpq_class exact_number(const table::Number& number);

}  // namespace gramproof::design
