// Files, compression, pipes, several files, passes.
#include "table/source.hpp"

#include <doctest/doctest.h>
#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <filesystem>
#include <fstream>
#include <string>
#include <thread>
#include <vector>

#include "table/spool.hpp"
#include "table/support.hpp"

using namespace gramproof;
using namespace gramproof::table;
using namespace table_test;

namespace {

const std::string small = "a,b\n1,x\n2,y\n";
const Cells small_cells = {{"1", "x"}, {"2", "y"}};

/// A table of `rows` rows whose cells have uneven lengths.
std::string long_table(int rows) {
  std::string text = "id,name,value\n";
  for (int i = 0; i < rows; ++i) {
    text += std::to_string(i) + ",\"n " + std::to_string(i % 7) + (i % 100 == 0 ? "\n\"\"q" : "") +
            "\"," + std::to_string(i * 37 % 1001) + "." + std::to_string(i % 10) + "\n";
  }
  return text;
}

std::string error_of(const std::vector<std::string>& names, const TemporaryFolder& folder,
                     const ReadOptions& options = {}) {
  auto table = read_table(names, options);
  return table
             ? "accepted"
             : line_without(table.error(), folder.path(".").substr(0, folder.path(".").size() - 2));
}

void check_same(const Table& table, const Table& plain) {
  CHECK(table.cells == plain.cells);
  CHECK(table.lines == plain.lines);
  CHECK(table.rows == plain.rows);
  CHECK(table.piece_sizes == plain.piece_sizes);
}

}  // namespace

TEST_CASE("compression is recognised by content, in one member or several") {
  const TemporaryFolder folder;
  const std::string text = long_table(9000);
  const std::size_t third = text.size() / 3;
  const std::string a = text.substr(0, third), b = text.substr(third, third),
                    c = text.substr(2 * third);
  const auto plain = read_table({folder.write("t.csv", text)});
  REQUIRE(plain);
  CHECK(plain.value().schema.rows == 9000);
  CHECK(plain.value().piece_sizes == std::vector<std::size_t>{4096, 4096, 808});

  // A skippable frame of 4 bytes (RFC 8878, 3.1.2).
  const std::string skippable("\x50\x2a\x4d\x18\x04\x00\x00\x00wxyz", 12);
  struct Case {
    std::string why, bytes;
  };
  const Case cases[] = {
      {"gzip", gzip(text)},
      {"gzip, three members, one empty", gzip(a) + gzip(b) + gzip("") + gzip(c)},
      {"gzip with zero padding", gzip(text) + std::string(1000, '\0')},
      {"zstd", zstd(text)},
      {"zstd, three frames, one empty", zstd(a) + zstd(b) + zstd("") + zstd(c)},
      {"zstd behind a skippable frame", skippable + zstd(text)},
      {"zstd with a skippable frame in between", zstd(a + b) + skippable + zstd(c)},
  };
  for (const Case& c2 : cases) {
    CAPTURE(c2.why);
    const auto table = read_table({folder.write("t", c2.bytes)});
    REQUIRE_MESSAGE(table, (table ? "" : to_line(table.error())));
    check_same(table.value(), plain.value());
  }
}

TEST_CASE("damaged compressed files are refused, cut off anywhere") {
  const TemporaryFolder folder;
  const std::string text = long_table(3000);
  for (const std::string& packed : {gzip(text), zstd(text)}) {
    for (std::size_t size = 5; size < packed.size(); size += packed.size() / 40) {
      CAPTURE(size);
      const std::string line = error_of({folder.write("cut", packed.substr(0, size))}, folder);
      CHECK(line.find("the compressed file is truncated: it ends after " + std::to_string(size) +
                      " bytes") != std::string::npos);
    }
    const std::string line =
        error_of({folder.write("cut", packed.substr(0, packed.size() - 1))}, folder);
    CHECK(line.find("truncated") != std::string::npos);
  }
  std::string flipped = gzip(text);
  flipped[flipped.size() - 6] ^= 1;  // within the checksum
  CHECK(error_of({folder.write("bad", flipped)}, folder).find("corrupt") != std::string::npos);
  std::string broken = zstd(text);
  broken[4] ^= 0x08;  // a reserved bit of the frame header: RFC 8878, 3.1.1.1.1.4
  CHECK(error_of({folder.write("bad", broken)}, folder).find("corrupt") != std::string::npos);
  CHECK(error_of({folder.write("bad", gzip(text) + "junk")}, folder).find("not gzip") !=
        std::string::npos);
  CHECK(error_of({folder.write("empty.gz", gzip(""))}, folder) ==
        "empty.gz: the file is empty (the first line must name the columns)");
}

