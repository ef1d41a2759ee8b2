// Numbers as they are written: every spelling, exactness, and doubles bit for bit.
#include "table/number.hpp"

#include <doctest/doctest.h>

#include <bit>
#include <cmath>
#include <cstdlib>
#include <random>
#include <string>
#include <vector>

#include "table/number_short.hpp"

using namespace gramproof::table;

namespace {

std::string exact(const Number& number) {
  return (number.wide.empty() ? std::to_string(number.mantissa) : number.wide) + "e" +
         std::to_string(-number.decimals);
}

std::string words(NumberStatus status) {
  switch (status) {
    case NumberStatus::number:
      return "number";
    case NumberStatus::not_a_number:
      return "text";
    case NumberStatus::out_of_range:
      return "out of range";
    case NumberStatus::too_long:
      return "too long";
  }
  return "?";
}

}  // namespace

TEST_CASE("every spelling has its one treatment") {
  struct Case {
    std::string why, text, status, exact;
    int significant = 0;
    char mark = '.';
  };
  const std::string nines18(18, '9'), nines19(19, '9');
  const std::string thousand(1000, '7'), beyond(1001, '7');
  const Case cases[] = {
      {"whole", "1", "number", "1e0", 1},
      {"plus sign", "+1", "number", "1e0", 1},
      {"minus sign", "-12.40", "number", "-1240e-2", 4},
      {"no digit before the mark", "-.5", "number", "-5e-1", 1},
      {"no digit after the mark", "5.", "number", "5e0", 1},
      {"leading zeros do not count as digits", "007.50", "number", "750e-2", 3},
      {"decimals of zero are kept", "0.00", "number", "0e-2", 0},
      {"minus zero is zero", "-0", "number", "0e0", 0},
      {"exponent", "1e3", "number", "1e3", 1},
      {"capital exponent with sign", "2.50E-2", "number", "250e-4", 3},
      {"exponent with plus", "1e+2", "number", "1e2", 1},
      {"blanks around", " \t12 ", "number", "12e0", 2},
      {"18 digits", nines18, "number", nines18 + "e0", 18},
      {"19 digits", nines19, "number", nines19 + "e0", 19},
      {"30 digits", "123456789012345678901234567890", "number", "123456789012345678901234567890e0",
       30},
      {"30 digits with decimals, negative", "-123456789012345678901234.567890", "number",
       "-123456789012345678901234567890e-6", 30},
      {"zeros before many digits", "0.000000000000000000000000000012", "number", "12e-30", 2},
      {"decimal comma", "1,5", "number", "15e-1", 2, ','},
      {"decimal comma with exponent", "-0,125e2", "number", "-125e-1", 3, ','},
      {"1,000 digits", thousand, "out of range", "", 0},
      {"1,000 digits in range", "0." + thousand, "number", thousand + "e-1000", 1000},
      {"1,001 digits", "0." + beyond, "too long", ""},
      {"largest in range", "1e305", "number", "1e305", 1},
      {"smallest in range", "1e-305", "number", "1e-305", 1},
      {"1e300", "1e300", "number", "1e300", 1},
      {"1e-300", "1e-300", "number", "1e-300", 1},
      {"just beyond", "1.0001e305", "out of range", ""},
      {"just below", "9.99e-306", "out of range", ""},
      {"1e400", "1e400", "out of range", ""},
      {"1e-400", "1e-400", "out of range", ""},
      {"an exponent that would overflow", "1e99999999999999999999", "out of range", ""},
      {"and a negative one", "-3e-99999999999999999999", "out of range", ""},
      {"a zero with such an exponent", "0e99999", "out of range", ""},
      {"nan", "nan", "text", ""},
      {"NaN", "NaN", "text", ""},
      {"inf", "inf", "text", ""},
      {"-Infinity", "-Infinity", "text", ""},
      {"hexadecimal", "0x1p-3", "text", ""},
      {"thousands separator", "1,234", "text", ""},
      {"thousands point beside decimal comma", "1.234", "text", "", 0, ','},
      {"two marks", "1.2.3", "text", ""},
      {"two signs", "--5", "text", ""},
      {"sign behind", "5-", "text", ""},
      {"sign apart", "- 5", "text", ""},
      {"underscore", "1_000", "text", ""},
      {"blank inside", "1 000", "text", ""},
      {"percent", "5%", "text", ""},
      {"currency", "$5", "text", ""},
      {"only a mark", ".", "text", ""},
      {"only a sign", "-", "text", ""},
      {"sign and mark", "+.", "text", ""},
      {"no exponent digits", "1e", "text", ""},
      {"no exponent digits after sign", "1e+", "text", ""},
      {"fraction in the exponent", "1e2.5", "text", ""},
      {"no mantissa", "e5", "text", ""},
      {"letters behind", "1.5abc", "text", ""},
      {"Fortran exponent", "1d5", "text", ""},
      {"typographic minus",
       "\xE2\x88\x92"
       "5",
       "text", ""},
      {"empty", "", "text", ""},
      {"blanks", "   ", "text", ""},
      {"a NUL behind", std::string("5\0", 2), "text", ""},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    CAPTURE(c.text);
    Number number;
    const NumberStatus status = parse_number(c.text, c.mark, number);
    CHECK(words(status) == c.status);
    if (status != NumberStatus::number) continue;
    CHECK(exact(number) == c.exact);
    CHECK(number.significant_digits == c.significant);
    CHECK_FALSE(std::signbit(number.value) != (c.exact.front() == '-'));
  }
}

