// tests/command/run_program.hpp - the real program, run as a user's shell runs it.
#pragma once

#include <iosfwd>
#include <string>
#include <vector>

#include "support/scratch.hpp"

namespace gramproof::test {

/// What is unlike a plain run from a script.
struct Setting {
  std::string input;                     ///< bytes on standard input, which is a pipe
  std::vector<std::string> environment;  ///< NAME=VALUE beside what the tests inherit
  std::string output_file;     ///< standard output is this file instead of a pipe that is read
  bool reader_leaves = false;  ///< the pipe of standard output has no reader from the start
};

struct Run {
  std::string command;  ///< for a person
  int status = -1;      ///< exit status, 128 + n after signal n; -1 if it hung and was ended
  std::string output;   ///< standard output, unless it went to a file
  std::string errors;   ///< standard error
};

/// Runs GRAMPROOF_EXECUTABLE in the folder, without a shell. SIGPIPE has its default action and
/// NO_COLOR is unset, whatever the tests inherit.
[[nodiscard]] Run run_program(const Scratch& folder, const std::vector<std::string>& arguments,
                              const Setting& setting = {});

/// For CAPTURE: command, status, output and errors.
std::ostream& operator<<(std::ostream& stream, const Run& run);

/// Bytes of a file; "" when it does not exist.
[[nodiscard]] std::string bytes_of(const std::filesystem::path& path);

/// Names in a folder, sorted.
[[nodiscard]] std::vector<std::string> names_in(const Scratch& folder);

}  // namespace gramproof::test