TEST_CASE("several files with the same columns in any order are one table") {
  const TemporaryFolder folder;
  const std::string first = folder.write("1.csv", "a,b,c\n1,x,10\n2,y,20\n");
  const std::string second = folder.write("2.csv.gz", gzip("c,a,b\r\n30,3,x\r\n\r\n"));
  const std::string third = folder.write("3.csv", "b,\"c\",a\nz,NA,5\n");
  const std::string only_header = folder.write("4.csv", "a,b,c\n");
  const auto table = read_table({first, only_header, second, third});
  REQUIRE_MESSAGE(table, (table ? "" : to_line(table.error())));
  CHECK(table.value().cells ==
        Cells{{"1", "x", "10"}, {"2", "y", "20"}, {"3", "x", "30"}, {"5", "z", std::nullopt}});
  CHECK(table.value().rows == std::vector<std::uint64_t>{1, 2, 3, 4});
  CHECK(table.value().lines == std::vector<std::uint64_t>{2, 3, 2, 2});
  CHECK(table.value().files == std::vector<std::size_t>{0, 0, 2, 3});
  CHECK(table.value().schema.rows_of_file == std::vector<std::uint64_t>{2, 0, 1, 1});

  struct Case {
    std::string why, other, line;
  };
  const Case cases[] = {
      {"a column more", "a,b,c,d\n1,2,3,4\n",
       "5.csv:1:1: column \"d\" is not in the header of 1.csv (files of one data set have the "
       "columns of 1.csv, in any order)"},
      {"a column less", "a,c\n1,2\n",
       "5.csv:1:1: the header has no column \"b\" (files of one data set have the columns of "
       "1.csv, in any order)"},
      {"another separator", "a;b;c\n1;2;3\n",
       "5.csv: this file is separated by semicolons, 1.csv by commas (files of one data set are "
       "written the same way; "
       "--separator sets the separator)"},
      {"a fault in the second file names it", "c,b,a\n1,2\n",
       "5.csv:2:3: this row has 2 cells where the header has 3; column \"a\" is the first one "
       "without a cell (a missing "
       "cell is written as nothing between two separators)"},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    CHECK(error_of({first, folder.write("5.csv", c.other)}, folder) == c.line);
  }
}

TEST_CASE("what cannot be opened is named with the way out") {
  const TemporaryFolder folder;
  CHECK(error_of({folder.path("none.csv")}, folder) == "none.csv: no such file");
  std::filesystem::create_directory(folder.path("data"));
  CHECK(error_of({folder.path("data")}, folder) ==
        "data: this is a directory (name the files in it)");
  const std::string locked = folder.write("locked.csv", small);
  std::filesystem::permissions(locked, std::filesystem::perms::none);
  if (geteuid() != 0) {  // root may read everything
    CHECK(error_of({locked}, folder) ==
          "locked.csv: no permission to read this file (ask its owner, or copy it to a place of "
          "your own)");
  }
  CHECK(error_of({}, folder) == "no file is named");
  CHECK(error_of({"-", "-"}, folder) ==
        "standard input (-) is named twice, but can be read only once");
  ReadOptions quote;
  quote.separator = '"';
  CHECK(error_of({folder.write("t.csv", small)}, folder, quote) ==
        "a separator is one ASCII character, and no quote or line break");
}

TEST_CASE("a pipe is read like a file, as often as needed") {
  const TemporaryFolder folder;
  for (const std::string& bytes : {long_table(9000), gzip(long_table(9000))}) {
    const std::string fifo = folder.path("fifo");
    std::filesystem::remove(fifo);
    REQUIRE(mkfifo(fifo.c_str(), 0600) == 0);
    std::thread writer([&] { std::ofstream(fifo, std::ios::binary) << bytes; });
    auto table = read_table({fifo});
    writer.join();
    REQUIRE_MESSAGE(table, (table ? "" : to_line(table.error())));
    const auto plain = read_table({folder.write("t.csv", bytes)});
    REQUIRE(plain);
    check_same(table.value(), plain.value());
  }
}

