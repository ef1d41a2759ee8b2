#include "report/number_text.hpp"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "base/text.hpp"

namespace gramproof::report {
namespace {

/// Decimal digits of a positive number and the power of ten of the first one.
struct Decimal {
  std::string digits;
  int exponent = 0;
};

Decimal decimal_of(double value, int digits) {
  const std::string text = fmt::format("{:.{}e}", value, digits - 1);
  const std::size_t mark = text.find('e');
  Decimal decimal;
  for (const char letter : text.substr(0, mark)) {
    if (letter != '.') decimal.digits += letter;
  }
  decimal.exponent = std::stoi(text.substr(mark + 1));
  while (decimal.digits.size() > 1 && decimal.digits.back() == '0') decimal.digits.pop_back();
  return decimal;
}

/// The digits with the decimal point behind the place of 10^0 when the first digit stands for
/// 10^exponent; thousands are grouped.
std::string placed(const std::string& digits, int exponent) {
  if (exponent < 0) {
    return "0." + std::string(static_cast<std::size_t>(-exponent - 1), '0') + digits;
  }
  std::string all = digits;
  const auto whole = static_cast<std::size_t>(exponent) + 1;
  if (all.size() < whole) all.append(whole - all.size(), '0');
  const std::string front = grouped(std::stoull(all.substr(0, whole)));
  return all.size() == whole ? front : front + "." + all.substr(whole);
}

std::string positive(double value, int digits) {
  const Decimal decimal = decimal_of(value, digits);
  if (decimal.exponent >= 15 || decimal.exponent < -4) {
    const std::string power = fmt::format("10^{}", decimal.exponent);
    return decimal.digits == "1" ? power : placed(decimal.digits, 0) + "·" + power;
  }
  if (decimal.exponent >= 12) return placed(decimal.digits, decimal.exponent - 12) + " trillion";
  if (decimal.exponent >= 9) return placed(decimal.digits, decimal.exponent - 9) + " billion";
  if (decimal.exponent >= 6) return placed(decimal.digits, decimal.exponent - 6) + " million";
  return placed(decimal.digits, decimal.exponent);
}

constexpr const char* not_known = "not known in double precision";

int digits_to_print(double known_digits) {
  return static_cast<int>(std::floor(std::min(known_digits, static_cast<double>(most_digits))));
}

}  // namespace

std::string rounded(double value, int digits) {
  if (std::isnan(value)) return "undefined";
  if (std::isinf(value)) return value > 0 ? "infinite" : "minus infinity";
  if (value == 0) return "0";
  const std::string text = positive(std::abs(value), std::max(digits, 1));
  return value < 0 ? "-" + text : text;
}

std::string figure(double value, double known_digits) {
  // An infinite or undefined value is a statement, not a rounding.
  if (!std::isfinite(value)) return rounded(value, 1);
  if (!(known_digits >= 1)) return not_known;
  return rounded(value, digits_to_print(known_digits));
}

std::string size_or_bound(double value, double known_digits, double largest) {
  if (std::isfinite(value) && known_digits >= 1) return figure(value, known_digits);
  const double bound = std::isfinite(value) && value > 0 ? 1 / (1 / value + 1 / largest) : largest;
  if (!(bound > 0) || !std::isfinite(bound)) return not_known;
  // A bound is rounded down to one digit. The factor keeps 2·10^12 from becoming 1·10^12 by the
  // rounding of the logarithm and the division.
  const double unit = std::pow(10, std::floor(std::log10(bound)));
  const double lower = std::max(1.0, std::floor(bound / unit * (1 + 1e-12))) * unit;
  return fmt::format("{}: at least {}", not_known, rounded(lower, 1));
}

std::string share(double value, double known_digits) {
  if (!std::isfinite(value)) return rounded(value, 1);
  if (!(known_digits >= 1)) return fmt::format("a share {}", not_known);
  if (value == 0) return "nothing";
  const int digits = digits_to_print(known_digits);
  if (value >= 1e-3) return rounded(100 * value, std::min(digits, 3)) + "%";
  return "1 part in " + rounded(1 / value, std::min(digits, 2));
}

std::string power_of_ten(double log10_value) {
  return fmt::format("about 10^{}", std::llround(log10_value));
}

std::string times(double factor, double known_digits) {
  if (!(known_digits >= 1)) return fmt::format("a number of times {}", not_known);
  const std::string text = rounded(factor, std::min(digits_to_print(known_digits), 3));
  if (text == "1") return "once";
  if (text == "2") return "twice";
  return text + " times";
}

}  // namespace gramproof::report
