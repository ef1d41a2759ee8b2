// src/table/piece_survey.hpp - what one piece tells about every column: the parallel half of the
// survey.
#pragma once

#include <cstdint>
#include <deque>
#include <limits>
#include <memory>
#include <string>
#include <vector>

#include "base/result.hpp"
#include "table/number.hpp"
#include "table/source_state.hpp"
#include "table/spelling_table.hpp"

namespace gramproof::table {

/// How far the texts of a column are listed.
enum class Listing : std::uint8_t {
  none,   ///< the column was surveyed before
  probe,  ///< all of them, until they prove to be many different numbers
  full,   ///< all of them
};

/// What is accumulated over the numbers of a column.
struct NumberRange {
  bool all_whole = true;
  std::int32_t most_decimals = std::numeric_limits<std::int32_t>::min();
  std::int32_t most_significant_digits = 0;
  double smallest = std::numeric_limits<double>::infinity();
  double largest = -std::numeric_limits<double>::infinity();
  double largest_magnitude = 0;

  void add(const Number& number);
  void add(const NumberRange& other);
};

struct ColumnSurvey {
  std::uint64_t present = 0;
  std::uint64_t missing = 0;
  std::uint64_t texts = 0;  ///< present cells that are no numbers
  NumberRange range;
  SpellingTable spellings;                  ///< empty if `cut`
  bool cut = false;                         ///< many different numbers, no texts: not listed
  std::uint64_t distinct = 0;               ///< cut: distinct values seen before the cut
  bool text_after_cut = false;              ///< the column must be listed in full after all
  Spelling first_text, first_out_of_range;  ///< count 0: none
};

struct PieceSurvey {
  std::unique_ptr<RawPiece> raw;      ///< holds the bytes that texts point into
  std::deque<std::string> unquoted;   ///< texts that had doubled quotes
  std::vector<ColumnSurvey> columns;  ///< one a table column
};

/// Surveys a piece. A pure function of its arguments, safe in any thread. `numeric_levels`: a
/// probed column of numbers is cut once it has more than 64 texts and more than so many distinct
/// values. Errors: the format faults of parse_piece.
[[nodiscard]] Result<PieceSurvey> survey_piece(const Source::State& state,
                                               std::vector<Listing> listings,
                                               std::size_t numeric_levels, RawPiece raw);

/// Texts of a column of numbers that are always listed. Few, because a table may have thousands of
/// columns.
inline constexpr std::size_t probed_texts = 64;

/// The key under which equal values meet: plain_text for numbers in range, the text itself beyond.
[[nodiscard]] std::string value_key(std::string_view text, CellClass kind, char decimal_mark);

}  // namespace gramproof::table
