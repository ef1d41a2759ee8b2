#include "recheck/table.hpp"

#include <algorithm>
#include <utility>

#include "base/text.hpp"

namespace gramproof::recheck {

Table::Table(std::vector<std::string> files, char separator, std::vector<std::string> wanted)
    : files_(std::move(files)),
      separator_(separator),
      wanted_(std::move(wanted)),
      rows_of_file_(files_.size(), 0) {}

Result<void> Table::open_file() {
  const std::string& path = files_[file_];
  Result<ByteReader> bytes = ByteReader::open(path);
  if (!bytes) return bytes.error();
  const std::string name = path == "-" ? "standard input" : path;
  reader_.emplace(std::move(bytes.value()), name, separator_);
  Record header;
  Result<bool> read = reader_->next(header);
  if (!read) return read.error();
  if (!read.value() || header.blank) {
    return Error{ErrorKind::data, name, "the file has no header", ""};
  }
  width_ = header.cells.size();
  position_.clear();
  for (const std::string& wanted : wanted_) {
    std::size_t count = 0, position = 0;
    for (std::size_t i = 0; i < width_; ++i) {
      if (without_blanks(header.cells[i]) != wanted) continue;
      position = i;
      ++count;
    }
    if (count != 1) {
      return Error{ErrorKind::data, name,
                   (count == 0 ? "no column \"" : "more than one column \"") + wanted + "\"",
                   "the verdict is on data that have it once; are these the same data?"};
    }
    position_.push_back(position);
  }
  return {};
}

Error Table::ragged() const {
  return {ErrorKind::data, reader_->name() + ":" + std::to_string(record_.line),
          "this row has " + counted(record_.cells.size(), "cell", "cells") +
              " where the header has " + grouped(width_),
          ""};
}

/// Steps to the next record that is not blank; false at the end of the file, where blank lines are
/// nothing.
Result<bool> Table::next_record() {
  blank_lines_ = 0;
  while (true) {
    Result<bool> read = reader_->next(record_);
    if (!read) return read.error();
    if (!read.value()) return false;
    if (!record_.blank) break;
    if (blank_lines_++ == 0) first_blank_line_ = record_.line;
  }
  if (blank_lines_ > 0 && width_ > 1) {
    return Error{ErrorKind::data, reader_->name() + ":" + std::to_string(first_blank_line_),
                 "a blank line in the middle of the data", ""};
  }
  if (record_.cells.size() != width_) return ragged();
  pending_ = true;
  return true;
}

void Table::give(Row& row, std::uint64_t line) {
  row.number = ++rows_;
  row.file = file_;
  row.line = line;
  row.cells.resize(wanted_.size());
  ++rows_of_file_[file_];
}

Result<bool> Table::next(Row& row) {
  while (!pending_) {
    if (file_ == files_.size()) return false;
    if (!reader_) {
      if (Result<void> opened = open_file(); !opened) return opened.error();
    }
    Result<bool> found = next_record();
    if (!found) return found.error();
    if (found.value()) break;
    reader_.reset();
    ++file_;
  }
  if (blank_lines_ > 0) {  // in a file of one column, a row whose cell is empty
    give(row, first_blank_line_++);
    std::fill(row.cells.begin(), row.cells.end(), std::string());
    --blank_lines_;
    return true;
  }
  give(row, record_.line);
  for (std::size_t i = 0; i < position_.size(); ++i) row.cells[i] = record_.cells[position_[i]];
  pending_ = false;
  return true;
}

}  // namespace gramproof::recheck
