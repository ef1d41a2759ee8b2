#include "command/option_table.hpp"

#include <fmt/format.h>

namespace gramproof::command {

const std::vector<OptionEntry>& check_options() {
  static const std::vector<OptionEntry> table = {
      {"design", "TEXT", "constant, rest", "The design",
       "the proposed columns, in the design language", false},
      {"design-file", "FILE", "", "The design", "the same from a file; # starts a remark", false},
      {"response", "COLUMN", "", "The design", "what will be explained: must be present in a row",
       false},
      {"complete", "COLUMNS", "", "The design", "further columns that must be present", false},
      {"rows", "CONDITION", "", "The design", "keep these rows only: 'age >= 18 and row != 7'",
       false},
      {"weight", "COLUMN", "", "The design", "weight of a row, not negative; 0 leaves it out",
       false},
      {"undefined", "exclude|stop", "exclude", "The design",
       "rows where a term has no value, as log(0)", false},
      {"focus", "COLUMNS", "", "What will be read",
       "coefficients to be read; the others are controls", false},
      {"protect", "COLUMNS", "", "What will be read", "columns never proposed for leaving out",
       false},
      {"contrast", "SUM", "", "What will be read", "'age + 80*age^2': estimable? how precise?",
       true},
      {"solver", "normal|qr", "normal", "What will be read", "whose digits are graded", false},
      {"missing", "TOKENS", ",NA,NaN,null", "How the data are written",
       "cells that are missing; the whole list", false},
      {"separator", "CHAR", "", "How the data are written", "between cells: one character or 'tab'",
       false},
      {"decimal-mark", ".|,", "", "How the data are written", "recognised if not given", false},
      {"recorded", "COLUMN=STEP", "", "How the data are written", "rounded to STEP, or =exact",
       true},
      {"json", "FILE", "", "What is written", "the verdict as JSON; - for standard output", false},
      {"accept", "LEVEL", "fragile", "What is written", "sound guarded fragile unreliable singular",
       false},
      {"accept-repaired", "LEVEL", "", "What is written", "good enough once columns are left out",
       false},
      {"colour", "WHEN", "auto", "What is written", "auto, always or never", false},
      {"quiet", "", "", "What is written", "no text report, no progress", false},
      {"threads", "N", "all cores", "The run", "the same bytes for any number", false},
      {"memory", "SIZE", "128MB", "The run", "for the columns; larger designs are refused", false},
      {"help", "", "", "The run", "this text", false},
  };
  return table;
}

const std::vector<OptionEntry>& why_options() {
  static const std::vector<OptionEntry> table = [] {
    std::vector<OptionEntry> options;
    for (const OptionEntry& option : check_options()) {
      // What grades or writes a verdict has nothing to do here.
      const bool judges = option.name == "json" || option.name == "accept" ||
                          option.name == "accept-repaired" || option.name == "solver";
      if (!judges) options.push_back(option);
    }
    return options;
  }();
  return table;
}

std::string listed_options(const std::vector<OptionEntry>& options) {
  std::string text;
  std::string group;
  for (const OptionEntry& option : options) {
    if (option.group != group) {
      group = option.group;
      text += "\n" + group + "\n";
    }
    const std::string head = "--" + option.name + (option.value.empty() ? "" : " " + option.value);
    text += fmt::format("  {:<25} {}\n", head, option.text);
    if (!option.fallback.empty())
      text += fmt::format("  {:<25} (default: {})\n", "", option.fallback);
  }
  return text;
}

std::string general_help() {
  return "gramproof - can X'X be inverted reliably, and if not, exactly why?\n"
         "\n"
         "  gramproof check FILE... [options]    audit a design against its data\n"
         "  gramproof why COLUMN FILE...         why a column cannot be kept, or can\n"
         "  gramproof recheck V.json FILE...     check the proofs in a verdict\n"
         "  gramproof check --help               the options; so for each command\n"
         "  gramproof --version\n"
         "\n"
         "FILE is delimited text with a header; - is standard input; .gz and .zst are\n"
         "read as they are; several files with the same header are one data set.\n"
         "\n"
         "  gramproof check harbour.csv --design 'constant, age, age^2, levels(region)'\n"
         "\n"
         "Exit status: 0 good enough (see --accept), 1 worse, 2 nothing was audited,\n"
         "70 a defect of gramproof.\n";
}

std::string check_help() {
  std::string text =
      "gramproof check FILE... [options]\n"
      "\n"
      "Audits a design: rank and relations (proved), digits, recorded precision, and\n"
      "what collinearity costs. Quote designs with single quotes for the shell.\n";
  text += listed_options(check_options());
  text +=
      "\n"
      "The design language, by example\n"
      "  'constant, age, age^2, log(income), levels(region), levels(region) * age'\n"
      "  '[age >= 65], all_levels(region), steps(grade, low < mid < high)'\n"
      "  'hinge(dose, 40), abs(x - 1), columns(\"share_*\"), rest'\n"
      "\n"
      "Verdicts, best first: sound, guarded, fragile, unreliable, singular.\n"
      "Exit status: 0 at least as good as --accept, 1 worse, 2 nothing was audited.\n";
  return text;
}

}  // namespace gramproof::command
