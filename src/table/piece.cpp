#include "table/piece.hpp"

#include <algorithm>

namespace gramproof::table {
namespace {

template <class T>
std::vector<T> picked(const std::vector<T>& from, const std::vector<std::size_t>& rows) {
  std::vector<T> to;
  if (from.empty()) return to;
  to.reserve(rows.size());
  for (const std::size_t row : rows) to.push_back(from[row]);
  return to;
}

template <class T>
void extend(std::vector<T>& to, const std::vector<T>& from) {
  to.insert(to.end(), from.begin(), from.end());
}

auto find_wide(const PieceColumn& column, std::size_t row) {
  return std::lower_bound(column.wide.begin(), column.wide.end(), row,
                          [](const WideCell& cell, std::size_t at) { return cell.row < at; });
}

std::vector<WideCell> picked_wide(const PieceColumn& column, const std::vector<std::size_t>& rows) {
  std::vector<WideCell> to;
  if (column.wide.empty()) return to;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    const auto cell = find_wide(column, rows[i]);
    if (cell != column.wide.end() && cell->row == rows[i]) {
      to.push_back({static_cast<std::uint32_t>(i), cell->digits});
    }
  }
  return to;
}

std::vector<std::uint32_t> files_of(const Piece& piece) {
  if (!piece.file_of_row.empty()) return piece.file_of_row;
  return std::vector<std::uint32_t>(piece.rows, static_cast<std::uint32_t>(piece.file));
}

std::int32_t significant_digits_of(const Number& number) {
  std::string digits = number.wide.empty() ? std::to_string(number.mantissa) : number.wide;
  if (digits.front() == '-') digits.erase(0, 1);
  return digits == "0" ? 0 : static_cast<std::int32_t>(digits.size());
}

}  // namespace

Number PieceColumn::number(std::size_t row) const {
  Number number;
  number.value = value[row];
  number.mantissa = mantissa[row];
  number.decimals = decimals[row];
  const auto cell = find_wide(*this, row);
  if (cell != wide.end() && cell->row == row) {
    number.wide = cell->digits;
    number.mantissa = 0;
  }
  number.significant_digits = significant_digits_of(number);
  return number;
}

Piece gather(const Piece& from, const std::vector<std::size_t>& rows) {
  Piece to;
  to.index = from.index;
  to.file = from.file;
  to.rows = rows.size();
  to.row = picked(from.row, rows);
  to.line = picked(from.line, rows);
  to.file_of_row = picked(from.file_of_row, rows);
  to.columns.resize(from.columns.size());
  for (std::size_t c = 0; c < from.columns.size(); ++c) {
    const PieceColumn& source = from.columns[c];
    PieceColumn& column = to.columns[c];
    column.loaded = source.loaded;
    column.kind = source.kind;
    column.missing = picked(source.missing, rows);
    column.value = picked(source.value, rows);
    column.mantissa = picked(source.mantissa, rows);
    column.decimals = picked(source.decimals, rows);
    column.code = picked(source.code, rows);
    column.wide = picked_wide(source, rows);
  }
  return to;
}

void append(Piece& to, const Piece& from) {
  if (to.rows == 0 && to.columns.empty()) {
    to = from;
    to.file_of_row = files_of(from);
    return;
  }
  to.file_of_row = files_of(to);
  extend(to.file_of_row, files_of(from));
  extend(to.row, from.row);
  extend(to.line, from.line);
  const auto shift = static_cast<std::uint32_t>(to.rows);
  for (std::size_t c = 0; c < to.columns.size(); ++c) {
    const PieceColumn& source = from.columns[c];
    PieceColumn& column = to.columns[c];
    extend(column.missing, source.missing);
    extend(column.value, source.value);
    extend(column.mantissa, source.mantissa);
    extend(column.decimals, source.decimals);
    extend(column.code, source.code);
    for (const WideCell& cell : source.wide) column.wide.push_back({cell.row + shift, cell.digits});
  }
  to.rows += from.rows;
}

}  // namespace gramproof::table
