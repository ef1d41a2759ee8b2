// tests/exact/matrix.hpp - small exact matrices for the tests of src/exact: from texts of cells,
// from integers, from files.
#pragma once

#include <numeric>
#include <string>
#include <vector>

#include "design/design.hpp"
#include "exact/rank.hpp"
#include "support/random_numbers.hpp"
#include "table/piece.hpp"
#include "table/survey.hpp"

namespace gramproof::test {

/// A table of numeric columns, each of them a design column of its own.
struct Matrix {
  design::Design design;
  table::Schema schema;
  table::Piece piece;

  [[nodiscard]] std::vector<int> order() const;
  [[nodiscard]] std::vector<std::size_t> all_rows() const;
};

/// `rows` hold the texts of the cells. A column called "constant" is the design's constant.
[[nodiscard]] Matrix matrix_of(const std::vector<std::string>& names,
                               const std::vector<std::vector<std::string>>& rows);

/// Columns x0, x1, ... of integers.
[[nodiscard]] Matrix matrix_of(const std::vector<std::vector<exact::Integer>>& rows);

/// A CSV file of plain numbers below GRAMPROOF_FIXTURES.
struct Csv {
  std::vector<std::string> names;
  std::vector<std::vector<std::string>> rows;
};
[[nodiscard]] Csv read_csv(const std::string& name);

[[nodiscard]] exact::ExactRows integer_rows(const std::vector<std::vector<exact::Integer>>& rows);

/// Rank by elimination in rationals, the slow and plain way.
[[nodiscard]] std::size_t plain_rank(std::vector<std::vector<mpq_class>> rows);
[[nodiscard]] std::size_t plain_rank(const std::vector<std::vector<exact::Integer>>& rows);

/// An expression that reads one cell.
[[nodiscard]] design::ExpressionPtr cell(int column);
[[nodiscard]] design::ExpressionPtr tree(design::Operation operation,
                                         std::vector<design::ExpressionPtr> operands,
                                         int exponent = 1);
[[nodiscard]] design::ExpressionPtr number(const std::string& text);

/// Adds a column with a definition of its own.
void add_column(Matrix& matrix, const std::string& label, design::ExpressionPtr definition);

/// n x k integers with `corank` planted relations: the last columns are combinations of the others
/// with coefficients up to `largest`, then all columns are shuffled.
[[nodiscard]] std::vector<std::vector<exact::Integer>> planted(Random& random, std::size_t n,
                                                               std::size_t k, std::size_t corank,
                                                               std::int64_t largest);

}  // namespace gramproof::test
