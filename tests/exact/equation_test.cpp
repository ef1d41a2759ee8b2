#include <doctest/doctest.h>

#include "exact/matrix.hpp"
#include "exact/relations.hpp"

using namespace gramproof;
using exact::NullVector;
using test::Matrix;
using Texts = std::vector<std::string>;

TEST_CASE("equations as a person writes them") {
  struct Case {
    std::string why;
    Texts names;
    Texts vector;
    std::string text;
  };
  const Texts abc = {"a", "b", "constant"};
  const std::vector<Case> cases = {
      {"sum",
       {"heat", "light", "cooking", "total"},
       {"1", "1", "1", "-1", "0"},
       "heat + light + cooking = total"},
      {"the total first in the design",
       {"total", "heat", "light"},
       {"1", "-1", "-1", "0"},
       "heat + light = total"},
      {"a constant between",
       {"celsius", "constant", "fahrenheit"},
       {"9", "160", "-5", "0"},
       "9\u00b7celsius + 160 = 5\u00b7fahrenheit"},
      {"a negative constant",
       {"kelvin", "constant", "celsius"},
       {"20", "-5463", "-20", "0"},
       "celsius + 273.15 = kelvin"},
      {"hand-coded levels",
       {"constant", "district_north", "district_south"},
       {"1", "-1", "-1", "0"},
       "district_north + district_south = 1"},
      {"zero", {"gone"}, {"1", "0"}, "gone = 0"},
      {"one value", {"constant", "seven"}, {"7", "-1", "0"}, "seven = 7"},
      {"one negative value", {"constant", "x"}, {"7", "1", "0"}, "x = \u22127"},
      {"one broken value", {"constant", "x"}, {"7", "-2", "0"}, "x = 3.5"},
      {"one value that is no decimal", {"constant", "x"}, {"7", "-3", "0"}, "x = 7/3"},
      {"the ones column where there is no constant", {"x"}, {"1", "-4"}, "x = 4"},
      {"duplicate", abc, {"1", "-1", "0", "0"}, "a = b"},
      {"multiple", abc, {"12", "-1", "0", "0"}, "12\u00b7a = b"},
      {"multiple the other way", abc, {"1", "-12", "0", "0"}, "12\u00b7b = a"},
      {"no side is free of a factor", abc, {"381", "-1250", "0", "0"}, "381\u00b7a = 1250\u00b7b"},
      {"nothing to the right", abc, {"1", "2", "0", "0"}, "a + 2\u00b7b = 0"},
      {"fixed sum", abc, {"1", "1", "-100", "0"}, "a + b = 100"},
      {"fixed sum that is a decimal", abc, {"2", "2", "-1", "0"}, "a + b = 0.5"},
      {"fixed sum that is none", abc, {"3", "3", "-1", "0"}, "3\u00b7a + 3\u00b7b = 1"},
      {"negative fixed sum", abc, {"1", "1", "3", "0"}, "a + b = \u22123"},
      {"offset", abc, {"1", "-1", "7", "0"}, "a + 7 = b"},
      {"powers of ten", abc, {"1000000000", "-1", "0", "0"}, "10^9\u00b7a = b"},
      {"many zeros", abc, {"40000000", "-1", "0", "0"}, "4\u00b710^7\u00b7a = b"},
      {"more digits than anybody reads",
       abc,
       {"1234567890123456789012345678901234567890", "-1", "0", "0"},
       "1.23456\u2026\u00b710^39\u00b7a = b"},
      {"30 digits are told",
       abc,
       {"123456789012345678901234567891", "-1", "0", "0"},
       "123456789012345678901234567891\u00b7a = b"},
      {"few zeros stay", abc, {"1000000", "-1", "0", "0"}, "1000000\u00b7a = b"},
      {"period, age, birth",
       {"birth_year", "interview_year", "age"},
       {"1", "-1", "1", "0"},
       "interview_year \u2212 birth_year = age"},
      {"the year last is what the others add up to",
       {"birth_year", "age", "interview_year"},
       {"1", "1", "-1", "0"},
       "birth_year + age = interview_year"},
      {"the year first, the birth last",
       {"year", "age", "birth_year"},
       {"1", "-1", "-1", "0"},
       "year \u2212 age = birth_year"},
      {"a name that is also a word of the design language",
       {"\"year\"", "age", "birth_year"},
       {"1", "-1", "-1", "0"},
       "year \u2212 age = birth_year"},
      {"a name of two words keeps its quotes",
       {"\"net income\"", "bonus", "pay"},
       {"1", "1", "-1", "0"},
       "\"net income\" + bonus = pay"},
      {"no time is counted in wages",
       {"wage", "bonus", "pay"},
       {"1", "-1", "-1", "0"},
       "bonus + pay = wage"},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const Matrix matrix = test::matrix_of(c.names, {});
    NullVector vector;
    for (const std::string& v : c.vector) vector.emplace_back(v);
    CHECK(exact::equation(matrix.design, vector) == c.text);
    for (auto& v : vector) v = -v;
    CHECK_MESSAGE(exact::equation(matrix.design, vector).size() == c.text.size(),
                  "the sign of the vector is no matter");
  }
}

TEST_CASE("labels that are sums or products stand in parentheses") {
  Matrix matrix = test::matrix_of({"a", "b"}, {});
  test::add_column(matrix, "a + b",
                   test::tree(design::Operation::add, {test::cell(0), test::cell(1)}));
  test::add_column(matrix, "a * b",
                   test::tree(design::Operation::multiply, {test::cell(0), test::cell(1)}));
  CHECK(exact::equation(matrix.design, {1, 1, -1, 0, 0}) == "a + b = (a + b)");
  CHECK(exact::equation(matrix.design, {1, 1, 0, -1, 0}) == "a + b = a * b");
  CHECK(exact::equation(matrix.design, {1, 1, 0, -3, 0}) == "a + b = 3\u00b7(a * b)");
}

TEST_CASE("long relations are cut") {
  Texts names;
  for (int i = 1; i <= 13; ++i) names.push_back("p" + std::to_string(i));
  names.push_back("total");
  NullVector vector(15, 1);
  vector[13] = -1;
  vector[14] = 0;
  CHECK(exact::equation(test::matrix_of(names, {}).design, vector) ==
        "p1 + p2 + p3 + p4 + p5 + p6 + \u2026 (6 more) + p13 = total");
  names.erase(names.begin(), names.begin() + 2);
  vector.erase(vector.begin(), vector.begin() + 2);
  CHECK(exact::equation(test::matrix_of(names, {}).design, vector) ==
        "p3 + p4 + p5 + p6 + p7 + p8 + p9 + p10 + p11 + p12 + p13 = total");
}
