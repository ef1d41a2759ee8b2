#include "exact/short_relations.hpp"

#include <algorithm>
#include <optional>
#include <set>
#include <utility>

#include "exact/flint_types.hpp"
#include "exact/modular.hpp"
#include "exact/small_fraction.hpp"

namespace gramproof::exact {
namespace {

using Support = std::vector<std::size_t>;

/// Word operations for all orders together, which is 0.1 s at most: (measured) 10 ms at 60 columns
/// and nullity 8, 70 ms at nullity 30.
constexpr std::size_t budget = 20'000'000;
/// A relation of 7 among 45 columns of a null space of dimension 8 comes out of an order with
/// probability 0.3: hardly any is missed in so many.
constexpr std::size_t most_orders = 400;
/// Where so many in succession bring nothing new, there is nothing to be found.
constexpr std::size_t idle_orders = 60;

std::vector<std::size_t> shuffled(std::vector<std::size_t> columns, std::size_t order) {
  std::vector<std::pair<std::uint64_t, std::size_t>> keys;
  for (const std::size_t j : columns) keys.emplace_back(row_hash((order << 32) + j), j);
  std::sort(keys.begin(), keys.end());
  for (std::size_t i = 0; i < keys.size(); ++i) columns[i] = keys[i].second;
  return columns;
}

/// The basis in the order of the columns, reduced row by row.
void reduce(const std::vector<std::vector<std::uint64_t>>& basis,
            const std::vector<std::size_t>& place, ResidueMatrix& matrix) {
  for (std::size_t i = 0; i < basis.size(); ++i) {
    for (std::size_t c = 0; c < place.size(); ++c) matrix.at(i, c) = basis[i][place[c]];
  }
  nmod_mat_rref(matrix.get());
}

/// The integer vector of one reduced row, whose first entry is 1; none if it is none of the space.
std::optional<NullVector> lifted(const NullSpace& space, const Modulus& field,
                                 const ResidueMatrix& matrix, std::size_t row,
                                 const std::vector<std::size_t>& order) {
  std::vector<std::pair<std::size_t, mpq_class>> fractions;
  Integer multiple = 1;
  for (std::size_t c = 0; c < order.size(); ++c) {
    const std::uint64_t residue = matrix.at(row, c);
    if (residue == 0) continue;
    auto fraction = small_fraction(residue, field);
    if (!fraction) return std::nullopt;
    multiple = lcm(multiple, fraction->get_den());
    fractions.emplace_back(order[c], std::move(*fraction));
  }
  NullVector vector(space.basis().front().size(), 0);
  for (const auto& [column, fraction] : fractions) vector[column] = Integer(fraction * multiple);
  make_primitive(vector);
  if (!space.contains(vector)) return std::nullopt;
  return vector;
}

std::optional<Support> support_of(const ResidueMatrix& matrix, std::size_t row,
                                  const std::vector<std::size_t>& order, std::size_t most) {
  Support support;
  for (std::size_t c = 0; c < order.size(); ++c) {
    if (matrix.at(row, c) == 0) continue;
    if (support.size() == most) return std::nullopt;
    support.push_back(order[c]);
  }
  std::sort(support.begin(), support.end());
  return support;
}

}  // namespace

std::vector<NullVector> short_relations(const NullSpace& space, std::size_t most_columns) {
  const Modulus field(prime);
  const std::vector<std::size_t>& columns = space.involved();
  const std::size_t nullity = space.basis().size();
  if (nullity < 2) return {};
  const std::size_t orders =
      std::min(most_orders, budget / std::max<std::size_t>(1, nullity * nullity * columns.size()));
  std::vector<std::vector<std::uint64_t>> basis;
  for (const NullVector& vector : space.basis()) {
    basis.emplace_back();
    for (const Integer& v : vector) basis.back().push_back(field.of(v));
  }
  ResidueMatrix matrix(nullity, columns.size(), prime);
  std::set<Support> seen;
  std::vector<NullVector> found;
  for (std::size_t o = 0, idle = 0; o < orders && idle < idle_orders; ++o, ++idle) {
    const std::vector<std::size_t> order = shuffled(columns, o);
    reduce(basis, order, matrix);
    for (std::size_t row = 0; row < nullity; ++row) {
      auto support = support_of(matrix, row, order, most_columns);
      if (!support || support->empty() || !seen.insert(std::move(*support)).second) continue;
      auto vector = lifted(space, field, matrix, row, order);
      if (!vector) continue;
      found.push_back(std::move(*vector));
      idle = 0;
    }
  }
  return found;
}

}  // namespace gramproof::exact
