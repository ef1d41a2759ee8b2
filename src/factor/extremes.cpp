// src/factor/extremes.cpp - the largest and the smallest singular triplets of a wide factor.
#include <Spectra/SymEigsSolver.h>

#include <algorithm>
#include <cmath>
#include <functional>
#include <limits>

#include "factor/spectrum.hpp"

namespace gramproof::factor {
namespace {

/// A symmetric product. One type for both, so that the solver is compiled once.
struct Operator {
  using Scalar = double;
  Index order;
  std::function<void(const double* in, double* out)> product;
  [[nodiscard]] Index rows() const { return order; }
  [[nodiscard]] Index cols() const { return order; }
  void perform_op(const double* in, double* out) const { product(in, out); }
};

/// x -> (r'r)^-1 x by two triangular solves: its largest eigenvalues are 1 / sigma^2 of the
/// smallest singular values.
Operator inverse_operator(const Matrix& r) {
  return {r.rows(), [&r](const double* in, double* out) {
            Eigen::Map<Vector> y(out, r.rows());
            y = Eigen::Map<const Vector>(in, r.rows());
            r.transpose().triangularView<Eigen::Lower>().solveInPlace(y);
            r.triangularView<Eigen::Upper>().solveInPlace(y);
          }};
}

/// x -> r' (r x): two products, never the matrix.
Operator forward_operator(const Matrix& r) {
  return {r.rows(), [&r](const double* in, double* out) {
            const Vector product =
                r.triangularView<Eigen::Upper>() * Eigen::Map<const Vector>(in, r.rows());
            Eigen::Map<Vector>(out, r.rows()) =
                r.transpose().triangularView<Eigen::Lower>() * product;
          }};
}

struct Triplets {
  Vector values;
  Matrix vectors;
};

/// Largest eigenpairs, largest first; empty unless all converged.
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

}  // namespace

Spectrum extremes(const Matrix& r, Index smallest) {
  const double largest_entry = r.cwiseAbs().maxCoeff();
  const bool invertible =
      (r.diagonal().array().abs() > largest_entry * std::numeric_limits<double>::epsilon()).all();
  if (!invertible || smallest + 1 >= r.cols()) return decompose(r);
  const Triplets top = largest_pairs(forward_operator(r), 1);
  const Triplets bottom = largest_pairs(inverse_operator(r), smallest);
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

}  // namespace gramproof::factor
