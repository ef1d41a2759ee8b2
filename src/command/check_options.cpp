#include "command/check_options.hpp"

#include <CLI/CLI.hpp>
#include <algorithm>
#include <fstream>
#include <functional>
#include <map>
#include <sstream>
#include <thread>

#include "base/text.hpp"
#include "command/name_list.hpp"
#include "command/option_table.hpp"

namespace gramproof::command {
namespace {

using Given = std::map<std::string, std::vector<std::string>>;

Error usage(const std::string& option, const std::string& what, const std::string& hint = "") {
  return {ErrorKind::usage, option.empty() ? "" : "--" + option, what, hint};
}

Error unknown_option(const std::string& argument) {
  std::vector<std::string> known;
  for (const OptionEntry& option : check_options()) known.push_back("--" + option.name);
  const std::string name = argument.substr(0, argument.find('='));
  const std::optional<std::string> near = nearest_name(name, known);
  return {ErrorKind::usage, "", "unknown option " + name,
          near ? "did you mean " + *near + "?" : "`gramproof check --help` lists the options"};
}

/// Sorts the arguments into option values and files. CLI11 knows the grammar; the words of its
/// messages are ours.
Result<Given> sort_arguments(std::vector<std::string> arguments, std::vector<std::string>& files) {
  CLI::App app;
  app.set_help_flag("");
  app.allow_extras();
  Given given;
  for (const OptionEntry& entry : check_options()) {
    if (entry.value.empty()) {
      app.add_flag_callback("--" + entry.name,
                            [&given, name = entry.name] { given[name].emplace_back(); });
      continue;
    }
    // One value an occurrence: CLI11 would take a bracketed value of a list option apart at its
    // commas.
    app.add_option_function<std::vector<std::string>>(
           "--" + entry.name, [&given, name = entry.name](
                                  const std::vector<std::string>& values) { given[name] = values; })
        ->expected(1)
        ->allow_extra_args(false)
        ->multi_option_policy(CLI::MultiOptionPolicy::TakeAll);
  }
  std::reverse(arguments.begin(), arguments.end());
  try {
    app.parse(arguments);
  } catch (const CLI::ParseError& fault) {
    return Error{ErrorKind::usage, "", fault.what(), "`gramproof check --help` lists the options"};
  }
  bool only_files = false;
  for (const std::string& rest : app.remaining()) {
    if (rest == "--") {
      only_files = true;
    } else if (!only_files && rest.size() > 1 && rest.front() == '-') {
      return unknown_option(rest);
    } else {
      files.push_back(rest);
    }
  }
  for (const OptionEntry& entry : check_options()) {
    const auto found = given.find(entry.name);
    if (found != given.end() && found->second.size() > 1 && !entry.repeatable &&
        !entry.value.empty()) {
      return usage(entry.name, "given " + std::to_string(found->second.size()) + " times",
                   "once is enough");
    }
  }
  return given;
}

std::string value_of(const Given& given, const std::string& name) {
  const auto found = given.find(name);
  return found == given.end() || found->second.empty() ? "" : found->second.front();
}

/// The option's value among words; the fallback when it is not given.
template <class T>
Result<T> choice(const Given& given, const std::string& name,
                 const std::vector<std::pair<std::string, T>>& words, T fallback) {
  const auto found = given.find(name);
  if (found == given.end()) return fallback;
  std::string list;
  for (const auto& [word, meaning] : words) {
    if (word == found->second.front()) return meaning;
    list += (list.empty() ? "" : ", ") + word;
  }
  return usage(name, "\"" + found->second.front() + "\" is none of " + list);
}

Result<void> read_design_file(const std::string& path, design::Request& request) {
  std::ifstream file(path, std::ios::binary);
  std::stringstream text;
  if (file) text << file.rdbuf();
  if (!file || file.bad() || (file.peek() != EOF && text.fail())) {
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

Result<void> fill_design(const Given& given, design::Request& request) {
  if (given.contains("design") && given.contains("design-file")) {
    return usage("design-file", "stands beside --design", "give one of them");
  }
  if (given.contains("design")) request.design = value_of(given, "design");
  if (given.contains("design-file")) {
    if (Result<void> read = read_design_file(value_of(given, "design-file"), request); !read)
      return read;
  }
  request.rows = value_of(given, "rows");
  if (given.contains("rows") && request.rows.find_first_not_of(" \t\n") == std::string::npos) {
    return usage("rows", "the condition is empty", "for example --rows 'age >= 18'");
  }
  request.response = unquoted(value_of(given, "response"));
  request.weight = unquoted(value_of(given, "weight"));
  for (const std::string& name : split_names(value_of(given, "complete")))
    request.complete.push_back(unquoted(name));
  request.focus = split_names(value_of(given, "focus"));
  request.protect = split_names(value_of(given, "protect"));
  Result<design::Undefined> undefined = choice<design::Undefined>(
      given, "undefined",
      {{"exclude", design::Undefined::exclude}, {"stop", design::Undefined::stop}},
      design::Undefined::exclude);
  if (!undefined) return undefined.error();
  request.undefined = undefined.value();
  return {};
}

Result<void> fill_reading(const Given& given, table::ReadOptions& reading) {
  if (given.contains("missing")) reading.missing = split_tokens(value_of(given, "missing"));
  if (given.contains("separator")) {
    std::string text = value_of(given, "separator");
    if (text == "tab" || text == "\\t") text = "\t";
    if (text.size() != 1 || text == "\"" || text == "\n" || text == "\r" ||
        static_cast<unsigned char>(text[0]) > 126) {
      return usage("separator", "\"" + text + "\" is not one plain character",
                   "for example --separator ';' or tab");
    }
    reading.separator = text[0];
  }
  if (given.contains("decimal-mark")) {
    const std::string text = value_of(given, "decimal-mark");
    if (text != "." && text != ",")
      return usage("decimal-mark", "\"" + text + "\" is neither . nor ,");
    reading.decimal_mark = text[0];
  }
  if (reading.separator && reading.decimal_mark && *reading.separator == *reading.decimal_mark) {
    return usage("decimal-mark", "the decimal mark is also the separator", "give different ones");
  }
  return {};
}

Result<void> fill_recorded(const Given& given, audit::Request& request) {
  const auto found = given.find("recorded");
  if (found == given.end()) return {};
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
    request.recorded.push_back(recorded);
  }
  return {};
}

Result<void> fill_run(const Given& given, audit::Request& request) {
  Result<audit::Solver> solver = choice<audit::Solver>(
      given, "solver", {{"normal", audit::Solver::normal}, {"qr", audit::Solver::qr}},
      audit::Solver::normal);
  if (!solver) return solver.error();
  request.solver = solver.value();
  request.threads = std::max(1U, std::thread::hardware_concurrency());
  if (given.contains("threads")) {
    table::Number number;
    const bool whole = table::parse_number(value_of(given, "threads"), '.', number) ==
                           table::NumberStatus::number &&
                       number.decimals == 0 && number.mantissa >= 1 && number.mantissa <= 1024;
    if (!whole)
      return usage("threads",
                   "\"" + value_of(given, "threads") + "\" is not a whole number from 1 to 1024");
    request.threads = static_cast<unsigned>(number.mantissa);
  }
  if (given.contains("memory")) {
    const std::optional<std::uint64_t> bytes = parse_size(value_of(given, "memory"));
    if (!bytes)
      return usage("memory", "\"" + value_of(given, "memory") + "\" is no size",
                   "for example 128MB or 2G");
    request.memory = *bytes;
  }
  const auto contrasts = given.find("contrast");
  if (contrasts != given.end()) request.contrasts = contrasts->second;
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

Result<void> fill_output(const Given& given, CheckOptions& options) {
  options.json = value_of(given, "json");
  if (given.contains("json") && options.json.empty()) return usage("json", "no file is named");
  options.quiet = given.contains("quiet");
  Result<audit::Overall> accept =
      choice<audit::Overall>(given, "accept", levels(), audit::Overall::fragile);
  if (!accept) return accept.error();
  options.accept = accept.value();
  if (given.contains("accept-repaired")) {
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
audit::OptionRecord record_of(const Given& given, const CheckOptions& options) {
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
    const auto found = given.find(entry.name);
    if (found == given.end()) continue;
    for (const std::string& value : found->second) record.emplace_back(entry.name, value);
  }
  return record;
}

}  // namespace

Result<CheckOptions> parse_check(std::vector<std::string> arguments) {
  CheckOptions options;
  Result<Given> sorted = sort_arguments(std::move(arguments), options.files);
  if (!sorted) return sorted.error();
  const Given& given = sorted.value();
  options.help = given.contains("help");
  if (options.help) return options;
  if (options.files.empty()) {
    return Error{ErrorKind::usage, "", "no data file is named",
                 "gramproof check FILE... ; - is standard input"};
  }
  if (Result<void> done = fill_design(given, options.audit.design); !done) return done.error();
  if (Result<void> done = fill_reading(given, options.reading); !done) return done.error();
  if (Result<void> done = fill_recorded(given, options.audit); !done) return done.error();
  if (Result<void> done = fill_run(given, options.audit); !done) return done.error();
  if (Result<void> done = fill_output(given, options); !done) return done.error();
  options.audit.options = record_of(given, options);
  return options;
}

}  // namespace gramproof::command
