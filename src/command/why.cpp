#include "command/why.hpp"

#include <algorithm>
#include <filesystem>

#include "audit/why.hpp"
#include "command/check_options.hpp"
#include "command/exit_status.hpp"
#include "command/option_table.hpp"
#include "command/output.hpp"
#include "command/progress.hpp"
#include "command/reading.hpp"
#include "report/text_why.hpp"

namespace gramproof::command {
namespace {

constexpr const char* usage = "gramproof why COLUMN FILE... ; - is standard input";

std::string why_help() {
  return "gramproof why COLUMN FILE... [options]\n"
         "\n"
         "Why a column of the design cannot be kept, or can: of which others it is a\n"
         "combination and since when; which could go instead; what every remaining\n"
         "coefficient then means. Of a column that can be kept: how near it is to the\n"
         "others, and on which rows it rests. Give the design that you would check.\n"
         "\n"
         "COLUMN is a column as the report names it, a term, a column of the data, or\n"
         "the level that levels() leaves out; it may also stand behind the files.\n"
         "\n"
         "  gramproof why '[region = north]' harbour.csv --design 'constant, levels(region)'\n" +
         listed_options(why_options()) +
         "\n"
         "Exit status: 0 answered, 2 nothing was answered.\n";
}

bool is_file(const std::string& word) {
  std::error_code fault;
  return word == "-" || std::filesystem::exists(word, fault);
}

Result<audit::Why> answer(CheckOptions& options, const ColumnAndFiles& words) {
  Result<table::Source> source = open_data(words.files, options.reading);
  if (!source) return source.error();
  ProgressLine progress(!options.quiet);
  options.audit.on_progress = [&progress](const std::string& pass, const table::Progress& at) {
    progress.show(pass, at);
  };
  return audit::why(source.value(), options.audit, words.column);
}

}  // namespace

Result<ColumnAndFiles> column_and_files(const std::vector<std::string>& words) {
  if (words.size() == 1) {
    return Error{ErrorKind::usage, "",
                 is_file(words.front()) ? "no column is named" : "no data file is named", usage};
  }
  std::size_t column = 0;
  const auto others = std::count_if(words.begin(), words.end(),
                                    [](const std::string& word) { return !is_file(word); });
  if (others == 1) {
    while (is_file(words[column])) ++column;
  }
  ColumnAndFiles result{words[column], words};
  result.files.erase(result.files.begin() + static_cast<std::ptrdiff_t>(column));
  const auto blank = [](const std::string& word) {
    return word.find_first_not_of(" \t\r\n") == std::string::npos;
  };
  if (blank(result.column)) return Error{ErrorKind::usage, "", "the column has no name", usage};
  if (std::any_of(result.files.begin(), result.files.end(), blank))
    return Error{ErrorKind::usage, "", "the name of a data file is empty", usage};
  return result;
}

int why(const std::vector<std::string>& arguments) {
  Result<CheckOptions> parsed = parse_options(arguments, why_options(), "why");
  if (!parsed) return failed(parsed.error());
  CheckOptions& options = parsed.value();
  if (options.help) {
    const Result<void> shown = write_standard_output(why_help());
    return shown ? good_enough : failed(shown.error());
  }
  const Result<ColumnAndFiles> words = column_and_files(options.files);
  if (!words) return failed(words.error());
  const Result<audit::Why> found = answer(options, words.value());
  if (!found) return failed(found.error());
  if (options.quiet) return good_enough;
  const Result<void> shown =
      write_standard_output(report::text_why(found.value(), text_options(options.colour)));
  return shown ? good_enough : failed(shown.error());
}

}  // namespace gramproof::command
