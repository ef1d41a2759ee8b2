// src/recheck/table.hpp - the rows of several files as one data set.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "base/result.hpp"
#include "recheck/delimited.hpp"

namespace gramproof::recheck {

struct Row {
  std::uint64_t number = 0;        ///< from 1 over all files
  std::size_t file = 0;            ///< which of the files given, from 0
  std::uint64_t line = 0;          ///< of its file
  std::vector<std::string> cells;  ///< of the wanted columns, in the order wanted
};

/// One row at a time; a file is opened when the one before it has ended. The header of each file
/// names its columns, in any order.
class Table {
 public:
  Table(std::vector<std::string> files, char separator, std::vector<std::string> wanted);

  /// False at the end. Errors: those of the reader; a wanted column that a file lacks or has twice;
  /// a row with more or fewer cells than its header; a blank line in the middle.
  [[nodiscard]] Result<bool> next(Row& row);
  /// Rows read so far of each file.
  [[nodiscard]] const std::vector<std::uint64_t>& rows_of_file() const { return rows_of_file_; }

 private:
  [[nodiscard]] Result<void> open_file();
  [[nodiscard]] Result<bool> next_record();
  [[nodiscard]] Error ragged() const;
  void give(Row& row, std::uint64_t line);

  std::vector<std::string> files_;
  char separator_;
  std::vector<std::string> wanted_;
  std::size_t file_ = 0;
  std::optional<RecordReader> reader_;
  std::size_t width_ = 0;              ///< columns of the present file
  std::vector<std::size_t> position_;  ///< of each wanted column in it
  Record record_;
  bool pending_ = false;  ///< record_ waits behind blank lines
  std::uint64_t blank_lines_ = 0, first_blank_line_ = 0;
  std::uint64_t rows_ = 0;
  std::vector<std::uint64_t> rows_of_file_;
};

}  // namespace gramproof::recheck
