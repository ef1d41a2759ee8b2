#include "mistakes.hpp"

#include <doctest/doctest.h>

#include "small_tables.hpp"

namespace gramproof::test {

void write_files(const Scratch& folder) {
  const std::string harbour = harbour_table(), plain = plain_table();
  folder.file("harbour.csv", harbour);
  folder.file("plain.csv", plain);
  folder.file("other.csv", "x,z\n1,2\n");
  folder.file("empty.csv", "");
  folder.file("header.csv", "x,y\n");
  folder.file("word.csv", plain_table("unknown,4"));
  folder.file("ragged.csv", plain_table("23,4,5"));
  folder.file("twice.csv", "x,x\n1,2\n");
  folder.file("unnamed.csv", "x,\n1,2\n");
  folder.file("quote.csv", plain_table("23,\"4"));
  folder.file("huge.csv", plain_table("24,1e400"));
  folder.file("negative.csv", plain_table("24,-3"));
  folder.file("latin.csv", "age,town\n1,Rom\n2,K\xF6ln\n");
  folder.file("missing.csv", "x,y,w\n1,NA,3\n2,NA,4\nNA,5,6\n");
  folder.file("design.txt", "constant,\n  # all about age\n  age, incme\n");
  folder.file("blank.txt", " \n\n");
  std::filesystem::create_directory(folder.path() / "folder");
}

void check_line(const Run& run, const std::string& line) {
  CAPTURE(run);
  CHECK(run.status == 2);
  CHECK(run.output.empty());
  CHECK(run.errors == "gramproof: " + line + "\n");
}

void check_mistakes(const Scratch& folder, const std::vector<Mistake>& mistakes) {
  folder.file("kept.json", "as before\n");
  const std::vector<std::string> before = names_in(folder);
  for (const Mistake& mistake : mistakes) {
    CAPTURE(mistake.why);
    check_line(run_program(folder, mistake.arguments), mistake.line);
    if (mistake.arguments.empty()) continue;
    for (const std::string name : {"new.json", "kept.json"}) {
      std::vector<std::string> arguments = mistake.arguments;
      arguments.insert(arguments.begin() + 1, {"--json", name});
      check_line(run_program(folder, arguments), mistake.line);
    }
    CHECK(bytes_of(folder.path() / "kept.json") == "as before\n");
    CHECK(names_in(folder) == before);
  }
}

}  // namespace gramproof::test
