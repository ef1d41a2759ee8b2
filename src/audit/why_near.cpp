// A column that exact relations leave alone: how near it is to the others, and through which.
#include <algorithm>
#include <cmath>

#include "audit/rare_levels.hpp"
#include "audit/why.hpp"

namespace gramproof::audit {
namespace {

/// Where a report begins to speak of an index (Belsley, Kuh & Welsch 1980: 10 is weak, 30 to 100
/// moderate to strong) and of a coefficient's part in it (the same, ch. 3: more than half).
constexpr double index_worth_telling = 10;
constexpr double part_worth_telling = 0.5;

Index position_of(const std::vector<int>& values, int value) {
  const auto at = std::find(values.begin(), values.end(), value);
  return at == values.end() ? -1 : static_cast<Index>(at - values.begin());
}

/// Indices where `position` has at least half of its variance, with the others of whom this holds;
/// the worst first.
std::vector<Competition> competitions(const Vector& indices, const Matrix& proportions,
                                      const std::vector<int>& names, Index position) {
  std::vector<Competition> result;
  const Index rows = std::min(indices.size(), proportions.rows());
  for (Index i = rows - 1; i >= 0; --i) {
    if (indices[i] < index_worth_telling || proportions(i, position) < part_worth_telling) continue;
    Competition competition{indices[i], {}};
    for (Index j = 0; j < proportions.cols(); ++j) {
      if (j != position && proportions(i, j) >= part_worth_telling)
        competition.with.push_back(names[static_cast<std::size_t>(j)]);
    }
    result.push_back(std::move(competition));
  }
  return result;
}

void fill_family(const Audit& audit, int column, Nearness& near) {
  const int family = audit.design.columns[static_cast<std::size_t>(column)].family;
  const Index position = position_of(audit.between.families, family);
  if (position < 0) return;
  near.family = audit.between.inflation[static_cast<std::size_t>(position)];
  near.between_families = competitions(audit.between.indices, audit.between.proportions,
                                       audit.between.families, position);
}

}  // namespace

Nearness nearness_of(const Audit& audit, int column) {
  Nearness near;
  const Index position = position_of(audit.kept, column);
  near.kept = position >= 0;
  for (const RelationFinding& relation : audit.relations) {
    const bool through =
        std::any_of(relation.terms.begin(), relation.terms.end(),
                    [column](const RelationTerm& term) { return term.column == column; });
    if (through && relation.standing != Standing::exact) near.relations.push_back(relation);
  }
  for (const RareLevel& rare : audit.rare_levels) {
    if (position_of(rare.involves, column) >= 0) near.rare.push_back(rare);
  }
  if (!near.kept) return near;
  for (const Inflation& inflation : audit.inflation) {
    if (inflation.column == column) near.inflation = inflation;
  }
  near.between_columns = competitions(audit.conditioning.condition_indices,
                                      audit.conditioning.proportions, audit.kept, position);
  fill_family(audit, column, near);
  return near;
}

Vector residual_direction(const factor::Factor& factor, const std::vector<int>& kept, int column,
                          Index columns) {
  std::vector<int> order;
  for (const int other : kept) {
    if (other != column) order.push_back(other);
  }
  order.push_back(column);
  const factor::Factor own = factor::select(factor, order);
  const Index others = static_cast<Index>(order.size()) - 1;
  Vector on_others = own.r.col(others).head(others);
  own.r.topLeftCorner(others, others).triangularView<Eigen::Upper>().solveInPlace(on_others);
  const double length = own.r(others, others);
  Vector direction = Vector::Zero(columns);
  for (Index j = 0; j <= others; ++j) {
    const double coefficient = j < others ? -on_others[j] : 1.0;
    const int exponent = own.exponents[static_cast<std::size_t>(j)];
    direction[order[static_cast<std::size_t>(j)]] = std::ldexp(coefficient / length, -exponent);
  }
  return direction;
}

}  // namespace gramproof::audit
