// Walks fixtures/accept and fixtures/reject: the expectation lies beside each file.
#include <doctest/doctest.h>

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <iterator>
#include <nlohmann/json.hpp>
#include <string>
#include <vector>

#include "table/support.hpp"

using namespace gramproof;
using namespace gramproof::table;
using namespace table_test;

namespace {

std::vector<std::filesystem::path> tables_in(const std::string& folder) {
  std::vector<std::filesystem::path> files;
  for (const auto& entry : std::filesystem::directory_iterator(folder)) {
    if (entry.path().extension() == ".csv") files.push_back(entry.path());
  }
  std::sort(files.begin(), files.end());
  return files;
}

std::string content(const std::filesystem::path& file) {
  std::ifstream stream(file, std::ios::binary);
  REQUIRE(stream.good());
  return {std::istreambuf_iterator<char>(stream), {}};
}

Cells cells_of(const nlohmann::json& json) {
  Cells cells;
  for (const auto& json_row : json) {
    auto& row = cells.emplace_back();
    for (const auto& cell : json_row) {
      row.push_back(cell.is_null() ? std::nullopt : std::optional(cell.get<std::string>()));
    }
  }
  return cells;
}

void check_accepted(const std::filesystem::path& file, const nlohmann::json& expected,
                    unsigned threads) {
  auto source = Source::open({file.string()}, {});
  REQUIRE_MESSAGE(source, (source ? "" : to_line(source.error())));
  auto table = read_table(source.value(), threads);
  REQUIRE_MESSAGE(table, (table ? "" : to_line(table.error())));
  CHECK(std::string(1, source.value().separator()) == expected["separator"].get<std::string>());
  CHECK(std::string(1, source.value().decimal_mark()) ==
        expected["decimal_mark"].get<std::string>());
  CHECK(source.value().column_names() == expected["columns"].get<std::vector<std::string>>());
  for (std::size_t c = 0; c < table.value().schema.columns.size(); ++c) {
    const ColumnFacts& facts = table.value().schema.columns[c];
    CAPTURE(facts.name);
    CHECK((facts.kind == ColumnKind::numeric ? "numeric" : "text") ==
          expected["kinds"][c].get<std::string>());
    CHECK(facts.present + facts.missing == table.value().schema.rows);
  }
  if (!expected["cells"].is_null()) CHECK(table.value().cells == cells_of(expected["cells"]));
  if (expected.contains("lines")) {
    CHECK(table.value().lines == expected["lines"].get<std::vector<std::uint64_t>>());
  }
  CHECK(table.value().rows.size() == table.value().schema.rows);
  for (std::size_t i = 0; i < table.value().rows.size(); ++i) CHECK(table.value().rows[i] == i + 1);
}

}  // namespace

TEST_CASE("every file in fixtures/accept is read as the text beside it says") {
  const auto files = tables_in(GRAMPROOF_FIXTURES "/accept");
  REQUIRE(files.size() >= 25);
  for (const auto& file : files) {
    const auto expected =
        nlohmann::json::parse(content(std::filesystem::path(file).replace_extension(".json")));
    CAPTURE(file.filename().string());
    CAPTURE(expected["why"].get<std::string>());
    check_accepted(file, expected, 1);
    check_accepted(file, expected, 3);
  }
}

TEST_CASE("every file in fixtures/reject is refused with the line beside it") {
  const auto files = tables_in(GRAMPROOF_FIXTURES "/reject");
  REQUIRE(files.size() >= 25);
  for (const auto& file : files) {
    const std::string name = file.filename().string();
    CAPTURE(name);
    std::string expected = content(std::filesystem::path(file).replace_extension(".txt"));
    REQUIRE(expected.ends_with('\n'));
    expected.pop_back();
    for (unsigned threads = 1; threads <= 3; threads += 2) {
      std::string line = "accepted";
      auto source = Source::open({file.string()}, {});
      if (!source) {
        line = line_without(source.error(), file.parent_path().string());
      } else if (auto table = read_table(source.value(), threads, true); !table) {
        line = line_without(table.error(), file.parent_path().string());
      }
      for (std::size_t at = line.find(name); at != std::string::npos; at = line.find(name)) {
        line.replace(at, name.size(), "FILE");
      }
      CHECK(line == expected);
    }
  }
}
