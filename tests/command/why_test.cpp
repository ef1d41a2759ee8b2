// `gramproof why` as a user runs it.
#include <doctest/doctest.h>

#include <string>
#include <vector>

#include "mistakes.hpp"
#include "run_program.hpp"
#include "small_tables.hpp"

namespace gramproof::test {
namespace {

const std::string design = "constant, age, levels(region), income, age + income";

bool has(const std::string& text, const std::string& part) {
  return text.find(part) != std::string::npos;
}

}  // namespace

TEST_CASE("why answers with status 0, whatever the answer is") {
  const Scratch folder;
  folder.file("harbour.csv", harbour_table());
  struct Case {
    std::string why, column;
    std::vector<std::string> parts;
  };
  const std::vector<Case> cases = {
      {"a combination",
       "age + income",
       {"`age + income` cannot be kept", "age + income = (age + income)", "`age` or `income`.",
        "estimates age + (age + income)", "first come, first kept",
        "Before you leave out anything"}},
      {"kept in place of another",
       "age",
       {"`age` cannot be kept beside all", "leaves out `age + income` instead"}},
      {"in no relation",
       "[region=north]",
       {"`[region = north]` can be kept", "How near it is", "Which rows hold it up",
        "harbour.csv:"}},
      {"left out by levels()",
       "[region = south]",
       {"`[region = south]` cannot be added", "levels() leaves one level out"}},
      {"several columns", "region", {"`region` is a source of 2 columns", "can be kept"}},
  };
  for (const Case& test : cases) {
    CAPTURE(test.why);
    const Run run = run_program(folder, {"why", test.column, "harbour.csv", "--design", design});
    CAPTURE(run);
    CHECK(run.status == 0);
    CHECK(run.errors.empty());
    for (const std::string& part : test.parts) {
      CAPTURE(part);
      CHECK(has(run.output, part));
    }
  }
}

TEST_CASE("the column may stand before or behind the files, and data come from a pipe too") {
  const Scratch folder;
  folder.file("harbour.csv", harbour_table());
  folder.file("more.csv", harbour_table());
  const auto output = [&](std::vector<std::string> words, const std::string& input = "") {
    words.insert(words.begin(), "why");
    words.insert(words.end(), {"--design", "constant, age, income, age + income"});
    Setting setting;
    setting.input = input;
    const Run run = run_program(folder, words, setting);
    CAPTURE(run);
    CHECK(run.status == 0);
    return run.output;
  };
  const std::string one = output({"income", "harbour.csv"});
  CHECK(has(one, "`income` cannot be kept"));
  CHECK(output({"harbour.csv", "income"}) == one);
  const std::string two = output({"income", "harbour.csv", "more.csv"});
  CHECK(has(two, "80 rows"));
  CHECK(output({"harbour.csv", "more.csv", "income"}) == two);
  CHECK(output({"-", "income"}, harbour_table()) == output({"income", "-"}, harbour_table()));
  // A file that is called like the column does not change the order.
  folder.file("income", harbour_table());
  CHECK(output({"income", "harbour.csv"}) == one);
}

TEST_CASE("options of check hold for why: rows, focus, contrasts, threads, quiet, colour") {
  const Scratch folder;
  folder.file("harbour.csv", harbour_table());
  const auto run = [&](std::vector<std::string> options) {
    options.insert(options.begin(), {"why", "age", "harbour.csv"});
    const Run result = run_program(folder, options);
    CAPTURE(result);
    CHECK(result.status == 0);
    CHECK(result.errors.empty());
    return result.output;
  };
  const std::vector<std::string> singular = {"--design", "constant, age, income, age + income"};
  const auto with = [&](std::vector<std::string> more) {
    more.insert(more.begin(), singular.begin(), singular.end());
    return run(more);
  };
  CHECK(has(with({"--rows", "row <= 25"}), "25 rows"));
  const std::string sums = with({"--contrast", "age - income", "--contrast", "income"});
  CHECK(has(sums, "`age - income` can be estimated"));
  CHECK(has(sums, "`income` cannot be estimated"));
  CHECK(has(with({"--protect", "income"}), "`age + income`. The fitted"));
  CHECK(with({"--quiet"}).empty());
  CHECK(with({"--threads", "1"}) == with({"--threads", "3"}));
  CHECK(has(with({"--colour", "always"}), "\x1b["));
  CHECK_FALSE(has(with({"--colour", "never"}), "\x1b["));
}

TEST_CASE("a slip in the command is named with status 2") {
  const Scratch folder;
  write_files(folder);
  const std::vector<Mistake> mistakes = {
      {"no word", {"why"}, "no data file is named (`gramproof why --help` says more)"},
      {"no file",
       {"why", "age"},
       "no data file is named (gramproof why COLUMN FILE... ; - is standard input)"},
      {"no column",
       {"why", "harbour.csv"},
       "no column is named (gramproof why COLUMN FILE... ; - is standard input)"},
      {"misspelt column",
       {"why", "incme", "harbour.csv"},
       "COLUMN: no column or term of the design is called \"incme\" (did you mean \"income\"?)"},
      {"a column that is not in the design",
       {"why", "income", "harbour.csv", "--design", "constant, age"},
       "COLUMN: no column of the design is made of \"income\" (add it to --design to ask about "
       "it)"},
      {"misspelt file",
       {"why", "income", "harbor.csv"},
       "harbor.csv: no such file (did you mean harbour.csv?)"},
      {"an empty column",
       {"why", "", "harbour.csv"},
       "the column has no name (gramproof why COLUMN FILE... ; - is standard input)"},
      {"an option of check alone",
       {"why", "income", "harbour.csv", "--accept", "sound"},
       "unknown option --accept (`gramproof why --help` lists the options)"},
      {"a fault in the design",
       {"why", "income", "harbour.csv", "--design", "constant, incme"},
       "--design:11: no column \"incme\" in harbour.csv (did you mean \"income\"?)"},
      {"a sum of unknown columns",
       {"why", "income", "harbour.csv", "--contrast", "agee"},
       "--contrast:1: no column of the design is called \"agee\" (did you mean \"age\"?)"},
  };
  for (const Mistake& mistake : mistakes) {
    CAPTURE(mistake.why);
    check_line(run_program(folder, mistake.arguments), mistake.line);
  }
  const Run help = run_program(folder, {"why", "--help"});
  CHECK(help.status == 0);
  CHECK(help.output.rfind("gramproof why COLUMN FILE...", 0) == 0);
  CHECK_FALSE(has(help.output, "--accept"));
  CHECK(help.errors.empty());
}

}  // namespace gramproof::test
