// src/table/survey.hpp - the first pass: what every column is, decided on all of its cells.
#pragma once

#include <cstdint>
#include <functional>
#include <optional>
#include <string>
#include <string_view>
#include <unordered_map>
#include <vector>

#include "base/result.hpp"
#include "table/piece.hpp"
#include "table/source.hpp"

namespace gramproof::table {

/// One distinct value of a column.
struct Level {
  std::string text;  ///< text column: as written; numeric column: table::plain_text of the value
  Number value;      ///< numeric columns only
  std::uint64_t rows = 0;  ///< present cells with this value, over all rows
};

/// Hash of a text that also takes string views, so that cells are looked up without a copy.
struct TextHash {
  using is_transparent = void;
  [[nodiscard]] std::size_t operator()(std::string_view text) const {
    return std::hash<std::string_view>{}(text);
  }
};

/// A cell named in a message.
struct CellPlace {
  std::string where;  ///< "file:line:column"
  std::string text;
  std::uint64_t row = 0;
};

/// What is known of a column after all its cells were seen.
struct ColumnFacts {
  std::string name;
  ColumnKind kind = ColumnKind::numeric;  ///< numeric: every present cell is a number; a column
                                          ///< with no present cell is numeric
  std::uint64_t present = 0;
  std::uint64_t missing = 0;
  std::uint64_t numbers = 0;                    ///< present cells that are numbers
  std::optional<CellPlace> first_not_number;    ///< first present cell that is no number
  std::optional<CellPlace> first_out_of_range;  ///< first number outside the stated range
  // Numeric columns:
  std::int32_t most_decimals = 0;  ///< the most decimals of any cell; 0 if all are whole and none
                                   ///< is written with an exponent
  std::int32_t most_significant_digits = 0;
  bool all_whole = true;             ///< every value is an integer
  double smallest = 0, largest = 0;  ///< over present cells
  double largest_magnitude = 0;
  // Levels, in order of first appearance (piece, row); complete unless `levels_cut`.
  std::vector<Level> levels;
  bool levels_cut = false;  ///< more distinct values than were to be listed: `levels` is then empty
  std::uint64_t distinct_at_least = 0;  ///< number of distinct values, a lower bound when cut
  /// Level::text -> index into levels, of text and numeric columns alike. Look-ups take string
  /// views.
  std::unordered_map<std::string, std::int32_t, TextHash, std::equal_to<>> code_of;
};

struct Schema {
  std::vector<ColumnFacts> columns;  ///< in the order of the first file's header
  std::uint64_t rows = 0;            ///< all rows read
  std::vector<std::uint64_t> rows_of_file;

  /// Index of the column called `name`, or none. O(columns).
  [[nodiscard]] std::optional<std::size_t> find(std::string_view name) const;
};

struct SurveyOptions {
  unsigned threads = 1;
  /// Most distinct values listed a column: text columns always up to `text_levels`; numeric columns
  /// up to `numeric_levels`, or up to `text_levels` if named in `list_values`.
  std::size_t text_levels = 1'000'000;
  std::size_t numeric_levels = 21;
  std::vector<std::string> list_values;  ///< numeric columns whose values become levels
  std::function<void(const Progress&)>
      on_progress;  ///< called from the consuming thread, at most once a piece; may be empty
};

/// One pass over the whole source, two where a text comes behind many numbers of its column or a
/// decimal comma behind whole numbers only. The result does not depend on `threads`. Errors: as
/// Source::next and the format faults of parse_piece (text in a number is no error here: it makes
/// the column a text column); a file without a data row. Memory: the distinct values listed, plus
/// the pieces under way.
[[nodiscard]] Result<Schema> survey(Source& source, const SurveyOptions& options);

}  // namespace gramproof::table
