#include "table/support.hpp"

#include <doctest/doctest.h>
#include <stdlib.h>
#include <zstd.h>

#include <filesystem>
#include <fstream>

using namespace gramproof;
using namespace gramproof::table;

namespace table_test {
namespace {

void collect(const Piece& piece, const Schema& schema, Table& table) {
  table.piece_sizes.push_back(piece.rows);
  for (std::size_t r = 0; r < piece.rows; ++r) {
    std::vector<std::optional<std::string>> row;
    for (std::size_t c = 0; c < piece.columns.size(); ++c) {
      const PieceColumn& column = piece.columns[c];
      if (column.missing[r] != 0) {
        row.emplace_back();
      } else if (column.kind == ColumnKind::numeric) {
        row.emplace_back(plain_text(column.number(r)));
      } else {
        REQUIRE(column.code[r] >= 0);
        row.emplace_back(
            schema.columns[c].levels.at(static_cast<std::size_t>(column.code[r])).text);
      }
    }
    table.cells.push_back(std::move(row));
    table.rows.push_back(piece.row[r]);
    table.lines.push_back(piece.line[r]);
    table.files.push_back(piece.file);
  }
}

}  // namespace

TemporaryFolder::TemporaryFolder() {
  std::string pattern = (std::filesystem::temp_directory_path() / "gramproof-test-XXXXXX").string();
  REQUIRE(mkdtemp(pattern.data()) != nullptr);
  folder_ = pattern;
}

TemporaryFolder::~TemporaryFolder() {
  std::error_code ignored;
  std::filesystem::remove_all(folder_, ignored);
}

std::string TemporaryFolder::write(const std::string& name, std::string_view bytes) const {
  std::ofstream(path(name), std::ios::binary) << bytes;
  return path(name);
}

std::string zstd(std::string_view bytes) {
  std::string packed(ZSTD_compressBound(bytes.size()), '\0');
  const std::size_t size =
      ZSTD_compress(packed.data(), packed.size(), bytes.data(), bytes.size(), 3);
  REQUIRE(ZSTD_isError(size) == 0);
  packed.resize(size);
  return packed;
}

Result<Table> read_table(Source& source, unsigned threads, bool all_numbers) {
  SurveyOptions options;
  options.threads = threads;
  auto schema = survey(source, options);
  if (!schema) return schema.error();
  Table table;
  std::vector<Want> wants;
  for (const ColumnFacts& facts : schema.value().columns) {
    const bool as_number = all_numbers || facts.kind == ColumnKind::numeric;
    wants.push_back(as_number ? Want::numeric : Want::text);
  }
  if (auto rewound = source.rewind(); !rewound) return rewound.error();
  while (true) {
    auto raw = source.next();
    if (!raw) return raw.error();
    if (!raw.value()) break;
    auto piece = parse_piece(source, schema.value(), wants, *raw.value());
    if (!piece) return piece.error();
    collect(piece.value(), schema.value(), table);
  }
  table.schema = std::move(schema.value());
  return table;
}

Result<Table> read_table(const std::vector<std::string>& names, const ReadOptions& options,
                         unsigned threads) {
  auto source = Source::open(names, options);
  if (!source) return source.error();
  return read_table(source.value(), threads);
}

std::string line_without(const Error& error, const std::string& folder) {
  std::string line = to_line(error);
  for (std::size_t at = line.find(folder + "/"); at != std::string::npos;
       at = line.find(folder + "/")) {
    line.erase(at, folder.size() + 1);
  }
  return line;
}

}  // namespace table_test
