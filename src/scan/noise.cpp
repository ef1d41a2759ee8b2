#include "scan/noise.hpp"

#include <algorithm>
#include <cmath>

namespace gramproof::scan {
namespace {

/// Exponent e with max|v| < 2^e, so that v / 2^e lies in (-1, 1); 0 for the zero vector.
int exponent_above(const Vector& values) {
  const double largest = values.size() == 0 ? 0.0 : values.cwiseAbs().maxCoeff();
  if (!(largest > 0)) return 0;
  int exponent = 0;
  std::frexp(largest, &exponent);
  return exponent;
}

/// values * 2^exponent; the power itself is a normal double, since design values stay within 1e-305
/// .. 1e305.
Vector scaled_by_power(const Vector& values, int exponent) {
  return values * std::ldexp(1.0, exponent);
}

/// Brings `matrix` from its own exponents to the common ones (never smaller: entries can only
/// underflow).
void rescale(Matrix& matrix, const std::vector<int>& from, const std::vector<int>& to) {
  for (Index a = 0; a < matrix.rows(); ++a) {
    const auto i = static_cast<std::size_t>(a);
    for (Index b = 0; b < matrix.cols(); ++b) {
      const auto j = static_cast<std::size_t>(b);
      matrix(a, b) = std::ldexp(matrix(a, b), from[i] - to[i] + from[j] - to[j]);
    }
  }
}

bool is_zero(const Matrix& matrix) {
  return matrix.size() == 0 || matrix.isZero(0.0);
}

void add_one(SourceNoise& total, SourceNoise part) {
  if (is_zero(part.absolute)) return;
  if (is_zero(total.absolute)) {
    total = std::move(part);
    return;
  }
  std::vector<int> common(total.exponents.size());
  for (std::size_t i = 0; i < common.size(); ++i) {
    common[i] = std::max(total.exponents[i], part.exponents[i]);
  }
  rescale(total.absolute, total.exponents, common);
  rescale(part.absolute, part.exponents, common);
  total.absolute += part.absolute;
  if (total.relative.size() > 0) {
    rescale(total.relative, total.exponents, common);
    rescale(part.relative, part.exponents, common);
    const int cell = std::max(total.cell_exponent, part.cell_exponent);
    total.relative = std::ldexp(1.0, 2 * (total.cell_exponent - cell)) * total.relative +
                     std::ldexp(1.0, 2 * (part.cell_exponent - cell)) * part.relative;
    total.cell_exponent = cell;
  }
  total.exponents = std::move(common);
}

bool may_carry_noise(const table::Schema& schema, int column) {
  return schema.columns[static_cast<std::size_t>(column)].kind == table::ColumnKind::numeric;
}

}  // namespace

NoisePlan::NoisePlan(const design::Design& design, const table::Schema& schema) {
  std::vector<Source> by_column(schema.columns.size());
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    for (const int column : design.columns[j].sources) {
      if (!may_carry_noise(schema, column)) continue;
      design::ExpressionPtr slope = design::derivative(design.columns[j].definition, column);
      if (!slope) continue;
      Source& source = by_column[static_cast<std::size_t>(column)];
      source.column = column;
      source.dependents.push_back(static_cast<int>(j));
      source.derivatives.push_back(std::move(slope));
    }
  }
  for (Source& source : by_column) {
    if (source.column < 0) continue;
    const auto at = static_cast<std::size_t>(source.column);
    source.relative = schema.columns[at].most_significant_digits >= 15;
    sources_.push_back(std::move(source));
  }
}

std::vector<SourceNoise> NoisePlan::sums(const table::Piece& piece,
                                         const design::Block& block) const {
  std::vector<SourceNoise> result;
  const auto rows = static_cast<Index>(block.rows.size());
  const Vector root_weights =
      block.weights.size() > 0 ? Vector(block.weights.cwiseSqrt()) : Vector(Vector::Ones(rows));
  for (const Source& source : sources_) {
    const auto width = static_cast<Index>(source.dependents.size());
    SourceNoise noise;
    noise.column = source.column;
    noise.dependents = source.dependents;
    noise.exponents.assign(source.dependents.size(), 0);
    Matrix slopes(rows, width);
    for (Index a = 0; a < width; ++a) {
      const auto i = static_cast<std::size_t>(a);
      const Vector slope = design::evaluate(*source.derivatives[i], piece, block.rows);
      noise.exponents[i] = exponent_above(slope);
      slopes.col(a) = scaled_by_power(slope, -noise.exponents[i]).cwiseProduct(root_weights);
    }
    noise.absolute = slopes.transpose() * slopes;
    if (source.relative) {
      Vector cells(rows);
      const auto& values = piece.columns[static_cast<std::size_t>(source.column)].value;
      for (Index r = 0; r < rows; ++r) cells[r] = values[block.rows[static_cast<std::size_t>(r)]];
      noise.cell_exponent = exponent_above(cells);
      const Matrix moved = scaled_by_power(cells, -noise.cell_exponent).asDiagonal() * slopes;
      noise.relative = moved.transpose() * moved;
    }
    result.push_back(std::move(noise));
  }
  return result;
}

void add(std::vector<SourceNoise>& total, const std::vector<SourceNoise>& part) {
  if (total.empty()) {
    total = part;
    return;
  }
  for (std::size_t i = 0; i < total.size(); ++i) add_one(total[i], part[i]);
}

std::vector<SourceNoise> select(const std::vector<SourceNoise>& noise,
                                const std::vector<int>& provisional) {
  std::vector<SourceNoise> result;
  for (const SourceNoise& source : noise) {
    SourceNoise kept;
    kept.column = source.column;
    kept.cell_exponent = source.cell_exponent;
    std::vector<int> from;
    for (std::size_t now = 0; now < provisional.size(); ++now) {
      const auto found =
          std::find(source.dependents.begin(), source.dependents.end(), provisional[now]);
      if (found == source.dependents.end()) continue;
      from.push_back(static_cast<int>(found - source.dependents.begin()));
      kept.dependents.push_back(static_cast<int>(now));
      kept.exponents.push_back(source.exponents[static_cast<std::size_t>(from.back())]);
    }
    if (from.empty()) continue;
    kept.absolute = source.absolute(from, from);
    if (source.relative.size() > 0) kept.relative = source.relative(from, from);
    result.push_back(std::move(kept));
  }
  return result;
}

}  // namespace gramproof::scan
