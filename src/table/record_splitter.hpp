// src/table/record_splitter.hpp - a stream of bytes cut into whole records.
//
// A line break ends a record unless the number of quotes before it is odd: in well-formed data that
// means "inside quotes". In malformed data the cut falls somewhere else, but the first fault stays
// inside the record in which it is, so the parser (table/records.hpp), which judges every byte,
// finds it there. Nothing is judged here.
#pragma once

#include <cstddef>
#include <cstdint>
#include <memory>
#include <string>
#include <string_view>

#include "base/result.hpp"
#include "table/byte_stream.hpp"

namespace gramproof::table {

/// Whole records, with the line breaks between them.
struct Records {
  std::string bytes;
  std::uint64_t first_line = 1;
  std::size_t count = 0;
  bool cut = false;  ///< the last record is over the limit of 64 MB and only its beginning is here
};

class RecordSplitter {
 public:
  /// Bytes after which a run of records is closed, whatever their number.
  static constexpr std::size_t most_bytes = std::size_t{4} << 20;
  static constexpr std::size_t longest_record = std::size_t{64} << 20;

  explicit RecordSplitter(std::unique_ptr<ByteStream> stream);

  /// Up to the first 256 KB after the byte order mark, to recognise the dialect; before any call of
  /// next().
  [[nodiscard]] Result<std::string_view> sample();

  /// At most `most_records`, closed early at `most_bytes`; count 0 at the end. Where the cuts fall
  /// depends on the content alone. Blank lines at the end of the file are dropped; `separator`
  /// tells whether a tab is a blank. Cost: memchr.
  [[nodiscard]] Result<Records> next(std::size_t most_records, char separator);

  /// After sample(): the sample is the whole file.
  [[nodiscard]] bool at_end() const { return ended_; }
  [[nodiscard]] std::uint64_t stored_bytes() const { return stream_->stored_bytes(); }
  [[nodiscard]] std::uint64_t line() const { return line_; }  ///< of the next byte to be given out

 private:
  Result<void> fill();
  bool find_record_end();
  void give(Records& records, std::size_t end);
  bool give_blank_lines(Records& records, std::size_t most_records);
  [[nodiscard]] bool is_blank(std::size_t begin, std::size_t end, char separator) const;

  std::unique_ptr<ByteStream> stream_;
  std::string buffer_;
  std::size_t given_ = 0;          ///< bytes of buffer_ already given out
  std::size_t record_ = 0;         ///< start of the record being looked for
  std::size_t scan_ = 0;           ///< everything before was searched
  bool in_quotes_ = false;         ///< at scan_
  bool ended_ = false;             ///< the stream has no more bytes
  std::uint64_t blank_lines_ = 0;  ///< seen, not given out: dropped if no record follows
  std::uint64_t line_ = 1;
};

}  // namespace gramproof::table
