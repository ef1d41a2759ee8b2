// src/command/recheck.hpp - `gramproof recheck`: the proofs of a verdict, checked by other code.
#pragma once

#include <string>
#include <vector>

#include "recheck/recheck.hpp"

namespace gramproof::command {

/// Arguments after `recheck`. Prints the claims; 0 if all that could be checked are upheld, 1 if
/// one is not, 2 if nothing was checked.
[[nodiscard]] int recheck(const std::vector<std::string>& arguments);

[[nodiscard]] std::string recheck_help();

/// The report: one line a claim, control characters of the document made visible, and a summary.
[[nodiscard]] std::string claims_text(const std::vector<recheck::Claim>& claims);

}  // namespace gramproof::command
