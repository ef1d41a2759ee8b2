// Words: what reaches a terminal, nearest names, counts.
#include "base/text.hpp"

#include <doctest/doctest.h>

#include <string>
#include <vector>

#include "base/result.hpp"

using namespace gramproof;

TEST_CASE("visible text cannot steer a terminal") {
  struct Case {
    std::string why, text, shown;
  };
  const Case cases[] = {
      {"plain text stays", "age^2 * 3", "age^2 * 3"},
      {"letters beyond ASCII stay", "gr\xC3\xB6\xC3\x9F\x65 \xE2\x89\xA5 1",
       "gr\xC3\xB6\xC3\x9F\x65 \xE2\x89\xA5 1"},
      {"line break", "a\nb", "a\\nb"},
      {"tab and return", "a\tb\r", "a\\tb\\r"},
      {"escape sequence", "\x1b[31mred", "\\x1b[31mred"},
      {"bell, delete", "\a\x7f", "\\x07\\x7f"},
      {"NUL", std::string("a\0b", 3), "a\\x00b"},
      {"C1 control as UTF-8",
       "\xC2\x9B"
       "31m",
       "\\x9b31m"},
      {"right-to-left override",
       "a\xE2\x80\xAE"
       "b",
       "a\\u202eb"},
      {"isolate", "\xE2\x81\xA6", "\\u2066"},
      {"zero-width space",
       "a\xE2\x80\x8B"
       "b",
       "a\\u200bb"},
      {"a Latin-1 byte", "caf\xE9", "caf\\xe9"},
      {"a cut character", "\xE2\x82", "\\xe2\\x82"},
      {"a tag character", "\xF3\xA0\x81\x81", "\\U000e0041"},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    CHECK(visible(c.text) == c.shown);
  }
}

TEST_CASE("the first byte that is not UTF-8 is found") {
  struct Case {
    std::string why, bytes;
    int at;  // -1: valid
  };
  const Case cases[] = {
      {"empty", "", -1},
      {"ASCII", "abc", -1},
      {"two, three, four bytes", "\xC3\xA9\xE2\x82\xAC\xF0\x9F\x9A\xA2", -1},
      {"lone continuation", "a\x80", 1},
      {"overlong slash", "\xC0\xAF", 0},
      {"overlong three bytes", "ab\xE0\x80\xAF", 2},
      {"surrogate", "\xED\xA0\x80", 0},
      {"last before the surrogates", "\xED\x9F\xBF", -1},
      {"above U+10FFFF", "\xF4\x90\x80\x80", 0},
      {"U+10FFFF", "\xF4\x8F\xBF\xBF", -1},
      {"five-byte lead", "\xF8\x88\x80\x80\x80", 0},
      {"cut off at the end", "abc\xE2\x82", 3},
      {"Latin-1 before a letter", "\xE9t\xE9", 0},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const auto found = first_invalid_utf8(c.bytes);
    CHECK((found ? static_cast<int>(*found) : -1) == c.at);
  }
}

TEST_CASE("width counts characters") {
  CHECK(display_width("") == 0);
  CHECK(display_width("age") == 3);
  CHECK(display_width("gr\xC3\xB6\xC3\x9F\x65") == 5);
  CHECK(display_width("e\xCC\x81") == 1);  // e + combining acute
}

TEST_CASE("the nearest name is a likely slip or none") {
  const std::vector<std::string> names = {"income", "Region", "age", "tenure", "sex", "year_built"};
  struct Case {
    std::string why, word, nearest;
  };
  const Case cases[] = {
      {"a letter left out", "incme", "income"},
      {"two letters swapped", "tenuer", "tenure"},
      {"case", "region", "Region"},
      {"all capitals", "INCOME", "income"},
      {"one of three letters", "agf", "age"},
      {"two of three letters is another word", "axx", ""},
      {"nothing like it", "harbour", ""},
      {"empty", "", ""},
      {"three edits of ten", "yaer_buit", "year_built"},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    CHECK(nearest_name(c.word, names).value_or("") == c.nearest);
  }
  CHECK_FALSE(nearest_name("age", {}).has_value());
}

TEST_CASE("counts are grouped and agree with their noun") {
  CHECK(grouped(0) == "0");
  CHECK(grouped(999) == "999");
  CHECK(grouped(1000) == "1,000");
  CHECK(grouped(1234567) == "1,234,567");
  CHECK(grouped(18446744073709551615u) == "18,446,744,073,709,551,615");
  CHECK(counted(1, "row", "rows") == "1 row");
  CHECK(counted(0, "row", "rows") == "0 rows");
  CHECK(counted(4096, "row", "rows") == "4,096 rows");
}

TEST_CASE("an error is one visible line of where, what and what to do") {
  CHECK(to_line({ErrorKind::data, "a.csv:2:3", "\"x\" is not a number", "see --missing"}) ==
        "a.csv:2:3: \"x\" is not a number (see --missing)");
  CHECK(to_line({ErrorKind::usage, "", "no file is named", ""}) == "no file is named");
  CHECK(to_line({ErrorKind::io, "a\nb.csv", "gone", ""}) == "a\\nb.csv: gone");
}

TEST_CASE("a result holds a value or an error") {
  Result<int> good = 3;
  REQUIRE(good);
  CHECK(good.value() == 3);
  const Result<int> bad = Error{ErrorKind::limit, "x", "y", "z"};
  REQUIRE_FALSE(bad);
  CHECK(bad.error().kind == ErrorKind::limit);
  CHECK(Result<void>{});
  const Result<void> failed = Error{ErrorKind::io, "", "full", ""};
  REQUIRE_FALSE(failed);
  CHECK(failed.error().what == "full");
}
