// src/exact/modulus.cpp
#include "exact/modulus.hpp"

namespace gramproof::exact {

Modulus::Modulus(std::uint64_t prime) {
  nmod_init(&mod_, prime);
  tenth_ = inverse(10);
}

std::uint64_t Modulus::of(const mpz_class& a) const {
  return mpz_fdiv_ui(a.get_mpz_t(), mod_.n);
}

std::uint64_t Modulus::of(__int128 a) const {
  const auto p = static_cast<__int128>(mod_.n);
  const __int128 rest = a % p;
  return static_cast<std::uint64_t>(rest < 0 ? rest + p : rest);
}

std::uint64_t Modulus::power_of_ten(std::int32_t decimals) const {
  if (decimals >= 0) return power(tenth_, static_cast<std::uint64_t>(decimals));
  return power(10, static_cast<std::uint64_t>(-static_cast<std::int64_t>(decimals)));
}

std::uint64_t prime_below(std::uint64_t prime) {
  do {
    --prime;
  } while (n_is_prime(prime) == 0);
  return prime;
}

std::uint64_t DotProduct::residue(const Modulus& modulus) const {
  // 2^64 is reduced to its residue first, so that every product below is of two residues.
  const std::uint64_t word = modulus.of(static_cast<__int128>(1) << 64);
  const std::uint64_t low = static_cast<std::uint64_t>(low_ % modulus.value());
  const std::uint64_t high = static_cast<std::uint64_t>(high_ % modulus.value());
  return modulus.add(low, modulus.multiply(high, word));
}

}  // namespace gramproof::exact
