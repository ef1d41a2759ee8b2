#include "table/piece_survey.hpp"

#include <algorithm>
#include <cmath>
#include <unordered_set>
#include <utility>

#include "table/number_short.hpp"

namespace gramproof::table {
namespace {

class PieceSurveyor {
 public:
  PieceSurveyor(const Source::State& state, const std::vector<Listing>& listings,
                std::size_t numeric_levels, PieceSurvey& survey)
      : state_(state),
        numeric_levels_(numeric_levels),
        survey_(survey),
        readable_(survey.raw->bytes.data() + survey.raw->bytes.size()) {
    survey_.columns.assign(listings.size(), {});
    next_check_.assign(listings.size(), probed_texts + 1);
    for (const std::size_t column : state.layouts[survey.raw->file].table_column) {
      cells_.push_back({&survey_.columns[column], &next_check_[column], listings[column]});
    }
  }

  Result<void> run() {
    const RawPiece& raw = *survey_.raw;
    const Fault fault = walk_records(
        raw.bytes, state_.separator, cells_.size(), raw.first_line,
        [](std::size_t, std::uint64_t) {},
        [&](std::size_t record, std::size_t number, const RawCell& cell) {
          const CellTarget& target = cells_[number];
          if (target.listing == Listing::none) return true;
          if (target.column->cut) {
            take_unlisted(*target.column, cell, record);
          } else {
            take_listed(target, cell, record);
          }
          return true;
        });
    if (fault.kind != FormatFault::none || raw.cut) return piece_fault(state_, raw, fault);
    for (ColumnSurvey& column : survey_.columns) {
      if (!column.cut) count_listed(column);
    }
    return {};
  }

 private:
  /// Where the cells of one column of the file go.
  struct CellTarget {
    ColumnSurvey* column;
    std::size_t* next_check;
    Listing listing;
  };

  void take_listed(const CellTarget& target, const RawCell& cell, std::size_t record) {
    std::string_view text = cell.text;
    if (cell.doubled_quotes) {
      survey_.unquoted.emplace_back();
      text = cell_text(cell, survey_.unquoted.back());
    }
    Spelling& spelling = target.column->spellings.find_or_add(text);
    if (++spelling.count > 1) return;
    spelling.at = cell.at;
    spelling.record = static_cast<std::uint32_t>(record);
    classify(*target.column, spelling);
    if (target.listing == Listing::probe &&
        target.column->spellings.spellings().size() >= *target.next_check) {
      consider_cut(target);
    }
  }

  void classify(ColumnSurvey& column, Spelling& spelling) {
    const std::string_view text = without_blanks(spelling.text);
    if (state_.missing.contains(text)) {
      spelling.kind = CellClass::missing;
      return;
    }
    Number number;
    const NumberStatus status = parse_number(text, state_.decimal_mark, number);
    if (status == NumberStatus::number) {
      spelling.kind = CellClass::number;
      column.range.add(number);
    } else if (status == NumberStatus::not_a_number) {
      spelling.kind = CellClass::text;
      if (column.first_text.count == 0) column.first_text = spelling;
    } else {
      spelling.kind = CellClass::out_of_range;
      if (column.first_out_of_range.count == 0) column.first_out_of_range = spelling;
    }
  }

  void consider_cut(const CellTarget& target) {
    ColumnSurvey& column = *target.column;
    const auto& spellings = column.spellings.spellings();
    *target.next_check = 2 * spellings.size();
    if (column.first_text.count > 0) return;
    std::unordered_set<std::string> values;
    for (const Spelling& spelling : spellings) {
      if (spelling.kind == CellClass::missing) continue;
      values.insert(value_key(spelling.text, spelling.kind, state_.decimal_mark));
    }
    if (values.size() <= numeric_levels_) return;
    count_listed(column);
    column.cut = true;
    column.distinct = values.size();
    column.spellings = {};
  }

  static void count_listed(ColumnSurvey& column) {
    for (const Spelling& spelling : column.spellings.spellings()) {
      (spelling.kind == CellClass::missing ? column.missing : column.present) += spelling.count;
      if (spelling.kind == CellClass::text) column.texts += spelling.count;
    }
  }

