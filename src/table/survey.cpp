#include "table/survey.hpp"

#include <algorithm>
#include <unordered_set>
#include <utility>

#include <fmt/format.h>

#include "base/ordered_work.hpp"
#include "table/piece_survey.hpp"

namespace gramproof::table {
namespace {

/// A text of a column over all pieces so far.
struct ListedText {
  const std::string* text = nullptr;  ///< key of ColumnTotal::index
  std::uint64_t rows = 0;
  CellClass kind = CellClass::text;
};

/// A column over all pieces so far.
struct ColumnTotal {
  ColumnFacts facts;
  NumberRange range;
  std::uint64_t texts = 0;
  std::unordered_map<std::string, std::int32_t, TextHash, std::equal_to<>> index;
  std::vector<ListedText> listed;  ///< in order of first appearance, missing texts left out
  bool cut = false;                ///< nothing is listed any more
  std::size_t next_check = probed_texts + 1;
  std::size_t most_values = 0;  ///< distinct values listed if the column is numeric
};

class Surveyor {
 public:
  Surveyor(Source& source, const SurveyOptions& options) : source_(source), options_(options) {}

  Result<Schema> run() {
    const std::size_t columns = source_.column_names().size();
    std::vector<Listing> listings(columns, Listing::probe);
    for (std::size_t c = 0; c < columns; ++c) {
      if (is_named(c)) listings[c] = Listing::full;
    }
    totals_.resize(columns);
    if (auto passed = pass(listings); !passed) return passed.error();
    if (schema_.rows == 0) {
      return Error{ErrorKind::data, source_.files().front().name,
                   "there is no data row, only a header",
                   "the rows of data follow the first line, which names the columns"};
    }
    if (!source_.decimal_mark_certain()) {
      const bool comma = only_comma_fits();
      source_.settle_decimal_mark(comma ? ',' : '.');
      if (comma) {
        if (auto passed = pass(listings); !passed) return passed.error();
      }
    }
    if (auto completed = list_late_texts(); !completed) return completed.error();
    for (ColumnTotal& total : totals_) schema_.columns.push_back(finished(total));
    return std::move(schema_);
  }

 private:
  [[nodiscard]] bool is_named(std::size_t column) const {
    const auto& names = options_.list_values;
    return std::find(names.begin(), names.end(), source_.column_names()[column]) != names.end();
  }

  /// One pass over the data; columns with Listing::none keep what is known of them.
  Result<void> pass(const std::vector<Listing>& listings) {
    for (std::size_t c = 0; c < listings.size(); ++c) {
      if (listings[c] == Listing::none) continue;
      totals_[c] = {};
      totals_[c].facts.name = source_.column_names()[c];
      totals_[c].most_values = is_named(c) ? options_.text_levels : options_.numeric_levels;
      // A full listing is not given up for its numbers: the texts may be behind them.
      if (listings[c] == Listing::full) totals_[c].next_check = options_.text_levels + 1;
    }
    schema_.rows = 0;
    schema_.rows_of_file.assign(source_.files().size(), 0);
    if (auto rewound = source_.rewind(); !rewound) return rewound.error();
    return run_ordered<RawPiece, PieceSurvey>(
        options_.threads, [&] { return source_.next(); },
        [&](RawPiece raw) {
          return survey_piece(source_.state(), listings, options_.numeric_levels, std::move(raw));
        },
        [&](PieceSurvey piece) -> Result<void> {
          add(piece, listings);
          if (options_.on_progress) options_.on_progress(source_.progress());
          return {};
        });
  }

  void add(const PieceSurvey& piece, const std::vector<Listing>& listings) {
    schema_.rows += piece.raw->records;
    schema_.rows_of_file[piece.raw->file] += piece.raw->records;
    for (std::size_t c = 0; c < listings.size(); ++c) {
      if (listings[c] != Listing::none) add_column(totals_[c], piece, piece.columns[c]);
    }
  }

  void add_column(ColumnTotal& total, const PieceSurvey& piece, const ColumnSurvey& column) {
    total.facts.present += column.present;
    total.facts.missing += column.missing;
    total.texts += column.texts;
    total.range.add(column.range);
    keep_first(total.facts.first_not_number, piece, column.first_text);
    keep_first(total.facts.first_out_of_range, piece, column.first_out_of_range);
    if (total.cut) return;
    if (column.cut) return cut(total, std::max<std::uint64_t>(column.distinct, values(total)));
    for (const Spelling& spelling : column.spellings.spellings()) {
      if (spelling.kind != CellClass::missing) list(total, spelling);
    }
    if (total.texts > 0) {
      if (total.listed.size() > options_.text_levels) cut(total, options_.text_levels + 1);
    } else if (total.listed.size() >= total.next_check) {
      total.next_check = 2 * total.listed.size();
      const std::size_t distinct = values(total);
      if (distinct > total.most_values) cut(total, distinct);
    }
  }

