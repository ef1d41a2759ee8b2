#include "factor/jacobi.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>
#include <vector>

namespace gramproof::factor {
namespace {

/// Sweeps after which rounding alone can keep a pair moving; in practice six to ten suffice.
constexpr int most_sweeps = 40;

/// Below this ratio of lengths the rotation is a projection to far more digits than a double has,
/// and the ratio's reciprocal is still far from overflow.
constexpr double far_apart = 1e-120;

struct Rotation {
  double cosine = 1;
  double sine = 0;
};

/// The rotation that makes two columns of lengths p >= q orthogonal; `correlation` is the cosine of
/// the angle between them. Only ratios of lengths enter.
Rotation rotation_of(double p, double q, double correlation) {
  const double zeta = (q / p - p / q) / (2 * correlation);
  const double magnitude = 1 / (std::abs(zeta) + std::hypot(1.0, zeta));
  const double tangent = zeta < 0 ? -magnitude : magnitude;
  const double cosine = 1 / std::hypot(1.0, tangent);
  return {cosine, cosine * tangent};
}

void rotate(Matrix& matrix, Index p, Index q, const Rotation& turn) {
  const Vector first = matrix.col(p);
  matrix.col(p) = turn.cosine * first - turn.sine * matrix.col(q);
  matrix.col(q) = turn.sine * first + turn.cosine * matrix.col(q);
}

/// What the rotations work on: `work` = matrix * `right`, and the lengths of its columns.
struct State {
  Matrix work, right;
  Vector lengths;

  void measure(Index column) { lengths[column] = work.col(column).stableNorm(); }
};

/// Makes columns p < q orthogonal and puts the longer one first; false if both were so already. An
/// exchange counts: the rest of the sweep then meets other pairs than those it set out for, and a
/// sweep that only exchanged has not seen all.
bool turn_pair(State& state, Index p, Index q, double tolerance) {
  const bool exchange = state.lengths[q] > state.lengths[p];
  if (exchange) {
    state.work.col(p).swap(state.work.col(q));
    state.right.col(p).swap(state.right.col(q));
    std::swap(state.lengths[p], state.lengths[q]);
  }
  const double longer = state.lengths[p];
  const double shorter = state.lengths[q];
  if (shorter == 0) return exchange;
  const double correlation = (state.work.col(p) / longer).dot(state.work.col(q) / shorter);
  if (!(std::abs(correlation) > tolerance)) return exchange;
  if (shorter < far_apart * longer) {
    // (p / longer) times its share: sine itself may be too small for a double.
    state.work.col(q) -= (correlation * shorter) * (state.work.col(p) / longer);
    rotate(state.right, p, q, {1.0, -correlation * (shorter / longer)});
  } else {
    const Rotation turn = rotation_of(longer, shorter, correlation);
    rotate(state.work, p, q, turn);
    rotate(state.right, p, q, turn);
    state.measure(p);
  }
  state.measure(q);
  return true;
}

/// One pass over all pairs; true if some pair was turned or exchanged.
bool sweep(State& state, double tolerance) {
  bool turned = false;
  for (Index p = 0; p + 1 < state.work.cols(); ++p) {
    for (Index q = p + 1; q < state.work.cols(); ++q) {
      if (turn_pair(state, p, q, tolerance)) turned = true;
    }
  }
  return turned;
}

}  // namespace

Spectrum jacobi_decomposition(const Matrix& matrix) {
  const Index columns = matrix.cols();
  // Columns as near to orthogonal as their lengths and k roundings let them be told.
  const double tolerance =
      2 * unit_roundoff * std::sqrt(static_cast<double>(std::max<Index>(columns, 1)));
  State state{matrix, Matrix::Identity(columns, columns), Vector(columns)};
  for (Index j = 0; j < columns; ++j) state.measure(j);
  for (int count = 0; count < most_sweeps && sweep(state, tolerance); ++count) {
  }
  std::vector<Index> order(static_cast<std::size_t>(columns));
  std::iota(order.begin(), order.end(), Index{0});
  std::stable_sort(order.begin(), order.end(),
                   [&](Index a, Index b) { return state.lengths[a] > state.lengths[b]; });
  Spectrum result;
  result.values = state.lengths(order);
  result.right = state.right(Eigen::all, order);
  return result;
}

}  // namespace gramproof::factor
