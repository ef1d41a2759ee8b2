#include "exact/told.hpp"

#include <algorithm>

namespace gramproof::test {
namespace {

std::vector<exact::ColumnSummary> summaries_of(const Matrix& matrix) {
  const auto rows = exact::exact_rows(matrix.design, matrix.piece).rows;
  std::vector<exact::ColumnSummary> summaries(matrix.design.columns.size());
  for (std::size_t j = 0; j < summaries.size(); ++j) {
    for (std::size_t i = 0; i < rows.size(); ++i) {
      // The last entry of an exact row is the factor that made it whole.
      const double value = mpq_class(mpq_class(rows[i][j]) / mpq_class(rows[i].back())).get_d();
      summaries[j].min = i == 0 ? value : std::min(summaries[j].min, value);
      summaries[j].max = i == 0 ? value : std::max(summaries[j].max, value);
      summaries[j].nonzero_rows += value != 0;
    }
  }
  return summaries;
}

design::ExpressionPtr bracket(int column, int level) {
  design::Expression expression;
  expression.operation = design::Operation::is_level;
  expression.column = column;
  expression.level = level;
  return std::make_shared<design::Expression>(expression);
}

}  // namespace

std::vector<exact::Relation> relations_of(const Matrix& matrix) {
  const auto rank = exact::rank_of_sample(matrix.design, matrix.piece, matrix.order());
  std::vector<exact::Relation> relations;
  for (const exact::NullVector& vector : exact::readable_basis(matrix.design, rank.null_vectors)) {
    relations.push_back(exact::describe(matrix.design, matrix.schema, vector, summaries_of(matrix),
                                        matrix.piece.rows));
  }
  return relations;
}

void add_text_column(Matrix& matrix, const std::string& name, const std::vector<int>& codes,
                     const Texts& levels) {
  table::PieceColumn column;
  column.loaded = true;
  column.kind = table::ColumnKind::text;
  column.missing.assign(codes.size(), 0);
  column.code.assign(codes.begin(), codes.end());
  matrix.piece.columns.push_back(std::move(column));
  table::ColumnFacts facts;
  facts.name = name;
  facts.kind = table::ColumnKind::text;
  for (const std::string& level : levels) {
    facts.levels.emplace_back();
    facts.levels.back().text = level;
  }
  matrix.schema.columns.push_back(std::move(facts));
}

void add_all_levels(Matrix& matrix, const std::string& name, int factor) {
  int column = 0;
  while (matrix.schema.columns[static_cast<std::size_t>(column)].name != name) ++column;
  const auto set = static_cast<int>(matrix.design.level_sets.size());
  matrix.design.level_sets.push_back({column, false, -1, {}});
  const auto& levels = matrix.schema.columns[static_cast<std::size_t>(column)].levels;
  const auto term = static_cast<int>(matrix.design.columns.size());
  for (std::size_t i = 0; i < levels.size(); ++i) {
    const auto level = static_cast<int>(i);
    std::string label = "[" + name + " = " + levels[i].text + "]";
    design::ExpressionPtr definition = bracket(column, level);
    std::vector<design::LevelUse> uses = {{set, level}};
    if (factor >= 0) {
      const design::DesignColumn& other = matrix.design.columns[static_cast<std::size_t>(factor)];
      label += " * " + other.label;
      definition = tree(design::Operation::multiply, {definition, other.definition});
      uses.insert(uses.end(), other.levels.begin(), other.levels.end());
    }
    add_column(matrix, label, definition);
    matrix.design.columns.back().levels = uses;
    matrix.design.columns.back().term = term;
  }
}

bool has(const std::vector<exact::Relation>& relations, const std::string& text,
         exact::Cause cause) {
  return std::any_of(relations.begin(), relations.end(),
                     [&](const exact::Relation& r) { return r.text == text && r.cause == cause; });
}

std::string all_texts(const std::vector<exact::Relation>& relations) {
  std::string text;
  for (const exact::Relation& r : relations) {
    text += r.text + " [" + exact::word_of(r.cause) + "] " + r.cause_text + "\n";
  }
  return text;
}

}  // namespace gramproof::test
