// tests/support/table_builder.hpp - a table out of rows of text, for tests that need no file.
#pragma once

#include <algorithm>
#include <string>
#include <utility>
#include <vector>

#include "table/piece.hpp"
#include "table/survey.hpp"

namespace gramproof::test {

/// What a survey would say of the rows, and all of them as one piece of file "table.csv" (header on
/// line 1).
struct Table {
  table::Schema schema;
  table::Piece piece;
};

inline bool is_missing(const std::string& cell) {
  return cell.empty() || cell == "NA";
}

inline void survey_column(const std::vector<std::vector<std::string>>& rows, std::size_t c,
                          table::ColumnFacts& facts) {
  for (std::size_t r = 0; r < rows.size(); ++r) {
    if (is_missing(rows[r][c])) continue;
    table::Number number;
    const table::NumberStatus status = table::parse_number(rows[r][c], '.', number);
    const table::CellPlace place{"table.csv:" + std::to_string(r + 2) + ":" + std::to_string(c + 1),
                                 rows[r][c], r + 1};
    const bool is_number =
        status == table::NumberStatus::number || status == table::NumberStatus::out_of_range;
    if (is_number) ++facts.numbers;
    if (!is_number && !facts.first_not_number) facts.first_not_number = place;
    if (status == table::NumberStatus::out_of_range && !facts.first_out_of_range)
      facts.first_out_of_range = place;
  }
}

inline void add_number(const table::Number& number, bool first, table::ColumnFacts& facts) {
  facts.most_decimals = std::max(facts.most_decimals, number.decimals);
  facts.most_significant_digits =
      std::max(facts.most_significant_digits, number.significant_digits);
  if (table::plain_text(number).find('.') != std::string::npos) facts.all_whole = false;
  facts.smallest = first ? number.value : std::min(facts.smallest, number.value);
  facts.largest = first ? number.value : std::max(facts.largest, number.value);
  facts.largest_magnitude = std::max({facts.largest_magnitude, facts.largest, -facts.smallest});
}

inline void add_level(table::Level level, bool numeric, table::ColumnFacts& facts) {
  const auto known =
      std::find_if(facts.levels.begin(), facts.levels.end(), [&](const table::Level& other) {
        return numeric ? table::compare(other.value, level.value) == 0 : other.text == level.text;
      });
  if (known != facts.levels.end()) {
    ++known->rows;
    return;
  }
  if (!numeric) facts.code_of.emplace(level.text, static_cast<std::int32_t>(facts.levels.size()));
  level.rows = 1;
  facts.levels.push_back(std::move(level));
  facts.distinct_at_least = facts.levels.size();
}

inline void fill_column(const std::vector<std::vector<std::string>>& rows, std::size_t c,
                        table::ColumnFacts& facts, table::PieceColumn& column) {
  const bool numeric = facts.kind == table::ColumnKind::numeric;
  column.loaded = true;
  column.kind = facts.kind;
  for (std::size_t r = 0; r < rows.size(); ++r) {
    const std::string& cell = rows[r][c];
    const bool missing = is_missing(cell);
    column.missing.push_back(missing ? 1 : 0);
    ++(missing ? facts.missing : facts.present);
    table::Number number;
    if (numeric && !missing &&
        table::parse_number(cell, '.', number) == table::NumberStatus::number) {
      add_number(number, facts.present == 1, facts);
      add_level({table::plain_text(number), number, 0}, true, facts);
    }
    if (!numeric && !missing) add_level({cell, {}, 0}, false, facts);
    if (numeric) {
      column.value.push_back(number.value);
      column.mantissa.push_back(number.mantissa);
      column.decimals.push_back(static_cast<std::int16_t>(number.decimals));
      if (!number.wide.empty()) column.wide.push_back({static_cast<std::uint32_t>(r), number.wide});
    } else {
      column.code.push_back(missing ? -1 : facts.code_of.at(cell));
    }
  }
}

/// Empty cells and NA are missing; a column is text if a present cell is no number. Every distinct
/// value is listed.
inline Table make_table(const std::vector<std::string>& names,
                        const std::vector<std::vector<std::string>>& rows) {
  Table made;
  made.schema.rows = rows.size();
  made.schema.rows_of_file = {rows.size()};
  made.piece.rows = rows.size();
  for (std::size_t r = 0; r < rows.size(); ++r) {
    made.piece.row.push_back(r + 1);
    made.piece.line.push_back(r + 2);
  }
  for (std::size_t c = 0; c < names.size(); ++c) {
    table::ColumnFacts facts;
    facts.name = names[c];
    survey_column(rows, c, facts);
    if (facts.first_not_number) facts.kind = table::ColumnKind::text;
    table::PieceColumn column;
    fill_column(rows, c, facts, column);
    made.schema.columns.push_back(std::move(facts));
    made.piece.columns.push_back(std::move(column));
  }
  return made;
}

}  // namespace gramproof::test
