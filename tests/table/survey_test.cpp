// The first pass: kinds, counts, levels; decided on all cells, the same for any number of threads.
#include "table/survey.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <map>
#include <random>
#include <string>
#include <vector>

#include "table/support.hpp"

using namespace gramproof;
using namespace gramproof::table;
using namespace table_test;

namespace {

Schema surveyed(const std::string& text, SurveyOptions options = {},
                const ReadOptions& reading = {}) {
  const TemporaryFolder folder;
  auto source = Source::open({folder.write("t.csv", text)}, reading);
  REQUIRE_MESSAGE(source, (source ? "" : to_line(source.error())));
  auto schema = survey(source.value(), options);
  REQUIRE_MESSAGE(schema, (schema ? "" : to_line(schema.error())));
  return std::move(schema.value());
}

std::string column_of(const std::vector<std::string>& cells) {
  std::string text = "x\n";
  for (const std::string& cell : cells) text += "\"" + cell + "\"\n";
  return text;
}

std::string levels_of(const ColumnFacts& facts) {
  std::string text;
  for (const Level& level : facts.levels)
    text += level.text + "*" + std::to_string(level.rows) + " ";
  return text;
}

void check_equal(const Schema& a, const Schema& b) {
  CHECK(a.rows == b.rows);
  REQUIRE(a.columns.size() == b.columns.size());
  for (std::size_t c = 0; c < a.columns.size(); ++c) {
    const ColumnFacts &x = a.columns[c], &y = b.columns[c];
    CAPTURE(x.name);
    CHECK(x.kind == y.kind);
    CHECK(x.present == y.present);
    CHECK(x.missing == y.missing);
    CHECK(x.numbers == y.numbers);
    CHECK(x.most_decimals == y.most_decimals);
    CHECK(x.most_significant_digits == y.most_significant_digits);
    CHECK(x.all_whole == y.all_whole);
    CHECK(x.smallest == y.smallest);
    CHECK(x.largest == y.largest);
    CHECK(x.levels_cut == y.levels_cut);
    CHECK(x.distinct_at_least == y.distinct_at_least);
    CHECK(levels_of(x) == levels_of(y));
    CHECK(x.code_of == y.code_of);
    CHECK(x.first_not_number.has_value() == y.first_not_number.has_value());
    if (x.first_not_number && y.first_not_number)
      CHECK(x.first_not_number->row == y.first_not_number->row);
  }
}

}  // namespace

TEST_CASE("facts of a column of numbers") {
  const Schema schema = surveyed(
      "a,b,c,d\n"
      "1,12.40,1e3,123456789012345678901\n"
      "-7,NA,2e2,0\n"
      "30,0.125,5,-2\n");
  const ColumnFacts &a = schema.columns[0], &b = schema.columns[1], &c = schema.columns[2],
                    &d = schema.columns[3];
  CHECK(a.all_whole);
  CHECK(a.most_decimals == 0);
  CHECK(a.most_significant_digits == 2);
  CHECK(a.smallest == -7);
  CHECK(a.largest == 30);
  CHECK(a.largest_magnitude == 30);
  CHECK(levels_of(a) == "1*1 -7*1 30*1 ");
  CHECK_FALSE(b.all_whole);
  CHECK(b.present == 2);
  CHECK(b.missing == 1);
  CHECK(b.numbers == 2);
  CHECK(b.most_decimals == 3);
  CHECK(b.most_significant_digits == 4);
  CHECK(c.all_whole);
  CHECK(c.most_decimals == 0);
  CHECK(d.most_significant_digits == 21);
  CHECK(d.largest == 123456789012345678901.0);
  CHECK(schema.find("c") == 2);
  CHECK_FALSE(schema.find("C").has_value());
}

TEST_CASE("whole numbers are recognised however they are written") {
  CHECK(surveyed("x\n1.0\n20.00\n3e2\n1000000000000000000000.0\n").columns[0].all_whole);
  CHECK_FALSE(surveyed("x\n1.0\n1e-1\n").columns[0].all_whole);
  CHECK_FALSE(surveyed("x\n1000000000000000000000.5\n").columns[0].all_whole);
  CHECK(surveyed("x\n1.0\n").columns[0].most_decimals == 1);
  CHECK(surveyed("x\n1e3\n5e4\n").columns[0].most_decimals == -3);
}

TEST_CASE("levels are in order of first appearance; equal values are one") {
  const Schema numbers = surveyed(column_of({"2", "1.0", "NA", "1", "2.00", "+1", " 3 ", "1e0"}));
  CHECK(levels_of(numbers.columns[0]) == "2*2 1*4 3*1 ");
  CHECK(numbers.columns[0].code_of.at("3") == 2);
  const Schema texts = surveyed(column_of({"b", "a", "", "1", "1.0", "b", "\"\"q\"\"", " b"}));
  CHECK(texts.columns[0].kind == ColumnKind::text);
  CHECK(texts.columns[0].numbers == 2);
  CHECK(levels_of(texts.columns[0]) == "b*2 a*1 1*1 1.0*1 \"q\"*1  b*1 ");
  CHECK(texts.columns[0].first_not_number->text == "b");
  CHECK(texts.columns[0].first_not_number->row == 1);
}

