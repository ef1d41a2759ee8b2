#include "recheck/numbers.hpp"

#include <cstdlib>
#include <string>

#include "recheck/delimited.hpp"

namespace gramproof::recheck {
namespace {

constexpr std::size_t longest_decimal = 4000;
constexpr std::size_t longest_integer = 100'000;
constexpr long largest_exponent = 4000;

std::string_view take_digits(std::string_view& text) {
  std::size_t count = 0;
  while (count < text.size() && text[count] >= '0' && text[count] <= '9') ++count;
  const std::string_view digits = text.substr(0, count);
  text.remove_prefix(count);
  return digits;
}

bool take_sign(std::string_view& text) {
  const bool negative = !text.empty() && text.front() == '-';
  if (!text.empty() && (text.front() == '-' || text.front() == '+')) text.remove_prefix(1);
  return negative;
}

/// The exponent behind an e, 0 without one; none if what is left is no exponent.
std::optional<long> take_exponent(std::string_view text) {
  if (text.empty()) return 0;
  if (text.front() != 'e' && text.front() != 'E') return std::nullopt;
  text.remove_prefix(1);
  const bool negative = take_sign(text);
  const std::string_view digits = take_digits(text);
  if (digits.empty() || !text.empty()) return std::nullopt;
  long exponent = 0;
  for (const char digit : digits) {
    exponent = exponent * 10 + (digit - '0');
    if (exponent > largest_exponent) return std::nullopt;
  }
  return negative ? -exponent : exponent;
}

/// The digits of both, one behind the other.
mpz_class integer_of(std::string_view whole, std::string_view fraction) {
  constexpr std::size_t most_short_digits = 18;
  if (whole.size() + fraction.size() > most_short_digits)
    return mpz_class(std::string(whole) + std::string(fraction), 10);
  unsigned long number = 0;
  for (const std::string_view digits : {whole, fraction}) {
    for (const char digit : digits) number = number * 10 + static_cast<unsigned long>(digit - '0');
  }
  return mpz_class(number);
}

mpq_class scaled(const mpz_class& digits, long exponent) {
  if (exponent == 0) return mpq_class(digits);
  mpz_class power;
  mpz_ui_pow_ui(power.get_mpz_t(), 10, static_cast<unsigned long>(std::labs(exponent)));
  if (exponent > 0) return mpq_class(digits * power);
  mpq_class value(digits, power);
  value.canonicalize();
  return value;
}

}  // namespace

std::optional<mpq_class> read_decimal(std::string_view text, char decimal_mark) {
  text = without_blanks(text);
  if (text.size() > longest_decimal) return std::nullopt;
  const bool negative = take_sign(text);
  const std::string_view whole = take_digits(text);
  std::string_view fraction;
  if (!text.empty() && text.front() == decimal_mark) {
    text.remove_prefix(1);
    fraction = take_digits(text);
  }
  if (whole.empty() && fraction.empty()) return std::nullopt;
  const std::optional<long> exponent = take_exponent(text);
  if (!exponent) return std::nullopt;
  mpz_class digits = integer_of(whole, fraction);
  if (negative) digits = -digits;
  return scaled(digits, *exponent - static_cast<long>(fraction.size()));
}

std::optional<mpq_class> read_exact(std::string_view text) {
  const std::size_t bar = text.find('/');
  const std::optional<mpq_class> above = read_decimal(text.substr(0, bar), '.');
  if (bar == std::string_view::npos || !above) return above;
  const std::optional<mpq_class> below = read_decimal(text.substr(bar + 1), '.');
  if (!below || *below == 0) return std::nullopt;
  return mpq_class(*above / *below);
}

std::optional<mpz_class> read_integer(std::string_view text) {
  if (text.size() > longest_integer) return std::nullopt;
  const bool negative = !text.empty() && text.front() == '-';
  if (negative) text.remove_prefix(1);
  const std::string_view digits = take_digits(text);
  if (digits.empty() || !text.empty()) return std::nullopt;
  mpz_class number(std::string(digits), 10);
  if (negative) number = -number;
  return number;
}

}  // namespace gramproof::recheck
