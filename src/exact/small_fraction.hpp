// src/exact/small_fraction.hpp - from a residue back to the small fraction it came from.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <optional>

#include "exact/flint_types.hpp"
#include "exact/modulus.hpp"

namespace gramproof::exact {

/// The only fraction of numbers below 2^30 with this residue, if there is one: a guess, which the
/// caller proves in integers. FLINT's rational reconstruction; a FlintSession must be open.
[[nodiscard]] inline std::optional<mpq_class> small_fraction(std::uint64_t residue,
                                                             const Modulus& modulus) {
  FlintInteger numerator, denominator, a, m;
  fmpz_set_ui(a.get(), residue);
  fmpz_set_ui(m.get(), modulus.value());
  if (_fmpq_reconstruct_fmpz(numerator.get(), denominator.get(), a.get(), m.get()) == 0) {
    return std::nullopt;
  }
  return mpq_class(numerator.to_mpz(), denominator.to_mpz());
}

}  // namespace gramproof::exact
