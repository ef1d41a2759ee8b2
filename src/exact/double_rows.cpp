// src/exact/double_rows.cpp
#include "exact/double_rows.hpp"

#include <algorithm>
#include <bit>
#include <cmath>
#include <limits>
#include <numeric>

#include "exact/flint_types.hpp"
#include "exact/modulus.hpp"

namespace gramproof::exact {
namespace {

/// value = mantissa * 2^exponent, the mantissa odd or 0.
struct Dyadic {
  std::int64_t mantissa = 0;
  int exponent = 0;
};

Dyadic dyadic(double value) {
  if (value == 0) return {};
  int exponent = 0;
  const double fraction = std::frexp(value, &exponent);
  // 53 bits: the product is whole.
  const auto mantissa = static_cast<std::int64_t>(std::ldexp(fraction, 53));
  const int zeros = std::countr_zero(static_cast<std::uint64_t>(mantissa));
  return {mantissa >> zeros, exponent - 53 + zeros};
}

constexpr int lowest_exponent = -1074, highest_exponent = 1023;

/// 2^e modulo a prime for every exponent of a double.
class PowersOfTwo {
 public:
  explicit PowersOfTwo(const Modulus& field) {
    powers_.reserve(highest_exponent - lowest_exponent + 1);
    powers_.push_back(field.power(field.inverse(2), -lowest_exponent));
    for (int e = lowest_exponent; e < highest_exponent; ++e) {
      powers_.push_back(field.add(powers_.back(), powers_.back()));
    }
  }
  [[nodiscard]] std::uint64_t at(int exponent) const {
    return powers_[static_cast<std::size_t>(exponent - lowest_exponent)];
  }

 private:
  std::vector<std::uint64_t> powers_;
};

int lowest(const std::vector<Dyadic>& entries) {
  int least = std::numeric_limits<int>::max();
  for (const Dyadic& entry : entries) {
    if (entry.mantissa != 0) least = std::min(least, entry.exponent);
  }
  return least;
}

Integer shifted(const Dyadic& entry, int from) {
  Integer value = static_cast<long>(entry.mantissa);
  if (entry.mantissa != 0) value <<= static_cast<mp_bitcnt_t>(entry.exponent - from);
  return value;
}

/// The non-zero entries of a vector.
struct Sparse {
  std::vector<Index> columns;
  std::vector<Integer> coefficients;
  std::vector<std::int64_t> words;  ///< the same, when each fits
  std::size_t bits = 0;             ///< of the largest
};

Sparse sparse(const NullVector& vector) {
  Sparse result;
  for (std::size_t j = 0; j < vector.size(); ++j) {
    if (vector[j] == 0) continue;
    result.columns.push_back(static_cast<Index>(j));
    result.coefficients.push_back(vector[j]);
    result.bits = std::max(result.bits, mpz_sizeinbase(vector[j].get_mpz_t(), 2));
  }
  if (result.bits > 62) return result;
  for (const Integer& v : result.coefficients) result.words.push_back(v.get_si());
  return result;
}

bool vanishes(const Sparse& vector, std::vector<Dyadic>& entries) {
  const int from = lowest(entries);
  if (from == std::numeric_limits<int>::max()) return true;
  int bits = 0;
  for (const Dyadic& entry : entries) {
    if (entry.mantissa == 0) continue;
    const auto size = static_cast<std::uint64_t>(std::abs(entry.mantissa));
    bits = std::max(bits, static_cast<int>(std::bit_width(size)) + entry.exponent - from);
  }
  const int together = bits + static_cast<int>(vector.bits) +
                       static_cast<int>(std::bit_width(vector.columns.size()));
  if (!vector.words.empty() && together <= 126) {
    __int128 sum = 0;
    for (std::size_t i = 0; i < entries.size(); ++i) {
      if (entries[i].mantissa == 0) continue;
      const __int128 scale = static_cast<__int128>(1) << (entries[i].exponent - from);
      sum += vector.words[i] * (scale * entries[i].mantissa);
    }
    return sum == 0;
  }
  Integer sum = 0;
  for (std::size_t i = 0; i < entries.size(); ++i) {
    sum += vector.coefficients[i] * shifted(entries[i], from);
  }
  return sum == 0;
}

}  // namespace

std::size_t DoubleRows::rows() const {
  return static_cast<std::size_t>(values_.rows());
}

std::size_t DoubleRows::width() const {
  return static_cast<std::size_t>(values_.cols());
}

std::vector<std::uint64_t> DoubleRows::residues(const std::vector<int>& columns,
                                                std::uint64_t modulus) const {
  const Modulus field(modulus);
  const PowersOfTwo powers(field);
  std::vector<std::uint64_t> result(rows() * columns.size());
  for (std::size_t j = 0; j < columns.size(); ++j) {
    for (std::size_t i = 0; i < rows(); ++i) {
      const Dyadic entry = dyadic(values_(static_cast<Index>(i), columns[j]));
      if (entry.mantissa == 0) continue;
      result[i * columns.size() + j] =
          field.multiply(field.of_short(entry.mantissa), powers.at(entry.exponent));
    }
  }
  return result;
}

std::vector<std::vector<Integer>> DoubleRows::integers(const std::vector<std::size_t>& rows,
                                                       const std::vector<int>& columns) const {
  std::vector<std::vector<Integer>> result;
  for (const std::size_t row : rows) {
    std::vector<Dyadic> entries;
    for (const int column : columns) {
      entries.push_back(dyadic(values_(static_cast<Index>(row), column)));
    }
    const int from = lowest(entries);
    std::vector<Integer>& integers = result.emplace_back();
    for (const Dyadic& entry : entries) integers.push_back(shifted(entry, from));
  }
  return result;
}

std::vector<bool> DoubleRows::vanish(const std::vector<NullVector>& vectors) const {
  std::vector<bool> result;
  for (const std::vector<std::size_t>& off : rows_off(values_, vectors)) {
    result.push_back(off.empty());
  }
  return result;
}

SampleRank rank_of_doubles(const Matrix& values, const std::vector<int>& order) {
  const FlintSession session;
  return rank_of_rows(DoubleRows(values), order);
}

std::vector<std::vector<std::size_t>> rows_off(const Matrix& values,
                                               const std::vector<NullVector>& vectors) {
  std::vector<std::vector<std::size_t>> result;
  std::vector<Dyadic> entries;
  for (const NullVector& dense : vectors) {
    const Sparse vector = sparse(dense);
    std::vector<std::size_t>& off = result.emplace_back();
    entries.resize(vector.columns.size());
    for (Index i = 0; i < values.rows(); ++i) {
      for (std::size_t j = 0; j < entries.size(); ++j) {
        entries[j] = dyadic(values(i, vector.columns[j]));
      }
      if (!vanishes(vector, entries)) off.push_back(static_cast<std::size_t>(i));
    }
  }
  return result;
}

}  // namespace gramproof::exact
