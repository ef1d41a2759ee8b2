// src/exact/residual_span.cpp
#include "exact/residual_span.hpp"

#include <algorithm>
#include <cmath>
#include <utility>

#include "exact/echelon.hpp"
#include "exact/fixed_point.hpp"
#include "exact/modular.hpp"
#include "exact/modulus.hpp"

namespace gramproof::exact {
namespace {

/// Columns with a non-zero coefficient in some vector, ascending.
std::vector<int> involved(const std::vector<NullVector>& vectors) {
  std::vector<int> columns;
  for (std::size_t j = 0; j < vectors.front().size(); ++j) {
    const bool used = std::any_of(vectors.begin(), vectors.end(),
                                  [j](const NullVector& vector) { return vector[j] != 0; });
    if (used) columns.push_back(static_cast<int>(j));
  }
  return columns;
}

std::vector<EntryBound> bounds_of(const design::Design& design, const table::Piece& piece,
                                  const std::vector<std::size_t>& rows) {
  std::vector<EntryBound> bounds(design.columns.size());
  for (std::size_t j = 0; j < bounds.size(); ++j) {
    const auto column = fixed_point(design.columns[j], piece, rows);
    if (!column) {
      bounds[j].known = false;
      continue;
    }
    bounds[j].decimals = column->decimals;
    // One rounding in the quotient and one in the power: 2^-51 covers both.
    bounds[j].largest =
        static_cast<double>(column->largest) * std::pow(10.0, -column->decimals) * (1 + 0x1p-50);
  }
  return bounds;
}

}  // namespace

ResidualRows residual_rows(const design::Design& design, const table::Piece& piece,
                           const std::vector<std::size_t>& rows,
                           const std::vector<NullVector>& vectors) {
  ResidualRows result;
  if (vectors.empty() || rows.empty()) return result;
  const std::vector<RelationTest> tests = test_relations(design, piece, rows, vectors, 0);
  result.all_hold = std::all_of(tests.begin(), tests.end(),
                                [](const RelationTest& test) { return test.violating == 0; });
  if (result.all_hold) return result;
  result.bounds = bounds_of(design, piece, rows);
  const Modulus field(prime);
  const std::vector<int> columns = involved(vectors);
  std::vector<std::vector<std::uint64_t>> coefficients;
  for (const NullVector& vector : vectors) {
    std::vector<std::uint64_t>& own = coefficients.emplace_back();
    for (const int j : columns) own.push_back(field.of(vector[static_cast<std::size_t>(j)]));
  }
  const std::vector<std::uint64_t> values =
      residues_of_columns(design, piece, rows, columns, prime);
  Echelon span;
  for (std::size_t i = 0; i < rows.size() && result.rows.size() < vectors.size(); ++i) {
    std::vector<std::uint64_t> residual;
    for (const std::vector<std::uint64_t>& own : coefficients) {
      DotProduct sum;
      for (std::size_t c = 0; c < columns.size(); ++c)
        sum.add(own[c], values[i * columns.size() + c]);
      residual.push_back(sum.residue(field));
    }
    if (!span.accept(residual)) continue;
    result.rows.push_back(rows[i]);
    result.residuals.push_back(std::move(residual));
  }
  return result;
}

void add(std::vector<EntryBound>& total, const std::vector<EntryBound>& part) {
  if (part.empty()) return;
  if (total.empty()) {
    total = part;
    return;
  }
  for (std::size_t j = 0; j < total.size(); ++j) {
    total[j].known = total[j].known && part[j].known;
    total[j].decimals = std::max(total[j].decimals, part[j].decimals);
    total[j].largest = std::max(total[j].largest, part[j].largest);
  }
}

bool is_decided_by_prime(const NullVector& vector, const std::vector<EntryBound>& bounds) {
  std::int32_t decimals = 0;
  for (std::size_t j = 0; j < bounds.size(); ++j) {
    if (vector[j] == 0) continue;
    if (!bounds[j].known) return false;
    decimals = std::max(decimals, bounds[j].decimals);
  }
  // Doubles bound it well enough: the sum of so few positive terms is off by less than 1e-12.
  double sum = std::abs(vector.back().get_d());
  for (std::size_t j = 0; j < bounds.size(); ++j)
    sum += std::abs(vector[j].get_d()) * bounds[j].largest;
  return sum * std::pow(10.0, decimals) * (1 + 1e-9) < static_cast<double>(prime);
}

}  // namespace gramproof::exact