  void keep_first(std::optional<CellPlace>& first, const PieceSurvey& piece,
                  const Spelling& spelling) const {
    if (first || spelling.count == 0) return;
    const RawPiece& raw = *piece.raw;
    first = CellPlace{cell_place(source_.state(), raw, spelling.at), std::string(spelling.text),
                      raw.first_row + spelling.record};
  }

  static void list(ColumnTotal& total, const Spelling& spelling) {
    auto found = total.index.find(spelling.text);
    if (found == total.index.end()) {
      const auto code = static_cast<std::int32_t>(total.listed.size());
      found = total.index.emplace(std::string(spelling.text), code).first;
      total.listed.push_back({&found->first, 0, spelling.kind});
    }
    total.listed[static_cast<std::size_t>(found->second)].rows += spelling.count;
  }

  static void cut(ColumnTotal& total, std::uint64_t distinct) {
    total.cut = true;
    total.facts.distinct_at_least = distinct;
    total.listed = {};
    total.index = {};
  }

  [[nodiscard]] std::size_t values(const ColumnTotal& total) const {
    std::unordered_set<std::string> keys;
    for (const ListedText& text : total.listed) {
      keys.insert(value_key(*text.text, text.kind, source_.decimal_mark()));
    }
    return keys.size();
  }

  /// Some column has texts that are numbers with a decimal comma, and no number has a fraction with
  /// a point.
  [[nodiscard]] bool only_comma_fits() const {
    bool fits = false;
    for (const ColumnTotal& total : totals_) {
      if (total.range.most_decimals > 0) return false;
      Number number;
      const auto& text = total.facts.first_not_number;
      fits |= text && parse_number(text->text, ',', number) != NumberStatus::not_a_number;
    }
    return fits;
  }

  /// A column that looked like many numbers until a text came has lost its list: one more pass for
  /// such.
  Result<void> list_late_texts() {
    std::vector<Listing> listings(totals_.size(), Listing::none);
    bool needed = false;
    for (std::size_t c = 0; c < totals_.size(); ++c) {
      const ColumnTotal& total = totals_[c];
      const bool late =
          total.texts > 0 && total.cut && total.facts.distinct_at_least <= options_.text_levels;
      if (late) listings[c] = Listing::full;
      needed |= late;
    }
    return needed ? pass(listings) : Result<void>{};
  }

  ColumnFacts finished(ColumnTotal& total) const {
    ColumnFacts& facts = total.facts;
    facts.numbers = facts.present - total.texts;
    facts.kind = total.texts == 0 ? ColumnKind::numeric : ColumnKind::text;
    const NumberRange& range = total.range;
    if (range.smallest <= range.largest) {
      facts.most_decimals = range.most_decimals;
      facts.most_significant_digits = range.most_significant_digits;
      facts.all_whole = range.all_whole;
      facts.smallest = range.smallest;
      facts.largest = range.largest;
      facts.largest_magnitude = range.largest_magnitude;
    }
    if (total.cut) {
      facts.levels_cut = true;
    } else if (facts.kind == ColumnKind::text) {
      list_text_levels(total);
    } else {
      list_value_levels(total);
    }
    return std::move(facts);
  }

  static void list_text_levels(ColumnTotal& total) {
    ColumnFacts& facts = total.facts;
    for (const ListedText& text : total.listed) facts.levels.push_back({*text.text, {}, text.rows});
    facts.distinct_at_least = facts.levels.size();
    facts.code_of = std::move(total.index);
  }

  /// Equal values are one level, however they are written.
  void list_value_levels(ColumnTotal& total) const {
    ColumnFacts& facts = total.facts;
    for (const ListedText& text : total.listed) {
      const std::string key = value_key(*text.text, text.kind, source_.decimal_mark());
      const auto code = static_cast<std::int32_t>(facts.levels.size());
      const auto [found, added] = facts.code_of.emplace(key, code);
      if (added) {
        Level level{key, {}, 0};
        static_cast<void>(parse_number(*text.text, source_.decimal_mark(), level.value));
        facts.levels.push_back(std::move(level));
      }
      facts.levels[static_cast<std::size_t>(found->second)].rows += text.rows;
    }
    facts.distinct_at_least = facts.levels.size();
    if (facts.levels.size() <= total.most_values) return;
    facts.levels_cut = true;
    facts.levels.clear();
    facts.code_of.clear();
  }

  Source& source_;
  const SurveyOptions& options_;
  Schema schema_;
  std::vector<ColumnTotal> totals_;
};

}  // namespace

std::optional<std::size_t> Schema::find(std::string_view name) const {
  for (std::size_t i = 0; i < columns.size(); ++i) {
    if (columns[i].name == name) return i;
  }
  return std::nullopt;
}

Result<Schema> survey(Source& source, const SurveyOptions& options) {
  return Surveyor(source, options).run();
}

}  // namespace gramproof::table
