#include "command/check.hpp"

#include <string>
#include <vector>

#include "audit/run.hpp"
#include "command/check_options.hpp"
#include "command/exit_status.hpp"
#include "command/option_table.hpp"
#include "command/output.hpp"
#include "command/progress.hpp"
#include "command/reading.hpp"
#include "command/version.hpp"
#include "report/document.hpp"
#include "report/text_report.hpp"
#include "table/source.hpp"

namespace gramproof::command {
namespace {

/// Overall is ordered from worst to best.
int status_of(const audit::Verdict& verdict, const CheckOptions& options) {
  if (verdict.overall >= options.accept) return good_enough;
  const bool repaired = options.accept_repaired && verdict.after_leaving_out &&
                        verdict.after_leaving_out->overall >= *options.accept_repaired;
  return repaired ? good_enough : not_good_enough;
}

Result<audit::Audit> run_audit(CheckOptions& options) {
  Result<table::Source> source = open_data(options.files, options.reading);
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
