#include <doctest/doctest.h>

#include <cmath>
#include <random>

#include "report/number_text.hpp"
#include "report/page.hpp"

using namespace gramproof::report;

TEST_CASE("figures show the digits that are known and no more") {
  struct Case {
    double value, known;
    std::string text, why;
  };
  const double infinity = std::numeric_limits<double>::infinity();
  const std::vector<Case> cases = {
      {41.23456, 12, "41.23", "at most four digits"},
      {41.23456, 2.9, "41", "a digit that is known in part is not known"},
      {41.23456, 1, "40", "one digit"},
      {41.23456, 0.99, "not known in double precision", "no digit"},
      {41.23456, -3, "not known in double precision", "negative"},
      {41.23456, std::nan(""), "not known in double precision", "no statement of digits is none"},
      {30, 12, "30", "no trailing zeros"},
      {0, 12, "0", "zero"},
      {-2.5, 12, "-2.5", "sign"},
      {12345.6, 12, "12,350", "thousands"},
      {999999, 4, "1 million", "rounding carries over"},
      {1234567, 12, "1.235 million", "millions"},
      {2.5e9, 12, "2.5 billion", "billions"},
      {7.25e13, 12, "72.5 trillion", "trillions"},
      {3.2e17, 12, "3.2·10^17", "larger"},
      {1e300, 12, "10^300", "a bare power"},
      {0.00012345, 3, "0.000123", "small"},
      {3.2e-7, 12, "3.2·10^-7", "smaller"},
      {infinity, 12, "infinite", "infinite"},
      {std::nan(""), 12, "undefined", "undefined"},
  };
  for (const Case& one : cases) {
    CAPTURE(one.why);
    CHECK(figure(one.value, one.known) == one.text);
  }
}

TEST_CASE("a figure never has more significant digits than are known, and rounds correctly") {
  const unsigned seed = 20260131;
  CAPTURE(seed);
  std::mt19937_64 random(seed);
  std::uniform_real_distribution<double> exponents(-4, 6), digits(1, 16);
  for (int i = 0; i < 2000; ++i) {
    const double value = std::pow(10, exponents(random));
    const double known = digits(random);
    if (value >= 5e5) continue;  // may round to a million
    std::string text = figure(value, known);
    CAPTURE(value);
    CAPTURE(known);
    CAPTURE(text);
    std::string significant, plain;
    for (const char letter : text) {
      if (letter == ',') continue;
      plain += letter;
      if (letter != '.' && (letter != '0' || !significant.empty())) significant += letter;
    }
    // Zeros before an absent point are places, not digits.
    if (text.find('.') == std::string::npos) {
      while (!significant.empty() && significant.back() == '0') significant.pop_back();
    }
    CHECK(static_cast<double>(significant.size()) <= std::min(known, 4.0));
    // Half a unit of the last digit printed, with 10^(1 - digits) relative to the first digit.
    const double shown = std::stod(plain);
    const double unit = std::pow(10, 1 - std::floor(std::min(known, 4.0)));
    CHECK(std::abs(shown - value) <= 0.5 * unit * std::max(shown, value) * (1 + 1e-9));
  }
}

TEST_CASE("a size without a known digit is bounded from below") {
  // The reciprocal is wrong by at most 1/4.7e13: the size is at least 1 / (1/3.1e15 + 1/4.7e13)
  // = 4.63e13.
  CHECK(size_or_bound(3.1e15, -1.8, 4.7e13) ==
        "not known in double precision: at least 40 trillion");
  // A computed size of the order of the limit says less: 1 / (1/2e12 + 1/2e12) = 1e12.
  CHECK(size_or_bound(2e12, 0, 2e12) == "not known in double precision: at least 1 trillion");
  CHECK(size_or_bound(std::numeric_limits<double>::infinity(), -5, 2e12) ==
        "not known in double precision: at least 2 trillion");
  CHECK(size_or_bound(41.2345, 9, 1e12) == "41.23");
  CHECK(size_or_bound(std::nan(""), 9, std::nan("")) == "not known in double precision");
}

TEST_CASE("shares and factors in plain language") {
  CHECK(share(0.0412, 10) == "4.12%");
  CHECK(share(0.97, 10) == "97%");
  CHECK(share(1, 10) == "100%");
  CHECK(share(0.000031, 10) == "1 part in 32,000");
  CHECK(share(0.000031, 1.5) == "1 part in 30,000");
  CHECK(share(0.000031, 0.5) == "a share not known in double precision");
  CHECK(times(1.001, 10) == "once");
  CHECK(times(2, 10) == "twice");
  CHECK(times(18.17, 10) == "18.2 times");
  CHECK(power_of_ten(62.7) == "about 10^63");
}

TEST_CASE("lines are broken between words and groups stay together") {
  struct Case {
    std::string text;
    std::size_t width;
    std::vector<std::string> lines;
    std::string why;
  };
  const std::vector<Case> cases = {
      {"one two three", 8, {"one two", "three"}, "at blanks"},
      {"", 8, {}, "nothing"},
      {"a [b = c] d", 8, {"a", "[b = c]", "d"}, "brackets"},
      {"a `b c d`, e", 9, {"a", "`b c d`,", "e"}, "backticks"},
      {"x [longer than the line]", 8, {"x", "[longer", "than the", "line]"}, "too long a group"},
      {"abcdefghij", 4, {"abcd", "efgh", "ij"}, "too long a word"},
      {"üüüü öö", 4, {"üüüü", "öö"}, "columns, not bytes"},
      {"a ] b `c", 5, {"a ] b", "`c"}, "a group that never opens or closes"},
  };
  for (const Case& one : cases) {
    CAPTURE(one.why);
    CHECK(wrapped(one.text, one.width) == one.lines);
  }
}
