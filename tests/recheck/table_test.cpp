#include "recheck/table.hpp"

#include <doctest/doctest.h>
#include <zstd.h>

#include <string>
#include <vector>

#include "support/gzip.hpp"
#include "support/scratch.hpp"

using gramproof::Result;
using gramproof::recheck::Row;
using gramproof::recheck::Table;
using gramproof::test::Scratch;

namespace {

/// "row:file:line=cell|cell" for each row, or what went wrong.
std::string read(const std::vector<std::string>& files, char separator,
                 const std::vector<std::string>& wanted) {
  Table table(files, separator, wanted);
  Row row;
  std::string text;
  while (true) {
    Result<bool> more = table.next(row);
    if (!more) return "error: " + more.error().what;
    if (!more.value()) return text;
    text += std::to_string(row.number) + ":" + std::to_string(row.file) + ":" +
            std::to_string(row.line) + "=";
    for (std::size_t i = 0; i < row.cells.size(); ++i) text += (i == 0 ? "" : "|") + row.cells[i];
    text += " ";
  }
}

std::string zstandard(const std::string& text) {
  std::string bytes(ZSTD_compressBound(text.size()), '\0');
  const std::size_t size = ZSTD_compress(bytes.data(), bytes.size(), text.data(), text.size(), 3);
  REQUIRE(ZSTD_isError(size) == 0);
  bytes.resize(size);
  return bytes;
}

}  // namespace

TEST_CASE("delimited text: nasty cases") {
  struct Case {
    std::string text;
    char separator;
    std::string rows;  ///< of columns a and b
    std::string why;
  };
  const std::vector<Case> cases = {
      {"a,b\n1,2\n", ',', "1:0:2=1|2 ", "plain"},
      {"a,b\n1,2", ',', "1:0:2=1|2 ", "no end of the last line"},
      {"a,b\r\n1,2\r\n", ',', "1:0:2=1|2 ", "CRLF"},
      {"a,b\r\n1,2\r", ',', "1:0:2=1|2 ", "a carriage return at the very end"},
      {"\xEF\xBB\xBF"
       "a,b\n1,2\n",
       ',', "1:0:2=1|2 ", "a byte order mark"},
      {"\xEF\xBB\xBF\"a\",b\n1,2\n", ',', "1:0:2=1|2 ", "a byte order mark before a quote"},
      {"b,a\n1,2\n", ',', "1:0:2=2|1 ", "columns in another order"},
      {"x,a,y,b\n0,1,0,2\n", ',', "1:0:2=1|2 ", "columns that are not wanted"},
      {" a , b \n 1 ,\t2 \n", ',', "1:0:2=1|2 ", "blanks around names and cells"},
      {"a,b\n\"1\",\"2\"\n", ',', "1:0:2=1|2 ", "quoted"},
      {"a,b\n  \"1\"\t,2\n", ',', "1:0:2=1|2 ", "blanks around quotes"},
      {"a,b\n\" 1 \",2\n", ',', "1:0:2= 1 |2 ", "blanks inside quotes are of the cell"},
      {"a,b\n\"1,5\",2\n", ',', "1:0:2=1,5|2 ", "a separator inside quotes"},
      {"a,b\n\"say \"\"no\"\"\",2\n", ',', "1:0:2=say \"no\"|2 ", "doubled quotes"},
      {"a,b\n\"\"\"\",2\n", ',', "1:0:2=\"|2 ", "nothing but a quote"},
      {"a,b\n\"two\nlines\",2\n3,4\n", ',', "1:0:2=two\nlines|2 2:0:4=3|4 ",
       "a line break inside quotes counts as a line"},
      {"a,b\n\"x\r\ny\",2\n", ',', "1:0:2=x\r\ny|2 ", "CRLF inside quotes is kept"},
      {"a,b\n,\n", ',', "1:0:2=| ", "empty cells"},
      {"a,b\n1,", ',', "1:0:2=1| ", "the last cell empty, and no end"},
      {"a;b\n1,5;2\n", ';', "1:0:2=1,5|2 ", "semicolons"},
      {"a\tb\n1\t\n\t\n", '\t', "1:0:2=1| 2:0:3=| ", "tabs are separators here, no blanks"},
      {"a b\n1 2\n", ' ', "1:0:2=1|2 ", "blanks as separators"},
      {"a,b\n1,2\n\n \n\n", ',', "1:0:2=1|2 ", "blank lines at the end are nothing"},
      {"a,b\n", ',', "", "no rows"},
      {"a,b\n1,2\n\n3,4\n", ',', "error: a blank line in the middle of the data",
       "a blank line in the middle"},
      {"a,b\n1\n", ',', "error: this row has 1 cell where the header has 2", "too few cells"},
      {"a,b\n1,2,3\n", ',', "error: this row has 3 cells where the header has 2", "too many cells"},
      {"a,b\n1\"2\",3\n", ',', "error: a quote in the middle of a cell", "a stray quote"},
      {"a,b\n\"1\"2,3\n", ',', "error: text behind the closing quote of a cell",
       "text behind a quote"},
      {"a,b\n\"1,3\n", ',', "error: a quoted cell never ends", "an open quote"},
      {"a,b\n1\r2,3\n", ',', "error: a carriage return that ends no line",
       "a lone carriage return"},
      {"a,c\n1,2\n", ',', "error: no column \"b\"", "a column that is absent"},
      {"a,b,b\n1,2,3\n", ',', "error: more than one column \"b\"", "a column named twice"},
      {"", ',', "error: the file has no header", "an empty file"},
      {"\n1,2\n", ',', "error: the file has no header", "a blank first line"},
  };
  const Scratch folder;
  for (const Case& one : cases) {
    CAPTURE(one.why);
    const std::string file = folder.file("case.csv", one.text);
    CHECK(read({file}, one.separator, {"a", "b"}) == one.rows);
  }
}

