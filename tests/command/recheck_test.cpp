// gramproof recheck as a user runs it; what it upholds is tested in tests/recheck.
#include <doctest/doctest.h>

#include <fstream>

#include "run_program.hpp"
#include "small_tables.hpp"

namespace gramproof::test {
namespace {

struct Slip {
  std::string why;
  std::vector<std::string> arguments;
  std::string message;
};

void write_verdict(const Scratch& folder) {
  folder.file("plain.csv", plain_table());
  const Run run = run_program(
      folder, {"check", "plain.csv", "--design", "constant, x, y, x + y", "--json", "v.json"});
  CAPTURE(run);
  REQUIRE(run.status == 1);
}

void replace(const Scratch& folder, const std::string& what, const std::string& by) {
  std::string text = bytes_of(folder.path() / "v.json");
  const std::size_t at = text.find(what);
  REQUIRE(at != std::string::npos);
  folder.file("v.json", text.replace(at, what.size(), by));
}

}  // namespace

TEST_CASE("recheck ends with 0, 1 or 2") {
  const Scratch folder;
  write_verdict(folder);
  const Run upheld = run_program(folder, {"recheck", "v.json", "plain.csv"});
  CAPTURE(upheld);
  CHECK(upheld.status == 0);
  CHECK(upheld.errors == "");
  CHECK(upheld.output.find("upheld       relation 1: x + y - (x + y) = 0 in all 30 rows used\n") !=
        std::string::npos);
  CHECK(upheld.output.find("\nNOT upheld") == std::string::npos);
  CHECK(upheld.output.find(" 0 not upheld, ") != std::string::npos);

  Setting piped_in;
  piped_in.input = plain_table();
  const Run piped = run_program(folder, {"recheck", "v.json", "-"}, piped_in);
  CAPTURE(piped);
  CHECK(piped.status == 0);

  folder.file("other.csv", plain_table() + "1,2\n");
  const Run other = run_program(folder, {"recheck", "v.json", "other.csv"});
  CAPTURE(other);
  CHECK(other.status == 1);
  folder.file("harbour.csv", harbour_table());
  const Run harbour = run_program(folder, {"recheck", "v.json", "harbour.csv"});
  CAPTURE(harbour);
  CHECK(harbour.status == 2);
  CHECK(harbour.errors ==
        "gramproof: harbour.csv: no column \"x\" (the verdict is on data that have it once; are "
        "these the same data?)\n");

  replace(folder, "\"rows_used\": 30", "\"rows_used\": 31");
  const Run refused = run_program(folder, {"recheck", "v.json", "plain.csv"});
  CAPTURE(refused);
  CHECK(refused.status == 1);
  CHECK(refused.output.find("NOT upheld   31 rows used: it is 30\n") != std::string::npos);
  const Run quiet = run_program(folder, {"recheck", "--quiet", "v.json", "plain.csv"});
  CHECK(quiet.status == 1);
  CHECK(quiet.output == "");
}

TEST_CASE("recheck says what is wrong with its arguments and files") {
  const std::string use = " (gramproof recheck VERDICT.json FILE...)";
  const std::vector<Slip> slips = {
      {"nothing named", {"recheck"}, "no verdict is named" + use},
      {"no data", {"recheck", "v.json"}, "no data file is named" + use},
      {"an empty name", {"recheck", "v.json", ""}, "the name of a file is empty" + use},
      {"standard input twice",
       {"recheck", "-", "-"},
       "standard input is named twice (it can be read once)"},
      {"an unknown option",
       {"recheck", "--strict", "v.json", "plain.csv"},
       "unknown option --strict (`gramproof recheck --help` lists the options)"},
      {"no such verdict",
       {"recheck", "w.json", "plain.csv"},
       "w.json: no such file (gramproof check FILE... --json makes one)"},
      {"no such data", {"recheck", "v.json", "plan.csv"}, "plan.csv: no such file"},
      {"the arguments change places",
       {"recheck", "plain.csv", "v.json"},
       "plain.csv: this is no JSON (is it a verdict, as `gramproof check --json` writes it?)"},
      {"a folder", {"recheck", "v.json", "."}, ".: this is a directory (name the files in it)"},
  };
  const Scratch folder;
  write_verdict(folder);
  for (const Slip& slip : slips) {
    CAPTURE(slip.why);
    const Run run = run_program(folder, slip.arguments);
    CAPTURE(run);
    CHECK(run.status == 2);
    CHECK(run.output == "");
    CHECK(run.errors == "gramproof: " + slip.message + "\n");
  }
}

TEST_CASE("recheck --help, and control characters of a document stay harmless") {
  const Scratch folder;
  const Run help = run_program(folder, {"recheck", "--help"});
  CHECK(help.status == 0);
  CHECK(help.output.starts_with("gramproof recheck VERDICT.json FILE... [options]\n"));
  write_verdict(folder);
  replace(folder, "\"plain.csv\"", "\"\\u001b[2J\\u202eplain\\ncsv\"");
  const Run run = run_program(folder, {"recheck", "v.json", "plain.csv"});
  CAPTURE(run);
  CHECK(run.status == 0);
  CHECK(run.output.find('\x1b') == std::string::npos);
  CHECK(run.output.find("\\x1b[2J\\u202eplain\\ncsv has 30 rows\n") != std::string::npos);
}

}  // namespace gramproof::test
