// src/exact/surely_regular.cpp
#include "exact/surely_regular.hpp"

#include <Eigen/LU>
#include <cmath>

namespace gramproof::exact {
namespace {

/// Rows whose entries are all this far below the largest of their columns (2^-100) are refused:
/// what scaling loses to underflow, 2^-1074, would no longer be negligible in them.
constexpr int smallest_exponent = -100;

/// Multiplies columns, then rows, by powers of two so that the largest entry of each is between
/// 1/2 and 1, which changes nothing that is asked. False where a column or row is zero or refused.
bool scale(Matrix& middle, Matrix& radius) {
  for (Index j = 0; j < middle.cols(); ++j) {
    int exponent = 0;
    if (std::frexp(middle.col(j).cwiseAbs().maxCoeff(), &exponent) == 0) return false;
    for (Index i = 0; i < middle.rows(); ++i) {
      middle(i, j) = std::ldexp(middle(i, j), -exponent);
      radius(i, j) = std::ldexp(radius(i, j), -exponent);
    }
  }
  for (Index i = 0; i < middle.rows(); ++i) {
    int exponent = 0;
    const double largest = std::frexp(middle.row(i).cwiseAbs().maxCoeff(), &exponent);
    if (largest == 0 || exponent < smallest_exponent) return false;
    middle.row(i) *= std::ldexp(1.0, -exponent);
    radius.row(i) *= std::ldexp(1.0, -exponent);
  }
  return true;
}

}  // namespace

bool surely_regular(const Matrix& middle, const Matrix& radius) {
  const Index n = middle.rows();
  if (n == 0) return true;
  Matrix scaled = middle, width = radius;
  if (!scaled.allFinite() || !width.allFinite() || !scale(scaled, width)) return false;
  // What scaling rounds or loses to underflow is below 2^-900 for entries of size 1.
  width.array() += 0x1p-900;
  const Matrix inverse = scaled.partialPivLu().inverse();
  if (!inverse.allFinite()) return false;
  // Row sums of |I - C A| <= |I - fl(C M)| + g |C| |M| + |C| width, g = gamma(n) of [H02], taken
  // four times as large, which covers the rounding of the sums below; underflow is covered by the
  // width.
  Matrix product = inverse * scaled;
  product.diagonal().array() -= 1;
  const double gamma = 4 * static_cast<double>(n + 8) * unit_roundoff;
  const Vector ones = Vector::Ones(n);
  const Vector inner = gamma * (scaled.cwiseAbs() * ones) + width * ones;
  const Vector sums = product.cwiseAbs() * ones + inverse.cwiseAbs() * inner;
  // The sums themselves are rounded by less than 1 part in 10.
  return sums.allFinite() && sums.maxCoeff() < 0.9;
}

}  // namespace gramproof::exact
