#include <doctest/doctest.h>

#include <algorithm>
#include <cstdlib>
#include <fstream>
#include <regex>
#include <set>
#include <sstream>

#include "base/text.hpp"
#include "report/sample_audits.hpp"
#include "report/text_report.hpp"
#include "support/lines.hpp"

namespace {

using namespace gramproof;
using test::lines_of;

std::string read_file(const std::string& path) {
  std::ifstream stream(path, std::ios::binary);
  std::ostringstream text;
  text << stream.rdbuf();
  return text.str();
}

/// GRAMPROOF_REWRITE_GOLDEN=1 writes the files anew; the change is then read in the diff.
bool rewriting() {
  return std::getenv("GRAMPROOF_REWRITE_GOLDEN") != nullptr;
}

void compare_with_golden(const std::string& name, const std::string& text) {
  const std::string path = std::string(GRAMPROOF_FIXTURES) + "/golden/" + name + ".txt";
  if (rewriting()) std::ofstream(path, std::ios::binary) << text;
  const std::vector<std::string> expected = lines_of(read_file(path));
  const std::vector<std::string> found = lines_of(text);
  CAPTURE(path);
  for (std::size_t i = 0; i < std::min(expected.size(), found.size()); ++i) {
    CAPTURE(i + 1);
    REQUIRE(found[i] == expected[i]);
  }
  CHECK(found.size() == expected.size());
}

std::string without_colour(const std::string& text) {
  return std::regex_replace(text, std::regex("\x1b\\[[0-9;]*m"), "");
}

}  // namespace

TEST_CASE("the reports are those that were read and found good") {
  for (const sample::Sample& sample : sample::all()) {
    CAPTURE(sample.name);
    compare_with_golden(sample.name, report::text_report(sample.audit, {}));
  }
}

TEST_CASE("no line is wider than the page and none steers the terminal") {
  for (const sample::Sample& sample : sample::all()) {
    for (const int width : {20, 80, 81, 96, 120, 500}) {
      const auto page = static_cast<std::size_t>(std::clamp(width, 80, 120));
      CAPTURE(sample.name);
      CAPTURE(width);
      const std::string text = report::text_report(sample.audit, {width, false});
      for (const std::string& line : lines_of(text)) {
        CAPTURE(line);
        CHECK(display_width(line) <= page);
        CHECK(visible(line) == line);
        CHECK((line.empty() || line.back() != ' '));
      }
      CHECK_FALSE(first_invalid_utf8(text).has_value());
      CHECK(text.back() == '\n');
    }
  }
}

TEST_CASE("colour adds colour and nothing else") {
  for (const sample::Sample& sample : sample::all()) {
    CAPTURE(sample.name);
    const std::string plain = report::text_report(sample.audit, {96, false});
    const std::string coloured = report::text_report(sample.audit, {96, true});
    CHECK(plain.find('\x1b') == std::string::npos);
    CHECK(coloured.find('\x1b') != std::string::npos);
    CHECK(without_colour(coloured) == plain);
  }
}

TEST_CASE("the verdict comes first") {
  for (const sample::Sample& sample : sample::all()) {
    CAPTURE(sample.name);
    const std::string first = lines_of(report::text_report(sample.audit, {120, false})).front();
    CHECK(visible(sample.audit.verdict.summary).rfind(first, 0) == 0);
  }
}

TEST_CASE("a wide design is summarised") {
  const std::string text = report::text_report(sample::wide(), {});
  CHECK(lines_of(text).size() < 170);
  CHECK(text.find("11 further relations are not shown here; the JSON document lists 8 of them") !=
        std::string::npos);
  CHECK(text.find("19 further notes") != std::string::npos);
}

TEST_CASE("a condition number without a known digit is told as a bound") {
  const std::string text = report::text_report(sample::beyond_doubles(), {});
  CHECK(text.find("3.1") == std::string::npos);
  CHECK(text.find("not known in double precision: at least 4") != std::string::npos);
  // Nothing is told of shares that are nothing but rounding.
  CHECK(text.find("1 part in") == std::string::npos);
}

TEST_CASE("every kind of finding is told") {
  struct Case {
    std::string why;
    audit::Audit audit;
    std::vector<std::string> words;
  };
  const std::vector<Case> cases = {
      {"an exact relation",
       sample::level_set(),
       {"constant = [phase = active] + [phase = parked] + [phase = trial]", "4,812 rows",
        "leave out `constant`"}},
      {"rows that break a relation",
       sample::with_exceptions(),
       {"invertible only because of these rows", "harbour.csv:1041 (row 1,040)", "530",
        "total = 30.49", "Holds on 1,800 rows, is violated on 6"}},
      {"a near relation",
       sample::near(),
       {"price is close to", "87.43", "`price` and `cost`", "31.92"}},
      {"no constant", sample::no_constant(), {"sum of squares"}},
      {"focus, contrasts, rare levels",
       sample::focus(),
       {"coefficients in focus", "cannot be estimated", "`[region = east]` (4 rows)",
        "weighted by"}},
      {"no degree of freedom", sample::more_columns_than_rows(), {"no degrees of freedom"}},
      {"limits of the tool",
       sample::sound(),
       {"property of the design", "can bias", "qualified statistician", "Belsley (1984) objected"}},
  };
  for (const Case& one : cases) {
    CAPTURE(one.why);
    std::string text = report::text_report(one.audit, {120, false});
    std::replace(text.begin(), text.end(), '\n', ' ');
    text = std::regex_replace(text, std::regex(" +"), " ");
    for (const std::string& word : one.words) {
      CAPTURE(word);
      CHECK(text.find(word) != std::string::npos);
    }
  }
}
