// src/exact/modulus.hpp - arithmetic modulo a prime of up to 62 bits, over FLINT's one-word
// residues.
#pragma once

#include <flint/nmod.h>
#include <flint/ulong_extras.h>
#include <gmpxx.h>

#include <cstdint>
#include <vector>

namespace gramproof::exact {

/// Residues are in 0 .. value - 1. The prime must lie between 2^61 and 2^62: then signed words
/// below 2^61 need one correction only.
class Modulus {
 public:
  explicit Modulus(std::uint64_t prime);

  [[nodiscard]] std::uint64_t value() const { return mod_.n; }
  [[nodiscard]] const nmod_t& flint() const { return mod_; }

  [[nodiscard]] std::uint64_t add(std::uint64_t a, std::uint64_t b) const {
    const std::uint64_t sum = a + b;
    return sum >= mod_.n ? sum - mod_.n : sum;
  }
  [[nodiscard]] std::uint64_t subtract(std::uint64_t a, std::uint64_t b) const {
    return a >= b ? a - b : a + mod_.n - b;
  }
  [[nodiscard]] std::uint64_t multiply(std::uint64_t a, std::uint64_t b) const {
    return nmod_mul(a, b, mod_);
  }
  [[nodiscard]] std::uint64_t power(std::uint64_t a, std::uint64_t exponent) const {
    return nmod_pow_ui(a, exponent, mod_);
  }
  /// `a` must not be 0.
  [[nodiscard]] std::uint64_t inverse(std::uint64_t a) const { return nmod_inv(a, mod_); }

  /// Of a signed word below 2^61 in absolute value.
  [[nodiscard]] std::uint64_t of_short(std::int64_t a) const {
    return a < 0 ? mod_.n - static_cast<std::uint64_t>(-a) : static_cast<std::uint64_t>(a);
  }
  [[nodiscard]] std::uint64_t of(const mpz_class& a) const;
  [[nodiscard]] std::uint64_t of(__int128 a) const;

  /// 10^-decimals, for either sign.
  [[nodiscard]] std::uint64_t power_of_ten(std::int32_t decimals) const;

 private:
  nmod_t mod_{};
  std::uint64_t tenth_ = 0;
};

/// The next smaller prime. The search for a prime that does not divide some minor goes down from
/// 2^62.
[[nodiscard]] std::uint64_t prime_below(std::uint64_t prime);

/// Sum of products of residues, reduced at the end only: the two words of each product are summed
/// apart, so that 2^64 terms cannot overflow. About 1 ns a term.
class DotProduct {
 public:
  void add(std::uint64_t a, std::uint64_t b) {
    const unsigned __int128 product = static_cast<unsigned __int128>(a) * b;
    low_ += static_cast<std::uint64_t>(product);
    high_ += static_cast<std::uint64_t>(product >> 64);
  }
  [[nodiscard]] std::uint64_t residue(const Modulus& modulus) const;

 private:
  unsigned __int128 low_ = 0, high_ = 0;
};

}  // namespace gramproof::exact
