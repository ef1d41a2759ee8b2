#include <Eigen/QR>
#include <algorithm>
#include <cmath>
#include <set>

#include "audit/figures.hpp"
#include "design/bind.hpp"
#include "factor/spectrum.hpp"

namespace gramproof::audit {
namespace {

/// Works in coordinates of the factor's rows, where every column of X is a column of R: columns of
/// unit length, ones last.
class FamilySpace {
 public:
  FamilySpace(const factor::Factor& factor, const design::Design& design,
              const std::vector<int>& kept, const std::vector<int>& constant_support)
      : design_(design), columns_(factor::unit_length(factor)), support_(constant_support) {
    const std::set<int> is_kept(kept.begin(), kept.end());
    for (std::size_t f = 0; f < design.families.size(); ++f) {
      std::vector<int> own;
      for (const int column : design.families[f].columns) {
        if (is_kept.contains(column) && !design.columns[static_cast<std::size_t>(column)].constant)
          own.push_back(column);
      }
      own_.push_back(std::move(own));
    }
    // Shares that add up to one, without a constant, differ in nothing but the constant: taking it
    // out would make competitors of columns that are told apart perfectly. It stays in then.
    if (!constant_has_a_home()) support_.clear();
  }

  [[nodiscard]] const std::vector<int>& own(int family) const {
    return own_[static_cast<std::size_t>(family)];
  }
  [[nodiscard]] std::size_t families() const { return own_.size(); }

  [[nodiscard]] bool is_under(int below, int above) const {
    return below != above && design::is_under(design_.families[static_cast<std::size_t>(below)],
                                              design_.families[static_cast<std::size_t>(above)]);
  }

  /// Families with kept columns under F, and those neither under nor above it.
  [[nodiscard]] std::vector<int> columns_under(int family) const {
    return collect([&](int other) { return is_under(other, family); });
  }
  [[nodiscard]] std::vector<int> columns_beside(int family) const {
    return collect([&](int other) {
      return other != family && !is_under(other, family) && !is_under(family, other);
    });
  }

  /// Rank that `columns` add beside `base` and the projected constant: exact, since kept columns
  /// are independent and the constant is a combination of exactly the columns of `support_`.
  [[nodiscard]] Index rank_added(const std::vector<int>& base,
                                 const std::vector<int>& columns) const {
    std::vector<int> both = base;
    both.insert(both.end(), columns.begin(), columns.end());
    const bool gives_constant = !support_.empty() && covers_support(both) && !covers_support(base);
    return static_cast<Index>(columns.size()) - (gives_constant ? 1 : 0);
  }

  /// Orthonormal basis of the constant (where it is in the span) and the columns.
  [[nodiscard]] Matrix base_of(const std::vector<int>& columns) const {
    std::vector<int> all = columns;
    Index rank = static_cast<Index>(columns.size());
    if (!support_.empty()) {
      all.insert(all.begin(), static_cast<int>(columns_.cols()) - 1);
      if (!covers_support(columns)) ++rank;
    }
    return orthonormal(columns_(Eigen::all, all), rank);
  }

  /// Orthonormal basis of what `columns` add beside a base.
  [[nodiscard]] Matrix beside(const Matrix& base, const std::vector<int>& columns,
                              Index rank) const {
    // What is left is not scaled to one length: of a column inside the base's span that is rounding
    // alone, which must come last among the pivots.
    Matrix rest = columns_(Eigen::all, columns);
    project_out(base, rest);
    return orthonormal(rest, rank);
  }

  /// Twice is enough (Kahan; Parlett 1980): after the second time what is left is orthogonal to
  /// working precision.
  static void project_out(const Matrix& base, Matrix& columns) {
    if (base.cols() == 0) return;
    for (int time = 0; time < 2; ++time) columns -= base * (base.transpose() * columns);
  }

 private:
  template <class Wanted>
  [[nodiscard]] std::vector<int> collect(Wanted&& wanted) const {
    std::vector<int> columns;
    for (std::size_t f = 0; f < own_.size(); ++f) {
      if (wanted(static_cast<int>(f)))
        columns.insert(columns.end(), own_[f].begin(), own_[f].end());
    }
    return columns;
  }

  [[nodiscard]] bool covers_support(const std::vector<int>& columns) const {
    return std::all_of(support_.begin(), support_.end(), [&](int column) {
      return std::find(columns.begin(), columns.end(), column) != columns.end();
    });
  }

  /// The constant is a column, or lies in the span of one family and those under it.
  [[nodiscard]] bool constant_has_a_home() const {
    if (std::any_of(support_.begin(), support_.end(), [&](int column) {
          return design_.columns[static_cast<std::size_t>(column)].constant;
        })) {
      return true;
    }
    for (std::size_t f = 0; f < own_.size(); ++f) {
      std::vector<int> columns = columns_under(static_cast<int>(f));
      columns.insert(columns.end(), own_[f].begin(), own_[f].end());
      if (covers_support(columns)) return true;
    }
    return false;
  }

