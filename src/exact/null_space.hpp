// src/exact/null_space.hpp - a space of relations: membership, fingerprints, its lattice of
// integers.
#pragma once

#include <array>
#include <cstdint>
#include <vector>

#include "exact/modulus.hpp"
#include "exact/rank.hpp"

namespace gramproof::exact {

/// The span of integer vectors, in a form in which each basis vector has a column of its own: one
/// where all the others are 0. A FlintSession must be open while a null space is made.
class NullSpace {
 public:
  explicit NullSpace(const std::vector<NullVector>& vectors);

  [[nodiscard]] const std::vector<NullVector>& basis() const { return basis_; }
  /// Columns with a non-zero entry in some relation, ascending.
  [[nodiscard]] const std::vector<std::size_t>& involved() const { return involved_; }
  /// Exact. O(nullity * involved).
  [[nodiscard]] bool contains(const NullVector& vector) const;
  /// The entries of a member at the own columns: coordinates, up to a factor each.
  [[nodiscard]] std::vector<std::uint64_t> coordinates(const NullVector& member,
                                                       const Modulus& modulus) const;

  /// Three values a column such that sum a_j * value_j = 0 for every relation a; of vectors that
  /// are no relations each vanishes with probability 2^-62 only. Turns a search for relations of a
  /// given form into look-ups; what is found is tested by `contains`.
  [[nodiscard]] std::vector<std::array<std::uint64_t, 3>> fingerprints(
      const Modulus& modulus) const;

  /// All integer vectors of the space, as a basis reduced by LLL. Only if affordable().
  [[nodiscard]] std::vector<NullVector> reduced_lattice() const;
  /// Budget for reduced_lattice: nullity^2 x bits of the largest entry up to 200,000, which takes
  /// under a second (measured: 0.6 s at nullity 40 with 102 bits, 14 s at 95 with 52).
  [[nodiscard]] bool affordable() const;

 private:
  void give_own_columns(const std::vector<NullVector>& vectors);
  std::vector<NullVector> basis_;
  std::vector<std::size_t> own_;  ///< aligned with basis_
  std::vector<std::size_t> involved_;
  std::size_t width_ = 0;
};

}  // namespace gramproof::exact
