// src/exact/null_space.cpp
#include "exact/null_space.hpp"

#include <flint/fmpz_lll.h>

#include <algorithm>

#include "exact/flint_types.hpp"
#include "exact/modular.hpp"

namespace gramproof::exact {
namespace {

/// A column where only the vector itself is not 0, for each vector; shorter if one has none.
std::vector<std::size_t> own_columns(const std::vector<NullVector>& vectors) {
  std::vector<std::size_t> own;
  const std::size_t width = vectors.empty() ? 0 : vectors.front().size();
  std::vector<std::size_t> users(width, 0);
  for (const NullVector& vector : vectors) {
    for (std::size_t j = 0; j < width; ++j) users[j] += vector[j] != 0;
  }
  for (const NullVector& vector : vectors) {
    // From the end: null vectors of an elimination end in the column that is theirs.
    std::size_t j = width;
    while (j > 0 && (users[j - 1] != 1 || vector[j - 1] == 0)) --j;
    if (j == 0) return {};
    own.push_back(j - 1);
  }
  return own;
}

}  // namespace

NullSpace::NullSpace(const std::vector<NullVector>& vectors) {
  width_ = vectors.empty() ? 0 : vectors.front().size();
  basis_ = vectors;
  own_ = own_columns(basis_);
  if (own_.size() != basis_.size()) give_own_columns(vectors);
  for (std::size_t j = 0; j < width_; ++j) {
    const auto uses = [j](const NullVector& v) { return v[j] != 0; };
    if (std::any_of(basis_.begin(), basis_.end(), uses)) involved_.push_back(j);
  }
}

void NullSpace::give_own_columns(const std::vector<NullVector>& vectors) {
  // Columns reversed: the echelon form then gives each vector the last column it can have, as the
  // null vectors of an elimination have it.
  FlintMatrix matrix(vectors.size(), width_);
  for (std::size_t i = 0; i < vectors.size(); ++i) {
    for (std::size_t j = 0; j < width_; ++j) matrix.set(i, j, vectors[i][width_ - 1 - j]);
  }
  FlintInteger denominator;
  const slong rank = fmpz_mat_rref(matrix.get(), denominator.get(), matrix.get());
  basis_.clear();
  own_.clear();
  for (std::size_t i = 0; i < static_cast<std::size_t>(rank); ++i) {
    NullVector vector(width_);
    for (std::size_t j = 0; j < width_; ++j) vector[j] = matrix.at(i, width_ - 1 - j);
    std::size_t last = width_ - 1;
    while (vector[last] == 0) --last;
    own_.push_back(last);
    make_primitive(vector);
    basis_.push_back(std::move(vector));
  }
}

bool NullSpace::contains(const NullVector& vector) const {
  Integer multiple = 1;
  std::vector<std::size_t> used;
  for (std::size_t i = 0; i < basis_.size(); ++i) {
    if (vector[own_[i]] == 0) continue;
    used.push_back(i);
    mpz_lcm(multiple.get_mpz_t(), multiple.get_mpz_t(), basis_[i][own_[i]].get_mpz_t());
  }
  NullVector rest(width_);
  for (std::size_t j = 0; j < width_; ++j) rest[j] = vector[j] * multiple;
  for (const std::size_t i : used) {
    const Integer factor = vector[own_[i]] * (multiple / basis_[i][own_[i]]);
    for (const std::size_t j : involved_) {
      if (basis_[i][j] != 0) rest[j] -= factor * basis_[i][j];
    }
  }
  return std::all_of(rest.begin(), rest.end(), [](const Integer& r) { return r == 0; });
}

std::vector<std::uint64_t> NullSpace::coordinates(const NullVector& member,
                                                  const Modulus& modulus) const {
  std::vector<std::uint64_t> result;
  for (const std::size_t own : own_) result.push_back(modulus.of(member[own]));
  return result;
}

std::vector<std::array<std::uint64_t, 3>> NullSpace::fingerprints(const Modulus& modulus) const {
  std::vector<std::array<std::uint64_t, 3>> values(width_);
  for (std::size_t j = 0; j < width_; ++j) {
    for (std::size_t t = 0; t < 3; ++t) values[j][t] = row_hash(3 * j + t) % modulus.value();
  }
  for (std::size_t i = 0; i < basis_.size(); ++i) {
    std::array<std::uint64_t, 3> sum{};
    for (const std::size_t j : involved_) {
      if (j == own_[i] || basis_[i][j] == 0) continue;
      const std::uint64_t entry = modulus.of(basis_[i][j]);
      for (std::size_t t = 0; t < 3; ++t) {
        sum[t] = modulus.add(sum[t], modulus.multiply(entry, values[j][t]));
      }
    }
    const std::uint64_t own = modulus.of(basis_[i][own_[i]]);
    // An own entry that the prime divides spoils this fingerprint only: nothing false is accepted.
    const std::uint64_t inverse = own == 0 ? 0 : modulus.inverse(own);
    for (std::size_t t = 0; t < 3; ++t) {
      values[own_[i]][t] = modulus.multiply(modulus.subtract(0, sum[t]), inverse);
    }
  }
  return values;
}

bool NullSpace::affordable() const {
  std::size_t bits = 1;
  for (const NullVector& vector : basis_) {
    for (const Integer& v : vector) bits = std::max(bits, mpz_sizeinbase(v.get_mpz_t(), 2));
  }
  return basis_.size() * basis_.size() * bits <= 200'000;
}

std::vector<NullVector> NullSpace::reduced_lattice() const {
  const std::size_t nullity = basis_.size(), columns = involved_.size();
  FlintMatrix vectors(nullity, columns);
  bool saturated = true;
  for (std::size_t i = 0; i < nullity; ++i) {
    saturated = saturated && abs(basis_[i][own_[i]]) == 1;
    for (std::size_t j = 0; j < columns; ++j) vectors.set(i, j, basis_[i][involved_[j]]);
  }
  if (!saturated) {
    // The columns of the vectors generate a lattice in Z^nullity. With a basis H of it, vectors =
    // H' * M, and the columns of M generate all of Z^nullity: the rows of M are then a basis of all
    // integer vectors of the span.
    FlintMatrix transposed(columns, nullity), hermite(columns, nullity), square(nullity, nullity);
    fmpz_mat_transpose(transposed.get(), vectors.get());
    fmpz_mat_hnf(hermite.get(), transposed.get());
    for (std::size_t i = 0; i < nullity; ++i) {
      for (std::size_t j = 0; j < nullity; ++j) square.set(j, i, hermite.at(i, j));
    }
    FlintMatrix all(nullity, columns);
    FlintInteger denominator;
    fmpz_mat_solve(all.get(), denominator.get(), square.get(), vectors.get());
    fmpz_mat_scalar_divexact_fmpz(vectors.get(), all.get(), denominator.get());
  }
  fmpz_lll_t context;
  fmpz_lll_context_init_default(context);
  fmpz_lll(vectors.get(), nullptr, context);
  std::vector<NullVector> result(nullity, NullVector(width_, 0));
  for (std::size_t i = 0; i < nullity; ++i) {
    for (std::size_t j = 0; j < columns; ++j) result[i][involved_[j]] = vectors.at(i, j);
    make_primitive(result[i]);
  }
  return result;
}

}  // namespace gramproof::exact
