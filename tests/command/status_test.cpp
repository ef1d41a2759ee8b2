// What a script can rely on.
#include <doctest/doctest.h>

#include "run_program.hpp"
#include "small_tables.hpp"

namespace gramproof::test {
namespace {

const std::vector<std::string> levels = {"sound", "guarded", "fragile", "unreliable", "singular"};

struct Level {
  std::size_t level;  ///< of `levels`
  std::string why;
  std::string file;
  std::string design;
};

const std::vector<Level> designs = {
    {0, "nothing in common", "plain.csv", "constant, x, y"},
    {1, "8 rows leave fewer than 10 degrees of freedom", "short.csv", "constant, x, y"},
    {2, "u follows x to 1 in 1000: a strong relation far above rounding", "near.csv",
     "constant, x, u"},
    {3, "a cubic of the calendar year: no digit is left to the normal equations", "years.csv",
     "constant, t, t^2, t^3"},
    {3, "a relation of logarithms, which is not proved", "plain.csv",
     "constant, log(x), log(x^2), y"},
    {4, "a proved relation", "plain.csv", "constant, x, y, x + y"},
};

void write_files(const Scratch& folder) {
  const std::string plain = plain_table();
  folder.file("plain.csv", plain);
  std::size_t end = 0;
  for (int line = 0; line < 9; ++line) end = plain.find('\n', end) + 1;
  folder.file("short.csv", plain.substr(0, end));
  std::string near = "x,u\n", years = "t,z\n";
  for (int i = 0; i < 60; ++i) {
    const int x = i * 7919 % 100003 * 10;
    near += std::to_string(x) + "," + std::to_string(x + i * i * 37 % 1009) + "\n";
    years += std::to_string(1960 + i) + "," + std::to_string(i * i % 13) + "\n";
  }
  folder.file("near.csv", near);
  folder.file("years.csv", years);
}

std::string lower(std::string word) {
  for (char& c : word) c = static_cast<char>(std::tolower(static_cast<unsigned char>(c)));
  return word;
}

}  // namespace

TEST_CASE("0 from the level of --accept on, else 1") {
  const Scratch folder;
  write_files(folder);
  for (const Level& design : designs) {
    CAPTURE(design.why);
    const Run plain = run_program(folder, {"check", design.file, "--design", design.design});
    CAPTURE(plain);
    const std::string& word = levels[design.level];
    CHECK(lower(plain.output.substr(0, word.size())) == word);
    CHECK(plain.status == (design.level <= 2 ? 0 : 1));  // the default is fragile
    for (std::size_t accepted = 0; accepted < levels.size(); ++accepted) {
      CAPTURE(levels[accepted]);
      const Run run = run_program(folder, {"check", design.file, "--design", design.design,
                                           "--quiet", "--accept", levels[accepted]});
      CHECK(run.status == (design.level <= accepted ? 0 : 1));
    }
  }
}

TEST_CASE("--accept-repaired forgives a relation, and nothing else") {
  const Scratch folder;
  write_files(folder);
  const auto status = [&](const std::string& file, const std::string& design,
                          const std::string& repaired) {
    return run_program(folder, {"check", file, "--design", design, "--quiet", "--accept", "sound",
                                "--accept-repaired", repaired})
        .status;
  };
  // Without `x + y` the design is sound; without `2 * t` it is unreliable.
  CHECK(status("plain.csv", "constant, x, y, x + y", "sound") == 0);
  CHECK(status("plain.csv", "constant, x, y, x + y", "fragile") == 0);
  CHECK(status("plain.csv", "constant, log(x), log(x^2), y", "sound") == 0);
  const std::string cubic = "constant, t, t^2, t^3, 2 * t";
  CHECK(status("years.csv", cubic, "fragile") == 1);
  CHECK(status("years.csv", cubic, "unreliable") == 0);
  // Nothing is left out of a fragile design, so nothing is repaired.
  CHECK(status("near.csv", "constant, x, u", "fragile") == 1);
}

TEST_CASE("help and version are answers, silence is not") {
  const Scratch folder;
  const Run version = run_program(folder, {"--version"});
  CAPTURE(version);
  CHECK(version.status == 0);
  CHECK(version.output.rfind("gramproof ", 0) == 0);
  CHECK(version.errors.empty());
  for (const std::vector<std::string>& arguments :
       {std::vector<std::string>{"--help"}, std::vector<std::string>{"help"},
        std::vector<std::string>{"check", "--help"},
        std::vector<std::string>{"check", "absent.csv", "--threads", "none", "--help"}}) {
    const Run run = run_program(folder, arguments);
    CAPTURE(run);
    CHECK(run.status == 0);
    CHECK(run.output.rfind("gramproof ", 0) == 0);
    CHECK(run.output.find("Exit status: 0") != std::string::npos);
    CHECK(run.errors.empty());
  }
  const Run silent = run_program(folder, {});
  CHECK(silent.status == 2);
  CHECK(silent.output.empty());
}

TEST_CASE("values may begin like options and stand anywhere") {
  const Scratch folder;
  folder.file("harbour.csv", harbour_table());
  folder.file("-dash.csv", harbour_table());
  const std::vector<std::vector<std::string>> questions = {
      {"check", "harbour.csv", "--design", "[age >= 50], constant"},
      {"check", "harbour.csv", "--design", "[age >= 50]"},
      {"check", "harbour.csv", "--design", "[age >= 50], [income > 2000]"},
      {"check", "harbour.csv", "--design", "-age, constant"},
      {"check", "harbour.csv", "--design=-age, constant"},
      {"check", "harbour.csv", "--design", "constant, age", "--rows", "-age < -30"},
      {"check", "harbour.csv", "--design", "constant, age, [region = north]", "--contrast",
       "-age + [region = north]", "--contrast", "[region = north]"},
      {"check", "--design", "constant, age", "harbour.csv"},
      {"check", "--design", "constant, age", "--", "harbour.csv"},
      {"check", "--design", "constant, age", "--", "-dash.csv"},
      {"check", "./-dash.csv", "--design", "\"age\", constant"},
      {"check", "harbour.csv", "--missing", "", "--separator=,"},
  };
  for (std::vector<std::string> question : questions) {
    question.insert(question.begin() + 1, "--quiet");
    const Run run = run_program(folder, question);
    CAPTURE(run);
    CHECK(run.status == 0);
    CHECK(run.errors.empty());
  }
}

}  // namespace gramproof::test
