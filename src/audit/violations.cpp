#include "audit/violations.hpp"

#include <algorithm>

#include "table/number.hpp"

namespace gramproof::audit {
namespace {

/// The cell as it was understood: the number in plain decimals, or the text.
std::string cell_text(const table::Schema& schema, const table::Piece& piece, int column,
                      std::size_t row) {
  const auto at = static_cast<std::size_t>(column);
  const table::PieceColumn& cells = piece.columns[at];
  if (!cells.loaded || cells.missing[row]) return "";
  if (cells.kind == table::ColumnKind::numeric) return table::plain_text(cells.number(row));
  const std::int32_t code = cells.code[row];
  return code < 0 ? "" : schema.columns[at].levels[static_cast<std::size_t>(code)].text;
}

std::vector<int> source_columns(const design::Design& design, const exact::NullVector& vector) {
  std::vector<int> sources;
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    if (vector[j] == 0) continue;
    sources.insert(sources.end(), design.columns[j].sources.begin(),
                   design.columns[j].sources.end());
  }
  std::sort(sources.begin(), sources.end());
  sources.erase(std::unique(sources.begin(), sources.end()), sources.end());
  return sources;
}

}  // namespace

std::string residual_text(const mpq_class& value) {
  mpz_class denominator = value.get_den();
  std::int32_t twos = 0, fives = 0;
  while (mpz_divisible_ui_p(denominator.get_mpz_t(), 2)) denominator /= 2, ++twos;
  while (mpz_divisible_ui_p(denominator.get_mpz_t(), 5)) denominator /= 5, ++fives;
  if (denominator != 1) return value.get_str();
  table::Number number;
  number.decimals = std::max(twos, fives);
  mpz_class power;
  mpz_ui_pow_ui(power.get_mpz_t(), 10, static_cast<unsigned long>(number.decimals));
  const mpz_class mantissa = value.get_num() * power / value.get_den();
  number.wide = mantissa.get_str();
  return table::plain_text(number);
}

std::vector<Violation> violations_of(const design::Design& design, const table::Schema& schema,
                                     const std::vector<std::string>& file_names,
                                     const exact::NullVector& vector,
                                     const scan::TestedVector& tested) {
  std::vector<Violation> violations;
  const std::vector<int> sources = source_columns(design, vector);
  const table::Piece& rows = tested.violators;
  for (std::size_t i = 0; i < rows.rows; ++i) {
    Violation violation;
    const std::size_t file = rows.file_of_row.empty() ? rows.file : rows.file_of_row[i];
    violation.file = file_names[file];
    violation.line = rows.line[i];
    violation.row = rows.row[i];
    violation.residual = residual_text(tested.residuals[i]);
    for (const int column : sources) {
      violation.cells.emplace_back(schema.columns[static_cast<std::size_t>(column)].name,
                                   cell_text(schema, rows, column, i));
    }
    violations.push_back(std::move(violation));
  }
  return violations;
}

}  // namespace gramproof::audit
