// src/command/version.hpp - the version of the program, from the build.
#pragma once

namespace gramproof::command {

inline constexpr const char* program_version = GRAMPROOF_VERSION;

}  // namespace gramproof::command
