// tests/support/folded.hpp - the factor of a matrix as the scan makes it: leaves in a tree, a
// column of ones last.
#pragma once

#include <algorithm>
#include <utility>

#include "factor/factor.hpp"

namespace gramproof::test {

/// `leaf_rows` small, so that merges take part in every figure.
inline factor::Factor folded(const Matrix& x, const Vector& weights = Vector(),
                             Index leaf_rows = 16) {
  factor::MergeTree tree;
  for (Index at = 0; at < x.rows(); at += leaf_rows) {
    const Index rows = std::min(leaf_rows, x.rows() - at);
    tree.add(factor::fold(Matrix(x.middleRows(at, rows)),
                          weights.size() > 0 ? Vector(weights.segment(at, rows)) : Vector()));
  }
  return tree.finish(x.cols());
}

inline factor::Factor folded_with_ones(const Matrix& x, const Vector& weights = Vector(),
                                       Index leaf_rows = 16) {
  Matrix extended(x.rows(), x.cols() + 1);
  extended << x, Vector::Ones(x.rows());
  return folded(extended, weights, leaf_rows);
}

}  // namespace gramproof::test
