#include <Eigen/QR>
#include <algorithm>
#include <cmath>
#include <limits>
#include <set>

#include "audit/figures.hpp"
#include "design/bind.hpp"
#include "factor/spectrum.hpp"

namespace gramproof::audit {
namespace {

using Columns = std::vector<int>;

void append(Columns& to, const Columns& more) {
  to.insert(to.end(), more.begin(), more.end());
}

bool covers(const Columns& columns, const Columns& wanted) {
  return std::all_of(wanted.begin(), wanted.end(), [&](int column) {
    return std::find(columns.begin(), columns.end(), column) != columns.end();
  });
}

/// Works in coordinates of the factor's rows, where every column of X is a column of R: columns of
/// unit length, ones last. Where the constant is projected out, `base` is the column of ones and
/// the family that holds the constant is short of one column, which the ones stand for: all columns
/// named here are then linearly independent, and a family's dimension is their number.
class FamilySpace {
 public:
  FamilySpace(const factor::Factor& factor, const design::Design& design, const Columns& kept,
              const Columns& constant_support)
      : design_(design), columns_(factor::unit_length(factor)) {
    const std::set<int> is_kept(kept.begin(), kept.end());
    for (const design::Family& family : design.families) {
      Columns own;
      for (const int column : family.columns) {
        if (is_kept.contains(column) && !is_constant(column)) own.push_back(column);
      }
      own_.push_back(std::move(own));
    }
    if (!constant_support.empty()) project_constant_out(constant_support);
  }

  [[nodiscard]] const Matrix& columns() const { return columns_; }
  [[nodiscard]] const Columns& base() const { return base_; }
  [[nodiscard]] const Columns& own(int family) const {
    return own_[static_cast<std::size_t>(family)];
  }
  [[nodiscard]] int families() const { return static_cast<int>(own_.size()); }

  [[nodiscard]] bool is_under(int below, int above) const {
    return below != above && design::is_under(design_.families[static_cast<std::size_t>(below)],
                                              design_.families[static_cast<std::size_t>(above)]);
  }

  [[nodiscard]] Columns under(int family) const {
    return collect([&](int other) { return is_under(other, family); });
  }
  [[nodiscard]] Columns above(int family) const {
    return collect([&](int other) { return is_under(family, other); });
  }
  /// Neither under nor above the family.
  [[nodiscard]] Columns beside(int family) const {
    return collect([&](int other) {
      return other != family && !is_under(other, family) && !is_under(family, other);
    });
  }

 private:
  [[nodiscard]] bool is_constant(int column) const {
    return design_.columns[static_cast<std::size_t>(column)].constant;
  }

  template <class Wanted>
  [[nodiscard]] Columns collect(Wanted&& wanted) const {
    Columns columns;
    for (int f = 0; f < families(); ++f) {
      if (wanted(f)) append(columns, own(f));
    }
    return columns;
  }

  /// The constant is a column, or lies in the span of one family and those under it. Shares that
  /// add up to one, without a constant, have no such home: they differ in nothing but the constant,
  /// and taking it out of them would make competitors of columns that are told apart perfectly. It
  /// stays in them then, and goes out of the families that have no part in it.
  void project_constant_out(const Columns& support) {
    const Columns ones = {static_cast<int>(columns_.cols()) - 1};
    if (std::any_of(support.begin(), support.end(), [&](int c) { return is_constant(c); })) {
      base_ = ones;
      return;
    }
    for (int f = 0; f < families(); ++f) {
      Columns columns = under(f);
      if (covers(columns, support)) continue;
      append(columns, own(f));
      if (!covers(columns, support)) continue;
      base_ = ones;
      std::erase(own_[static_cast<std::size_t>(f)], largest_part(support, own(f)));
      return;
    }
    centre_families_without(support);
  }

  /// What the families without a part in the constant span together with those that make it stays
  /// the same.
  void centre_families_without(const Columns& support) {
    const Vector ones = columns_.col(columns_.cols() - 1);
    for (const Columns& own : own_) {
      if (std::any_of(own.begin(), own.end(), [&](int c) { return covers(support, {c}); }))
        continue;
      for (const int column : own)
        columns_.col(column) -= ones * (ones.dot(columns_.col(column)) / ones.squaredNorm());
    }
  }

