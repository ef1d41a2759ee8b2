// src/table/number.hpp - numbers as they are written: exact decimals beside the nearest double.
//
// A cell means its decimals: 12.40 is 1240 * 10^-2. The double serves the floating-point factor;
// the decimals serve the proofs. Treatment of every spelling (tested case by case in
// tests/table/number_test.cpp):
//   accepted   digits with an optional sign (+ or -), an optional decimal mark and an optional
//   exponent: 1, +1, -.5, 5., 1e3 blanks     leading and trailing spaces and tabs around a cell are
//   ignored refused    nan, inf, hexadecimal floats, 1,234 (where the comma is no decimal
//   mark), 1.2.3, --5, 1_000: text, not numbers zero       -0, 0.00 and 0e5 are zero; the double is
//   never minus zero limits     at most 1,000 significant digits (too_long); a non-zero value whose
//   double would leave 1e-305 .. 1e305 (1e400,
//              1e-400) and a zero with more than 1,400 decimals or an exponent beyond 1,400 are
//              numbers out of range: both are an error where a term needs the number, and none
//              where no term does
#pragma once

#include <cstdint>
#include <string>
#include <string_view>

namespace gramproof::table {

/// The exact value `mantissa * 10^-decimals` when `wide` is empty (|mantissa| < 10^18), else `wide
/// * 10^-decimals`, `wide` being a decimal integer with optional '-'. `decimals` counts as written
/// (12.40 has 2) and is negative only through an exponent (1e5: mantissa 1, decimals -5).
struct Number {
  double value = 0;
  std::int64_t mantissa = 0;
  std::int32_t decimals = 0;
  std::int32_t significant_digits =
      0;  ///< digits from the first non-zero one to the last written; 0 for zero
  std::string wide;
};

enum class NumberStatus { number, not_a_number, out_of_range, too_long };

/// Parses a whole cell (blanks around it ignored). O(length).
[[nodiscard]] NumberStatus parse_number(std::string_view cell, char decimal_mark, Number& number);

/// The shortest plain text of the exact value: no trailing zeros, '.' as decimal mark (1240 * 10^-2
/// -> "12.4").
[[nodiscard]] std::string plain_text(const Number& number);

/// Exact comparison of values, -1, 0 or 1. 1.0 equals 1.
[[nodiscard]] int compare(const Number& left, const Number& right);

}  // namespace gramproof::table