namespace {

std::string random_digits(std::mt19937_64& random, std::size_t most) {
  std::string digits(random() % (most + 1), '0');
  for (char& digit : digits) digit = static_cast<char>('0' + random() % 10);
  return digits;
}

std::string random_spelling(std::mt19937_64& random) {
  const std::size_t most = random() % 4 == 0 ? 40 : 10;
  std::string text = random() % 3 == 0 ? "-" : "";
  const std::string whole = random_digits(random, most), fraction = random_digits(random, most);
  text += whole;
  if (!fraction.empty() || random() % 2 == 0) text += "." + fraction;
  if (whole.empty() && fraction.empty()) text = "7";
  if (random() % 3 == 0) text += "e" + std::to_string(static_cast<int>(random() % 560) - 280);
  return text;
}

void check_against_strtod(const std::string& text) {
  Number number;
  const NumberStatus status = parse_number(text, '.', number);
  const double expected =
      std::strtod(text.c_str(), nullptr);  // the C locale: nothing here sets another
  const double magnitude = std::abs(expected);
  CAPTURE(text);
  if (magnitude != 0 && (magnitude < 1e-305 || magnitude > 1e305)) {
    CHECK(status == NumberStatus::out_of_range);
    return;
  }
  REQUIRE(status == NumberStatus::number);
  // Adding zero takes the sign off minus zero and leaves every other double as it is.
  CHECK(std::bit_cast<std::uint64_t>(number.value) == std::bit_cast<std::uint64_t>(expected + 0.0));
}

}  // namespace

