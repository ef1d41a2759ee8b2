// tests/long/experiments.hpp - what is tried on thousands of seeded designs. Each function takes
// one seed and prints a line to standard error for what is wrong.
#pragma once

#include <cstdint>
#include <string>

namespace gramproof::test {

/// Of all designs tried.
struct Tally {
  std::uint64_t designs = 0;
  std::uint64_t right = 0;
  std::uint64_t through_audit = 0;  ///< of the designs, also audited from a file
};

/// Planted relations (coefficients to 10^6, corank to 8, k to 60): is their span recovered by the
/// proof, by the basis that is shown and, for one design in twenty, by a whole audit?
void try_span(std::uint64_t seed, Tally& tally);

/// Planted relations of at most 7 columns with coefficients of at most 12: has the basis that is
/// shown no more non-zero coefficients in all than the planted one?
void try_length(std::uint64_t seed, Tally& tally);

/// A relation that one to five rows break (n 100 to 5,000, k to 60): is it the only one that the
/// audit tells, with all the rows that break it?
void try_violators(std::uint64_t seed, Tally& tally);

/// No relation: does the audit tell of none?
void try_clean(std::uint64_t seed, Tally& tally);

}  // namespace gramproof::test
