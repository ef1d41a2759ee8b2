#include "command/check.hpp"

#include <sys/ioctl.h>
#include <unistd.h>

#include <algorithm>
#include <cstdlib>
#include <filesystem>
#include <optional>
#include <string>
#include <vector>

#include "audit/run.hpp"
#include "base/text.hpp"
#include "command/check_options.hpp"
#include "command/exit_status.hpp"
#include "command/option_table.hpp"
#include "command/output.hpp"
#include "command/progress.hpp"
#include "command/version.hpp"
#include "report/document.hpp"
#include "report/text_report.hpp"
#include "table/source.hpp"

namespace gramproof::command {
namespace {

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

/// Overall is ordered from worst to best.
int status_of(const audit::Verdict& verdict, const CheckOptions& options) {
  if (verdict.overall >= options.accept) return good_enough;
  const bool repaired = options.accept_repaired && verdict.after_leaving_out &&
                        verdict.after_leaving_out->overall >= *options.accept_repaired;
  return repaired ? good_enough : not_good_enough;
}

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

Result<audit::Audit> run_audit(CheckOptions& options) {
  if (Result<void> exist = check_files(options.files); !exist) return exist.error();
  Result<table::Source> source = table::Source::open(options.files, options.reading);
  if (!source) return source.error();
  ProgressLine progress(!options.quiet);
  options.audit.on_progress = [&progress](const std::string& pass, const table::Progress& at) {
    progress.show(pass, at);
  };
  return audit::run(source.value(), options.audit);
}

}  // namespace

int check(const std::vector<std::string>& arguments) {
  Result<CheckOptions> parsed = parse_check(arguments);
  if (!parsed) return failed(parsed.error());
  CheckOptions& options = parsed.value();
  if (options.help) {
    const Result<void> shown = write_standard_output(check_help());
    return shown ? good_enough : failed(shown.error());
  }
  Result<audit::Audit> audit = run_audit(options);
  if (!audit) return failed(audit.error());
  // The file first: when it cannot be written, nothing is printed that looks like success.
  if (!options.json.empty()) {
    const std::string document =
        report::to_json_text(report::verdict_document(audit.value(), program_version));
    const Result<void> written =
        options.json == "-" ? write_standard_output(document) : write_file(options.json, document);
    if (!written) return failed(written.error());
  }
  if (options.json != "-" && !options.quiet) {
    const Result<void> shown =
        write_standard_output(report::text_report(audit.value(), text_options(options.colour)));
    if (!shown) return failed(shown.error());
  }
  return status_of(audit.value().verdict, options);
}

}  // namespace gramproof::command
