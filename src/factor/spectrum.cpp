#include "factor/spectrum.hpp"

#include <Spectra/SymEigsSolver.h>

#include <Eigen/QR>
#include <Eigen/SVD>
#include <algorithm>
#include <cmath>
#include <limits>
#include <numeric>

#include "factor/jacobi.hpp"

namespace gramproof::factor {
namespace {

/// Up to this many columns the rotations take a twentieth of a second at most, seven times as long
/// as divide and conquer (tests/bench): a price worth paying for digits that do not depend on
/// units.
constexpr Index jacobi_up_to = 128;

/// x -> (r'r)^-1 x by two triangular solves: its largest eigenvalues are 1 / sigma^2 of the
/// smallest singular values.
struct InverseOperator {
  using Scalar = double;
  const Matrix& r;
  [[nodiscard]] Index rows() const { return r.rows(); }
  [[nodiscard]] Index cols() const { return r.cols(); }
  void perform_op(const double* in, double* out) const {
    Eigen::Map<Vector> y(out, r.rows());
    y = Eigen::Map<const Vector>(in, r.rows());
    r.transpose().triangularView<Eigen::Lower>().solveInPlace(y);
    r.triangularView<Eigen::Upper>().solveInPlace(y);
  }
};

/// x -> r' (r x): two products, never the matrix.
struct ForwardOperator {
  using Scalar = double;
  const Matrix& r;
  [[nodiscard]] Index rows() const { return r.rows(); }
  [[nodiscard]] Index cols() const { return r.cols(); }
  void perform_op(const double* in, double* out) const {
    const Vector product =
        r.triangularView<Eigen::Upper>() * Eigen::Map<const Vector>(in, r.rows());
    Eigen::Map<Vector>(out, r.rows()) = r.transpose().triangularView<Eigen::Lower>() * product;
  }
};

struct Triplets {
  Vector values;
  Matrix vectors;
};

/// Largest eigenpairs, largest first; empty unless all converged.
template <class Operator>
Triplets largest_pairs(Operator op, Index count) {
  const Index order = op.rows();
  const Index width = std::min(order, std::max<Index>(2 * count + 1, count + 20));
  Spectra::SymEigsSolver<Operator> solver(op, count, width);
  const Vector start = Vector::LinSpaced(order, 1.0, 2.0);
  solver.init(start.data());
  const Index converged = solver.compute(Spectra::SortRule::LargestAlge, 1000, 1e-13);
  if (solver.info() != Spectra::CompInfo::Successful || converged < count) return {};
  return {solver.eigenvalues(), solver.eigenvectors()};
}

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

Spectrum extremes(const Matrix& r, Index smallest) {
  const double largest_entry = r.cwiseAbs().maxCoeff();
  const bool invertible =
      (r.diagonal().array().abs() > largest_entry * std::numeric_limits<double>::epsilon()).all();
  if (!invertible || smallest + 1 >= r.cols()) return decompose(r);
  const Triplets top = largest_pairs(ForwardOperator{r}, 1);
  const Triplets bottom = largest_pairs(InverseOperator{r}, smallest);
  if (top.values.size() == 0 || bottom.values.size() == 0) return decompose(r);
  Spectrum result;
  result.complete = false;
  result.values.resize(smallest + 1);
  result.right.resize(r.cols(), smallest + 1);
  result.values[0] = std::sqrt(top.values[0]);
  result.right.col(0) = top.vectors.col(0);
  for (Index i = 0; i < smallest; ++i) {
    // Descending singular values: the largest inverse comes last. |r v| for a unit v is more
    // accurate than 1 / sqrt(eigenvalue).
    const Vector direction = bottom.vectors.col(i);
    result.values[smallest - i] = (r.triangularView<Eigen::Upper>() * direction).norm();
    result.right.col(smallest - i) = direction;
  }
  return result;
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
