// src/command/arguments.hpp - the arguments of a command, sorted into options and files.
#pragma once

#include <map>
#include <string>
#include <vector>

#include "base/result.hpp"
#include "command/option_table.hpp"

namespace gramproof::command {

struct Arguments {
  /// The values of each option that is given, in order; a switch has one empty value an occurrence.
  std::map<std::string, std::vector<std::string>> given;
  std::vector<std::string> files;  ///< everything else; after `--` words with a dash too

  [[nodiscard]] bool has(const std::string& option) const { return given.contains(option); }
  /// The first value; "" when the option is not given.
  [[nodiscard]] std::string value(const std::string& option) const;
};

/// A value may begin with a dash ('-age + [x = 1]'), but is never the name of an option: `--json
/// --quiet` is a forgotten value and not a file called --quiet (`--json=--quiet` is). Errors:
/// unknown options (with the nearest), a value that is absent, empty or too many.
/// `command` is named where its --help is recommended.
[[nodiscard]] Result<Arguments> sort_arguments(const std::vector<std::string>& arguments,
                                               const std::vector<OptionEntry>& options,
                                               const std::string& command = "check");

}  // namespace gramproof::command