TEST_CASE("listing stops at its limit and says how many values were seen") {
  std::vector<std::string> cells;
  for (int i = 0; i < 21; ++i) cells.push_back(std::to_string(i));
  CHECK(surveyed(column_of(cells)).columns[0].levels.size() == 21);
  cells.push_back("21");
  const ColumnFacts cut = surveyed(column_of(cells)).columns[0];
  CHECK(cut.levels_cut);
  CHECK(cut.levels.empty());
  CHECK(cut.distinct_at_least == 22);
  SurveyOptions listed;
  listed.list_values = {"x"};
  CHECK(surveyed(column_of(cells), listed).columns[0].levels.size() == 22);
  SurveyOptions few_texts;
  few_texts.text_levels = 3;
  CHECK(surveyed(column_of({"a", "b", "c", "a"}), few_texts).columns[0].levels.size() == 3);
  const ColumnFacts many = surveyed(column_of({"a", "b", "c", "d", "e"}), few_texts).columns[0];
  CHECK(many.levels_cut);
  CHECK(many.distinct_at_least == 4);
}

TEST_CASE("few values in many spellings are listed, not cut") {
  std::vector<std::string> cells;
  for (int i = 0; i < 900; ++i)
    cells.push_back(std::to_string(i % 3) + "." + std::string(static_cast<std::size_t>(i), '0'));
  CHECK(levels_of(surveyed(column_of(cells)).columns[0]) == "0*300 1*300 2*300 ");
}

TEST_CASE("a text behind any number of numbers makes a text column with all its levels") {
  for (const int numbers : {10, 300, 4095, 4096, 4097, 9000}) {
    CAPTURE(numbers);
    std::vector<std::string> cells;
    for (int i = 0; i < numbers; ++i) cells.push_back(std::to_string(i));
    cells.emplace_back("A1");
    cells.emplace_back("7");
    for (const unsigned threads : {1u, 3u}) {
      SurveyOptions options;
      options.threads = threads;
      const ColumnFacts facts = surveyed(column_of(cells), options).columns[0];
      CHECK(facts.kind == ColumnKind::text);
      CHECK(facts.levels.size() == static_cast<std::size_t>(numbers) + 1);
      CHECK(facts.levels[7].rows == 2);
      CHECK(facts.code_of.at("A1") == numbers);
      CHECK(facts.numbers == static_cast<std::uint64_t>(numbers) + 1);
      CHECK(facts.first_not_number->row == static_cast<std::uint64_t>(numbers) + 1);
      CHECK(facts.first_not_number->where.ends_with("t.csv:" + std::to_string(numbers + 2) + ":1"));
    }
  }
}

TEST_CASE("the decimal mark is settled on all data, not on the first records") {
  std::string text = "a;b\n";
  for (int i = 0; i < 60'000; ++i) text += std::to_string(i % 1000) + ";1\n";
  const Schema comma = surveyed(text + "1,5;2\n");
  CHECK(comma.columns[0].kind == ColumnKind::numeric);
  CHECK(comma.columns[0].most_decimals == 1);
  const Schema both = surveyed(text + "1,5;2.5\n");
  CHECK(both.columns[0].kind == ColumnKind::text);
  CHECK(both.columns[1].kind == ColumnKind::numeric);
  ReadOptions point;
  point.decimal_mark = '.';
  CHECK(surveyed(text + "1,5;2\n", {}, point).columns[0].kind == ColumnKind::text);
}

TEST_CASE("numbers out of range are numbers with a place") {
  const ColumnFacts facts = surveyed("x\n1\n1e400\n-1e-400\n").columns[0];
  CHECK(facts.kind == ColumnKind::numeric);
  CHECK(facts.numbers == 3);
  CHECK(facts.largest == 1);
  REQUIRE(facts.first_out_of_range.has_value());
  CHECK(facts.first_out_of_range->text == "1e400");
  CHECK(facts.first_out_of_range->row == 2);
}

namespace {

/// A random table: numbers with few and many values, texts, missing cells, rare texts among
/// numbers.
std::string random_table(std::mt19937& random, int rows) {
  std::string text = "few,many,text,mixed,sparse\n";
  for (int i = 0; i < rows; ++i) {
    text += std::to_string(random() % 5) + "," + std::to_string(random() % 100'000) + "." +
            std::to_string(random() % 100);
    text += ",level " + std::to_string(random() % 50);
    text += "," + (random() % 3000 == 0 ? "code" : std::to_string(random() % 4000));
    text += random() % 10 == 0 ? ",1.0\n" : (random() % 2 == 0 ? ",\n" : ",NA\n");
  }
  return text;
}

}  // namespace

TEST_CASE("the survey is the same for any number of threads and agrees with a plain count") {
  for (const unsigned seed : {1u, 2u, 3u}) {
    CAPTURE(seed);
    std::mt19937 random(seed);
    const std::string text = random_table(random, 15'000);
    const Schema one = surveyed(text);
    for (unsigned threads = 2; threads <= 8; threads += 2) {
      CAPTURE(threads);
      SurveyOptions options;
      options.threads = threads;
      check_equal(surveyed(text, options), one);
    }
    std::map<std::string, std::uint64_t> counts;
    for (std::size_t at = text.find("level"); at != std::string::npos;
         at = text.find("level", at + 1)) {
      ++counts[text.substr(at, text.find(',', at) - at)];
    }
    REQUIRE(one.columns[2].levels.size() == counts.size());
    for (const Level& level : one.columns[2].levels) CHECK(counts.at(level.text) == level.rows);
  }
}

TEST_CASE("progress is told once a piece and grows") {
  const TemporaryFolder folder;
  std::string text = "x\n";
  for (int i = 0; i < 10'000; ++i) text += "1\n";
  auto source = Source::open({folder.write("t.csv", text)}, {});
  REQUIRE(source);
  std::vector<std::uint64_t> rows;
  SurveyOptions options;
  options.threads = 2;
  options.on_progress = [&](const Progress& progress) { rows.push_back(progress.rows); };
  REQUIRE(survey(source.value(), options));
  CHECK(rows.size() == 3);
  CHECK(std::is_sorted(rows.begin(), rows.end()));
  CHECK(rows.back() == 10'000);
}
