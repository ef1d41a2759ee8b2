// src/exact/rank.cpp - rank and null space of a sample.
#include "exact/rank.hpp"

#include <algorithm>
#include <numeric>

#include "exact/elimination.hpp"
#include "exact/flint_types.hpp"
#include "exact/lifting.hpp"
#include "exact/modular.hpp"
#include "exact/modulus.hpp"
#include "exact/row_source.hpp"

namespace gramproof::exact {
namespace {

std::vector<std::size_t> counted_up(std::size_t count) {
  std::vector<std::size_t> result(count);
  std::iota(result.begin(), result.end(), 0);
  return result;
}

std::size_t width_of(const ExactRows& sample, const std::vector<int>& order) {
  if (!sample.rows.empty()) return sample.rows.front().size();
  const auto last = std::max_element(order.begin(), order.end());
  return last == order.end() ? 0 : static_cast<std::size_t>(*last) + 1;
}

/// Candidates for the null vectors that one prime gives; false where one does not hold on every
/// row, even lifted: the rank modulo this prime is then below the true rank.
bool lift_all(const RowSource& source, const std::vector<int>& order, const Elimination& eliminated,
              std::uint64_t modulus, std::vector<NullVector>& vectors) {
  vectors.clear();
  for (std::size_t f = 0; f < eliminated.free.size(); ++f) {
    vectors.push_back(reconstructed(source.width(), order, eliminated, f, modulus));
  }
  std::vector<bool> holds = source.vanish(vectors);
  std::vector<std::size_t> again;
  for (std::size_t f = 0; f < vectors.size(); ++f) {
    // An empty vector (no reconstruction) holds trivially and is no null vector.
    const bool zero =
        std::all_of(vectors[f].begin(), vectors[f].end(), [](const Integer& v) { return v == 0; });
    if (zero || !holds[f]) again.push_back(f);
  }
  std::vector<NullVector> lifted;
  for (const std::size_t f : again) {
    lifted.push_back(solved(source, order, eliminated, f, modulus));
    if (lifted.back().empty()) return false;
  }
  holds = source.vanish(lifted);
  if (std::find(holds.begin(), holds.end(), false) != holds.end()) return false;
  for (std::size_t i = 0; i < again.size(); ++i) vectors[again[i]] = std::move(lifted[i]);
  return true;
}

}  // namespace

std::vector<std::size_t> support_of(const NullVector& vector) {
  std::vector<std::size_t> support;
  for (std::size_t j = 0; j < vector.size(); ++j) {
    if (vector[j] != 0) support.push_back(j);
  }
  return support;
}

void make_primitive(NullVector& vector) {
  Integer divisor = 0;
  for (const Integer& v : vector) {
    if (v != 0) mpz_gcd(divisor.get_mpz_t(), divisor.get_mpz_t(), v.get_mpz_t());
    if (divisor == 1) break;
  }
  if (divisor == 0) return;
  const auto first =
      std::find_if(vector.begin(), vector.end(), [](const Integer& v) { return v != 0; });
  if (*first < 0) divisor = -divisor;
  if (divisor == 1) return;
  for (Integer& v : vector) {
    if (v != 0) mpz_divexact(v.get_mpz_t(), v.get_mpz_t(), divisor.get_mpz_t());
  }
}

SampleRank rank_of_rows(const RowSource& source, const std::vector<int>& order) {
  SampleRank result;
  // Only the finitely many primes that divide one of finitely many minors fail: the loop ends.
  for (result.prime = prime;; result.prime = prime_below(result.prime)) {
    const Elimination eliminated =
        eliminate(source.residues(order, result.prime), source.rows(), order.size(), result.prime);
    if (!lift_all(source, order, eliminated, result.prime, result.null_vectors)) continue;
    result.pivot_rows = eliminated.rows;
    for (const std::size_t j : eliminated.columns) result.pivot_columns.push_back(order[j]);
    return result;
  }
}

SampleRank rank_of_sample(const design::Design& design, const table::Piece& sample,
                          const std::vector<int>& order) {
  const FlintSession session;
  return rank_of_rows(PieceRows(design, sample, counted_up(sample.rows)), order);
}

SampleRank rank_of_sample(const ExactRows& sample, const std::vector<int>& order) {
  const FlintSession session;
  return rank_of_rows(IntegerRows(sample, width_of(sample, order), counted_up(sample.rows.size())),
                      order);
}

std::uint64_t minor_residue(const design::Design& design, const table::Piece& sample,
                            const std::vector<std::size_t>& rows, const std::vector<int>& columns,
                            std::uint64_t modulus) {
  const std::size_t size = rows.size();
  const std::vector<std::uint64_t> values =
      residues_of_columns(design, sample, rows, columns, modulus);
  ResidueMatrix matrix(size, size, modulus);
  for (std::size_t i = 0; i < size; ++i) {
    for (std::size_t j = 0; j < size; ++j) matrix.at(i, j) = values[i * size + j];
  }
  return nmod_mat_det(matrix.get());
}

}  // namespace gramproof::exact