  /// The column of both lists with the largest part in the constant.
  [[nodiscard]] int largest_part(const Columns& support, const Columns& among) const {
    const Eigen::HouseholderQR<Matrix> decomposition(columns_(Eigen::all, support));
    const Vector parts = decomposition.solve(columns_.col(columns_.cols() - 1)).cwiseAbs();
    int result = -1;
    double largest = -1;
    for (std::size_t i = 0; i < support.size(); ++i) {
      const double part = parts[static_cast<Index>(i)];
      if (part <= largest || !covers(among, {support[i]})) continue;
      largest = part;
      result = support[i];
    }
    return result;
  }

  const design::Design& design_;
  Matrix columns_;
  Columns base_;
  std::vector<Columns> own_;
};

/// What the last columns keep beside those before them: an orthonormal basis, and the logarithm of
/// the volume they span.
struct Remainder {
  Matrix basis;
  double log10_volume = 0;
};

Remainder remainder(const Matrix& columns, const Columns& before, const Columns& last) {
  Columns all = before;
  append(all, last);
  const auto count = static_cast<Index>(all.size());
  const auto width = static_cast<Index>(last.size());
  const Eigen::HouseholderQR<Matrix> decomposition(columns(Eigen::all, all));
  Remainder result;
  result.basis =
      decomposition.householderQ() * Matrix::Identity(columns.rows(), count).rightCols(width);
  result.log10_volume = factor::log10_abs_determinant(
      decomposition.matrixQR().block(count - width, count - width, width, width));
  return result;
}

/// Volumes that families keep beside all other columns, from one inverse: rows F of R^-1 span its
/// reciprocal.
class VolumesBesideAll {
 public:
  explicit VolumesBesideAll(const FamilySpace& space) {
    Columns all = space.base();
    for (int f = 0; f < space.families(); ++f) {
      first_.push_back(static_cast<Index>(all.size()));
      append(all, space.own(f));
    }
    const auto count = static_cast<Index>(all.size());
    const Eigen::HouseholderQR<Matrix> decomposition(space.columns()(Eigen::all, all));
    inverse_ = factor::triangular_inverse(decomposition.matrixQR().topRows(count));
  }

  [[nodiscard]] double log10_volume(int family, Index dimensions) const {
    const Index first = first_[static_cast<std::size_t>(family)];
    const Eigen::HouseholderQR<Matrix> decomposition(
        inverse_.middleRows(first, dimensions).transpose());
    return -factor::log10_abs_determinant(
        decomposition.matrixQR().topLeftCorner(dimensions, dimensions));
  }

 private:
  std::vector<Index> first_;
  Matrix inverse_;
};

/// Product of 1 / (1 - rho^2) over the canonical correlations with the families beside: the squared
/// ratio of two volumes, what the family keeps beside those under it and what is left of it beside
/// the others too. Nothing is subtracted, so nothing cancels near rho = 1.
double generalised_vif(const FamilySpace& space, const VolumesBesideAll& beside_all, int family,
                       double log10_own) {
  const Columns& own = space.own(family);
  const Columns beside = space.beside(family);
  if (beside.empty()) return 1;
  double log10_left = 0;
  if (space.above(family).empty()) {
    log10_left = beside_all.log10_volume(family, static_cast<Index>(own.size()));
  } else {
    Columns before = space.base();
    append(before, space.under(family));
    append(before, beside);
    log10_left = remainder(space.columns(), before, own).log10_volume;
  }
  const double result = std::pow(10.0, 2 * (log10_own - log10_left));
  return std::isnan(result) ? std::numeric_limits<double>::infinity() : std::max(1.0, result);
}

/// Families with something of their own, small source sets first.
std::vector<int> ordered_families(const FamilySpace& space, const design::Design& design) {
  std::vector<int> order;
  for (int f = 0; f < space.families(); ++f) {
    if (!space.own(f).empty()) order.push_back(f);
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
  const VolumesBesideAll beside_all(space);
  BetweenFamilies result;
  std::vector<Matrix> blocks;
  for (const int family : ordered_families(space, design)) {
    Columns before = space.base();
    append(before, space.under(family));
    Remainder own = remainder(space.columns(), before, space.own(family));
    const auto dimensions = static_cast<int>(space.own(family).size());
    FamilyInflation inflation{family, dimensions, 1, 1};
    inflation.generalised_vif = generalised_vif(space, beside_all, family, own.log10_volume);
    inflation.per_dimension =
        std::pow(inflation.generalised_vif, 0.5 / static_cast<double>(dimensions));
    result.families.push_back(family);
    result.inflation.push_back(inflation);
    blocks.push_back(std::move(own.basis));
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
