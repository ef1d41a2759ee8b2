// tests/command/mistakes.hpp - mistakes of users, and the line that tells each.
#pragma once

#include <string>
#include <vector>

#include "run_program.hpp"

namespace gramproof::test {

struct Mistake {
  std::string why;
  std::vector<std::string> arguments;
  std::string line;  ///< all of standard error, without the prefix and the line break
};

/// harbour.csv and plain.csv, which are good, and files with one fault each.
void write_files(const Scratch& folder);

/// Status 2, nothing on standard output, and this one line on standard error.
void check_line(const Run& run, const std::string& line);

/// Each mistake, alone and with a JSON file asked for beside it that does not exist or that does:
/// neither file is touched, and nothing else is left behind.
void check_mistakes(const Scratch& folder, const std::vector<Mistake>& mistakes);

}  // namespace gramproof::test
