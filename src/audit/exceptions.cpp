#include "audit/exceptions.hpp"

#include <algorithm>

#include "exact/relations.hpp"

namespace gramproof::audit {
namespace {

std::uint64_t most_violating(std::uint64_t rows) {
  return std::max<std::uint64_t>(5, rows / 100);
}

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

/// Exact decimal of a rational when it has one, else the fraction.
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

void add_violations(const ExceptionSearch& search, const exact::NullVector& vector,
                    const scan::TestedVector& tested, RelationFinding& finding) {
  const std::vector<int> sources = source_columns(search.design, vector);
  const table::Piece& rows = tested.violators;
  for (std::size_t i = 0; i < rows.rows; ++i) {
    Violation violation;
    const std::size_t file = rows.file_of_row.empty() ? rows.file : rows.file_of_row[i];
    violation.file = search.file_names[file];
    violation.line = rows.line[i];
    violation.row = rows.row[i];
    violation.residual = residual_text(tested.residuals[i]);
    for (const int column : sources) {
      violation.cells.emplace_back(search.schema.columns[static_cast<std::size_t>(column)].name,
                                   cell_text(search.schema, rows, column, i));
    }
    finding.violations.push_back(std::move(violation));
  }
}

/// What is left of a relation once columns that are zero in all but `rows` rows are set aside: the
/// columns that really relate.
std::vector<int> relating_columns(const ExceptionSearch& search, const exact::NullVector& vector,
                                  std::uint64_t rows) {
  std::vector<int> result;
  for (std::size_t j = 0; j < search.design.columns.size(); ++j) {
    if (vector[j] != 0 && search.digest.columns[j].nonzero_rows > rows)
      result.push_back(static_cast<int>(j));
  }
  return result;
}

/// The constant against 0/1 columns that all have the same coefficient: the violating rows are
/// those of a level left out.
bool is_complement_of_levels(const ExceptionSearch& search, const exact::NullVector& vector,
                             const std::vector<int>& columns, const scan::TestedVector& tested) {
  const mpz_class* constant = nullptr;
  for (const int j : columns) {
    if (search.design.columns[static_cast<std::size_t>(j)].constant)
      constant = &vector[static_cast<std::size_t>(j)];
  }
  if (constant == nullptr) return false;
  // In a row of a level left out every 0/1 column is 0, so that only the constant is left.
  const auto is_constant_alone = [&](const mpq_class& residual) { return residual == *constant; };
  if (!std::all_of(tested.residuals.begin(), tested.residuals.end(), is_constant_alone))
    return false;
  return std::all_of(columns.begin(), columns.end(), [&](int j) {
    const auto at = static_cast<std::size_t>(j);
    const design::DesignColumn& column = search.design.columns[at];
    return column.constant || (column.zero_one && vector[at] == -*constant);
  });
}

bool is_worth_reporting(const ExceptionSearch& search, const exact::NullVector& vector,
                        const scan::TestedVector& tested) {
  if (tested.violating == 0 || tested.violating > most_violating(search.digest.rows_used))
    return false;
  const std::vector<int> columns = relating_columns(search, vector, tested.violating);
  if (columns.size() < 2 || tested.holding < 10 * columns.size()) return false;
  return !is_complement_of_levels(search, vector, columns, tested);
}

}  // namespace

RelationFinding exact_terms(const exact::NullVector& vector, std::size_t columns) {
  RelationFinding finding;
  for (std::size_t j = 0; j < columns; ++j) {
    if (vector[j] == 0) continue;
    finding.terms.push_back({static_cast<int>(j), vector[j].get_str(), vector[j].get_d()});
  }
  return finding;
}

Result<std::vector<RelationFinding>> relations_but_for_rows(const ExceptionSearch& search,
                                                            Prover& prover) {
  std::vector<RelationFinding> findings;
  if (search.digest.rows_used < 5 * search.design.columns.size()) return findings;
  const std::vector<std::size_t> essential = exact::essential_rows(
      search.design, search.digest.sample, search.rank, search.digest.random_combination);
  if (essential.empty()) return findings;
  std::vector<exact::NullVector> vectors;
  for (const std::size_t row : essential) {
    exact::NullVector vector =
        exact::relation_without_row(search.design, search.digest.sample, search.rank, row);
    // A level that rests on this row alone needs no pass: the vector is that column.
    if (relating_columns(search, vector, 1).size() >= 2) vectors.push_back(std::move(vector));
  }
  if (vectors.empty()) return findings;
  Result<std::vector<scan::TestedVector>> tested = prover.test(vectors);
  if (!tested) return tested.error();
  for (std::size_t i = 0; i < vectors.size(); ++i) {
    const scan::TestedVector& test = tested.value()[i];
    if (!is_worth_reporting(search, vectors[i], test)) continue;
    RelationFinding finding = exact_terms(vectors[i], search.design.columns.size());
    finding.standing = Standing::exact_except;
    finding.text = exact::equation(search.design, vectors[i]);
    finding.rows_holding = test.holding;
    finding.rows_violating = test.violating;
    finding.largest_residual = residual_text(test.largest_residual);
    finding.largest_residual_value = test.largest_residual.get_d();
    for (const RelationTerm& term : finding.terms) finding.removable.push_back(term.column);
    add_violations(search, vectors[i], test, finding);
    findings.push_back(std::move(finding));
  }
  return findings;
}

}  // namespace gramproof::audit
