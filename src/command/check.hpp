// src/command/check.hpp - `gramproof check`: the main job.
#pragma once

#include <string>
#include <vector>

namespace gramproof::command {

/// Arguments after `check`. Prints, writes, and gives the exit status.
[[nodiscard]] int check(const std::vector<std::string>& arguments);

}  // namespace gramproof::command
