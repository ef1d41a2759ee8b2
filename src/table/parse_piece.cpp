#include <algorithm>
#include <utility>

#include <fmt/format.h>

#include "base/text.hpp"
#include "table/number_short.hpp"
#include "table/source_state.hpp"
#include "table/survey.hpp"

namespace gramproof::table {
namespace {

/// Fills the wanted columns of one piece.
class PieceParser {
 public:
  PieceParser(const Source::State& state, const Schema& schema, const std::vector<Want>& wants,
              const RawPiece& raw)
      : state_(state), schema_(schema), raw_(raw), readable_(raw.bytes.data() + raw.bytes.size()) {
    piece_.index = raw.index;
    piece_.file = raw.file;
    piece_.rows = raw.records;
    piece_.row.resize(raw.records);
    piece_.line.resize(raw.records);
    piece_.columns.resize(wants.size());
    for (std::size_t c = 0; c < wants.size(); ++c) prepare(piece_.columns[c], wants[c]);
    for (const std::size_t c : state.layouts[raw.file].table_column) {
      wanted_.push_back(wants[c]);
    }
  }

  Result<Piece> parse() {
    if (auto checked = check_bytes(state_, raw_); !checked) return checked.error();
    const auto& table_column = state_.layouts[raw_.file].table_column;
    std::size_t records = 0;
    const Fault fault = walk_records(
        raw_.bytes, state_.separator, table_column.size(), raw_.first_line,
        [&](std::size_t record, std::uint64_t line) {
          records = record + 1;
          if (record >= piece_.rows) return;
          piece_.row[record] = raw_.first_row + record;
          piece_.line[record] = line;
        },
        [&](std::size_t record, std::size_t cell_number, const RawCell& cell) {
          if (wanted_[cell_number] == Want::skip) return true;
          if (record >= piece_.rows) return false;
          const std::size_t column = table_column[cell_number];
          return wanted_[cell_number] == Want::numeric ? take_number(record, column, cell)
                                                       : take_text(record, column, cell);
        });
    if (error_) return std::move(*error_);
    if (fault.kind != FormatFault::none || raw_.cut) return piece_fault(state_, raw_, fault);
    if (records != piece_.rows) {
      return Error{ErrorKind::internal, cell_place(state_, raw_, raw_.bytes.data()),
                   "the reader counted the rows of a piece in two ways", "please report this"};
    }
    return std::move(piece_);
  }

 private:
  void prepare(PieceColumn& column, Want want) const {
    if (want == Want::skip) return;
    column.loaded = true;
    column.missing.resize(raw_.records);
    if (want == Want::numeric) {
      column.kind = ColumnKind::numeric;
      column.value.resize(raw_.records);
      column.mantissa.resize(raw_.records);
      column.decimals.resize(raw_.records);
    } else {
      column.kind = ColumnKind::text;
      column.code.resize(raw_.records, -1);
    }
  }

  bool take_number(std::size_t row, std::size_t index, const RawCell& cell) {
    PieceColumn& column = piece_.columns[index];
    ShortNumber quick;
    const char* const begin = cell.text.data();
    if (!state_.missing.like_numbers() &&
        parse_short(begin, begin + cell.text.size(), readable_, state_.decimal_mark, quick) &&
        short_value(quick, column.value[row])) {
      column.mantissa[row] = quick.mantissa;
      column.decimals[row] = static_cast<std::int16_t>(quick.decimals);
      return true;
    }
    const std::string_view text = without_blanks(cell_text(cell, scratch_));
    if (state_.missing.contains(text)) {
      column.missing[row] = 1;
      column.value[row] = 0;
      return true;
    }
    Number number;
    const NumberStatus status = parse_number(text, state_.decimal_mark, number);
    if (status != NumberStatus::number) return refuse(index, cell, text, status);
    column.value[row] = number.value;
    column.mantissa[row] = number.mantissa;
    column.decimals[row] = static_cast<std::int16_t>(number.decimals);
    if (!number.wide.empty()) {
      column.wide.push_back({static_cast<std::uint32_t>(row), std::move(number.wide)});
    }
    return true;
  }