TEST_CASE("doubles agree with strtod bit for bit on random spellings") {
  const unsigned seed = 20240817;
  CAPTURE(seed);
  std::mt19937_64 random(seed);
  for (int i = 0; i < 50'000; ++i) check_against_strtod(random_spelling(random));
}

TEST_CASE(
    "doubles agree with strtod on random doubles printed with 15 to 20 digits and on midpoints") {
  const unsigned seed = 5;
  CAPTURE(seed);
  std::mt19937_64 random(seed);
  for (int i = 0; i < 20'000; ++i) {
    const double value = std::bit_cast<double>(random());
    if (!std::isfinite(value)) continue;
    char text[2000];
    std::snprintf(text, sizeof text, "%.*e", 14 + static_cast<int>(random() % 6), value);
    check_against_strtod(text);
    // Halfway between two neighbours of 1..2^20, written out whole: ties to even.
    const double base = 1 + static_cast<double>(random() % (1u << 20)) +
                        0x1p-30 * static_cast<double>(random() % (1u << 30));
    const long double midpoint =
        (static_cast<long double>(base) + static_cast<long double>(std::nextafter(base, 1e9))) / 2;
    std::snprintf(text, sizeof text, "%.64Lf", midpoint);
    check_against_strtod(text);
  }
}

TEST_CASE("the edges of the short path are rounded correctly") {
  for (const std::string text :
       {"9007199254740992", "9007199254740993", "9007199254740995", "900719925474099.3",
        "0.9007199254740993", "999999999999999999", "0.999999999999999999", "123456789012345678",
        ".000000000000000001", "9007199254740991e22", "9007199254740991e-22", "9007199254740993e23",
        "1e22", "1e23", "1e-22", "1e-23"}) {
    check_against_strtod(text);
  }
}

TEST_CASE("plain text is the shortest spelling of the exact value") {
  struct Case {
    std::string text, plain;
  };
  const Case cases[] = {
      {"12.40", "12.4"},
      {"1.0", "1"},
      {"0.00", "0"},
      {"-0", "0"},
      {"1e3", "1000"},
      {"-5e-3", "-0.005"},
      {"100", "100"},
      {".50", "0.5"},
      {"1200e-1", "120"},
      {"-0.10", "-0.1"},
      {"0010", "10"},
      {"123456789012345678901234567890.500", "123456789012345678901234567890.5"},
      {"1e20", "1" + std::string(20, '0')},
      {"1000000000000000000000e-21", "1"},
  };
  for (const Case& c : cases) {
    CAPTURE(c.text);
    Number number;
    REQUIRE(parse_number(c.text, '.', number) == NumberStatus::number);
    CHECK(plain_text(number) == c.plain);
  }
}

TEST_CASE("comparison is exact and orders all pairs of an ascending list") {
  const std::vector<std::string> ascending = {"-1e300",
                                              "-123456789012345678901234567891",
                                              "-123456789012345678901234567890",
                                              "-10",
                                              "-9.99",
                                              "-1",
                                              "-0.1",
                                              "-1e-300",
                                              "0",
                                              "1e-300",
                                              "0.1",
                                              "0.10000000000000000000000000001",
                                              "0.2",
                                              "1",
                                              "1.0000000000000000000000001",
                                              "9",
                                              "10",
                                              "9007199254740992",
                                              "9007199254740993",
                                              "1e300"};
  for (std::size_t i = 0; i < ascending.size(); ++i) {
    for (std::size_t j = 0; j < ascending.size(); ++j) {
      Number a, b;
      REQUIRE(parse_number(ascending[i], '.', a) == NumberStatus::number);
      REQUIRE(parse_number(ascending[j], '.', b) == NumberStatus::number);
      CAPTURE(ascending[i]);
      CAPTURE(ascending[j]);
      CHECK(compare(a, b) == (i < j ? -1 : (i > j ? 1 : 0)));
    }
  }
  Number one, same, zero, long_zero;
  REQUIRE(parse_number("1", '.', one) == NumberStatus::number);
  REQUIRE(parse_number("1000000000000000000000e-21", '.', same) == NumberStatus::number);
  REQUIRE(parse_number("-0.000", '.', zero) == NumberStatus::number);
  REQUIRE(parse_number("0e5", '.', long_zero) == NumberStatus::number);
  CHECK(compare(one, same) == 0);
  CHECK(compare(zero, long_zero) == 0);
}

TEST_CASE("the word-wise and the digit-wise reading of short texts agree") {
  const unsigned seed = 31;
  CAPTURE(seed);
  std::mt19937 random(seed);
  static const std::string alphabet =
      "0123456789012345678901234567890123456789..,-+e/:\x7f\xB0\xFF ";
  int numbers = 0;
  for (int i = 0; i < 200'000; ++i) {
    std::string text(1 + random() % 10, '0');
    for (char& c : text) c = alphabet[random() % alphabet.size()];
    const std::string behind = text + ",9.9,8,7,";
    const char mark = random() % 4 == 0 ? ',' : '.';
    const char* const end = text.data() + text.size();
    const char* const cell = behind.data();
    ShortNumber by_digit, by_word;
    const bool digit_wise = parse_short(text.data(), end, end, mark, by_digit);
    const bool word_wise =
        parse_short(cell, cell + text.size(), cell + behind.size(), mark, by_word);
    CAPTURE(text);
    REQUIRE(digit_wise == word_wise);
    if (!digit_wise) continue;
    ++numbers;
    REQUIRE(by_digit.mantissa == by_word.mantissa);
    REQUIRE(by_digit.decimals == by_word.decimals);
  }
  CHECK(numbers > 20'000);
}
