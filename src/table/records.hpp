// src/table/records.hpp - records and cells within a run of bytes (RFC 4180, and what people really
// have).
//
//   cells      separated by one byte; a record ends with LF or CRLF, the last one also with the end
//   of the bytes quoted     "..." may hold separators, line breaks and doubled quotes; blanks
//   outside the quotes are ignored unquoted   may not hold a quote; surrounding spaces and tabs are
//   ignored
// A record has exactly one cell a column. A blank line is an empty cell where there is one column,
// else a row with too few cells (blank lines at the end of a file never get here:
// table/record_splitter.hpp).
#pragma once

#include <array>
#include <bit>
#include <cstddef>
#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#ifdef __SSE2__
#include <emmintrin.h>
#endif

#include "base/result.hpp"

namespace gramproof::table {

/// A cell as it stands in the bytes.
struct RawCell {
  std::string_view
      text;  ///< without outer quotes and the blanks outside them; quotes inside still doubled
  const char* at = nullptr;  ///< where the cell starts: just after the separator or line break
  bool quoted = false;
  bool doubled_quotes = false;
};

enum class FormatFault : std::uint8_t {
  none,
  stray_quote,  ///< a quote inside an unquoted cell
  after_quote,  ///< something other than blanks between a closing quote and the separator
  open_quote,   ///< the bytes end inside quotes
  lone_return,  ///< CR that is not followed by LF
  too_few,      ///< cells
  too_many,     ///< cells
  long_cell,    ///< over 16 MB
};

struct Fault {
  FormatFault kind = FormatFault::none;
  const char* at = nullptr;  ///< start of the cell concerned
  std::size_t cell = 0;      ///< its number within the record, from 0
  std::size_t cells = 0;     ///< too_few, too_many: how many the record has
};

inline constexpr std::size_t longest_cell = std::size_t{16} << 20;

/// The text of a cell with doubled quotes made single; `scratch` holds it where it had any.
[[nodiscard]] std::string_view cell_text(const RawCell& cell, std::string& scratch);

[[nodiscard]] inline std::string_view without_blanks(std::string_view text) {
  while (!text.empty() && (text.front() == ' ' || text.front() == '\t')) text.remove_prefix(1);
  while (!text.empty() && (text.back() == ' ' || text.back() == '\t')) text.remove_suffix(1);
  return text;
}

/// Walks cells one after the other. Inlined into the readers' loops: one call a cell.
class CellWalker {
 public:
  CellWalker(std::string_view bytes, char separator)
      : at_(bytes.data()), end_(bytes.data() + bytes.size()), separator_(separator) {
    for (const char stop : {separator, '\n', '\r', '"'})
      stops_[static_cast<unsigned char>(stop)] = true;
  }

  /// False when no record starts here any more.
  [[nodiscard]] bool more() const { return at_ != end_; }
  [[nodiscard]] const char* at() const { return at_; }
  /// Line breaks inside quotes met so far.
  [[nodiscard]] std::uint64_t breaks_in_quotes() const { return breaks_; }

  /// Reads a cell and what ends it: `last` tells whether it was the record's last one.
  FormatFault next(RawCell& cell, bool& last) {
    cell.at = at_;
    const char* const stop = find_stop();
    if (stop != end_ && *stop == '"') return next_quoted(cell, stop, last);
    cell.quoted = cell.doubled_quotes = false;
    cell.text = without_blanks({at_, static_cast<std::size_t>(stop - at_)});
    if (cell.text.size() > longest_cell) return FormatFault::long_cell;
    return finish(stop, last);
  }

