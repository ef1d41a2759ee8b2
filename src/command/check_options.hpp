// src/command/check_options.hpp - the words of `gramproof check`, understood.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "audit/run.hpp"
#include "base/result.hpp"
#include "command/option_table.hpp"
#include "table/source.hpp"

namespace gramproof::command {

enum class When { automatic, always, never };

struct CheckOptions {
  std::vector<std::string> files;
  table::ReadOptions reading;
  audit::Request audit;
  std::string json;  ///< path, "-" or empty
  audit::Overall accept = audit::Overall::fragile;
  std::optional<audit::Overall> accept_repaired;
  When colour = When::automatic;
  bool quiet = false;
  bool help = false;
};

/// Arguments after `check`. Errors: unknown options (with the nearest), missing or impossible
/// values, no file, a file that cannot be written. --design-file is read here.
[[nodiscard]] Result<CheckOptions> parse_check(const std::vector<std::string>& arguments);

/// The same for a command that has some of these options; what its table does not list keeps its
/// default.
[[nodiscard]] Result<CheckOptions> parse_options(const std::vector<std::string>& arguments,
                                                 const std::vector<OptionEntry>& table,
                                                 const std::string& command);

}  // namespace gramproof::command
