// src/table/source_state.hpp - what a Source is made of; for this station only.
//
// Everything above `pass` is fixed once the source is open (settle_decimal_mark apart, which is
// called between passes): the parsers read it from any thread while the pass goes on in another.
#pragma once

#include <atomic>
#include <cstdint>
#include <memory>
#include <string>
#include <string_view>
#include <vector>

#include "table/missing.hpp"
#include "table/record_splitter.hpp"
#include "table/records.hpp"
#include "table/source.hpp"
#include "table/stored_file.hpp"

namespace gramproof::table {

/// How the columns stand in one file.
struct FileLayout {
  std::vector<std::string> names;         ///< in the order of the file
  std::vector<std::size_t> table_column;  ///< of each of them
};

struct Source::State {
  std::vector<StoredFile> stored;
  std::vector<SourceFile> files;
  std::vector<FileLayout> layouts;
  std::vector<std::string> column_names;
  std::vector<std::string> missing_texts;
  MissingTexts missing;
  char separator = ',';
  char decimal_mark = '.';
  bool mark_certain = true;

  /// The pass under way. Counters are atomic: progress() may be asked from another thread than
  /// next().
  struct Pass {
    bool at_start = true;
    std::size_t file = 0;
    std::unique_ptr<RecordSplitter>
        splitter;  ///< of `file`, behind its header; null: not yet opened
    std::size_t pieces = 0;
    std::atomic<std::uint64_t> rows{0};
    std::uint64_t bytes_of_files_done = 0;
    std::atomic<std::uint64_t> bytes_read{0};
  } pass;
  /// Splitters behind the header, kept from open() for files that can be read only once: their
  /// first pass needs no copy.
  std::vector<std::unique_ptr<RecordSplitter>> opened;
};

/// The error for a format fault in a piece.
[[nodiscard]] Error piece_fault(const Source::State& state, const RawPiece& raw,
                                const Fault& fault);

/// Error for the first byte of the piece that is NUL or not UTF-8.
[[nodiscard]] Result<void> check_bytes(const Source::State& state, const RawPiece& raw);

/// "file:line:column" of a cell of the piece.
[[nodiscard]] std::string cell_place(const Source::State& state, const RawPiece& raw,
                                     const char* at);

}  // namespace gramproof::table
