// src/exact/echelon.hpp - linear independence modulo the prime, one vector at a time.
#pragma once

#include <algorithm>
#include <cstddef>
#include <cstdint>
#include <utility>
#include <vector>

#include "exact/modular.hpp"
#include "exact/modulus.hpp"

namespace gramproof::exact {

/// Vectors of one length. Independent modulo the prime means independent; the converse may fail
/// where the prime divides a minor.
class Echelon {
 public:
  /// True, and remembered, if the vector is independent of those accepted before. O(length *
  /// accepted).
  bool accept(std::vector<std::uint64_t> vector) {
    for (const auto& [pivot, row] : rows_) {
      const std::uint64_t factor = vector[pivot];
      if (factor == 0) continue;
      for (std::size_t i = 0; i < vector.size(); ++i) {
        if (row[i] != 0) vector[i] = field_.subtract(vector[i], field_.multiply(factor, row[i]));
      }
    }
    const auto first =
        std::find_if(vector.begin(), vector.end(), [](std::uint64_t v) { return v != 0; });
    if (first == vector.end()) return false;
    const auto pivot = static_cast<std::size_t>(first - vector.begin());
    const std::uint64_t inverse = field_.inverse(*first);
    for (std::uint64_t& v : vector) v = field_.multiply(v, inverse);
    rows_.emplace_back(pivot, std::move(vector));
    return true;
  }

 private:
  Modulus field_{prime};
  std::vector<std::pair<std::size_t, std::vector<std::uint64_t>>> rows_;
};

}  // namespace gramproof::exact
