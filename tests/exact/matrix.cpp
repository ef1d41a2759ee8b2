#include "exact/matrix.hpp"

#include <algorithm>
#include <fstream>
#include <sstream>
#include <stdexcept>

namespace gramproof::test {
namespace {

std::vector<std::string> split(const std::string& line) {
  std::vector<std::string> cells;
  std::stringstream stream(line);
  std::string text;
  while (std::getline(stream, text, ',')) cells.push_back(text);
  if (!line.empty() && line.back() == ',') cells.emplace_back();
  return cells;
}

void append_cell(table::PieceColumn& column, const std::string& text, std::uint32_t row) {
  table::Number number;
  if (table::parse_number(text, '.', number) != table::NumberStatus::number) {
    throw std::invalid_argument("no number: " + text);
  }
  column.missing.push_back(0);
  column.value.push_back(number.value);
  column.mantissa.push_back(number.mantissa);
  column.decimals.push_back(static_cast<std::int16_t>(number.decimals));
  if (!number.wide.empty()) column.wide.push_back({row, number.wide});
}

}  // namespace

std::vector<int> Matrix::order() const {
  std::vector<int> order(design.columns.size());
  std::iota(order.begin(), order.end(), 0);
  return order;
}

std::vector<std::size_t> Matrix::all_rows() const {
  std::vector<std::size_t> rows(piece.rows);
  std::iota(rows.begin(), rows.end(), 0);
  return rows;
}

void add_column(Matrix& matrix, const std::string& label, design::ExpressionPtr definition) {
  design::DesignColumn column;
  column.label = label;
  column.term = static_cast<int>(matrix.design.columns.size());
  column.sources = design::columns_of(*definition);
  column.zero_one = design::is_zero_one(*definition);
  column.exact = design::is_exact(*definition);
  column.definition = std::move(definition);
  matrix.design.columns.push_back(std::move(column));
}

Matrix matrix_of(const std::vector<std::string>& names,
                 const std::vector<std::vector<std::string>>& rows) {
  Matrix matrix;
  matrix.piece.rows = rows.size();
  matrix.piece.columns.resize(names.size());
  for (std::size_t i = 0; i < rows.size(); ++i) {
    matrix.piece.row.push_back(i + 1);
    matrix.piece.line.push_back(i + 2);
  }
  for (std::size_t j = 0; j < names.size(); ++j) {
    table::PieceColumn& column = matrix.piece.columns[j];
    column.loaded = true;
    for (std::size_t i = 0; i < rows.size(); ++i) {
      append_cell(column, rows[i][j], static_cast<std::uint32_t>(i));
    }
    table::ColumnFacts facts;
    facts.name = names[j];
    facts.all_whole = std::all_of(column.decimals.begin(), column.decimals.end(),
                                  [](std::int16_t d) { return d <= 0; });
    matrix.schema.columns.push_back(std::move(facts));
    add_column(matrix, names[j], cell(static_cast<int>(j)));
    design::DesignColumn& made = matrix.design.columns.back();
    made.constant = names[j] == "constant";
    made.zero_one = std::all_of(column.value.begin(), column.value.end(),
                                [](double v) { return v == 0 || v == 1; });
  }
  return matrix;
}

Matrix matrix_of(const std::vector<std::vector<exact::Integer>>& rows) {
  std::vector<std::string> names;
  for (std::size_t j = 0; j < rows.front().size(); ++j) names.push_back("x" + std::to_string(j));
  std::vector<std::vector<std::string>> cells;
  for (const auto& row : rows) {
    cells.emplace_back();
    for (const exact::Integer& value : row) cells.back().push_back(value.get_str());
  }
  return matrix_of(names, cells);
}

Csv read_csv(const std::string& name) {
  std::ifstream file(std::string(GRAMPROOF_FIXTURES) + "/" + name);
  if (!file) throw std::runtime_error("no fixture " + name);
  Csv csv;
  std::string line;
  while (std::getline(file, line)) {
    if (line.empty()) continue;
    if (csv.names.empty()) {
      csv.names = split(line);
    } else {
      csv.rows.push_back(split(line));
    }
  }
  return csv;
}

exact::ExactRows integer_rows(const std::vector<std::vector<exact::Integer>>& rows) {
  exact::ExactRows result;
  result.rows = rows;
  result.number.resize(rows.size());
  std::iota(result.number.begin(), result.number.end(), 1);
  return result;
}

std::size_t plain_rank(std::vector<std::vector<mpq_class>> rows) {
  std::size_t rank = 0;
  const std::size_t width = rows.empty() ? 0 : rows.front().size();
  for (std::size_t j = 0; j < width && rank < rows.size(); ++j) {
    std::size_t pivot = rank;
    while (pivot < rows.size() && rows[pivot][j] == 0) ++pivot;
    if (pivot == rows.size()) continue;
    std::swap(rows[rank], rows[pivot]);
    for (std::size_t i = rank + 1; i < rows.size(); ++i) {
      if (rows[i][j] == 0) continue;
      const mpq_class factor = rows[i][j] / rows[rank][j];
      for (std::size_t c = j; c < width; ++c) rows[i][c] -= factor * rows[rank][c];
    }
    ++rank;
  }
  return rank;
}

std::size_t plain_rank(const std::vector<std::vector<exact::Integer>>& rows) {
  std::vector<std::vector<mpq_class>> rationals;
  for (const auto& row : rows) rationals.emplace_back(row.begin(), row.end());
  return plain_rank(std::move(rationals));
}

design::ExpressionPtr cell(int column) {
  auto expression = std::make_shared<design::Expression>();
  expression->operation = design::Operation::cell;
  expression->column = column;
  return expression;
}

design::ExpressionPtr tree(design::Operation operation, std::vector<design::ExpressionPtr> operands,
                           int exponent) {
  auto expression = std::make_shared<design::Expression>();
  expression->operation = operation;
  expression->operands = std::move(operands);
  expression->exponent = exponent;
  return expression;
}

design::ExpressionPtr number(const std::string& text) {
  auto expression = std::make_shared<design::Expression>();
  if (table::parse_number(text, '.', expression->number) != table::NumberStatus::number) {
    throw std::invalid_argument("no number: " + text);
  }
  return expression;
}

std::vector<std::vector<exact::Integer>> planted(Random& random, std::size_t n, std::size_t k,
                                                 std::size_t corank, std::int64_t largest) {
  const std::size_t free = k - corank;
  std::vector<std::vector<exact::Integer>> rows(n, std::vector<exact::Integer>(k));
  std::vector<std::vector<std::int64_t>> weights(corank, std::vector<std::int64_t>(free));
  for (auto& vector : weights) {
    for (auto& w : vector) w = random.whole(0, 2) == 0 ? random.whole(-largest, largest) : 0;
  }
  std::vector<std::size_t> place(k);
  std::iota(place.begin(), place.end(), 0);
  for (std::size_t j = k; j > 1; --j) {
    std::swap(place[j - 1],
              place[static_cast<std::size_t>(random.whole(0, static_cast<std::int64_t>(j) - 1))]);
  }
  for (auto& row : rows) {
    for (std::size_t j = 0; j < free; ++j) row[place[j]] = random.whole(-1000, 1000);
    for (std::size_t c = 0; c < corank; ++c) {
      for (std::size_t j = 0; j < free; ++j) {
        row[place[free + c]] += exact::Integer(weights[c][j]) * row[place[j]];
      }
    }
  }
  return rows;
}

}  // namespace gramproof::test
