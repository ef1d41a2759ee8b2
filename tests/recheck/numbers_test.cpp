#include "recheck/numbers.hpp"

#include <doctest/doctest.h>

#include <string>
#include <vector>

using gramproof::recheck::read_decimal;
using gramproof::recheck::read_exact;
using gramproof::recheck::read_integer;

namespace {

std::string text_of(const std::optional<mpq_class>& value) {
  return value ? value->get_str() : "none";
}

}  // namespace

TEST_CASE("numbers: a cell means its decimals") {
  struct Case {
    std::string text;
    char mark;
    std::string value;
    std::string why;
  };
  const std::vector<Case> cases = {
      {"12.40", '.', "62/5", "lowest terms"},
      {"+1", '.', "1", "a sign"},
      {"-.5", '.', "-1/2", "no digit before the mark"},
      {"5.", '.', "5", "no digit behind it"},
      {"1e3", '.', "1000", "an exponent"},
      {"1E-3", '.', "1/1000", "a capital E and a sign"},
      {"1.5e+1", '.', "15", "mark and exponent"},
      {"-0.00", '.', "0", "minus zero is zero"},
      {"0e9999", '.', "none", "an exponent beyond 4,000, even of zero"},
      {"  7\t", '.', "7", "blanks around"},
      {"007", '.', "7", "leading zeros are no octal"},
      {"1,5", ',', "3/2", "a decimal comma"},
      {"1.5", ',', "none", "a point where the comma is the mark"},
      {"1,234", '.', "none", "no thousands separators"},
      {"9007199254740993", '.', "9007199254740993", "2^53 + 1 is no double"},
      {"0.1000000000000000055511151231257827", '.',
       "1000000000000000055511151231257827/10000000000000000000000000000000000",
       "the double nearest to 0.1 is not 0.1"},
      {"", '.', "none", "empty"},
      {".", '.', "none", "a mark alone"},
      {"-", '.', "none", "a sign alone"},
      {"--5", '.', "none", "two signs"},
      {"- 5", '.', "none", "a blank inside"},
      {"1.2.3", '.', "none", "two marks"},
      {"1e", '.', "none", "an exponent without digits"},
      {"1e5.0", '.', "none", "an exponent with a mark"},
      {"nan", '.', "none", "no number"},
      {"inf", '.', "none", "no number"},
      {"0x1p3", '.', "none", "no hexadecimal"},
      {"1_000", '.', "none", "no digit groups"},
      {"1e4001", '.', "none", "beyond the limit"},
      {std::string(5000, '1'), '.', "none", "beyond the limit"},
      {std::string("1\0002", 3), '.', "none", "a NUL inside"},
  };
  for (const Case& one : cases) {
    CAPTURE(one.why);
    CAPTURE(one.text);
    CHECK(text_of(read_decimal(one.text, one.mark)) == one.value);
  }
}

TEST_CASE("numbers: exact values of a document") {
  struct Case {
    std::string text;
    std::string value;
    std::string why;
  };
  const std::vector<Case> cases = {
      {"3", "3", "an integer"},       {"-0.25", "-1/4", "a decimal"},
      {"6/4", "3/2", "a fraction"},   {"-1/3", "-1/3", "a negative one"},
      {"1/0", "none", "no number"},   {"1/2/3", "none", "two bars"},
      {"/2", "none", "half of none"}, {"3 apples", "none", "a word"},
  };
  for (const Case& one : cases) {
    CAPTURE(one.why);
    CHECK(text_of(read_exact(one.text)) == one.value);
  }
  CHECK(read_integer("-12")->get_str() == "-12");
  CHECK_FALSE(read_integer("1.0"));
  CHECK_FALSE(read_integer("+1"));
  CHECK_FALSE(read_integer(""));
  CHECK_FALSE(read_integer("-"));
  CHECK_FALSE(read_integer("0x10"));
  CHECK_FALSE(read_integer(std::string(100'001, '1')));
}
