// src/command/output.hpp - writing whole files or nothing.
#pragma once

#include <string>

#include "base/result.hpp"

namespace gramproof::command {

/// Whether write_file() has a chance, so that a long audit does not end in a misspelt folder: the
/// path is no directory, its folder exists and takes new files.
[[nodiscard]] Result<void> can_be_written(const std::string& path);

/// Writes `bytes` to a path. A regular (or new) file is written to a temporary beside it (O_EXCL)
/// and renamed, so that it is whole or untouched; links are resolved first and the
/// permissions of an existing file kept. /dev/stdout and its like mean the open descriptor. A
/// device, pipe or socket is written directly and never renamed over.
[[nodiscard]] Result<void> write_file(const std::string& path, const std::string& bytes);

/// Writes to standard output. A closed pipe is no error.
[[nodiscard]] Result<void> write_standard_output(const std::string& bytes);

/// Everything else a person should see: standard error, with the program's prefix.
void complain(const Error& error);

}  // namespace gramproof::command
