#include "factor/factor.hpp"

#include <Eigen/QR>
#include <algorithm>
#include <cmath>
#include <utility>

namespace gramproof::factor {
namespace {

/// Exponent e with max|v| < 2^e; 0 for the zero vector.
int exponent_above(double largest) {
  if (!(largest > 0)) return 0;
  int exponent = 0;
  std::frexp(largest, &exponent);
  return exponent;
}

/// Divides by the power of two just above the largest magnitude and returns its exponent.
int scale_to_one(Eigen::Ref<Vector> column) {
  const int exponent = exponent_above(column.cwiseAbs().maxCoeff());
  column *= std::ldexp(1.0, -exponent);
  return exponent;
}

/// Each row has a free sign: the diagonal is made non-negative, so that equal data give equal
/// factors.
void make_diagonal_positive(Matrix& r) {
  for (Index i = 0; i < r.rows(); ++i) {
    if (std::signbit(r(i, i))) r.row(i).tail(r.cols() - i) *= -1.0;
  }
}

/// Upper triangular factor, k x k, of any m x k matrix.
Matrix triangularise(Matrix&& rows) {
  const Index columns = rows.cols();
  Matrix r = Matrix::Zero(columns, columns);
  if (rows.rows() > 0) {
    const Eigen::HouseholderQR<Eigen::Ref<Matrix>> decomposition(rows);
    const Index height = std::min(rows.rows(), columns);
    r.topRows(height) = rows.topRows(height).triangularView<Eigen::Upper>();
  }
  make_diagonal_positive(r);
  return r;
}

/// Brings a factor's columns to larger exponents; entries can only underflow.
void raise_exponents(Factor& factor, const std::vector<int>& exponents) {
  for (std::size_t j = 0; j < exponents.size(); ++j) {
    if (factor.exponents[j] == exponents[j]) continue;
    const int shift = factor.exponents[j] - exponents[j];
    auto column = factor.r.col(static_cast<Index>(j));
    column = column.unaryExpr([shift](double value) { return std::ldexp(value, shift); }).eval();
  }
  factor.exponents = exponents;
}

/// Householder reflections that take `bottom` into `top`, both upper triangular: column j meets
/// rows j of the top and 0..j of the bottom only, a third of the work of a full QR of the stack.
void fold_triangle(Matrix& top, Matrix& bottom) {
  for (Index j = 0; j < top.cols(); ++j) {
    auto below = bottom.col(j).head(j + 1);
    const double length = below.norm();
    if (length == 0) continue;
    const double corner = top(j, j);
    const double reflected = corner > 0 ? -std::hypot(corner, length) : std::hypot(corner, length);
    const double tau = (reflected - corner) / reflected;
    const Vector direction = below / (corner - reflected);
    top(j, j) = reflected;
    for (Index c = j + 1; c < top.cols(); ++c) {
      auto column = bottom.col(c).head(j + 1);
      const double along = tau * (top(j, c) + direction.dot(column));
      top(j, c) -= along;
      column -= along * direction;
    }
  }
}

}  // namespace

Factor fold(Matrix&& block, const Vector& weights) {
  Factor factor;
  factor.rows = block.rows();
  factor.exponents.assign(static_cast<std::size_t>(block.cols()), 0);
  if (block.rows() == 0) {
    factor.r = Matrix::Zero(block.cols(), block.cols());
    return factor;
  }
  // An even power of two out of the weights leaves a power of two out of their roots.
  const int weight_exponent = weights.size() > 0 ? (exponent_above(weights.maxCoeff()) + 1) / 2 : 0;
  Vector roots;
  if (weights.size() > 0) roots = (weights * std::ldexp(1.0, -2 * weight_exponent)).cwiseSqrt();
  for (Index j = 0; j < block.cols(); ++j) {
    int exponent = scale_to_one(block.col(j));
    if (roots.size() > 0) {
      block.col(j).array() *= roots.array();
      // A column that lives on rows of tiny weight only would else be squared into underflow.
      exponent += weight_exponent + scale_to_one(block.col(j));
    }
    factor.exponents[static_cast<std::size_t>(j)] = exponent;
  }
  factor.r = triangularise(std::move(block));
  return factor;
}

Factor merge(const Factor& top, const Factor& bottom) {
  Factor result = top;
  Factor other = bottom;
  std::vector<int> common(top.exponents.size());
  for (std::size_t j = 0; j < common.size(); ++j) {
    const auto at = static_cast<Index>(j);
    // A column that is zero so far has no size: it must not drag the other's entries to its
    // exponent.
    if (top.r.col(at).isZero(0.0)) {
      common[j] = bottom.exponents[j];
    } else if (bottom.r.col(at).isZero(0.0)) {
      common[j] = top.exponents[j];
    } else {
      common[j] = std::max(top.exponents[j], bottom.exponents[j]);
    }
  }
  raise_exponents(result, common);
  raise_exponents(other, common);
  fold_triangle(result.r, other.r);
  make_diagonal_positive(result.r);
  result.rows = top.rows + bottom.rows;
  return result;
}

void MergeTree::add(Factor leaf) {
  nodes_.push_back({std::move(leaf), 0});
  while (nodes_.size() > 1 && nodes_[nodes_.size() - 2].height == nodes_.back().height) {
    Node last = std::move(nodes_.back());
    nodes_.pop_back();
    nodes_.back().factor = merge(nodes_.back().factor, last.factor);
    ++nodes_.back().height;
  }
}

Factor MergeTree::finish(Index columns) const {
  if (nodes_.empty()) return fold(Matrix(0, columns), Vector());
  Factor result = nodes_.back().factor;
  for (std::size_t i = nodes_.size() - 1; i-- > 0;) result = merge(nodes_[i].factor, result);
  return result;
}

Factor select(const Factor& factor, const std::vector<int>& columns) {
  Factor result;
  result.rows = factor.rows;
  for (const int column : columns)
    result.exponents.push_back(factor.exponents[static_cast<std::size_t>(column)]);
  result.r = triangularise(factor.r(Eigen::all, columns));
  return result;
}

Vector column_lengths(const Factor& factor) {
  Vector lengths = factor.r.colwise().norm();
  for (Index j = 0; j < lengths.size(); ++j) {
    lengths[j] = std::ldexp(lengths[j], factor.exponents[static_cast<std::size_t>(j)]);
  }
  return lengths;
}

Matrix unit_length(const Factor& factor) {
  Matrix scaled = factor.r;
  for (Index j = 0; j < scaled.cols(); ++j) {
    const double length = scaled.col(j).norm();
    if (length > 0) scaled.col(j) /= length;
  }
  return scaled;
}

}  // namespace gramproof::factor
