// src/command/option_table.hpp - every option of `check` once: read by the parser, by --help and by
// the tests.
#pragma once

#include <string>
#include <vector>

namespace gramproof::command {

struct OptionEntry {
  std::string name;      ///< without the dashes
  std::string value;     ///< what stands after it, "" for a switch
  std::string fallback;  ///< default as the user would write it, "" for none
  std::string group;     ///< heading in --help
  std::string text;      ///< one line of help, at most 79 columns with its indent
  bool repeatable = false;
};

[[nodiscard]] const std::vector<OptionEntry>& check_options();

/// Those of `why`: all that say what is read and how.
[[nodiscard]] const std::vector<OptionEntry>& why_options();

/// The options under their headings, as --help lists them.
[[nodiscard]] std::string listed_options(const std::vector<OptionEntry>& options);

/// Text of `gramproof --help` and of `gramproof check --help`.
[[nodiscard]] std::string general_help();
[[nodiscard]] std::string check_help();

}  // namespace gramproof::command
