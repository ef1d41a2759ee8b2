// Where the sizes in src/factor come from: time of a leaf's fold and of a merge, of one-sided
// rotations against divide and conquer, of the full decomposition against the extreme triplets.
// Medians of repeated runs in ms, on designs of condition number 1e6. Run it on a quiet machine.
#include <fmt/format.h>

#include <Eigen/SVD>
#include <algorithm>
#include <chrono>
#include <cmath>
#include <functional>
#include <vector>

#include "factor/factor.hpp"
#include "factor/jacobi.hpp"
#include "factor/spectrum.hpp"
#include "support/random_numbers.hpp"

namespace {

using gramproof::Index;
using gramproof::Matrix;
using gramproof::Vector;

constexpr Index leaf_rows = 4096;

double median_ms(int runs, const std::function<void()>& work) {
  std::vector<double> times;
  for (int i = 0; i < runs; ++i) {
    const auto start = std::chrono::steady_clock::now();
    work();
    const std::chrono::duration<double, std::milli> passed =
        std::chrono::steady_clock::now() - start;
    times.push_back(passed.count());
  }
  std::nth_element(times.begin(), times.begin() + runs / 2, times.end());
  return times[static_cast<std::size_t>(runs / 2)];
}

Matrix random_block(Index rows, Index columns) {
  gramproof::test::Random random(7);
  Matrix block(rows, columns);
  for (Index j = 0; j < columns; ++j) {
    for (Index i = 0; i < rows; ++i) block(i, j) = random.unit() - 0.5;
  }
  // Each column leans on the first, the last by all but a millionth of itself.
  for (Index j = 1; j < columns; ++j) {
    const double own = std::pow(1e-6, static_cast<double>(j) / static_cast<double>(columns));
    block.col(j) = block.col(0) + own * block.col(j);
  }
  return block;
}

void leaf(Index columns) {
  namespace factor = gramproof::factor;
  const Matrix block = random_block(leaf_rows, columns);
  const int runs = columns > 300 ? 3 : 15;
  factor::Factor folded;
  const double fold = median_ms(runs, [&] { folded = factor::fold(Matrix(block), Vector()); });
  factor::Factor merged;
  const double merge = median_ms(runs, [&] { merged = factor::merge(folded, folded); });
  fmt::print("k {:5}  fold of {} rows {:9.3f}  merge {:9.3f}\n", columns, leaf_rows, fold, merge);
}

void decompositions(Index columns, bool rotations, bool extremes) {
  namespace factor = gramproof::factor;
  const Matrix block = random_block(std::max<Index>(leaf_rows, 2 * columns), columns);
  const Matrix r = factor::unit_length(factor::fold(Matrix(block), Vector()));
  const int runs = columns > 300 ? 3 : 9;
  double sink = 0;
  const double conquer = median_ms(runs, [&] {
    const Eigen::BDCSVD<Matrix> svd(r, Eigen::ComputeFullV);
    sink += svd.singularValues()[0];
  });
  fmt::print("k {:5}  divide and conquer {:9.2f}", columns, conquer);
  if (rotations) {
    fmt::print("  rotations {:9.2f}",
               median_ms(runs, [&] { sink += factor::jacobi_decomposition(r).values[0]; }));
  }
  if (extremes) {
    bool complete = true;
    const double time = median_ms(
        runs, [&] { complete = factor::extremes(r, factor::smallest_computed).complete; });
    fmt::print("  extremes {:9.2f}{}", time, complete ? " (fell back)" : "");
  }
  fmt::print("{}\n", std::isfinite(sink) ? "" : "  not finite");
}

}  // namespace

int main() {
  for (const Index columns : {5, 13, 27, 60, 120, 250, 500, 1000}) leaf(columns);
  for (const Index columns : {5, 13, 27, 60, 120, 180, 250, 350})
    decompositions(columns, true, false);
  for (const Index columns : {500, 800, 1200, 1600}) decompositions(columns, false, true);
}