TEST_CASE("delimited text: a file of one column") {
  const Scratch folder;
  const std::string file = folder.file("one.csv", "a\n1\n\n \n\"\"\n4\n\n");
  CHECK(read({file}, ',', {"a"}) == "1:0:2=1 2:0:3= 3:0:4= 4:0:5= 5:0:6=4 ");
}

TEST_CASE("delimited text: several files are one table") {
  const Scratch folder;
  const std::string first = folder.file("first.csv", "a,b\n1,2\n3,4\n");
  const std::string second = folder.file("second.csv", "b,c,a\r\n6,0,5");
  CHECK(read({first, second}, ',', {"a", "b"}) == "1:0:2=1|2 2:0:3=3|4 3:1:2=5|6 ");
  CHECK(read({first, folder.path().string() + "/none.csv"}, ',', {"a"}) == "error: no such file");
  CHECK(read({folder.path().string()}, ',', {"a"}) == "error: this is a directory");
}

TEST_CASE("delimited text: compressed files are recognised by their first bytes") {
  const Scratch folder;
  std::string text = "a,b\n";
  for (int i = 1; i <= 60'000; ++i)
    text += std::to_string(i) + "," + std::to_string(i * 7919 % 97) + "\n";
  const std::string plain = folder.file("plain", text);
  const std::string wanted = read({plain}, ',', {"a", "b"});
  const std::size_t half = text.find("\n30000,") + 1;
  struct Case {
    std::string bytes;
    std::string why;
  };
  const std::vector<Case> cases = {
      {gramproof::test::gzip(text), "gzip"},
      {zstandard(text), "Zstandard"},
      {gramproof::test::gzip(text.substr(0, half)) + gramproof::test::gzip(text.substr(half)),
       "two members"},
      {zstandard(text.substr(0, half)) + zstandard(text.substr(half)), "two frames"},
  };
  for (const Case& one : cases) {
    CAPTURE(one.why);
    CHECK(read({folder.file("packed", one.bytes)}, ',', {"a", "b"}) == wanted);
    const std::string cut = one.bytes.substr(0, one.bytes.size() - 9);
    CHECK(read({folder.file("cut", cut)}, ',', {"a", "b"}) ==
          "error: the compressed file ends too early");
  }
  std::string damaged = gramproof::test::gzip(text);
  damaged[damaged.size() / 2] = static_cast<char>(~damaged[damaged.size() / 2]);
  CHECK(read({folder.file("damaged", damaged)}, ',', {"a"}).starts_with("error: "));
}
