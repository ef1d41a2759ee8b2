// src/exact/few_violations.cpp
#include "exact/few_violations.hpp"

#include <optional>
#include <set>
#include <utility>

namespace gramproof::exact {
namespace {

/// a - factor * b.
SparseVector combination(const SparseVector& a, const SparseVector& b, std::uint64_t factor,
                         const Modulus& field) {
  SparseVector result = a;
  for (const auto& [position, value] : b) {
    std::uint64_t& entry = result[position];
    entry = field.subtract(entry, field.multiply(factor, value));
    if (entry == 0) result.erase(position);
  }
  return result;
}

/// The ratio a / b that most rows of both have.
std::optional<std::uint64_t> commonest_ratio(const SparseVector& a, const SparseVector& b,
                                             const Modulus& field) {
  std::map<std::uint64_t, std::size_t> count;
  for (const auto& [row, value] : b) {
    const auto other = a.find(row);
    if (other != a.end()) ++count[field.multiply(other->second, field.inverse(value))];
  }
  std::optional<std::uint64_t> best;
  std::size_t most = 0;
  for (const auto& [ratio, rows] : count) {
    if (rows <= most) continue;
    most = rows;
    best = ratio;
  }
  return best;
}

/// Vectors by the rows they are violated on.
using RowIndex = std::map<std::size_t, std::set<std::size_t>>;

std::set<std::size_t> sharing_a_row(const std::vector<SparseViolations>& vectors, std::size_t a,
                                    const RowIndex& index) {
  std::set<std::size_t> result;
  for (const auto& [row, value] : vectors[a].violations) {
    const auto found = index.find(row);
    if (found != index.end()) result.insert(found->second.begin(), found->second.end());
  }
  result.erase(a);
  return result;
}

RowIndex index_of(const std::vector<SparseViolations>& vectors) {
  RowIndex index;
  for (std::size_t a = 0; a < vectors.size(); ++a) {
    for (const auto& [row, value] : vectors[a].violations) index[row].insert(a);
  }
  return index;
}

/// Takes `other` away from `vector` where that leaves fewer violations.
bool take_away(SparseViolations& vector, const SparseViolations& other, const Modulus& field) {
  const auto ratio = commonest_ratio(vector.violations, other.violations, field);
  if (!ratio) return false;
  SparseVector fewer = combination(vector.violations, other.violations, *ratio, field);
  if (fewer.size() >= vector.violations.size()) return false;
  vector.violations = std::move(fewer);
  vector.coefficients = combination(vector.coefficients, other.coefficients, *ratio, field);
  return true;
}

}  // namespace

void make_monic(SparseViolations& vector, const Modulus& field) {
  if (vector.coefficients.empty()) return;
  const std::uint64_t inverse = field.inverse(vector.coefficients.begin()->second);
  for (auto& [column, value] : vector.coefficients) value = field.multiply(value, inverse);
  for (auto& [row, value] : vector.violations) value = field.multiply(value, inverse);
}

void combine_to_fewest(std::vector<SparseViolations>& vectors, const Modulus& field) {
  bool changed = true;
  while (changed) {
    changed = false;
    const RowIndex index = index_of(vectors);
    for (std::size_t a = 0; a < vectors.size(); ++a) {
      for (const std::size_t b : sharing_a_row(vectors, a, index)) {
        if (take_away(vectors[a], vectors[b], field)) changed = true;
      }
    }
  }
}

}  // namespace gramproof::exact
