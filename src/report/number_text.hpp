// src/report/number_text.hpp - figures as a person reads them: only digits that are known, no
// notation to decode.
#pragma once

#include <string>
#include <string_view>

namespace gramproof::report {

/// A figure is printed with at most this many significant digits: a reader compares sizes.
inline constexpr int most_digits = 4;

/// `value` rounded to `digits` significant digits (at least 1), without trailing zeros: "41.23",
/// "12,350", "1.235 million", "3.2·10^-7", "3.2·10^17". Not finite: "infinite" or "undefined".
[[nodiscard]] std::string rounded(double value, int digits);

/// rounded() to the digits that are known, at most most_digits; "not known in double precision"
/// when not one is.
[[nodiscard]] std::string figure(double value, double known_digits);

/// A positive size: figure(), or when not one digit is known "not known in double precision: at
/// least 40 trillion". `largest`: the largest size that can be told at all; the reciprocal of the
/// size is wrong by at most 1/largest, so the size is at least 1 / (1/value + 1/largest).
[[nodiscard]] std::string size_or_bound(double value, double known_digits, double largest);

/// A share between 0 and 1: "4.1%", below a thousandth "1 part in 32,000".
[[nodiscard]] std::string share(double value, double known_digits);

/// A power of ten from its logarithm, to the whole exponent: "about 10^63".
[[nodiscard]] std::string power_of_ten(double log10_value);

/// "once", "twice", "3 times", ... for whole counts below 3, else "N times".
[[nodiscard]] std::string times(double factor, double known_digits);

}  // namespace gramproof::report
