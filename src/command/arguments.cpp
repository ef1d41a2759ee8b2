#include "command/arguments.hpp"

#include <CLI/CLI.hpp>
#include <algorithm>
#include <optional>

#include "base/text.hpp"

namespace gramproof::command {
namespace {

std::string see_help(const std::string& command) {
  return "`gramproof " + command + " --help` lists the options";
}

/// The option an argument names, `--json` and `--json=FILE` alike; none for a file or a value.
const OptionEntry* option_of(const std::string& argument, const std::vector<OptionEntry>& options) {
  const std::string head = argument.substr(0, argument.find('='));
  const auto found = std::find_if(options.begin(), options.end(), [&](const OptionEntry& option) {
    return head == "--" + option.name;
  });
  return found == options.end() ? nullptr : &*found;
}

Error unknown_option(const std::string& argument, const std::vector<OptionEntry>& options,
                     const std::string& command) {
  std::vector<std::string> names;
  for (const OptionEntry& option : options) names.push_back(option.name);
  const std::string written = argument.substr(0, argument.find('='));
  // Without the dashes, which all names share and which would make any two of them look alike.
  const std::size_t first = written.find_first_not_of('-');
  const std::optional<std::string> near =
      first == std::string::npos ? std::nullopt : nearest_name(written.substr(first), names);
  return {ErrorKind::usage, "", "unknown option " + written,
          near ? "did you mean --" + *near + "?" : see_help(command)};
}

Error value_absent(const OptionEntry& option) {
  return {ErrorKind::usage, "--" + option.name, "a value must follow this option",
          "written --" + option.name + " " + option.value};
}

/// The arguments with every `--name=value` in two, as the grammar of CLI11 takes what follows an
/// option for its value, even another option, and reads `--name=` as if it were `--name`.
Result<std::vector<std::string>> in_pairs(const std::vector<std::string>& arguments,
                                          const std::vector<OptionEntry>& options) {
  std::vector<std::string> pairs;
  for (std::size_t i = 0; i < arguments.size(); ++i) {
    if (arguments[i] == "--") {
      pairs.insert(pairs.end(), arguments.begin() + static_cast<std::ptrdiff_t>(i),
                   arguments.end());
      break;
    }
    const OptionEntry* option = option_of(arguments[i], options);
    const std::size_t sign = arguments[i].find('=');
    pairs.push_back(option == nullptr ? arguments[i] : "--" + option->name);
    if (option == nullptr) continue;
    if (option->value.empty() && sign != std::string::npos) {
      return Error{ErrorKind::usage, "--" + option->name, "this option takes no value",
                   "written --" + option->name + " alone"};
    }
    if (option->value.empty()) continue;
    if (sign != std::string::npos) {
      pairs.push_back(arguments[i].substr(sign + 1));
      continue;
    }
    const bool absent = i + 1 == arguments.size() || arguments[i + 1] == "--" ||
                        option_of(arguments[i + 1], options) != nullptr;
    if (absent) return value_absent(*option);
    pairs.push_back(arguments[++i]);
  }
  return pairs;
}

void declare(CLI::App& app, const OptionEntry& option, Arguments& sorted) {
  if (option.value.empty()) {
    app.add_flag_callback("--" + option.name,
                          [&sorted, name = option.name] { sorted.given[name].emplace_back(); });
    return;
  }
  // One value an occurrence: CLI11 would take a bracketed value of a list option apart at its
  // commas.
  app.add_option_function<std::vector<std::string>>(
         "--" + option.name,
         [&sorted, name = option.name](const std::vector<std::string>& values) {
           sorted.given[name] = values;
         })
      ->expected(1)
      ->allow_extra_args(false)
      ->multi_option_policy(CLI::MultiOptionPolicy::TakeAll);
}

/// An empty value is mostly a variable of a script that was never set. --missing '' means something
/// and --separator says what it wants.
Result<void> check_values(const Arguments& sorted, const std::vector<OptionEntry>& options) {
  for (const OptionEntry& option : options) {
    const auto found = sorted.given.find(option.name);
    if (found == sorted.given.end() || option.value.empty()) continue;
    if (found->second.size() > 1 && !option.repeatable) {
      return Error{ErrorKind::usage, "--" + option.name,
                   "given " + std::to_string(found->second.size()) + " times", "give it once"};
    }
    if (option.name == "missing" || option.name == "separator") continue;
    for (const std::string& value : found->second) {
      if (value.find_first_not_of(" \t\r\n") != std::string::npos) continue;
      return Error{ErrorKind::usage, "--" + option.name, "the value is empty",
                   "written --" + option.name + " " + option.value +
                       (option.fallback.empty() ? "" : "; left out, it is " + option.fallback)};
    }
  }
  return {};
}

}  // namespace

std::string Arguments::value(const std::string& option) const {
  const auto found = given.find(option);
  return found == given.end() || found->second.empty() ? "" : found->second.front();
}

Result<Arguments> sort_arguments(const std::vector<std::string>& arguments,
                                 const std::vector<OptionEntry>& options,
                                 const std::string& command) {
  Result<std::vector<std::string>> pairs = in_pairs(arguments, options);
  if (!pairs) return pairs.error();
  CLI::App app;
  app.set_help_flag("");
  app.allow_extras();
  Arguments sorted;
  for (const OptionEntry& option : options) declare(app, option, sorted);
  std::reverse(pairs.value().begin(), pairs.value().end());
  try {
    app.parse(pairs.value());
  } catch (const CLI::ParseError& fault) {
    return Error{ErrorKind::usage, "", fault.what(), see_help(command)};
  }
  bool only_files = false;
  for (const std::string& rest : app.remaining()) {
    if (rest == "--" && !only_files) {
      only_files = true;
    } else if (!only_files && rest.size() > 1 && rest.front() == '-') {
      return unknown_option(rest, options, command);
    } else {
      sorted.files.push_back(rest);
    }
  }
  if (Result<void> checked = check_values(sorted, options); !checked) return checked.error();
  return sorted;
}

}  // namespace gramproof::command
