#include "recheck/delimited.hpp"

#include <utility>

namespace gramproof::recheck {
namespace {

constexpr std::size_t buffer_size = 256 * 1024;
constexpr std::size_t longest_cell = 16 * 1024 * 1024;
constexpr int end_of_data = -1;
constexpr std::string_view byte_order_mark = "\xEF\xBB\xBF";

bool is_blank(int character) {
  return character == ' ' || character == '\t';
}

}  // namespace

std::string_view without_blanks(std::string_view text) {
  while (!text.empty() && is_blank(text.front())) text.remove_prefix(1);
  while (!text.empty() && is_blank(text.back())) text.remove_suffix(1);
  return text;
}

RecordReader::RecordReader(ByteReader bytes, std::string name, char separator)
    : bytes_(std::move(bytes)), name_(std::move(name)), separator_(separator) {}

Error RecordReader::fault(const std::string& what) const {
  return {ErrorKind::data, name_ + ":" + std::to_string(line_), what, ""};
}

/// The next byte, which stays where it is.
Result<int> RecordReader::look() {
  if (at_ == buffer_.size()) {
    buffer_.resize(buffer_size);
    Result<std::size_t> got = bytes_.read(buffer_.data(), buffer_.size());
    if (!got) return got.error();
    buffer_.resize(got.value());
    at_ = 0;
    if (buffer_.empty()) return end_of_data;
  }
  return static_cast<int>(static_cast<unsigned char>(buffer_[at_]));
}

Result<void> RecordReader::skip_byte_order_mark() {
  started_ = true;
  // A mark may come in pieces (from a pipe): byte by byte, and what only begins like one is given
  // back.
  std::size_t seen = 0;
  while (seen < byte_order_mark.size()) {
    Result<int> next = look();
    if (!next) return next.error();
    if (next.value() != static_cast<unsigned char>(byte_order_mark[seen])) break;
    ++at_;
    ++seen;
  }
  if (seen == byte_order_mark.size()) return {};
  buffer_ = std::string(byte_order_mark.substr(0, seen)) + buffer_.substr(at_);
  at_ = 0;
  return {};
}

/// Takes what ends a cell: true if it ends the record too.
Result<bool> RecordReader::end_of_cell(int character) {
  if (character == end_of_data) return true;
  ++at_;
  if (character == static_cast<unsigned char>(separator_)) return false;
  if (character == '\r') {
    Result<int> next = look();
    if (!next) return next.error();
    if (next.value() == end_of_data) return true;
    if (next.value() != '\n') return fault("a carriage return that ends no line");
    ++at_;
  }
  ++line_;
  return true;
}

/// From behind the opening quote to the end of the cell.
Result<bool> RecordReader::read_quoted(std::string& text) {
  text.clear();
  while (true) {
    Result<int> next = look();
    if (!next) return next.error();
    if (next.value() == end_of_data) return fault("a quoted cell never ends");
    ++at_;
    if (next.value() == '"') {
      Result<int> second = look();
      if (!second) return second.error();
      if (second.value() != '"') break;
      ++at_;
    }
    if (next.value() == '\n') ++line_;
    if (text.size() == longest_cell) return fault("a cell is over 16 MB");
    text += static_cast<char>(next.value());
  }
  while (true) {
    Result<int> next = look();
    if (!next) return next.error();
    const int character = next.value();
    const bool ends = character == end_of_data || character == '\n' || character == '\r' ||
                      character == static_cast<unsigned char>(separator_);
    if (ends) return end_of_cell(character);
    if (!is_blank(character)) return fault("text behind the closing quote of a cell");
    ++at_;
  }
}

/// True if the cell is the record's last one.
Result<bool> RecordReader::read_cell(std::string& text, bool& quoted) {
  text.clear();
  quoted = false;
  while (true) {
    Result<int> next = look();
    if (!next) return next.error();
    const int character = next.value();
    if (character == end_of_data || character == '\n' || character == '\r' ||
        character == static_cast<unsigned char>(separator_)) {
      text = std::string(without_blanks(text));
      return end_of_cell(character);
    }
    ++at_;
    if (character == '"') {
      if (!without_blanks(text).empty()) return fault("a quote in the middle of a cell");
      quoted = true;
      return read_quoted(text);
    }
    if (text.size() == longest_cell) return fault("a cell is over 16 MB");
    text += static_cast<char>(character);
  }
}

Result<bool> RecordReader::next(Record& record) {
  if (!started_) {
    if (Result<void> done = skip_byte_order_mark(); !done) return done.error();
  }
  Result<int> first = look();
  if (!first) return first.error();
  if (first.value() == end_of_data) return false;
  record.line = line_;
  std::size_t count = 0;
  bool quoted = false;
  for (bool last = false; !last; ++count) {
    if (count == record.cells.size()) record.cells.emplace_back();
    Result<bool> read = read_cell(record.cells[count], quoted);
    if (!read) return read.error();
    last = read.value();
  }
  record.cells.resize(count);
  record.blank = count == 1 && !quoted && record.cells[0].empty();
  return true;
}

}  // namespace gramproof::recheck
