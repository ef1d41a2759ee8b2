#include <csignal>
#include <exception>
#include <new>
#include <optional>
#include <string>
#include <vector>

#include "base/text.hpp"
#include "command/check.hpp"
#include "command/exit_status.hpp"
#include "command/option_table.hpp"
#include "command/output.hpp"
#include "command/recheck.hpp"
#include "command/version.hpp"
#include "command/why.hpp"

namespace {

using namespace gramproof;
using namespace gramproof::command;

int print(const std::string& text) {
  const Result<void> shown = write_standard_output(text);
  if (shown) return good_enough;
  complain(shown.error());
  return not_audited;
}

int unknown_command(const std::string& word) {
  const std::optional<std::string> near =
      nearest_name(word, {"check", "recheck", "why", "--help", "--version"});
  complain({ErrorKind::usage, "", "unknown command \"" + word + "\"",
            near ? "did you mean " + *near + "?"
                 : "gramproof check FILE... ; `gramproof --help` says more"});
  return not_audited;
}

int run(const std::vector<std::string>& arguments) {
  if (arguments.empty()) {
    complain({ErrorKind::usage, "", "no command is given",
              "gramproof check FILE... ; `gramproof --help` says more"});
    return not_audited;
  }
  const std::string& word = arguments.front();
  if (word == "--help" || word == "help") return print(general_help());
  if (word == "--version") return print("gramproof " + std::string(program_version) + "\n");
  if (word == "recheck") return command::recheck({arguments.begin() + 1, arguments.end()});
  if (word == "why") return command::why({arguments.begin() + 1, arguments.end()});
  if (word != "check") return unknown_command(word);
  return check({arguments.begin() + 1, arguments.end()});
}

}  // namespace

int main(int count, char** words) {
  // A closed pipe is no error: writing to one then says EPIPE instead of ending the program.
  std::signal(SIGPIPE, SIG_IGN);
  try {
    return run({words + 1, words + count});
  } catch (const std::bad_alloc&) {
    complain({ErrorKind::limit, "", "the memory of this machine does not suffice",
              "use fewer columns or --threads 1"});
    return not_audited;
  } catch (const std::exception& fault) {
    complain({ErrorKind::internal, "", std::string("a defect of gramproof: ") + fault.what(),
              "please report it"});
    return defect;
  }
}
