#include "command/check_options.hpp"

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <sstream>
#include <thread>

#include "command/arguments.hpp"
#include "command/name_list.hpp"
#include "command/option_table.hpp"
#include "command/output.hpp"

namespace gramproof::command {
namespace {

Error usage(const std::string& option, const std::string& what, const std::string& hint = "") {
  return {ErrorKind::usage, option.empty() ? "" : "--" + option, what, hint};
}

/// The option's value among words; the fallback when it is not given.
template <class T>
Result<T> choice(const Arguments& given, const std::string& name,
                 const std::vector<std::pair<std::string, T>>& words, T fallback) {
  if (!given.has(name)) return fallback;
  std::string list;
  for (const auto& [word, meaning] : words) {
    if (word == given.value(name)) return meaning;
    list += (list.empty() ? "" : ", ") + word;
  }
  return usage(name, "\"" + given.value(name) + "\" is none of " + list);
}

Result<void> read_design_file(const std::string& path, design::Request& request) {
  std::error_code fault;
  if (std::filesystem::is_directory(path, fault)) {
    return Error{ErrorKind::io, path, "this is a directory", "--design-file wants a text file"};
  }
  std::ifstream file(path, std::ios::binary);
  std::stringstream text;
  if (file && file.peek() != EOF) text << file.rdbuf();
  if (!file.is_open() || file.bad() || text.bad()) {
    return Error{ErrorKind::io, path, "the design file cannot be read",
                 "check its name and its permissions"};
  }
  request.design = text.str();
  request.design_where = path;
  if (request.design.find_first_not_of(" \t\r\n") == std::string::npos) {
    return Error{ErrorKind::design, path, "the design file is empty",
                 "write terms separated by commas"};
  }
  return {};
}

Result<void> fill_design(const Arguments& given, design::Request& request) {
  if (given.has("design") && given.has("design-file")) {
    return usage("design-file", "--design is given too", "give one of them");
  }
  if (given.has("design")) request.design = given.value("design");
  if (given.has("design-file")) {
    if (Result<void> read = read_design_file(given.value("design-file"), request); !read)
      return read;
  }
  request.rows = given.value("rows");
  request.response = unquoted(given.value("response"));
  request.weight = unquoted(given.value("weight"));
  for (const std::string& name : split_names(given.value("complete")))
    request.complete.push_back(unquoted(name));
  request.focus = split_names(given.value("focus"));
  request.protect = split_names(given.value("protect"));
  Result<design::Undefined> undefined = choice<design::Undefined>(
      given, "undefined",
      {{"exclude", design::Undefined::exclude}, {"stop", design::Undefined::stop}},
      design::Undefined::exclude);
  if (!undefined) return undefined.error();
  request.undefined = undefined.value();
  return {};
}

Result<void> fill_reading(const Arguments& given, table::ReadOptions& reading) {
  if (given.has("missing")) reading.missing = split_tokens(given.value("missing"));
  if (given.has("separator")) {
    std::string text = given.value("separator");
    if (text == "tab" || text == "\\t") text = "\t";
    if (text.size() != 1 || text == "\"" || text == "\n" || text == "\r" ||
        static_cast<unsigned char>(text[0]) > 126) {
      return usage("separator", "\"" + text + "\" is not one plain character",
                   "for example --separator ';' or tab");
    }
    reading.separator = text[0];
  }
  if (given.has("decimal-mark")) {
    const std::string text = given.value("decimal-mark");
    if (text != "." && text != ",")
      return usage("decimal-mark", "\"" + text + "\" is neither . nor ,");
    reading.decimal_mark = text[0];
  }
  if (reading.separator && reading.decimal_mark && *reading.separator == *reading.decimal_mark) {
    return usage("decimal-mark", "the decimal mark is also the separator", "give different ones");
  }
  return {};
}

Result<void> fill_recorded(const Arguments& given, audit::Request& request) {
  const auto found = given.given.find("recorded");
  if (found == given.given.end()) return {};
  for (const std::string& entry : found->second) {
    const std::size_t at = entry.rfind('=');
    if (at == std::string::npos || at == 0) {
      return usage("recorded", "\"" + entry + "\" is not COLUMN=STEP",
                   "for example --recorded age=1 or age=exact");
    }
    const std::string step = entry.substr(at + 1);
    audit::RecordedStep recorded{unquoted(entry.substr(0, at)), 0};
    if (step != "exact") {
      table::Number number;
      if (table::parse_number(step, '.', number) != table::NumberStatus::number ||
          !(number.value > 0)) {
        return usage("recorded", "\"" + step + "\" is neither a positive number nor exact",
                     "for example --recorded age=1 or age=exact");
      }
      recorded.step = number.value;
    }
    for (const audit::RecordedStep& earlier : request.recorded) {
      if (earlier.column == recorded.column)
        return usage("recorded", "\"" + recorded.column + "\" is given twice", "give it once");
    }
    request.recorded.push_back(recorded);
  }
  return {};
}

Result<void> fill_run(const Arguments& given, audit::Request& request) {
  Result<audit::Solver> solver = choice<audit::Solver>(
      given, "solver", {{"normal", audit::Solver::normal}, {"qr", audit::Solver::qr}},
      audit::Solver::normal);
  if (!solver) return solver.error();
  request.solver = solver.value();
  request.threads = std::max(1U, std::thread::hardware_concurrency());
  if (given.has("threads")) {
    table::Number number;
    const bool whole =
        table::parse_number(given.value("threads"), '.', number) == table::NumberStatus::number &&
        number.decimals == 0 && number.mantissa >= 1 && number.mantissa <= 1024;
    if (!whole)
      return usage("threads",
                   "\"" + given.value("threads") + "\" is not a whole number from 1 to 1024");
    request.threads = static_cast<unsigned>(number.mantissa);
  }
  if (given.has("memory")) {
    const std::optional<std::uint64_t> bytes = parse_size(given.value("memory"));
    if (!bytes)
      return usage("memory", "\"" + given.value("memory") + "\" is no size",
                   "for example 128MB or 2G");
    request.memory = *bytes;
  }
  const auto contrasts = given.given.find("contrast");
  if (contrasts != given.given.end()) request.contrasts = contrasts->second;
  return {};
}

std::vector<std::pair<std::string, audit::Overall>> levels() {
  std::vector<std::pair<std::string, audit::Overall>> words;
  for (const audit::Overall level :
       {audit::Overall::sound, audit::Overall::guarded, audit::Overall::fragile,
        audit::Overall::unreliable, audit::Overall::singular}) {
    words.emplace_back(audit::word_of(level), level);
  }
  return words;
}

/// A regular file that is read must not be replaced by the verdict on it.
Result<void> apart_from_input(const CheckOptions& options, const std::string& design_file) {
  std::vector<std::string> inputs = options.files;
  inputs.push_back(design_file);
  for (const std::string& input : inputs) {
    std::error_code fault;
    if (!std::filesystem::is_regular_file(input, fault)) continue;
    if (std::filesystem::equivalent(input, options.json, fault)) {
      return Error{ErrorKind::usage, "--json", options.json + " is read, and would be replaced",
                   "name another file"};
    }
  }
  return {};
}

Result<void> fill_output(const Arguments& given, CheckOptions& options) {
  options.json = given.value("json");
  if (given.has("json") && options.json != "-") {
    if (Result<void> writable = can_be_written(options.json); !writable) return writable.error();
    if (Result<void> apart = apart_from_input(options, given.value("design-file")); !apart)
      return apart.error();
  }
  options.quiet = given.has("quiet");
  Result<audit::Overall> accept =
      choice<audit::Overall>(given, "accept", levels(), audit::Overall::fragile);
  if (!accept) return accept.error();
  options.accept = accept.value();
  if (given.has("accept-repaired")) {
    Result<audit::Overall> repaired =
        choice<audit::Overall>(given, "accept-repaired", levels(), audit::Overall::sound);
    if (!repaired) return repaired.error();
    options.accept_repaired = repaired.value();
  }
  Result<When> colour =
      choice<When>(given, "colour",
                   {{"auto", When::automatic}, {"always", When::always}, {"never", When::never}},
                   When::automatic);
  if (!colour) return colour.error();
  options.colour = colour.value();
  return {};
}

/// What was asked, without what must not change the bytes of the document.
audit::OptionRecord record_of(const Arguments& given, const CheckOptions& options) {
  audit::OptionRecord record;
  for (const OptionEntry& entry : check_options()) {
    const bool silent = entry.name == "threads" || entry.name == "memory" || entry.name == "json" ||
                        entry.name == "colour" || entry.name == "quiet" || entry.name == "help" ||
                        entry.name == "design-file";
    if (silent) continue;
    if (entry.name == "design") {
      record.emplace_back("design", options.audit.design.design);
      continue;
    }
    const auto found = given.given.find(entry.name);
    if (found == given.given.end()) continue;
    for (const std::string& value : found->second) record.emplace_back(entry.name, value);
  }
  return record;
}

}  // namespace

Result<CheckOptions> parse_options(const std::vector<std::string>& arguments,
                                   const std::vector<OptionEntry>& table,
                                   const std::string& command) {
  CheckOptions options;
  Result<Arguments> sorted = sort_arguments(arguments, table, command);
  if (!sorted) return sorted.error();
  const Arguments& given = sorted.value();
  options.files = given.files;
  options.help = given.has("help");
  if (options.help) return options;
  if (options.files.empty()) {
    return Error{ErrorKind::usage, "", "no data file is named",
                 command == "check" ? "gramproof check FILE... ; - is standard input"
                                    : "`gramproof " + command + " --help` says more"};
  }
  if (Result<void> done = fill_design(given, options.audit.design); !done) return done.error();
  if (Result<void> done = fill_reading(given, options.reading); !done) return done.error();
  if (Result<void> done = fill_recorded(given, options.audit); !done) return done.error();
  if (Result<void> done = fill_run(given, options.audit); !done) return done.error();
  if (Result<void> done = fill_output(given, options); !done) return done.error();
  options.audit.options = record_of(given, options);
  return options;
}

Result<CheckOptions> parse_check(const std::vector<std::string>& arguments) {
  return parse_options(arguments, check_options(), "check");
}

}  // namespace gramproof::command
