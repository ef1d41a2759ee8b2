// src/table/number_short.hpp - the common spelling of a number, inlined into the readers' inner
// loops.
//
// Nearly every cell of real data is a sign, up to 18 digits and a decimal mark. Its double comes
// from one correctly rounded division, because mantissa and power of ten are both doubles exactly:
// Clinger, "How to read floating point numbers accurately", PLDI 1990. All else goes to
// parse_number.
#pragma once

#include <array>
#include <bit>
#include <cstddef>
#include <cstdint>
#include <cstdlib>
#include <cstring>

namespace gramproof::table {

struct ShortNumber {
  std::int64_t mantissa = 0;
  std::int32_t decimals = 0;  ///< 0 .. 18
};

inline constexpr std::array<double, 23> double_powers_of_ten = {
    1e0,  1e1,  1e2,  1e3,  1e4,  1e5,  1e6,  1e7,  1e8,  1e9,  1e10, 1e11,
    1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22};

inline constexpr std::array<std::int64_t, 19> integer_powers_of_ten = [] {
  std::array<std::int64_t, 19> powers{};
  std::int64_t power = 1;
  for (std::size_t i = 0; i < powers.size(); ++i) {
    powers[i] = power;
    if (i + 1 < powers.size()) power *= 10;
  }
  return powers;
}();

inline constexpr std::uint64_t every_byte = 0x0101010101010101u;

/// Up to eight unsigned characters, of which the last `length` (1 .. 8) bytes of `word` are the
/// text in memory order (little endian) and the others are '0'.
inline bool parse_word(std::uint64_t word, int length, char decimal_mark, ShortNumber& number) {
  const std::uint64_t differs = word ^ (every_byte * static_cast<unsigned char>(decimal_mark));
  // The lowest set bit marks the first byte that is zero; higher ones may be false.
  const std::uint64_t marks = (differs - every_byte) & ~differs & (every_byte * 0x80);
  int decimals = 0;
  if (marks != 0) {
    const int at = std::countr_zero(marks) & ~7;  // bits below the mark's byte
    const std::uint64_t below = word & ((std::uint64_t{1} << at) - 1);
    const std::uint64_t upto = at == 56 ? ~std::uint64_t{0} : (std::uint64_t{1} << (at + 8)) - 1;
    word = (word & ~upto) | (below << 8) | '0';
    decimals = 7 - at / 8;
    if (--length == 0) return false;
  }
  const std::uint64_t digits = word - every_byte * '0';
  if ((((word + every_byte * 0x46) | digits) & (every_byte * 0x80)) != 0) return false;
  const std::uint64_t pairs = digits * 10 + (digits >> 8);  // in every second byte
  constexpr std::uint64_t low_bytes = 0x000000FF000000FFu;
  const std::uint64_t odd = (pairs & low_bytes) * (100 + (std::uint64_t{1'000'000} << 32));
  const std::uint64_t even = ((pairs >> 16) & low_bytes) * (1 + (std::uint64_t{10'000} << 32));
  number.mantissa = static_cast<std::int64_t>((odd + even) >> 32);
  number.decimals = decimals;
  return true;
}

/// Reads [at, end) whole: optional sign, digits with at most one decimal mark, 1 to 18 digits in
/// all (leading zeros count). False: another spelling, or no number; nothing is known then. Bytes
/// up to `readable` (>= end) may be looked at.
inline bool parse_short(const char* at, const char* end, const char* readable, char decimal_mark,
                        ShortNumber& number) {
  if (at == end) return false;
  const bool negative = *at == '-';
  if (negative || *at == '+') ++at;
  const std::ptrdiff_t length = end - at;
  if (std::endian::native == std::endian::little && length >= 1 && length <= 8 &&
      readable - at >= 8) {
    std::uint64_t word = 0;
    std::memcpy(&word, at, 8);
    const int unused = 64 - 8 * static_cast<int>(length);
    word <<= unused;
    if (unused > 0) word |= (every_byte * '0') >> (64 - unused);
    if (!parse_word(word, static_cast<int>(length), decimal_mark, number)) return false;
    if (negative) number.mantissa = -number.mantissa;
    return true;
  }
  std::uint64_t mantissa = 0;  // wraps beyond 19 digits; such texts are refused below
  const char* const first = at;
  while (at != end && static_cast<unsigned char>(*at - '0') < 10) {
    mantissa = mantissa * 10 + static_cast<unsigned char>(*at++ - '0');
  }
  std::ptrdiff_t digits = at - first, decimals = 0;
  if (at != end && *at == decimal_mark) {
    const char* const fraction = ++at;
    while (at != end && static_cast<unsigned char>(*at - '0') < 10) {
      mantissa = mantissa * 10 + static_cast<unsigned char>(*at++ - '0');
    }
    decimals = at - fraction;
    digits += decimals;
  }
  if (at != end || digits == 0 || digits > 18) return false;
  const auto magnitude = static_cast<std::int64_t>(mantissa);
  number.mantissa = negative ? -magnitude : magnitude;
  number.decimals = static_cast<std::int32_t>(decimals);
  return true;
}

/// The nearest double, or false where the mantissa has more than 53 bits. Minus zero gives plain
/// zero.
inline bool short_value(const ShortNumber& number, double& value) {
  constexpr std::int64_t exact = std::int64_t{1} << 53;
  if (number.mantissa > exact || number.mantissa < -exact) return false;
  value = static_cast<double>(number.mantissa) /
          double_powers_of_ten[static_cast<std::size_t>(number.decimals)];
  return true;
}

/// Digits of |mantissa| < 10^18; 0 for zero.
inline std::int32_t digits_in(std::int64_t mantissa) {
  const std::int64_t magnitude = std::abs(mantissa);
  std::int32_t digits = 0;
  while (digits < 18 && magnitude >= integer_powers_of_ten[static_cast<std::size_t>(digits)]) {
    ++digits;
  }
  return digits;
}

}  // namespace gramproof::table
