#include "table/dialect.hpp"

#include <algorithm>
#include <string>
#include <tuple>
#include <vector>

#include "table/number.hpp"
#include "table/records.hpp"

namespace gramproof::table {
namespace {

constexpr std::string_view candidates = ",;\t|";
constexpr std::size_t most_records = 200;

/// The sample cut into records and cells under one separator.
struct Cut {
  std::vector<std::vector<std::string>> records;
  [[nodiscard]] std::size_t header_cells() const {
    return records.empty() ? 0 : records.front().size();
  }
};

Cut cut(std::string_view sample, bool whole, char separator) {
  Cut result;
  CellWalker walker(sample, separator);
  RawCell cell;
  std::string scratch;
  while (walker.more() && result.records.size() < most_records) {
    std::vector<std::string> record;
    for (bool last = false; !last;) {
      if (walker.next(cell, last) != FormatFault::none) return result;
      record.emplace_back(cell_text(cell, scratch));
    }
    const bool unfinished = !walker.more() && !whole && sample.back() != '\n';
    // A header longer than the sample still shows its separator.
    if (!unfinished || result.records.empty()) result.records.push_back(std::move(record));
  }
  // Blank lines at the end are no records.
  while (result.records.size() > 1 && result.records.back() == std::vector<std::string>{""}) {
    result.records.pop_back();
  }
  return result;
}

bool is_number(std::string_view text, char mark) {
  Number number;
  return parse_number(text, mark, number) != NumberStatus::not_a_number;
}

bool fits(const Cut& cut) {
  if (cut.header_cells() < 2) return false;
  return std::all_of(cut.records.begin(), cut.records.end(),
                     [&](const auto& record) { return record.size() == cut.header_cells(); });
}

double share_of_numbers(const Cut& cut, char separator) {
  std::size_t cells = 0, numbers = 0;
  for (std::size_t i = 1; i < cut.records.size(); ++i) {
    for (const std::string& text : cut.records[i]) {
      ++cells;
      if (text.empty() || is_number(text, '.') || (separator != ',' && is_number(text, ','))) {
        ++numbers;
      }
    }
  }
  return cells == 0 ? 0 : static_cast<double>(numbers) / static_cast<double>(cells);
}

/// The separator of a file with one column, `rows` being its data under the semicolon.
char separator_of_one_column(const Cut& rows) {
  bool any_comma = false;
  for (std::size_t i = 1; i < rows.records.size(); ++i) {
    for (const std::string& text : rows.records[i]) {
      if (text.find(',') == std::string::npos) continue;
      any_comma = true;
      if (!is_number(text, ',')) return ',';
    }
  }
  return any_comma ? ';' : ',';
}

char recognise_separator(std::string_view sample, bool whole) {
  std::tuple<bool, double, std::size_t> best{false, -1, 0};
  char separator = '\0';
  for (const char candidate : candidates) {
    const Cut result = cut(sample, whole, candidate);
    if (result.header_cells() < 2) continue;
    const bool fitting = fits(result);
    const std::tuple merit{fitting, fitting ? share_of_numbers(result, candidate) : 0.0,
                           result.header_cells()};
    if (merit > best) {
      best = merit;
      separator = candidate;
    }
  }
  return separator != '\0' ? separator : separator_of_one_column(cut(sample, whole, ';'));
}

void recognise_decimal_mark(const Cut& rows, Dialect& dialect) {
  dialect.mark_certain = dialect.separator == ',';
  bool only_comma = false, only_point = false;
  for (std::size_t i = 1; i < rows.records.size(); ++i) {
    for (const std::string& text : rows.records[i]) {
      const bool with_point = is_number(text, '.'), with_comma = is_number(text, ',');
      only_point |= with_point && !with_comma;
      only_comma |= with_comma && !with_point;
    }
  }
  if (dialect.mark_certain || (!only_comma && !only_point)) return;
  dialect.mark_certain = true;
  if (only_comma && !only_point) dialect.decimal_mark = ',';
}

}  // namespace

Dialect recognise_dialect(std::string_view sample, bool whole, const ReadOptions& options) {
  Dialect dialect;
  dialect.separator = options.separator ? *options.separator : recognise_separator(sample, whole);
  if (options.decimal_mark) {
    dialect.decimal_mark = *options.decimal_mark;
  } else {
    recognise_decimal_mark(cut(sample, whole, dialect.separator), dialect);
  }
  return dialect;
}

}  // namespace gramproof::table
