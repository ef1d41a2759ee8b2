#include <Eigen/Eigenvalues>
#include <algorithm>
#include <cmath>

#include "audit/figures.hpp"
#include "factor/spectrum.hpp"

namespace gramproof::audit {
namespace {

/// Standard deviation of an error spread evenly over one step.
const double deviation_of_step = 1 / std::sqrt(12.0);

/// Ratios worth naming the columns of: from 3 on the rounding is less than a ninth.
constexpr double close_below = 3;
constexpr Index most_close = 10;

bool is_whole(const Step& step) {
  return step.how == Step::How::whole;
}

/// The kept columns: their unit-length factor and what turns design indices into kept ones.
struct Kept {
  factor::Factor factor;
  Matrix scaled;
  Vector lengths;             ///< mantissas; the exponents are the factor's
  std::vector<int> position;  ///< design column -> index among the kept, or -1

  Kept(const factor::Factor& whole, const std::vector<int>& kept)
      : factor(factor::select(whole, kept)),
        scaled(factor::unit_length(factor)),
        lengths(factor.r.colwise().norm()) {
    position.assign(static_cast<std::size_t>(whole.r.cols()), -1);
    for (std::size_t i = 0; i < kept.size(); ++i)
      position[static_cast<std::size_t>(kept[i])] = static_cast<int>(i);
  }
};

/// Adds sd^2 g g' of one source, in units of the columns' lengths. One factor sd a side keeps
/// squares of 1e-300 away.
void add_source(const scan::SourceNoise& source, const Step& step, const Kept& kept,
                Matrix& noise) {
  const bool relative = step.how == Step::How::binary;
  const Matrix& sums = relative ? source.relative : source.absolute;
  const double deviation = step.step * deviation_of_step;
  std::vector<double> scale(source.dependents.size(), 0.0);
  for (std::size_t a = 0; a < scale.size(); ++a) {
    const int at = kept.position[static_cast<std::size_t>(source.dependents[a])];
    if (at < 0) continue;
    const int exponent = source.exponents[a] + (relative ? source.cell_exponent : 0) -
                         kept.factor.exponents[static_cast<std::size_t>(at)];
    const double length = kept.lengths[at];
    if (length > 0) scale[a] = std::ldexp(deviation, exponent) / length;
  }
  for (std::size_t a = 0; a < scale.size(); ++a) {
    for (std::size_t b = 0; b < scale.size(); ++b) {
      if (scale[a] == 0 || scale[b] == 0) continue;
      noise(kept.position[static_cast<std::size_t>(source.dependents[a])],
            kept.position[static_cast<std::size_t>(source.dependents[b])]) +=
          scale[a] * sums(static_cast<Index>(a), static_cast<Index>(b)) * scale[b];
    }
  }
}

/// N = sum of the sources' errors; `round_whole`: whole numbers are read as rounded to their step.
Matrix noise_of(const scan::Digest& digest, const std::vector<Step>& steps, const Kept& kept,
                bool round_whole) {
  Matrix noise = Matrix::Zero(kept.scaled.cols(), kept.scaled.cols());
  for (std::size_t s = 0; s < digest.noise.size(); ++s) {
    if (steps[s].step == 0 || (is_whole(steps[s]) && !round_whole)) continue;
    add_source(digest.noise[s], steps[s], kept, noise);
  }
  return noise;
}

/// L with N = L'L, a row a direction that carries noise. The noisy columns are brought to unit
/// noise first, so that a small step beside a large one keeps its digits.
Matrix root_of(const Matrix& noise) {
  std::vector<Index> noisy;
  for (Index j = 0; j < noise.cols(); ++j) {
    if (noise(j, j) > 0) noisy.push_back(j);
  }
  const auto count = static_cast<Index>(noisy.size());
  if (count == 0) return Matrix(0, noise.cols());
  const Vector sizes = noise.diagonal()(noisy).cwiseSqrt();
  const Matrix correlation =
      sizes.cwiseInverse().asDiagonal() * noise(noisy, noisy) * sizes.cwiseInverse().asDiagonal();
  const Eigen::SelfAdjointEigenSolver<Matrix> solver(correlation);
  // N comes from sums of products, rounded to some tens of k u: a direction below that is taken to
  // carry no noise. Its square root, 1e-7, would else pass for noise in a near-singular direction.
  const double floor = 64 * static_cast<double>(count) * unit_roundoff;
  const Vector values =
      solver.eigenvalues().unaryExpr([floor](double v) { return v > floor ? std::sqrt(v) : 0.0; });
  const Matrix root = values.asDiagonal() * solver.eigenvectors().transpose() * sizes.asDiagonal();
  Matrix result = Matrix::Zero(count, noise.cols());
  result(Eigen::all, noisy) = root;
  return result;
}

struct Distances {
  Vector ratios;
  std::vector<NoisyDirection> close;
};

/// 1 / non-zero singular values of L R^-1, smallest first; for the close ones
/// the direction b = R^-1 v.
Distances distances(const Matrix& root, const Kept& kept, const std::vector<int>& names) {
  Distances result;
  if (root.rows() == 0) return result;
  const Matrix carried =
      kept.scaled.transpose().triangularView<Eigen::Lower>().solve(root.transpose()).transpose();
  if (!carried.allFinite()) {
    result.ratios = Vector::Zero(1);
    return result;
  }
  Matrix square = Matrix::Zero(carried.cols(), carried.cols());
  square.topRows(carried.rows()) = carried;
  const factor::Spectrum spectrum = factor::decompose(square);
  const Vector& values = spectrum.values;
  const double floor = static_cast<double>(kept.scaled.cols()) * unit_roundoff * values[0];
  Index count = 0;
  while (count < values.size() && values[count] > floor) ++count;
  result.ratios = values.head(count).cwiseInverse();
  for (Index i = 0; i < count && result.ratios[i] < close_below && i < most_close; ++i) {
    NoisyDirection direction{result.ratios[i], {}};
    const Vector b = kept.scaled.triangularView<Eigen::Upper>().solve(spectrum.right.col(i));
    const double largest = b.cwiseAbs().maxCoeff();
    for (Index j = 0; j < b.size(); ++j) {
      if (std::abs(b[j]) >= 0.1 * largest)
        direction.columns.push_back(names[static_cast<std::size_t>(j)]);
    }
    result.close.push_back(std::move(direction));
  }
  return result;
}

/// [(R'R)^-1 N]_jj where column j carries noise (Davies & Hutton 1975).
std::vector<std::optional<double>> attenuation_of(const Matrix& noise, const Matrix& scaled) {
  const Matrix inverse = factor::triangular_inverse(scaled);
  const Matrix carried = inverse.transpose() * noise;
  std::vector<std::optional<double>> result(static_cast<std::size_t>(noise.cols()));
  for (Index j = 0; j < noise.cols(); ++j) {
    if (noise(j, j) > 0) result[static_cast<std::size_t>(j)] = inverse.row(j).dot(carried.col(j));
  }
  return result;
}

}  // namespace

Recording recording_of(const scan::Digest& digest, const std::vector<int>& kept,
                       std::vector<Step> steps) {
  Recording result;
  const Kept own(digest.factor, kept);
  result.whole_numbers_matter = std::any_of(steps.begin(), steps.end(), is_whole);
  const Matrix noise = noise_of(digest, steps, own, false);
  Distances exact = distances(root_of(noise), own, kept);
  result.distance_ratios = std::move(exact.ratios);
  result.close = std::move(exact.close);
  if (result.whole_numbers_matter) {
    Distances rounded = distances(root_of(noise_of(digest, steps, own, true)), own, kept);
    result.distance_ratios_whole_rounded = std::move(rounded.ratios);
    result.close_whole_rounded = std::move(rounded.close);
  }
  result.attenuation = attenuation_of(noise, own.scaled);
  result.steps = std::move(steps);
  return result;
}

}  // namespace gramproof::audit