  bool take_text(std::size_t row, std::size_t index, const RawCell& cell) {
    PieceColumn& column = piece_.columns[index];
    std::string_view text = cell_text(cell, scratch_);
    if (state_.missing.contains(without_blanks(text))) {
      column.missing[row] = 1;
      return true;
    }
    const ColumnFacts& facts = schema_.columns[index];
    std::string value_text;
    if (facts.kind == ColumnKind::numeric) {
      Number number;
      const NumberStatus status = parse_number(text, state_.decimal_mark, number);
      if (status == NumberStatus::number) {
        value_text = plain_text(number);
        text = value_text;
      } else {
        text = without_blanks(text);
      }
    }
    const auto found = facts.code_of.find(text);
    column.code[row] = found == facts.code_of.end() ? -2 : found->second;
    return true;
  }

  bool refuse(std::size_t index, const RawCell& cell, std::string_view text, NumberStatus status) {
    error_ = Error{ErrorKind::data, cell_place(state_, raw_, cell.at), "", ""};
    const std::string column =
        fmt::format("column \"{}\": {}", state_.column_names[index], quoted_for_message(text));
    switch (status) {
      case NumberStatus::out_of_range:
        error_->what = column + " is out of range";
        error_->hint = "a number is 0 or lies between 1e-305 and 1e305 in size; change its unit";
        break;
      case NumberStatus::too_long:
        error_->kind = ErrorKind::limit;
        error_->what = column + " has more than 1,000 significant digits";
        error_->hint = "round it";
        break;
      default:
        error_->what = column + " is not a number";
        error_->hint = "--missing sets the texts that count as missing";
    }
    return false;
  }

  const Source::State& state_;
  const Schema& schema_;
  const RawPiece& raw_;
  const char* readable_;      ///< the end of the piece's bytes
  std::vector<Want> wanted_;  ///< in the order of the file
  Piece piece_;
  std::string scratch_;
  std::optional<Error> error_;
};

}  // namespace

std::string cell_place(const Source::State& state, const RawPiece& raw, const char* at) {
  return place(state.files[raw.file].name, line_column(raw.bytes, at, raw.first_line));
}

Error piece_fault(const Source::State& state, const RawPiece& raw, const Fault& fault) {
  // Where the last record is cut off at the limit, what it lacks behind the cut is no fault of its
  // own.
  const bool in_cut_record = raw.cut && (fault.kind == FormatFault::none ||
                                         (fault.kind == FormatFault::too_few &&
                                          std::find(fault.at, raw.bytes.data() + raw.bytes.size(),
                                                    '\n') == raw.bytes.data() + raw.bytes.size()));
  if (in_cut_record) {
    return {ErrorKind::limit, cell_place(state, raw, raw.bytes.data() + raw.bytes.size()),
            "this row is over 64 MB", "line ends are LF or CRLF; is a closing quote missing?"};
  }
  return fault_error(fault, state.files[raw.file].name, raw.bytes, raw.first_line,
                     state.layouts[raw.file].names);
}

Result<void> check_bytes(const Source::State& state, const RawPiece& raw) {
  const std::size_t bad = first_bad_byte(raw.bytes);
  if (bad == raw.bytes.size()) return {};
  // A piece cut at the limit may end inside a character; the cut itself is the fault to report.
  if (raw.cut && raw.bytes.size() - bad < 4) return {};
  return bad_byte_error(state.files[raw.file].name, raw.bytes, bad, raw.first_line);
}

Result<Piece> parse_piece(const Source& source, const Schema& schema,
                          const std::vector<Want>& wants, const RawPiece& raw) {
  return PieceParser(source.state(), schema, wants, raw).parse();
}

}  // namespace gramproof::table
