// src/recheck/delimited.hpp - records of delimited text, read character by character.
//
// RFC 4180 with the freedoms a verdict's data may take: LF or CRLF, the last line with or without
// an end, a UTF-8 byte order mark, blanks (spaces and tabs) around a cell, which are no part of it.
// Blanks inside quotes belong to the cell. At most 16 MB a cell.
#pragma once

#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

#include "base/result.hpp"
#include "recheck/byte_reader.hpp"

namespace gramproof::recheck {

[[nodiscard]] std::string_view without_blanks(std::string_view text);

struct Record {
  std::vector<std::string> cells;
  std::uint64_t line = 0;  ///< where it begins, from 1
  bool blank = false;      ///< nothing but blanks: no cell, unless the file has one column
};

class RecordReader {
 public:
  RecordReader(ByteReader bytes, std::string name, char separator);

  /// False at the end. Errors: a quote in the middle of a cell, text behind a closing quote, an
  /// open quote, a carriage return that ends no line, each with file and line.
  [[nodiscard]] Result<bool> next(Record& record);
  [[nodiscard]] const std::string& name() const { return name_; }

 private:
  [[nodiscard]] Result<int> look();
  [[nodiscard]] Result<void> skip_byte_order_mark();
  [[nodiscard]] Result<bool> read_cell(std::string& text, bool& quoted);
  [[nodiscard]] Result<bool> read_quoted(std::string& text);
  [[nodiscard]] Result<bool> end_of_cell(int character);
  [[nodiscard]] Error fault(const std::string& what) const;

  ByteReader bytes_;
  std::string name_;
  char separator_;
  std::string buffer_;
  std::size_t at_ = 0;
  std::uint64_t line_ = 1;
  bool started_ = false;
};

}  // namespace gramproof::recheck
