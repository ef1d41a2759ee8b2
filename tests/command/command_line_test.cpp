// Slips on the command line itself, and outputs that cannot be written.
#include <doctest/doctest.h>
#include <unistd.h>

#include "mistakes.hpp"
#include "small_tables.hpp"

namespace gramproof::test {
namespace {

const std::vector<Mistake> command_line = {
    {"no command",
     {},
     "no command is given (gramproof check FILE... ; `gramproof --help` says more)"},
    {"misspelt command", {"chek", "harbour.csv"}, "unknown command \"chek\" (did you mean check?)"},
    {"unknown command",
     {"harbour.csv"},
     "unknown command \"harbour.csv\" (gramproof check FILE... ; `gramproof --help` says more)"},
    {"no file", {"check"}, "no data file is named (gramproof check FILE... ; - is standard input)"},
    {"misspelt option",
     {"check", "harbour.csv", "--desing", "age"},
     "unknown option --desing (did you mean --design?)"},
    {"one dash",
     {"check", "harbour.csv", "-design", "age"},
     "unknown option -design (did you mean --design?)"},
    {"letter",
     {"check", "harbour.csv", "-q"},
     "unknown option -q (`gramproof check --help` lists the options)"},
    {"not an option of check",
     {"check", "--version"},
     "unknown option --version (`gramproof check --help` lists the options)"},
    {"not built yet",
     {"check", "harbour.csv", "--each", "region"},
     "unknown option --each (`gramproof check --help` lists the options)"},
    {"no value at the end",
     {"check", "harbour.csv", "--design"},
     "--design: a value must follow this option (written --design TEXT)"},
    {"an option for a value",
     {"check", "harbour.csv", "--response", "--quiet"},
     "--response: a value must follow this option (written --response COLUMN)"},
    {"an option with = for a value",
     {"check", "harbour.csv", "--rows", "--accept=sound"},
     "--rows: a value must follow this option (written --rows CONDITION)"},
    {"-- for a value",
     {"check", "--rows", "--", "harbour.csv"},
     "--rows: a value must follow this option (written --rows CONDITION)"},
    {"value of a switch",
     {"check", "harbour.csv", "--quiet=no"},
     "--quiet: this option takes no value (written --quiet alone)"},
    {"empty design",
     {"check", "harbour.csv", "--design", ""},
     "--design: the value is empty (written --design TEXT; left out, it is constant, rest)"},
    {"empty design behind =",
     {"check", "--design=", "harbour.csv"},
     "--design: the value is empty (written --design TEXT; left out, it is constant, rest)"},
    {"blank condition",
     {"check", "harbour.csv", "--rows", " "},
     "--rows: the value is empty (written --rows CONDITION)"},
    {"empty response",
     {"check", "harbour.csv", "--response", ""},
     "--response: the value is empty (written --response COLUMN)"},
    {"design twice",
     {"check", "harbour.csv", "--design", "age", "--design", "income"},
     "--design: given 2 times (give it once)"},
    {"two designs",
     {"check", "harbour.csv", "--design", "age", "--design-file", "design.txt"},
     "--design-file: --design is given too (give one of them)"},
    {"design without its option",
     {"check", "harbour.csv", "constant, age"},
     "constant, age: no such file (a design stands behind --design: --design 'constant, age')"},
    {"level of verdict",
     {"check", "harbour.csv", "--accept", "good"},
     "--accept: \"good\" is none of sound, guarded, fragile, unreliable, singular"},
    {"solver",
     {"check", "harbour.csv", "--solver", "svd"},
     "--solver: \"svd\" is none of normal, qr"},
    {"colour",
     {"check", "harbour.csv", "--colour", "yes"},
     "--colour: \"yes\" is none of auto, always, never"},
    {"undefined",
     {"check", "harbour.csv", "--undefined", "drop"},
     "--undefined: \"drop\" is none of exclude, stop"},
    {"no thread",
     {"check", "harbour.csv", "--threads", "0"},
     "--threads: \"0\" is not a whole number from 1 to 1024"},
    {"threads in words",
     {"check", "harbour.csv", "--threads", "two"},
     "--threads: \"two\" is not a whole number from 1 to 1024"},
    {"memory in words",
     {"check", "harbour.csv", "--memory", "much"},
     "--memory: \"much\" is no size (for example 128MB or 2G)"},
    {"two characters",
     {"check", "harbour.csv", "--separator", ";;"},
     "--separator: \";;\" is not one plain character (for example --separator ';' or tab)"},
    {"no character",
     {"check", "harbour.csv", "--separator", ""},
     "--separator: \"\" is not one plain character (for example --separator ';' or tab)"},
    {"decimal mark",
     {"check", "harbour.csv", "--decimal-mark", "'"},
     "--decimal-mark: \"'\" is neither . nor ,"},
    {"mark and separator",
     {"check", "harbour.csv", "--separator", ",", "--decimal-mark", ","},
     "--decimal-mark: the decimal mark is also the separator (give different ones)"},
    {"step without number",
     {"check", "harbour.csv", "--recorded", "age"},
     "--recorded: \"age\" is not COLUMN=STEP (for example --recorded age=1 or age=exact)"},
    {"two steps",
     {"check", "harbour.csv", "--recorded", "age=1", "--recorded", "\"age\"=exact"},
     "--recorded: \"age\" is given twice (give it once)"},
    {"step of nothing",
     {"check", "harbour.csv", "--recorded", "age=0"},
     "--recorded: \"0\" is neither a positive number nor exact (for example --recorded age=1 or "
     "age=exact)"},
};

const std::vector<Mistake> outputs = {
    {"missing folder",
     {"check", "plain.csv", "--json", "nowhere/verdict.json"},
     "nowhere/verdict.json: there is no folder nowhere (make it first, or name another file)"},
    {"directory",
     {"check", "plain.csv", "--json", "folder"},
     "folder: this is a directory (name a file in it)"},
    {"file for a folder",
     {"check", "plain.csv", "--json", "plain.csv/verdict.json"},
     "plain.csv/verdict.json: there is no folder plain.csv (make it first, or name another file)"},
    {"the data",
     {"check", "plain.csv", "--json", "plain.csv"},
     "--json: plain.csv is read, and would be replaced (name another file)"},
    {"the design",
     {"check", "plain.csv", "--design-file", "design.txt", "--json", "./design.txt"},
     "--json: ./design.txt is read, and would be replaced (name another file)"},
    {"an option for a file",
     {"check", "plain.csv", "--json", "--quiet"},
     "--json: a value must follow this option (written --json FILE)"},
    {"no name",
     {"check", "plain.csv", "--json", ""},
     "--json: the value is empty (written --json FILE)"},
};

}  // namespace

TEST_CASE("a slip on the command line is named") {
  const Scratch folder;
  write_files(folder);
  check_mistakes(folder, command_line);
}

TEST_CASE("a JSON file that cannot be written is refused before the audit") {
  const Scratch folder;
  write_files(folder);
  const std::vector<std::string> before = names_in(folder);
  for (const Mistake& mistake : outputs) {
    CAPTURE(mistake.why);
    check_line(run_program(folder, mistake.arguments), mistake.line);
    CHECK(names_in(folder) == before);
    CHECK(bytes_of(folder.path() / "plain.csv") == plain_table());
  }
}

TEST_CASE("files without permission") {
  if (::geteuid() == 0) return;  // nothing is forbidden to root
  const Scratch folder;
  write_files(folder);
  const std::filesystem::path data = folder.path() / "plain.csv";
  std::filesystem::permissions(data, std::filesystem::perms::none);
  check_line(run_program(folder, {"check", "plain.csv"}),
             "plain.csv: no permission to read this file (ask its owner, or copy it to a place of "
             "your own)");
  std::filesystem::permissions(folder.path() / "folder", std::filesystem::perms::none);
  check_line(run_program(folder, {"check", "harbour.csv", "--json", "folder/v.json"}),
             "folder/v.json: no file can be made in folder: Permission denied (name another file)");
  std::filesystem::permissions(folder.path() / "folder", std::filesystem::perms::owner_all);
}

}  // namespace gramproof::test
