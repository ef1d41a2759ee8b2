#include "table/records.hpp"

#include <algorithm>
#include <cstring>

#include <fmt/format.h>

#include "base/text.hpp"

namespace gramproof::table {
namespace {

constexpr std::size_t longest_quotation = 40;  ///< code points of a cell in a message

bool is_blank(std::string_view text) {
  return without_blanks(text).empty();
}

bool starts_code_point(char byte) {
  return (static_cast<unsigned char>(byte) & 0xC0) != 0x80;
}

/// `column "price"` where the cell belongs to one, else `cell 5`.
std::string column_words(const Fault& fault, const std::vector<std::string>& names) {
  if (fault.cell >= names.size()) return fmt::format("cell {}", fault.cell + 1);
  if (names[fault.cell].empty()) return "the unnamed first column";
  return fmt::format("column \"{}\"", names[fault.cell]);
}

Error too_few_error(const Fault& fault, std::string_view row,
                    const std::vector<std::string>& names) {
  if (is_blank(row)) {
    return {ErrorKind::data, "", "a blank line in the middle of the data",
            "delete the line; blank lines are allowed at the end of a file only"};
  }
  return {
      ErrorKind::data, "",
      fmt::format(
          "this row has {} where the header has {}; column \"{}\" is the first one without a cell",
          counted(fault.cells, "cell", "cells"), grouped(names.size()), names[fault.cells]),
      "a missing cell is written as nothing between two separators"};
}

Error too_many_error(const Fault& fault, const std::vector<std::string>& names) {
  return {ErrorKind::data, "",
          fmt::format("this row has {} where the header has {}",
                      counted(fault.cells, "cell", "cells"), grouped(names.size())),
          "put quotes around a cell that holds the separator; --separator sets the separator"};
}

}  // namespace

std::string_view cell_text(const RawCell& cell, std::string& scratch) {
  if (!cell.doubled_quotes) return cell.text;
  scratch.clear();
  for (std::size_t i = 0; i < cell.text.size(); ++i) {
    scratch += cell.text[i];
    if (cell.text[i] == '"') ++i;  // the walker has seen that quotes come in pairs here
  }
  return scratch;
}

FormatFault CellWalker::next_quoted(RawCell& cell, const char* quote, bool& last) {
  if (!is_blank({at_, static_cast<std::size_t>(quote - at_)})) return FormatFault::stray_quote;
  const char* const begin = quote + 1;
  cell.quoted = true;
  cell.doubled_quotes = false;
  const char* close = begin;
  while (true) {
    const auto left = static_cast<std::size_t>(end_ - close);
    const auto* found = static_cast<const char*>(std::memchr(close, '"', left));
    if (found == nullptr) {
      return static_cast<std::size_t>(end_ - begin) > longest_cell ? FormatFault::long_cell
                                                                   : FormatFault::open_quote;
    }
    close = found;
    if (close + 1 == end_ || close[1] != '"') break;
    cell.doubled_quotes = true;
    close += 2;
  }
  cell.text = {begin, static_cast<std::size_t>(close - begin)};
  if (cell.text.size() > longest_cell) return FormatFault::long_cell;
  breaks_ += static_cast<std::uint64_t>(std::count(begin, close, '\n'));
  const char* stop = close + 1;
  while (stop != end_ && (*stop == ' ' || *stop == '\t') && *stop != separator_) ++stop;
  if (stop != end_ && *stop != separator_ && *stop != '\n' && *stop != '\r') {
    return FormatFault::after_quote;
  }
  return finish(stop, last);
}

LineColumn line_column(std::string_view bytes, const char* at, std::uint64_t first_line) {
  const char* const begin = bytes.data();
  const char* line_start = at;
  while (line_start != begin && line_start[-1] != '\n') --line_start;
  const auto characters = std::count_if(line_start, at, starts_code_point);
  return {first_line + static_cast<std::uint64_t>(std::count(begin, line_start, '\n')),
          static_cast<std::uint64_t>(characters) + 1};
}

std::string place(const std::string& file, const LineColumn& where) {
  return fmt::format("{}:{}:{}", file, where.line, where.column);
}

std::size_t first_bad_byte(std::string_view bytes) {
  constexpr std::size_t block = 4096;
  for (std::size_t start = 0; start < bytes.size(); start += block) {
    const std::string_view part = bytes.substr(start, block);
    unsigned char any = 0, least = 0xFF;
    for (const char c : part) {
      any |= static_cast<unsigned char>(c);
      least = std::min(least, static_cast<unsigned char>(c));
    }
    if (any < 0x80 && least > 0) continue;
    // Not pure ASCII: all that is left, so that no character is cut by a block's edge.
    const std::string_view rest = bytes.substr(start);
    const std::size_t nul = std::min(rest.find('\0'), rest.size());
    return start + std::min(first_invalid_utf8(rest).value_or(rest.size()), nul);
  }
  return bytes.size();
}

Error bad_byte_error(const std::string& file, std::string_view bytes, std::size_t offset,
                     std::uint64_t first_line) {
  const std::string where = place(file, line_column(bytes, bytes.data() + offset, first_line));
  const bool marked_utf16 = bytes.starts_with("\xFF\xFE") || bytes.starts_with("\xFE\xFF");
  if (offset == 0 && first_line == 1 && marked_utf16) {
    return {ErrorKind::data, where, "the file is in UTF-16",
            "convert it with `iconv -f utf-16 -t utf-8`"};
  }
  if (bytes[offset] == '\0') {
    return {ErrorKind::data, where, "a NUL byte: this is no text file, or not in UTF-8",
            "convert UTF-16 with `iconv -f utf-16 -t utf-8`"};
  }
  return {
      ErrorKind::data, where,
      fmt::format("byte \\x{:02x} is not valid UTF-8", static_cast<unsigned char>(bytes[offset])),
      "convert the file, for instance with `iconv -f latin1 -t utf-8`"};
}

Error fault_error(const Fault& fault, const std::string& file, std::string_view bytes,
                  std::uint64_t first_line, const std::vector<std::string>& names) {
  Error error{ErrorKind::data, "", "", ""};
  switch (fault.kind) {
    case FormatFault::stray_quote:
    case FormatFault::after_quote:
      error.what = column_words(fault, names) + ": " +
                   (fault.kind == FormatFault::stray_quote
                        ? "a quote inside a cell that does not begin with one"
                        : "text after the closing quote of a quoted cell");
      error.hint = "put the whole cell in quotes and double the quotes inside it";
      break;
    case FormatFault::open_quote:
      error.what = column_words(fault, names) +
                   ": the quoted cell that starts here never ends: the closing quote is missing";
      error.hint = "close the quotes; a quote that belongs to the text is written twice";
      break;
    case FormatFault::lone_return:
      error.what = "a carriage return that ends no line";
      error.hint = "line ends are LF or CRLF; convert others with `tr '\\r' '\\n'`";
      break;
    case FormatFault::long_cell:
      error.kind = ErrorKind::limit;
      error.what = column_words(fault, names) + ": the cell that starts here is over 16 MB";
      error.hint = "is its closing quote missing?";
      break;
    case FormatFault::too_few: {
      const char* start = fault.at;
      while (start != bytes.data() && start[-1] != '\n') --start;
      const auto left = static_cast<std::size_t>(bytes.data() + bytes.size() - start);
      std::string_view row(start, left);
      row = row.substr(0, row.find_first_of("\r\n"));
      error = too_few_error(fault, row, names);
      break;
    }
    case FormatFault::too_many:
      error = too_many_error(fault, names);
      break;
    case FormatFault::none:
      return {ErrorKind::internal, file, "no fault to report", ""};
  }
  error.where = place(file, line_column(bytes, fault.at, first_line));
  return error;
}

std::string quoted_for_message(std::string_view text) {
  std::size_t end = 0, characters = 0;
  while (end < text.size() && characters < longest_quotation) {
    ++end;
    while (end < text.size() && !starts_code_point(text[end])) ++end;
    ++characters;
  }
  return fmt::format("\"{}{}\"", text.substr(0, end), end < text.size() ? "..." : "");
}

}  // namespace gramproof::table