 private:
  /// The next separator, line break, carriage return or quote, or the end. Sixteen bytes at a time
  /// where the processor can: cells have uneven lengths, so that a loop over their bytes ends in a
  /// branch it cannot foresee.
  [[nodiscard]] const char* find_stop() const {
    const char* stop = at_;
#ifdef __SSE2__
    for (; end_ - stop >= 16; stop += 16) {
      const __m128i bytes = _mm_loadu_si128(reinterpret_cast<const __m128i*>(stop));
      const __m128i ends = _mm_or_si128(_mm_cmpeq_epi8(bytes, _mm_set1_epi8(separator_)),
                                        _mm_cmpeq_epi8(bytes, _mm_set1_epi8('\n')));
      const __m128i others = _mm_or_si128(_mm_cmpeq_epi8(bytes, _mm_set1_epi8('\r')),
                                          _mm_cmpeq_epi8(bytes, _mm_set1_epi8('"')));
      const int found = _mm_movemask_epi8(_mm_or_si128(ends, others));
      if (found != 0) return stop + std::countr_zero(static_cast<unsigned>(found));
    }
#endif
    while (stop != end_ && !stops_[static_cast<unsigned char>(*stop)]) ++stop;
    return stop;
  }

  /// Steps over the separator or line break at `stop`.
  FormatFault finish(const char* stop, bool& last) {
    if (stop != end_ && *stop == separator_) {
      at_ = stop + 1;
      last = false;
      return FormatFault::none;
    }
    last = true;
    if (stop != end_ && *stop == '\r') {
      ++stop;
      if (stop != end_ && *stop != '\n') return FormatFault::lone_return;
    }
    at_ = stop == end_ ? end_ : stop + 1;
    return FormatFault::none;
  }

  FormatFault next_quoted(RawCell& cell, const char* quote, bool& last);

  const char* at_;
  const char* end_;
  char separator_;
  std::array<bool, 256> stops_{};
  std::uint64_t breaks_ = 0;
};

/// Calls on_record(record, line) at each record's start and on_cell(record, cell number, RawCell)
/// for each of its cells. `columns` is the number of cells a record must have. `first_line` is the
/// line of the first byte. Stops at the first fault, or when on_cell returns false. O(bytes).
template <class OnRecord, class OnCell>
Fault walk_records(std::string_view bytes, char separator, std::size_t columns,
                   std::uint64_t first_line, OnRecord&& on_record, OnCell&& on_cell) {
  CellWalker walker(bytes, separator);
  RawCell cell;
  for (std::size_t record = 0; walker.more(); ++record) {
    on_record(record, first_line + record + walker.breaks_in_quotes());
    const char* beyond = nullptr;  // the first cell too many
    std::size_t number = 0;
    for (bool last = false; !last; ++number) {
      const FormatFault fault = walker.next(cell, last);
      if (fault != FormatFault::none) return {fault, cell.at, number, 0};
      if (number >= columns) {
        if (beyond == nullptr) beyond = cell.at;
      } else if (!on_cell(record, number, cell)) {
        return {};
      }
    }
    if (number < columns) return {FormatFault::too_few, cell.at, number - 1, number};
    if (number > columns) return {FormatFault::too_many, beyond, columns, number};
  }
  return {};
}

/// The line and the character column (code points, from 1) of `at` within `bytes`, whose first byte
/// is on `first_line`.
struct LineColumn {
  std::uint64_t line = 1;
  std::uint64_t column = 1;
};
[[nodiscard]] LineColumn line_column(std::string_view bytes, const char* at,
                                     std::uint64_t first_line);

/// "file:line:column".
[[nodiscard]] std::string place(const std::string& file, const LineColumn& where);

/// Offset of the first byte that is NUL or no valid UTF-8, or bytes.size(). O(bytes), vectorised
/// while all is ASCII.
[[nodiscard]] std::size_t first_bad_byte(std::string_view bytes);

/// The error for a bad byte at `offset`.
[[nodiscard]] Error bad_byte_error(const std::string& file, std::string_view bytes,
                                   std::size_t offset, std::uint64_t first_line);

/// The error for a fault. `names`: column names in the order of this file, for the message; may be
/// empty (header).
[[nodiscard]] Error fault_error(const Fault& fault, const std::string& file, std::string_view bytes,
                                std::uint64_t first_line, const std::vector<std::string>& names);

/// A cell for a message: in quotes, doubled quotes undone, cut after 40 characters.
[[nodiscard]] std::string quoted_for_message(std::string_view text);

}  // namespace gramproof::table