  static Matrix orthonormal(const Matrix& columns, Index rank) {
    if (rank == 0) return Matrix(columns.rows(), 0);
    const Eigen::ColPivHouseholderQR<Matrix> decomposition(columns);
    return decomposition.householderQ() * Matrix::Identity(columns.rows(), rank);
  }

  const design::Design& design_;
  Matrix columns_;
  std::vector<int> support_;
  std::vector<std::vector<int>> own_;
};

/// Product of 1 / (1 - rho^2) over the canonical correlations with `others`; 1 - rho^2 are squared
/// sines, the singular values of what `basis` keeps beside `others`: no cancellation near rho = 1.
double generalised_vif(const Matrix& basis, const Matrix& others) {
  Matrix rest = basis;
  FamilySpace::project_out(others, rest);
  const Eigen::HouseholderQR<Matrix> decomposition(rest);
  const Matrix r = decomposition.matrixQR().topRows(rest.cols());
  return std::pow(10.0, -2 * factor::log10_abs_determinant(r));
}

/// Families with something of their own, small source sets first.
std::vector<int> ordered_families(const FamilySpace& space, const design::Design& design) {
  std::vector<int> order;
  for (std::size_t f = 0; f < space.families(); ++f) {
    if (!space.own(static_cast<int>(f)).empty()) order.push_back(static_cast<int>(f));
  }
  std::stable_sort(order.begin(), order.end(), [&](int a, int b) {
    return design.families[static_cast<std::size_t>(a)].sources.size() <
           design.families[static_cast<std::size_t>(b)].sources.size();
  });
  return order;
}

void fill_indices(const Matrix& bases, const std::vector<Index>& family_of_column,
                  BetweenFamilies& result) {
  const Eigen::HouseholderQR<Matrix> decomposition(bases);
  const Index columns = bases.cols();
  Matrix r = Matrix::Zero(columns, columns);
  const Index height = std::min(bases.rows(), columns);
  r.topRows(height) = decomposition.matrixQR().topRows(height).triangularView<Eigen::Upper>();
  const factor::Spectrum spectrum = factor::spectrum(r);
  const Index count = spectrum.values.size();
  const double smallest = spectrum.values[count - 1];
  result.indices.resize(count);
  result.proportions = Matrix::Zero(count, static_cast<Index>(result.families.size()));
  for (Index i = 0; i < count; ++i) {
    const double value = spectrum.values[i];
    result.indices[i] = spectrum.values[0] / value;
    const double weight = value > 0 ? smallest / value : 1.0;
    for (Index j = 0; j < columns; ++j) {
      const double part = weight * spectrum.right(j, i);
      result.proportions(i, family_of_column[static_cast<std::size_t>(j)]) += part * part;
    }
  }
  for (Index f = 0; f < result.proportions.cols(); ++f) {
    const double total = result.proportions.col(f).sum();
    if (total > 0) result.proportions.col(f) /= total;
  }
}

}  // namespace

BetweenFamilies between_families(const factor::Factor& factor, const design::Design& design,
                                 const std::vector<int>& kept,
                                 const std::vector<int>& constant_support) {
  const FamilySpace space(factor, design, kept, constant_support);
  BetweenFamilies result;
  std::vector<Matrix> blocks;
  for (const int family : ordered_families(space, design)) {
    const std::vector<int> under = space.columns_under(family);
    const Index dimensions = space.rank_added(under, space.own(family));
    if (dimensions == 0) continue;
    const Matrix base = space.base_of(under);
    Matrix basis = space.beside(base, space.own(family), dimensions);
    FamilyInflation inflation{family, static_cast<int>(dimensions), 1, 1};
    const std::vector<int> others = space.columns_beside(family);
    if (const Index rank = space.rank_added(under, others); rank > 0) {
      inflation.generalised_vif = generalised_vif(basis, space.beside(base, others, rank));
      inflation.per_dimension =
          std::pow(inflation.generalised_vif, 0.5 / static_cast<double>(dimensions));
    }
    result.families.push_back(family);
    result.inflation.push_back(inflation);
    blocks.push_back(std::move(basis));
  }
  if (blocks.empty()) return result;
  Index width = 0;
  for (const Matrix& block : blocks) width += block.cols();
  Matrix bases(blocks.front().rows(), width);
  std::vector<Index> family_of_column;
  Index at = 0;
  for (std::size_t f = 0; f < blocks.size(); ++f) {
    bases.middleCols(at, blocks[f].cols()) = blocks[f];
    at += blocks[f].cols();
    family_of_column.insert(family_of_column.end(), static_cast<std::size_t>(blocks[f].cols()),
                            static_cast<Index>(f));
  }
  fill_indices(bases, family_of_column, result);
  return result;
}

}  // namespace gramproof::audit