  void take_unlisted(ColumnSurvey& column, const RawCell& cell, std::size_t record) {
    ShortNumber quick;
    double value = 0;
    const char* const begin = cell.text.data();
    if (!state_.missing.like_numbers() &&
        parse_short(begin, begin + cell.text.size(), readable_, state_.decimal_mark, quick) &&
        short_value(quick, value)) {
      ++column.present;
      add_short(column.range, quick, value);
      return;
    }
    const std::string_view text = without_blanks(cell_text(cell, scratch_));
    if (state_.missing.contains(text)) {
      ++column.missing;
      return;
    }
    ++column.present;
    Number number;
    const NumberStatus status = parse_number(text, state_.decimal_mark, number);
    if (status == NumberStatus::number) {
      column.range.add(number);
    } else if (status == NumberStatus::not_a_number) {
      column.text_after_cut = true;
    } else if (column.first_out_of_range.count == 0) {
      column.first_out_of_range = {cell.text, cell.at, static_cast<std::uint32_t>(record),
                                   1,         0,       CellClass::out_of_range};
    }
  }

  /// NumberRange::add without divisions and digit counts where they can change nothing.
  static void add_short(NumberRange& range, const ShortNumber& number, double value) {
    range.smallest = std::min(range.smallest, value);
    range.largest = std::max(range.largest, value);
    range.largest_magnitude = std::max(range.largest_magnitude, std::abs(value));
    range.most_decimals = std::max(range.most_decimals, number.decimals);
    const auto digits = static_cast<std::size_t>(range.most_significant_digits);
    if (digits < 18 && std::abs(number.mantissa) >= integer_powers_of_ten[digits]) {
      range.most_significant_digits = digits_in(number.mantissa);
    }
    if (range.all_whole && number.decimals > 0) {
      const auto power = integer_powers_of_ten[static_cast<std::size_t>(number.decimals)];
      range.all_whole = number.mantissa % power == 0;
    }
  }

  const Source::State& state_;
  std::size_t numeric_levels_;
  PieceSurvey& survey_;
  const char* readable_;                 ///< the end of the piece's bytes
  std::vector<std::size_t> next_check_;  ///< number of texts at which a column may be cut
  std::vector<CellTarget> cells_;        ///< in the order of the file
  std::string scratch_;
};

/// mantissa * 10^-decimals is an integer.
bool is_whole(const Number& number) {
  if (number.decimals <= 0 || number.significant_digits == 0) return true;
  const std::string digits = number.wide.empty() ? std::to_string(number.mantissa) : number.wide;
  const std::size_t last = digits.find_last_not_of('0');
  return digits.size() - 1 - last >= static_cast<std::size_t>(number.decimals);
}

}  // namespace

void NumberRange::add(const Number& number) {
  smallest = std::min(smallest, number.value);
  largest = std::max(largest, number.value);
  largest_magnitude = std::max(largest_magnitude, std::abs(number.value));
  most_decimals = std::max(most_decimals, number.decimals);
  most_significant_digits = std::max(most_significant_digits, number.significant_digits);
  all_whole = all_whole && is_whole(number);
}

void NumberRange::add(const NumberRange& other) {
  smallest = std::min(smallest, other.smallest);
  largest = std::max(largest, other.largest);
  largest_magnitude = std::max(largest_magnitude, other.largest_magnitude);
  most_decimals = std::max(most_decimals, other.most_decimals);
  most_significant_digits = std::max(most_significant_digits, other.most_significant_digits);
  all_whole = all_whole && other.all_whole;
}

std::string value_key(std::string_view text, CellClass kind, char decimal_mark) {
  Number number;
  if (kind != CellClass::number) return std::string(without_blanks(text));
  if (parse_number(text, decimal_mark, number) != NumberStatus::number) return std::string(text);
  return plain_text(number);
}

Result<PieceSurvey> survey_piece(const Source::State& state, std::vector<Listing> listings,
                                 std::size_t numeric_levels, RawPiece raw) {
  PieceSurvey survey;
  survey.raw = std::make_unique<RawPiece>(std::move(raw));
  if (auto checked = check_bytes(state, *survey.raw); !checked) return checked.error();
  while (true) {
    if (auto done = PieceSurveyor(state, listings, numeric_levels, survey).run(); !done) {
      return done.error();
    }
    // A column of many numbers with a text behind them is read once more, listed in full: at most
    // one more turn, because a full listing is never cut.
    bool again = false;
    for (std::size_t c = 0; c < listings.size(); ++c) {
      if (!survey.columns[c].text_after_cut) continue;
      listings[c] = Listing::full;
      again = true;
    }
    if (!again) return survey;
    survey.unquoted.clear();
  }
}

}  // namespace gramproof::table
