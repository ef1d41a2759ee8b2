#include "command/recheck.hpp"

#include <cstdio>
#include <filesystem>
#include <memory>
#include <string_view>

#include "base/text.hpp"
#include "command/arguments.hpp"
#include "command/exit_status.hpp"
#include "command/option_table.hpp"
#include "command/output.hpp"
#include "command/reading.hpp"

namespace gramproof::command {
namespace {

using recheck::Claim;
using recheck::Outcome;

const std::vector<OptionEntry>& recheck_options() {
  static const std::vector<OptionEntry> table = {
      {"quiet", "", "", "", "print nothing; the exit status speaks", false},
      {"help", "", "", "", "this text", false},
  };
  return table;
}

struct CloseFile {
  void operator()(std::FILE* file) const {
    if (file != stdin) std::fclose(file);
  }
};

Result<std::string> read_whole(const std::string& path) {
  constexpr std::size_t most = 257 * 1024 * 1024;  // a little more than the checker accepts
  std::error_code fault;
  if (path != "-" && !std::filesystem::exists(path, fault))
    return Error{ErrorKind::io, path, "no such file", "gramproof check FILE... --json makes one"};
  if (std::filesystem::is_directory(path, fault))
    return Error{ErrorKind::io, path, "this is a directory", "name the verdict in it"};
  const std::unique_ptr<std::FILE, CloseFile> file(path == "-" ? stdin
                                                               : std::fopen(path.c_str(), "rb"));
  if (!file) return Error{ErrorKind::io, path, "cannot be opened", "check its permissions"};
  std::string text;
  std::string part(64 * 1024, '\0');
  while (text.size() < most) {
    const std::size_t got = std::fread(part.data(), 1, part.size(), file.get());
    if (got == 0) break;
    text.append(part, 0, got);
  }
  if (std::ferror(file.get()) != 0) return Error{ErrorKind::io, path, "cannot be read", ""};
  return text;
}

Result<void> check_names(const std::vector<std::string>& names) {
  const std::string use = "gramproof recheck VERDICT.json FILE...";
  if (names.empty()) return Error{ErrorKind::usage, "", "no verdict is named", use};
  if (names.size() == 1) return Error{ErrorKind::usage, "", "no data file is named", use};
  std::size_t standard_inputs = 0;
  for (const std::string& name : names) {
    if (name.empty()) return Error{ErrorKind::usage, "", "the name of a file is empty", use};
    standard_inputs += name == "-" ? 1 : 0;
  }
  if (standard_inputs > 1)
    return Error{ErrorKind::usage, "", "standard input is named twice", "it can be read once"};
  return {};
}

const char* word_of(Outcome outcome) {
  if (outcome == Outcome::upheld) return "upheld";
  return outcome == Outcome::not_upheld ? "NOT upheld" : "not checked";
}

std::size_t count_of(const std::vector<Claim>& claims, Outcome outcome) {
  std::size_t count = 0;
  for (const Claim& claim : claims) count += claim.outcome == outcome ? 1 : 0;
  return count;
}

}  // namespace

std::string recheck_help() {
  return "gramproof recheck VERDICT.json FILE... [options]\n"
         "\n"
         "Checks what a verdict proves, claim by claim, against the data it was made from:\n"
         "which rows were used, rank, exact relations, relations that few rows violate,\n"
         "and which columns are kept. Separate, slow and simple code in whole numbers and\n"
         "fractions; nothing of it made the verdict. Definitions are taken as given.\n"
         "FILE... are the files of the verdict in their order; - is standard input.\n"
         "\n"
         "  --quiet                   print nothing; the exit status speaks\n"
         "  --help                    this text\n"
         "\n"
         "Exit status: 0 every claim that was checked is upheld, 1 one is not, 2 nothing\n"
         "was checked.\n";
}

std::string claims_text(const std::vector<Claim>& claims) {
  std::string text;
  for (const Claim& claim : claims) {
    std::string word = word_of(claim.outcome);
    word.resize(13, ' ');
    text += word + visible(claim.text) + "\n";
  }
  const std::size_t upheld = count_of(claims, Outcome::upheld);
  text += "\n" + counted(upheld, "claim is", "claims are") + " upheld, " +
          grouped(count_of(claims, Outcome::not_upheld)) + " not upheld, " +
          grouped(count_of(claims, Outcome::not_checked)) + " not checked.\n";
  return text;
}

int recheck(const std::vector<std::string>& arguments) {
  Result<Arguments> sorted = sort_arguments(arguments, recheck_options(), "recheck");
  if (!sorted) return failed(sorted.error());
  if (sorted.value().has("help")) {
    const Result<void> shown = write_standard_output(recheck_help());
    return shown ? good_enough : failed(shown.error());
  }
  const std::vector<std::string>& names = sorted.value().files;
  if (Result<void> done = check_names(names); !done) return failed(done.error());
  Result<std::string> document = read_whole(names.front());
  if (!document) return failed(document.error());
  Result<std::vector<Claim>> claims = recheck::recheck(
      document.value(), names.front(), std::vector<std::string>(names.begin() + 1, names.end()));
  if (!claims) return failed(claims.error());
  if (!sorted.value().has("quiet")) {
    const Result<void> shown = write_standard_output(claims_text(claims.value()));
    if (!shown) return failed(shown.error());
  }
  return count_of(claims.value(), Outcome::not_upheld) == 0 ? good_enough : not_good_enough;
}

}  // namespace gramproof::command
