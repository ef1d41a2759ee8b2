// Pieces: what parse_piece fills, gather and append.
#include "table/piece.hpp"

#include <doctest/doctest.h>

#include <string>
#include <vector>

#include "table/support.hpp"

using namespace gramproof;
using namespace gramproof::table;
using namespace table_test;

namespace {

const std::string table_text =
    "n,t,w\n"
    "1.50,x,123456789012345678901234567890\n"
    "NA,y,2\n"
    "-3,,-0.1234567890123456789\n"
    "4e2,x,NA\n";

struct Read {
  Schema schema;
  Piece piece;
};

Read read(const std::string& text, const std::vector<Want>& wants,
          const SurveyOptions& options = {}) {
  const TemporaryFolder folder;
  auto source = Source::open({folder.write("t.csv", text)}, {});
  REQUIRE(source);
  auto schema = survey(source.value(), options);
  REQUIRE(schema);
  REQUIRE(source.value().rewind());
  auto raw = source.value().next();
  REQUIRE(raw);
  REQUIRE(raw.value().has_value());
  auto piece = parse_piece(source.value(), schema.value(), wants, *raw.value());
  REQUIRE_MESSAGE(piece, (piece ? "" : to_line(piece.error())));
  return {std::move(schema.value()), std::move(piece.value())};
}

const std::vector<Want> by_kind = {Want::numeric, Want::text, Want::numeric};

}  // namespace

TEST_CASE("a piece holds value, mantissa, decimals, codes and missing cells") {
  const Piece piece = read(table_text, by_kind).piece;
  REQUIRE(piece.rows == 4);
  const PieceColumn &n = piece.columns[0], &t = piece.columns[1], &w = piece.columns[2];
  CHECK(n.missing == std::vector<std::uint8_t>{0, 1, 0, 0});
  CHECK(n.value == std::vector<double>{1.5, 0, -3, 400});
  CHECK(n.mantissa == std::vector<std::int64_t>{150, 0, -3, 4});
  CHECK(n.decimals == std::vector<std::int16_t>{2, 0, 0, -2});
  CHECK(n.wide.empty());
  CHECK(t.code == std::vector<std::int32_t>{0, 1, -1, 0});
  CHECK(t.value.empty());
  REQUIRE(w.wide.size() == 2);
  CHECK(w.wide[0].row == 0);
  CHECK(w.wide[1].digits == "-1234567890123456789");
  CHECK(w.number(2).decimals == 19);
  CHECK(w.number(2).wide == "-1234567890123456789");
  CHECK(w.number(2).significant_digits == 19);
  CHECK(w.number(1).mantissa == 2);
  CHECK(w.number(1).wide.empty());
  CHECK(n.number(0).significant_digits == 3);
  CHECK(w.value[0] == 123456789012345678901234567890.0);
}

TEST_CASE("columns not wanted are not loaded, but their faults are found") {
  const Piece piece = read(table_text, {Want::skip, Want::text, Want::skip}).piece;
  CHECK_FALSE(piece.columns[0].loaded);
  CHECK(piece.columns[0].value.empty());
  CHECK(piece.columns[1].loaded);
}

TEST_CASE("a column of numbers wanted as text gets the codes of its values") {
  SurveyOptions options;
  options.list_values = {"n"};
  const Read got = read("n,m\n2,1\n1.0,1\nNA,1\n1,1\n2.00,1\n", {Want::text, Want::skip}, options);
  CHECK(got.piece.columns[0].kind == ColumnKind::text);
  CHECK(got.piece.columns[0].code == std::vector<std::int32_t>{0, 1, -1, 1, 0});
}

TEST_CASE("a text that the schema does not know is marked") {
  const TemporaryFolder folder;
  auto first = Source::open({folder.write("1.csv", "a\nx\ny\n")}, {});
  auto second = Source::open({folder.write("2.csv", "a\ny\nz\n")}, {});
  REQUIRE(first);
  REQUIRE(second);
  const auto schema = survey(first.value(), {});
  REQUIRE(schema);
  const auto raw = second.value().next();
  REQUIRE(raw);
  const auto piece = parse_piece(second.value(), schema.value(), {Want::text}, *raw.value());
  REQUIRE(piece);
  CHECK(piece.value().columns[0].code == std::vector<std::int32_t>{1, -2});
}

TEST_CASE("gather takes the named rows in the named order") {
  const Piece piece = gather(read(table_text, by_kind).piece, {3, 0, 2, 2});
  CHECK(piece.rows == 4);
  CHECK(piece.row == std::vector<std::uint64_t>{4, 1, 3, 3});
  CHECK(piece.line == std::vector<std::uint64_t>{5, 2, 4, 4});
  CHECK(piece.columns[0].value == std::vector<double>{400, 1.5, -3, -3});
  CHECK(piece.columns[1].code == std::vector<std::int32_t>{0, 0, -1, -1});
  CHECK(piece.columns[2].missing == std::vector<std::uint8_t>{1, 0, 0, 0});
  CHECK(piece.columns[2].number(1).wide == "123456789012345678901234567890");
  CHECK(piece.columns[2].number(3).wide == "-1234567890123456789");
  CHECK(piece.columns[2].wide.size() == 3);
}

TEST_CASE("append puts rows behind each other and remembers their files") {
  const Piece piece = read(table_text, by_kind).piece;
  Piece other = piece;
  other.file = 3;
  Piece sum;
  append(sum, piece);
  append(sum, gather(other, {2}));
  append(sum, gather(piece, {}));
  append(sum, gather(other, {0}));
  CHECK(sum.rows == 6);
  CHECK(sum.file_of_row == std::vector<std::uint32_t>{0, 0, 0, 0, 3, 3});
  CHECK(sum.row == std::vector<std::uint64_t>{1, 2, 3, 4, 3, 1});
  CHECK(sum.columns[2].number(4).wide == "-1234567890123456789");
  CHECK(sum.columns[2].number(5).wide == "123456789012345678901234567890");
  CHECK(sum.columns[0].value[4] == -3);
  const Piece again = gather(sum, {5, 4});
  CHECK(again.file_of_row == std::vector<std::uint32_t>{3, 3});
}
