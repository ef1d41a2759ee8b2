#include "command/reading.hpp"

#include <sys/ioctl.h>
#include <unistd.h>

#include <algorithm>
#include <cstdlib>
#include <filesystem>
#include <optional>

#include "base/text.hpp"
#include "command/exit_status.hpp"
#include "command/output.hpp"

namespace gramproof::command {
namespace {

/// The file of the same folder that was probably meant.
std::string near_file(const std::string& file) {
  const std::filesystem::path path = file;
  std::error_code fault;
  std::vector<std::string> names;
  for (std::filesystem::directory_iterator
           entry(path.has_parent_path() ? path.parent_path() : ".", fault),
       end;
       !fault && entry != end; entry.increment(fault)) {
    names.push_back(entry->path().filename().string());
  }
  const std::optional<std::string> near = nearest_name(path.filename().string(), names);
  return near ? "did you mean " + (path.parent_path() / *near).string() + "?" : "";
}

/// Says of a file that does not exist what may have been meant.
Result<void> check_files(const std::vector<std::string>& files) {
  for (const std::string& file : files) {
    std::error_code fault;
    if (file.empty()) {
      return Error{ErrorKind::usage, "", "the name of a data file is empty",
                   "gramproof check FILE... ; - is standard input"};
    }
    if (file == "-" || std::filesystem::exists(file, fault) || fault) continue;
    // Nobody looks for a file called 'constant, age'.
    const bool design = file.find_first_of(",([*^") != std::string::npos;
    return Error{
        ErrorKind::io, file, "no such file",
        design ? "a design stands behind --design: --design '" + file + "'" : near_file(file)};
  }
  return {};
}

}  // namespace

int failed(const Error& error) {
  complain(error);
  return error.kind == ErrorKind::internal ? defect : not_audited;
}

report::TextOptions text_options(When colour) {
  report::TextOptions options;
  const bool terminal = ::isatty(STDOUT_FILENO) == 1;
  const char* no_colour = std::getenv("NO_COLOR");
  const bool plain = no_colour != nullptr && *no_colour != '\0';
  options.colour = colour == When::always || (colour == When::automatic && terminal && !plain);
  struct winsize size {};
  if (terminal && ::ioctl(STDOUT_FILENO, TIOCGWINSZ, &size) == 0 && size.ws_col > 0) {
    options.width = std::clamp<int>(size.ws_col, 80, 120);
  }
  return options;
}

Result<table::Source> open_data(const std::vector<std::string>& files,
                                const table::ReadOptions& reading) {
  if (Result<void> exist = check_files(files); !exist) return exist.error();
  return table::Source::open(files, reading);
}

}  // namespace gramproof::command