TEST_CASE("a pipe too large to copy is read once; a second reading is an error with the way out") {
  std::array<int, 2> ends{};
  REQUIRE(pipe(ends.data()) == 0);
  const std::string bytes(1000, 'x');
  REQUIRE(write(ends[1], bytes.data(), bytes.size()) == 1000);
  close(ends[1]);
  Spool spool(Descriptor(ends[0]), "standard input", 600);
  std::string got(1000, '\0');
  auto first = spool.read(0, got.data(), 500);
  REQUIRE(first);
  CHECK(first.value() == 500);
  CHECK(spool.read(0, got.data(), 500));  // the copy holds all so far
  auto rest = spool.read(500, got.data(), 500);
  REQUIRE(rest);
  CHECK(rest.value() == 500);
  auto end = spool.read(1000, got.data(), 500);
  REQUIRE(end);
  CHECK(end.value() == 0);
  auto again = spool.read(0, got.data(), 500);
  REQUIRE_FALSE(again);
  CHECK(to_line(again.error()) ==
        "standard input: a second pass over the data is needed, but they were too large to keep a "
        "copy of (at most 600 "
        "bytes) (save the data to a file and name that file, or point TMPDIR to a larger disk)");
}

TEST_CASE("a file that changes between passes is an error") {
  const TemporaryFolder folder;
  const std::string name = folder.write("t.csv", small);
  auto source = Source::open({name}, {});
  REQUIRE(source);
  REQUIRE(read_table(source.value()));
  folder.write("t.csv", small + "3,z\n");
  auto table = read_table(source.value());
  REQUIRE_FALSE(table);
  CHECK(table.error().what == "the file changed while it was being read");
}

TEST_CASE("pieces end at 4,096 rows or 4 MB, the same in every pass") {
  const TemporaryFolder folder;
  std::string text = "a,b\n";
  for (int i = 0; i < 100; ++i) text += "1," + std::string(100'000, 'x') + "\n";
  for (int i = 0; i < 5000; ++i) text += "2,y\n";
  auto source = Source::open({folder.write("t.csv", text)}, {});
  REQUIRE(source);
  const auto first = read_table(source.value(), 1);
  const auto second = read_table(source.value(), 4);
  REQUIRE(first);
  REQUIRE(second);
  CHECK(first.value().piece_sizes == std::vector<std::size_t>{42, 42, 4096, 920});
  CHECK(second.value().piece_sizes == first.value().piece_sizes);
  CHECK(source.value().progress().rows == 5100);
  CHECK(source.value().progress().bytes_read == text.size());
  CHECK(source.value().progress().bytes_total == text.size());
}

TEST_CASE("blank lines in the middle count as rows of a one-column file across piece borders") {
  const TemporaryFolder folder;
  std::string text = "a\n";
  for (int i = 0; i < 3000; ++i) text += "1\n";
  text += std::string(9000, '\n') + "2\n" + std::string(5000, '\n');
  const auto table = read_table({folder.write("t.csv", text)});
  REQUIRE(table);
  CHECK(table.value().schema.rows == 12001);
  CHECK(table.value().schema.columns[0].missing == 9000);
  CHECK(table.value().lines.back() == 12002);
  CHECK(table.value().piece_sizes == std::vector<std::size_t>{4096, 4096, 3809});
}

TEST_CASE("cells and rows over the limits are refused by name") {
  const TemporaryFolder folder;
  const std::string seventeen(17u << 20, 'x');
  const auto has = [](const std::string& line, const std::string& part) {
    return line.find(part) != std::string::npos;
  };
  CHECK(has(error_of({folder.write("t.csv", "a,b\n1," + seventeen + "\n")}, folder),
            "t.csv:2:3: column \"b\": the cell that starts here is over 16 MB"));
  CHECK(has(error_of({folder.write("t.csv", "a,b\n1,\"" + seventeen + "\n2,3\n")}, folder),
            "t.csv:2:3: column \"b\": the cell that starts here is over 16 MB"));
  std::string wide = "a";
  for (int i = 1; i < 8; ++i) wide += ",c" + std::to_string(i);
  wide += "\n1,2,3,4,5,6,7,8\n";
  for (int i = 0; i < 8; ++i) wide += (i > 0 ? "," : "") + std::string(15u << 20, 'y');
  CHECK(has(error_of({folder.write("t.csv", wide)}, folder), "this row is over 64 MB"));
  std::string header = "c0";
  for (int i = 1; i <= 100'000; ++i) header += ",c" + std::to_string(i);
  CHECK(has(error_of({folder.write("t.csv", header + "\n")}, folder),
            "the header has more than 100,000 columns"));
}

TEST_CASE("separator, decimal mark and missing texts can be set") {
  const TemporaryFolder folder;
  ReadOptions options;
  options.separator = ':';
  options.decimal_mark = ',';
  options.missing = {"-99", " . "};
  const auto table =
      read_table({folder.write("t.csv", "a:b:c\n1,5:-99: .\n-99,0:2:NA\n:3:\n")}, options);
  REQUIRE(table);
  CHECK(table.value().cells ==
        Cells{{"1,5", std::nullopt, std::nullopt}, {"-99,0", "2", "NA"}, {"", "3", ""}});
}
