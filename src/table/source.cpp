#include "table/source.hpp"

#include <algorithm>
#include <string_view>
#include <utility>

#include <fmt/format.h>

#include "table/dialect.hpp"
#include "table/header.hpp"
#include "table/source_state.hpp"

namespace gramproof::table {
namespace {

Result<RecordSplitter> open_splitter(const StoredFile& file) {
  auto stored = file.open();
  if (!stored) return stored.error();
  auto stream = decompressed(std::move(stored.value()), file.name());
  if (!stream) return stream.error();
  return RecordSplitter(std::move(stream.value()));
}

Result<Records> take_header(RecordSplitter& splitter, const std::string& file, char separator) {
  auto header = splitter.next(1, separator);
  if (header && header.value().cut) {
    return Error{ErrorKind::limit, place(file, {}), "the first line is over 64 MB",
                 "is this a text file? line ends are LF or CRLF"};
  }
  return header;
}

std::string separator_words(char separator) {
  switch (separator) {
    case ',':
      return "commas";
    case ';':
      return "semicolons";
    case '\t':
      return "tabs";
    case '|':
      return "bars";
    default:
      return fmt::format("'{}'", separator);
  }
}

/// A separator given by hand that the header does not have, where the first two lines agree on
/// another one: the data would be a single column of text, which `rest` leaves out.
Result<void> check_separator(const std::string& file, const std::vector<std::string>& names,
                             std::string_view sample, bool whole, const ReadOptions& options) {
  if (!options.separator || names.size() > 1) return {};
  ReadOptions unsaid = options;
  unsaid.separator.reset();
  const char other = recognise_dialect(sample, whole, unsaid).separator;
  const std::size_t line_end = std::min(sample.find('\n'), sample.size());
  const std::string_view second = sample.substr(std::min(line_end + 1, sample.size()));
  const bool agree = sample.substr(0, line_end).find(other) != std::string_view::npos &&
                     second.substr(0, second.find('\n')).find(other) != std::string_view::npos;
  if (other == *options.separator || !agree) return {};
  return Error{ErrorKind::data, fmt::format("{}:1", file),
               fmt::format("the header is not separated by {}, but seemingly by {}",
                           separator_words(*options.separator), separator_words(other)),
               "leave --separator out, or give another one"};
}

/// Reads the header of file `index` and appends its layout; the first file decides names and
/// dialect.
Result<void> open_header(Source::State& state, std::size_t index, const ReadOptions& options) {
  const StoredFile& stored = state.stored[index];
  auto splitter = open_splitter(stored);
  if (!splitter) return splitter.error();
  auto sample = splitter.value().sample();
  if (!sample) return sample.error();
  const Dialect dialect = recognise_dialect(sample.value(), splitter.value().at_end(), options);
  if (index == 0) {
    state.separator = dialect.separator;
    state.decimal_mark = dialect.decimal_mark;
    state.mark_certain = dialect.mark_certain;
  }
  auto header = take_header(splitter.value(), stored.name(), state.separator);
  if (!header) return header.error();
  auto names = read_header(stored.name(), header.value().bytes, state.separator);
  if (!names) return names.error();
  Result<void> separated = check_separator(stored.name(), names.value(), sample.value(),
                                           splitter.value().at_end(), options);
  if (!separated) return separated.error();
  if (index == 0) state.column_names = names.value();
  auto columns =
      match_header(stored.name(), names.value(), state.files.front().name, state.column_names);
  if (!columns) {
    if (dialect.separator == state.separator) return columns.error();
    return Error{
        ErrorKind::data, stored.name(),
        fmt::format("this file is separated by {}, {} by {}", separator_words(dialect.separator),
                    state.files.front().name, separator_words(state.separator)),
        "files of one data set are written the same way; --separator sets the separator"};
  }
  state.layouts.push_back({std::move(names.value()), std::move(columns.value())});
  // A file that can be opened again is closed here, so that any number of files can be named.
  state.opened.push_back(stored.readable_once()
                             ? std::make_unique<RecordSplitter>(std::move(splitter.value()))
                             : nullptr);
  return {};
}

Result<void> check_options(const ReadOptions& options, const std::vector<std::string>& names) {
  const char separator = options.separator.value_or(',');
  const auto fault = [](std::string what) {
    return Error{ErrorKind::usage, "", std::move(what), ""};
  };
  if (names.empty()) return fault("no file is named");
  if (separator == '"' || separator == '\n' || separator == '\r' || separator == '\0' ||
      static_cast<unsigned char>(separator) >= 0x80) {
    return fault("a separator is one ASCII character, and no quote or line break");
  }
  if (options.decimal_mark && *options.decimal_mark != '.' && *options.decimal_mark != ',') {
    return fault("the decimal mark is . or ,");
  }
  if (std::count(names.begin(), names.end(), "-") > 1) {
    return fault("standard input (-) is named twice, but can be read only once");
  }
  return {};
}

/// Opens the file the pass stands at, unless it is open, behind its header.
Result<void> open_next_file(Source::State& state) {
  Source::State::Pass& pass = state.pass;
  if (pass.splitter != nullptr) return {};
  if (state.opened[pass.file] != nullptr) {
    pass.splitter = std::move(state.opened[pass.file]);
    return {};
  }
  auto splitter = open_splitter(state.stored[pass.file]);
  if (!splitter) return splitter.error();
  if (auto sample = splitter.value().sample(); !sample) return sample.error();
  auto header = take_header(splitter.value(), state.files[pass.file].name, state.separator);
  if (!header) return header.error();
  pass.splitter = std::make_unique<RecordSplitter>(std::move(splitter.value()));
  return {};
}

Result<void> close_file(Source::State& state) {
  Source::State::Pass& pass = state.pass;
  pass.bytes_of_files_done += pass.splitter->stored_bytes();
  pass.splitter.reset();
  return state.stored[pass.file++].unchanged();
}

}  // namespace

Source::Source(std::unique_ptr<State> state) : state_(std::move(state)) {}
Source::Source(Source&&) noexcept = default;
Source& Source::operator=(Source&&) noexcept = default;
Source::~Source() = default;

Result<Source> Source::open(const std::vector<std::string>& names, const ReadOptions& options) {
  if (auto checked = check_options(options, names); !checked) return checked.error();
  auto state = std::make_unique<State>();
  for (const std::string& name : names) {
    auto stored = StoredFile::find(name);
    if (!stored) return stored.error();
    state->files.push_back({stored.value().name(), stored.value().bytes()});
    state->stored.push_back(std::move(stored.value()));
  }
  state->missing_texts = options.missing;
  for (std::string& text : state->missing_texts) text = std::string(without_blanks(text));
  state->missing = MissingTexts(state->missing_texts);
  for (std::size_t i = 0; i < names.size(); ++i) {
    if (auto opened = open_header(*state, i, options); !opened) return opened.error();
  }
  return Source(std::move(state));
}

const std::vector<SourceFile>& Source::files() const {
  return state_->files;
}
const std::vector<std::string>& Source::column_names() const {
  return state_->column_names;
}
char Source::separator() const {
  return state_->separator;
}
char Source::decimal_mark() const {
  return state_->decimal_mark;
}
const std::vector<std::string>& Source::missing() const {
  return state_->missing_texts;
}
bool Source::decimal_mark_certain() const {
  return state_->mark_certain;
}

void Source::settle_decimal_mark(char mark) {
  state_->decimal_mark = mark;
  state_->mark_certain = true;
}

Result<void> Source::rewind() {
  State::Pass& pass = state_->pass;
  if (pass.at_start) return {};
  for (auto& splitter : state_->opened) splitter.reset();
  pass.at_start = true;
  pass.file = 0;
  pass.splitter.reset();
  pass.pieces = 0;
  pass.rows = 0;
  pass.bytes_of_files_done = 0;
  pass.bytes_read = 0;
  // Opening now, not at the first next(), tells at once when a copy of standard input was given up.
  return open_next_file(*state_);
}

Result<std::optional<RawPiece>> Source::next() {
  State::Pass& pass = state_->pass;
  pass.at_start = false;
  while (pass.file < state_->files.size()) {
    if (auto opened = open_next_file(*state_); !opened) return opened.error();
    auto records = pass.splitter->next(rows_a_piece, state_->separator);
    if (!records) {
      Error error = std::move(records.error());
      error.where = fmt::format("{}:{}", state_->files[pass.file].name, pass.splitter->line());
      return error;
    }
    pass.bytes_read = pass.bytes_of_files_done + pass.splitter->stored_bytes();
    if (records.value().count == 0) {
      if (auto closed = close_file(*state_); !closed) return closed.error();
      continue;
    }
    RawPiece piece;
    piece.index = pass.pieces++;
    piece.file = pass.file;
    piece.first_row = pass.rows + 1;
    piece.first_line = records.value().first_line;
    piece.records = records.value().count;
    piece.cut = records.value().cut;
    piece.bytes = std::move(records.value().bytes);
    pass.rows += piece.records;
    return std::optional<RawPiece>(std::move(piece));
  }
  return std::optional<RawPiece>();
}

Progress Source::progress() const {
  Progress progress;
  progress.rows = state_->pass.rows;
  progress.bytes_read = state_->pass.bytes_read;
  for (const SourceFile& file : state_->files) {
    if (file.bytes == 0) {
      progress.bytes_total = 0;
      return progress;
    }
    progress.bytes_total += file.bytes;
  }
  return progress;
}

}  // namespace gramproof::table
