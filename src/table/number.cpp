#include "table/number.hpp"

#include <algorithm>
#include <cmath>
#include <cstdlib>

#include <fast_float/fast_float.h>

#include "table/number_short.hpp"

namespace gramproof::table {
namespace {

constexpr std::size_t most_significant_digits = 1000;
constexpr std::int64_t most_decimals = 1400;  // 1,000 digits at 1e-305 have 1,305; fits int16
constexpr double smallest_magnitude = 1e-305;
constexpr double largest_magnitude = 1e305;

bool is_digit(char c) {
  return c >= '0' && c <= '9';
}

std::string_view without_blanks(std::string_view text) {
  while (!text.empty() && (text.front() == ' ' || text.front() == '\t')) text.remove_prefix(1);
  while (!text.empty() && (text.back() == ' ' || text.back() == '\t')) text.remove_suffix(1);
  return text;
}

/// The parts of a number as written.
struct Spelling {
  bool negative = false;
  std::string_view unsigned_text;  ///< from the first digit or mark to the end
  std::string_view whole, fraction;
  std::int64_t exponent = 0;  ///< held at +-1e6: far beyond every limit, and free of overflow
};

std::string_view take_digits(std::string_view& text) {
  std::size_t count = 0;
  while (count < text.size() && is_digit(text[count])) ++count;
  const std::string_view digits = text.substr(0, count);
  text.remove_prefix(count);
  return digits;
}

bool take_exponent(std::string_view& text, std::int64_t& exponent) {
  if (text.empty() || (text.front() != 'e' && text.front() != 'E')) return true;
  text.remove_prefix(1);
  const bool negative = !text.empty() && text.front() == '-';
  if (!text.empty() && (text.front() == '-' || text.front() == '+')) text.remove_prefix(1);
  const std::string_view digits = take_digits(text);
  if (digits.empty()) return false;
  for (const char digit : digits) {
    exponent = std::min<std::int64_t>(exponent * 10 + (digit - '0'), 1'000'000);
  }
  if (negative) exponent = -exponent;
  return true;
}

bool read_spelling(std::string_view text, char decimal_mark, Spelling& spelling) {
  if (text.empty()) return false;
  spelling.negative = text.front() == '-';
  if (text.front() == '-' || text.front() == '+') text.remove_prefix(1);
  spelling.unsigned_text = text;
  spelling.whole = take_digits(text);
  if (!text.empty() && text.front() == decimal_mark) {
    text.remove_prefix(1);
    spelling.fraction = take_digits(text);
  }
  if (spelling.whole.empty() && spelling.fraction.empty()) return false;
  return take_exponent(text, spelling.exponent) && text.empty();
}

/// The nearest double of a spelling the short path does not cover. fast_float 3.9 returns success
/// with inf or 0 beyond the range of doubles; the caller's range check meets both.
double nearest_double(const Spelling& spelling, char decimal_mark) {
  const std::string_view text = spelling.unsigned_text;
  double value = 0;
  const fast_float::parse_options options(fast_float::chars_format::general, decimal_mark);
  fast_float::from_chars_advanced(text.data(), text.data() + text.size(), value, options);
  return spelling.negative ? -value : value;
}

std::string digits_of(const Number& number) {
  std::string digits = number.wide.empty() ? std::to_string(number.mantissa) : number.wide;
  if (digits.front() == '-') digits.erase(0, 1);
  return digits;
}

bool is_negative(const Number& number) {
  return number.wide.empty() ? number.mantissa < 0 : number.wide.front() == '-';
}

/// |value| = 0.d1 d2 ... * 10^point with d1 != 0 and no trailing zeros; no digits for zero.
struct Canonical {
  bool negative = false;
  std::string digits;
  std::int64_t point = 0;
};

Canonical canonical(const Number& number) {
  Canonical form{is_negative(number), digits_of(number), 0};
  form.digits.erase(0, std::min(form.digits.find_first_not_of('0'), form.digits.size()));
  form.point = static_cast<std::int64_t>(form.digits.size()) - number.decimals;
  while (!form.digits.empty() && form.digits.back() == '0') form.digits.pop_back();
  if (form.digits.empty()) form = {};
  return form;
}

}  // namespace

NumberStatus parse_number(std::string_view cell, char decimal_mark, Number& number) {
  number = {};
  cell = without_blanks(cell);
  const char* const end = cell.data() + cell.size();
  if (ShortNumber quick; parse_short(cell.data(), end, end, decimal_mark, quick)) {
    number.mantissa = quick.mantissa;
    number.decimals = quick.decimals;
    number.significant_digits = digits_in(quick.mantissa);
    if (short_value(quick, number.value)) return NumberStatus::number;
  }
  Spelling spelling;
  if (!read_spelling(cell, decimal_mark, spelling)) return NumberStatus::not_a_number;

  std::string digits = std::string(spelling.whole) + std::string(spelling.fraction);
  digits.erase(0, std::min(digits.find_first_not_of('0'), digits.size()));
  const std::int64_t decimals =
      static_cast<std::int64_t>(spelling.fraction.size()) - spelling.exponent;
  if (digits.size() > most_significant_digits) return NumberStatus::too_long;
  if (std::abs(decimals) > most_decimals) return NumberStatus::out_of_range;
  number.decimals = static_cast<std::int32_t>(decimals);
  number.significant_digits = static_cast<std::int32_t>(digits.size());
  number.mantissa = 0;
  if (digits.empty()) return NumberStatus::number;

  if (digits.size() <= 18) {
    for (const char digit : digits) number.mantissa = number.mantissa * 10 + (digit - '0');
    if (spelling.negative) number.mantissa = -number.mantissa;
  } else {
    number.wide = (spelling.negative ? "-" : "") + digits;
  }
  number.value = nearest_double(spelling, decimal_mark);
  const double magnitude = std::abs(number.value);
  const bool in_range = magnitude >= smallest_magnitude && magnitude <= largest_magnitude;
  return in_range ? NumberStatus::number : NumberStatus::out_of_range;
}

std::string plain_text(const Number& number) {
  const Canonical form = canonical(number);
  if (form.digits.empty()) return "0";
  std::string text = form.negative ? "-" : "";
  const auto size = static_cast<std::int64_t>(form.digits.size());
  if (form.point <= 0) {
    text += "0." + std::string(static_cast<std::size_t>(-form.point), '0') + form.digits;
  } else if (form.point >= size) {
    text += form.digits + std::string(static_cast<std::size_t>(form.point - size), '0');
  } else {
    const auto point = static_cast<std::size_t>(form.point);
    text += form.digits.substr(0, point) + "." + form.digits.substr(point);
  }
  return text;
}

int compare(const Number& left, const Number& right) {
  const Canonical a = canonical(left), b = canonical(right);
  const int sign_a = a.digits.empty() ? 0 : (a.negative ? -1 : 1);
  const int sign_b = b.digits.empty() ? 0 : (b.negative ? -1 : 1);
  if (sign_a != sign_b) return sign_a < sign_b ? -1 : 1;
  if (sign_a == 0) return 0;
  if (a.point != b.point) return (a.point < b.point) == (sign_a > 0) ? -1 : 1;
  const int order = a.digits.compare(b.digits);
  if (order == 0) return 0;
  return (order < 0) == (sign_a > 0) ? -1 : 1;
}

}  // namespace gramproof::table
