// src/command/why.hpp - `gramproof why COLUMN FILE...`: why a column cannot be kept, or can.
#pragma once

#include <string>
#include <vector>

#include "base/result.hpp"

namespace gramproof::command {

struct ColumnAndFiles {
  std::string column;
  std::vector<std::string> files;
};

/// The words beside the options: COLUMN first, unless all words but one are files that exist (or
/// standard input): then that one is COLUMN wherever it stands. Errors: a word too few.
[[nodiscard]] Result<ColumnAndFiles> column_and_files(const std::vector<std::string>& words);

/// Arguments after `why`. Prints, and gives the exit status: 0 or 2.
[[nodiscard]] int why(const std::vector<std::string>& arguments);

}  // namespace gramproof::command
