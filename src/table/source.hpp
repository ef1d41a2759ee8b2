// src/table/source.hpp - the files of one data set as a stream of raw pieces.
//
// Splitting into records is serial and cheap; parsing cells is pure and runs in any thread. No file
// is held whole. Standard input
// ("-"), like every pipe, is spooled from its first byte to an unlinked temporary file (TMPDIR), so
// that further passes are possible. How bytes are read (each rule has a file in fixtures/accept or
// fixtures/reject):
//   text       UTF-8, a byte order mark allowed; LF or CRLF, the last line with or without
//   header     the first line; names without the blanks around them, unique, not empty but for the
//   first; at most 100,000 rows       as many cells as the header; blank lines at the end of a file
//   are nothing, in the middle an error, in a file
//              of one column a missing cell (so a last missing cell of such a file is written NA or
//              "")
//   cells      RFC 4180 quoting; blanks around a cell are ignored, blanks inside quotes belong to a
//   text but not to a number;
//              at most 16 MB, a row at most 64 MB
//   missing    compared without blanks around, quoted or not, with exact case, before the cell is
//   read as a number
// The separator is recognised from the first 256 KB, the decimal mark on all data where these leave
// it open (dialect.hpp).
#pragma once

#include <cstdint>
#include <functional>
#include <memory>
#include <optional>
#include <string>
#include <vector>

#include "base/result.hpp"
#include "table/piece.hpp"

namespace gramproof::table {

struct ReadOptions {
  std::optional<char>
      separator;  ///< none: recognised from the header and the first records: , ; tab |
  std::optional<char> decimal_mark;  ///< '.' or ','; none: ',' if the separator is not a comma and
                                     ///< numbers show it, else '.'
  std::vector<std::string> missing = {
      "", "NA", "NaN", "null"};  ///< the whole list; a blank cell is missing iff "" is in it
};

struct SourceFile {
  std::string name;         ///< as the user wrote it; "standard input" for "-"
  std::uint64_t bytes = 0;  ///< size on disk, 0 when unknown (pipes)
};

/// The bytes of up to rows_a_piece whole records.
struct RawPiece {
  std::size_t index = 0;
  std::size_t file = 0;
  std::uint64_t first_row = 0;   ///< row number of the first record, from 1 over all files
  std::uint64_t first_line = 0;  ///< its line in its file
  std::size_t records = 0;
  bool cut =
      false;  ///< the last record is over the limit of 64 MB: parse_piece and survey report it
  std::string bytes;
};

struct Progress {
  std::uint64_t rows = 0;
  std::uint64_t bytes_read = 0;   ///< of the files as stored
  std::uint64_t bytes_total = 0;  ///< 0 when unknown
};

/// What a pass wants of each table column: the others are skipped.
enum class Want : std::uint8_t { skip, numeric, text };

struct Schema;  // table/survey.hpp

class Source {
 public:
  /// Opens all files, checks headers (same names, columns in any order; order of the first),
  /// recognises compression by content
  /// (.gz, .zst), separator and decimal mark. Errors: every header fault with file:line:column.
  [[nodiscard]] static Result<Source> open(const std::vector<std::string>& names,
                                           const ReadOptions& options);
  Source(Source&&) noexcept;
  Source& operator=(Source&&) noexcept;
  ~Source();

  [[nodiscard]] const std::vector<SourceFile>& files() const;
  [[nodiscard]] const std::vector<std::string>& column_names()
      const;  ///< an unnamed first column has the name ""
  [[nodiscard]] char separator() const;
  [[nodiscard]] char decimal_mark() const;
  [[nodiscard]] const std::vector<std::string>& missing() const;

  /// Starts a new pass at the first row of the first file. The first call after open is free.
  [[nodiscard]] Result<void> rewind();

  /// The next records; empty at the end of the data. Not thread-safe. Errors: unterminated quote,
  /// truncated compressed file, read error, a file that changed since the first pass.
  [[nodiscard]] Result<std::optional<RawPiece>> next();

  /// How far the present pass is.
  [[nodiscard]] Progress progress() const;

  struct State;  // table/source_state.hpp: the reader's own
  [[nodiscard]] const State& state() const { return *state_; }

  /// False where no fraction in the first records showed the decimal mark: it is '.' then, until
  /// the survey has seen all.
  [[nodiscard]] bool decimal_mark_certain() const;
  void settle_decimal_mark(char mark);

 private:
  explicit Source(std::unique_ptr<State> state);
  std::unique_ptr<State> state_;
};

/// Parses the wanted columns of a raw piece. Thread-safe: touches nothing but its arguments.
/// `wants` has one entry a table column. Text cells get the codes of `schema` (an unseen text: -2,
/// which the caller treats as a changed file); numeric columns require every present cell to be a
/// number in range. Errors: ragged row, invalid UTF-8, quote faults, text where a number is wanted,
/// number out of range: all with file:line:column.
[[nodiscard]] Result<Piece> parse_piece(const Source& source, const Schema& schema,
                                        const std::vector<Want>& wants, const RawPiece& raw);

}  // namespace gramproof::table
