// src/command/reading.hpp - what every command that reads data and prints a report shares.
#pragma once

#include <string>
#include <vector>

#include "base/result.hpp"
#include "command/check_options.hpp"
#include "report/text_report.hpp"
#include "table/source.hpp"

namespace gramproof::command {

/// Complains, and gives the status of an error that ends the command.
[[nodiscard]] int failed(const Error& error);

/// Width and colour as the terminal, NO_COLOR and --colour say.
[[nodiscard]] report::TextOptions text_options(When colour);

/// The data, opened. Says of a file that does not exist what may have been meant.
[[nodiscard]] Result<table::Source> open_data(const std::vector<std::string>& files,
                                              const table::ReadOptions& reading);

}  // namespace gramproof::command
