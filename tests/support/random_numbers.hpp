// tests/support/random_numbers.hpp - seeded numbers that are the same on every machine and library.
#pragma once

#include <cstdint>

namespace gramproof::test {

/// SplitMix64 (Steele, Lea & Flood 2014, OOPSLA): every seed gives a good stream.
class Random {
 public:
  explicit Random(std::uint64_t seed) : state_(seed) {}
  std::uint64_t bits() {
    std::uint64_t z = (state_ += 0x9E3779B97F4A7C15ULL);
    z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9ULL;
    z = (z ^ (z >> 27)) * 0x94D049BB133111EBULL;
    return z ^ (z >> 31);
  }
  /// Whole number from low to high.
  std::int64_t whole(std::int64_t low, std::int64_t high) {
    return low + static_cast<std::int64_t>(bits() % static_cast<std::uint64_t>(high - low + 1));
  }
  /// In [0, 1).
  double unit() { return static_cast<double>(bits() >> 11) * 0x1p-53; }

 private:
  std::uint64_t state_;
};

}  // namespace gramproof::test
