// Random tables: what is written is read back; bytes at random are accepted or refused, never
// worse.
#include <doctest/doctest.h>

#include <algorithm>
#include <random>
#include <string>
#include <vector>

#include "table/dialect.hpp"
#include "table/records.hpp"
#include "table/support.hpp"

using namespace gramproof;
using namespace gramproof::table;
using namespace table_test;

namespace {

std::string random_cell(std::mt19937& random, bool numeric) {
  if (random() % 8 == 0) return "";
  if (numeric) return std::to_string(static_cast<int>(random() % 20'001) - 10'000);
  static const std::vector<std::string> parts = {"a",  "b",    " ",  ",", ";",        "\"",
                                                 "\n", "\r\n", "\t", "|", "\xC3\xA9", "7"};
  std::string text = "t";  // neither blank nor missing
  for (std::size_t i = random() % 12; i > 0; --i) text += parts[random() % parts.size()];
  return text;
}

/// Quoted when it must be, and at random otherwise.
std::string written(const std::string& cell, char separator, std::mt19937& random) {
  const bool must = cell.find_first_of("\"\r\n") != std::string::npos ||
                    cell.find(separator) != std::string::npos || without_blanks(cell) != cell;
  if (!must && random() % 4 != 0) return cell;
  std::string text = "\"";
  for (const char c : cell) text += c == '"' ? std::string("\"\"") : std::string(1, c);
  return text + "\"";
}

struct Made {
  std::string bytes;
  Cells cells;
  std::vector<std::uint64_t> lines;
};

Made make_table(std::mt19937& random, std::size_t rows, std::size_t columns, char separator) {
  Made made;
  const std::string line_break = random() % 2 == 0 ? "\n" : "\r\n";
  if (random() % 3 == 0) made.bytes = "\xEF\xBB\xBF";
  for (std::size_t c = 0; c < columns; ++c) {
    made.bytes += (c > 0 ? std::string(1, separator) : "") + "c" + std::to_string(c);
  }
  made.bytes += line_break;
  for (std::size_t r = 0; r < rows; ++r) {
    made.lines.push_back(
        1 + static_cast<std::uint64_t>(std::count(made.bytes.begin(), made.bytes.end(), '\n')));
    auto& row = made.cells.emplace_back();
    for (std::size_t c = 0; c < columns; ++c) {
      const std::string cell = random_cell(random, c % 2 == 0);
      row.push_back(cell.empty() ? std::nullopt : std::optional(cell));
      made.bytes += (c > 0 ? std::string(1, separator) : "") + written(cell, separator, random);
    }
    if (r + 1 < rows || random() % 2 == 0) made.bytes += line_break;
  }
  return made;
}

}  // namespace

TEST_CASE("random tables are read back cell by cell") {
  const TemporaryFolder folder;
  for (unsigned seed = 0; seed < 120; ++seed) {
    CAPTURE(seed);
    std::mt19937 random(seed);
    const char separator = ",;\t|"[seed % 4];
    const Made made = make_table(random, 1 + random() % 300, 2 + random() % 6, separator);
    ReadOptions options;
    options.separator = separator;
    options.decimal_mark = '.';
    const auto table = read_table({folder.write("t.csv", made.bytes)}, options, 1 + seed % 3);
    REQUIRE_MESSAGE(table, (table ? "" : to_line(table.error())));
    CHECK(table.value().cells == made.cells);
    CHECK(table.value().lines == made.lines);
  }
}

TEST_CASE("the separator of random tables is recognised") {
  for (unsigned seed = 1000; seed < 1060; ++seed) {
    CAPTURE(seed);
    std::mt19937 random(seed);
    const char separator = ",;\t|"[seed % 4];
    const Made made = make_table(random, 20 + random() % 100, 3 + random() % 6, separator);
    const bool marked = made.bytes.starts_with("\xEF\xBB\xBF");
    const std::string_view sample = std::string_view(made.bytes).substr(marked ? 3 : 0);
    CHECK(recognise_dialect(sample, true, {}).separator == separator);
    // Cut off anywhere behind the header, as a sample of a long file is.
    const std::size_t cut = sample.size() / 2;
    CHECK(recognise_dialect(sample.substr(0, cut), false, {}).separator == separator);
  }
}

TEST_CASE("bytes at random are read or refused alike in every pass and by any number of threads") {
  const TemporaryFolder folder;
  static const std::string alphabet = "ab1,;\t|\"\n\r .-e\xC3\xA9";
  int accepted = 0, refused = 0;
  for (unsigned seed = 0; seed < 800; ++seed) {
    CAPTURE(seed);
    std::mt19937 random(seed);
    std::string bytes = seed % 4 == 0 ? "a,b\n" : "";
    if (seed % 2 == 1) bytes = make_table(random, 1 + random() % 8, 2, ',').bytes;
    for (std::size_t i = random() % 4 * (seed % 2 == 0 ? 10 : 1); i > 0; --i) {
      const char byte =
          random() % 20 == 0 ? static_cast<char>(random()) : alphabet[random() % alphabet.size()];
      bytes.insert(seed % 2 == 0 ? bytes.size() : random() % bytes.size(), 1, byte);
    }
    const std::string name = folder.write("t.csv", bytes);
    const auto one = read_table({name}, {}, 1), three = read_table({name}, {}, 3);
    REQUIRE(static_cast<bool>(one) == static_cast<bool>(three));
    if (one) {
      ++accepted;
      CHECK(one.value().cells == three.value().cells);
    } else {
      ++refused;
      CHECK(to_line(one.error()) == to_line(three.error()));
      CHECK(one.error().kind != ErrorKind::internal);
      CHECK(one.error().where.find("t.csv") != std::string::npos);
    }
  }
  // Else the test would say little about one of the two.
  CHECK(accepted > 100);
  CHECK(refused > 100);
}

TEST_CASE("dialects") {
  struct Case {
    std::string why, sample;
    char separator, mark;
    bool certain;
  };
  const Case cases[] = {
      {"commas", "a,b\n1,2\n", ',', '.', true},
      {"semicolons with points", "a;b\n1.5;2\n", ';', '.', true},
      {"semicolons with commas", "a;b\n1,5;2\n", ';', ',', true},
      {"semicolons with whole numbers: open", "a;b\n1;2\n", ';', '.', false},
      {"semicolons with both marks: points", "a;b\n1,5;2.5\n", ';', '.', true},
      {"tabs beside commas in texts", "a\tb\nx, y\t1\nz\t2\n", '\t', '.', false},
      {"bars", "a|b|c\n1|2|3\n", '|', '.', false},
      {"one column", "a\n1\n2\n", ',', '.', true},
      {"one column with decimal commas", "a\n1,5\n2\n", ';', ',', true},
      {"one column whose rows are ragged", "a\n1,2,3\n", ',', '.', true},
      {"ragged: the header decides", "a;b;c\n1;2\n", ';', '.', false},
      {"quoted separators do not count", "\"a;b\",c\n\"1;2\",3\n", ',', '.', true},
      {"header only", "a;b\n", ';', '.', false},
      {"nothing", "", ',', '.', true},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const Dialect dialect = recognise_dialect(c.sample, true, {});
    CHECK(std::string(1, dialect.separator) == std::string(1, c.separator));
    CHECK(std::string(1, dialect.decimal_mark) == std::string(1, c.mark));
    CHECK(dialect.mark_certain == c.certain);
  }
}
