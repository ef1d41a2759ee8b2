#include "factor/spectrum.hpp"

#include <Eigen/QR>
#include <Eigen/SVD>

#include "factor/jacobi.hpp"

namespace gramproof::factor {
namespace {

/// Up to this many columns the rotations take a twentieth of a second at most, seven times as long
/// as divide and conquer (tests/bench): a price worth paying for digits that do not depend on
/// units.
constexpr Index jacobi_up_to = 128;

Spectrum divide_and_conquer(const Matrix& matrix) {
  const Eigen::BDCSVD<Matrix> svd(matrix, Eigen::ComputeFullV);
  Spectrum result{svd.singularValues(), svd.matrixV(), true};
  // Eigen 3.4's divide and conquer is known to give NaN on rare inputs.
  if (result.values.allFinite() && result.right.allFinite()) return result;
  return jacobi_decomposition(matrix);
}

}  // namespace

Spectrum decompose(const Matrix& matrix) {
  return matrix.cols() <= jacobi_up_to ? jacobi_decomposition(matrix) : divide_and_conquer(matrix);
}

Spectrum spectrum(const Matrix& r) {
  return r.cols() > extremes_beyond ? extremes(r, smallest_computed) : decompose(r);
}

double log10_abs_determinant(const Matrix& r) {
  return r.diagonal().cwiseAbs().array().log10().sum();
}

Matrix triangular_inverse(const Matrix& r) {
  return r.triangularView<Eigen::Upper>().solve(Matrix::Identity(r.rows(), r.cols()));
}

std::vector<int> pivot_order(const Matrix& r) {
  const Eigen::ColPivHouseholderQR<Matrix> decomposition(r);
  const auto& indices = decomposition.colsPermutation().indices();
  return {indices.data(), indices.data() + indices.size()};
}

}  // namespace gramproof::factor
