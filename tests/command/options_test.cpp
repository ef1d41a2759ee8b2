// The table of options is what --help says and what the parser takes.
#include <doctest/doctest.h>

#include <set>
#include <sstream>

#include "base/text.hpp"
#include "command/check_options.hpp"
#include "command/name_list.hpp"
#include "command/option_table.hpp"
#include "command/progress.hpp"

namespace gramproof::command {
namespace {

/// A value the option takes.
std::string good_value(const OptionEntry& option) {
  if (option.name == "design-file") return std::string(GRAMPROOF_FIXTURES) + "/accept/ORIGIN.md";
  if (option.name == "rows") return "age > 1";
  if (option.name == "recorded") return "age=1";
  if (option.name == "separator") return ";";
  if (option.name == "decimal-mark") return ".";
  if (option.name == "accept" || option.name == "accept-repaired") return "guarded";
  if (option.name == "threads") return "3";
  if (option.name == "json") return "-";
  if (!option.fallback.empty()) return option.fallback;
  return "age";
}

std::set<std::string> options_in(const std::string& help) {
  std::set<std::string> names;
  std::istringstream lines(help);
  for (std::string line; std::getline(lines, line);) {
    if (line.rfind("  --", 0) == 0) names.insert(line.substr(4, line.find(' ', 4) - 4));
  }
  return names;
}

}  // namespace

TEST_CASE("every option is in the help, and nothing else") {
  std::set<std::string> known;
  for (const OptionEntry& option : check_options()) {
    CAPTURE(option.name);
    CHECK(known.insert(option.name).second);
    CHECK_FALSE(option.text.empty());
    CHECK_FALSE(option.group.empty());
  }
  CHECK(options_in(check_help()) == known);
  std::istringstream lines(check_help() + general_help());
  for (std::string line; std::getline(lines, line);) {
    CAPTURE(line);
    CHECK(display_width(line) <= 79);
  }
}

TEST_CASE("every option is taken by the parser, in both forms") {
  for (const OptionEntry& option : check_options()) {
    CAPTURE(option.name);
    std::vector<std::vector<std::string>> forms = {{"data.csv", "--" + option.name}};
    if (!option.value.empty()) {
      forms = {{"data.csv", "--" + option.name, good_value(option)},
               {"--" + option.name + "=" + good_value(option), "data.csv"}};
    }
    for (const auto& arguments : forms) {
      const Result<CheckOptions> parsed = parse_check(arguments);
      REQUIRE_MESSAGE(parsed, (parsed ? "" : to_line(parsed.error())));
      if (option.name != "help")
        CHECK(parsed.value().files == std::vector<std::string>{"data.csv"});
    }
    const std::string once = option.value.empty() ? "" : good_value(option);
    std::vector<std::string> twice = {"data.csv"};
    for (int i = 0; i < 2; ++i) {
      twice.push_back("--" + option.name);
      if (!option.value.empty()) twice.push_back(i == 1 && once == "age=1" ? "size=1" : once);
    }
    CHECK(static_cast<bool>(parse_check(twice)) == (option.repeatable || option.value.empty()));
  }
}

TEST_CASE("options to come are unknown") {
  for (const std::string name : {"designs", "html", "each", "order", "within", "strata", "cluster",
                                 "weight-kind", "replicate-weights"}) {
    CAPTURE(name);
    const Result<CheckOptions> parsed = parse_check({"data.csv", "--" + name, "age"});
    REQUIRE_FALSE(parsed);
    CHECK(parsed.error().kind == ErrorKind::usage);
    CHECK(parsed.error().what == "unknown option --" + name);
    CHECK(options_in(check_help()).count(name) == 0);
  }
}

TEST_CASE("the defaults in the help are the defaults") {
  const Result<CheckOptions> bare = parse_check({"data.csv"});
  REQUIRE(bare);
  for (const OptionEntry& option : check_options()) {
    if (option.fallback.empty() || option.name == "threads") continue;
    CAPTURE(option.name);
    const Result<CheckOptions> said =
        parse_check({"data.csv", "--" + option.name, option.fallback});
    REQUIRE(said);
    const CheckOptions &a = bare.value(), &b = said.value();
    CHECK(a.audit.design.design == b.audit.design.design);
    CHECK(a.audit.design.undefined == b.audit.design.undefined);
    CHECK(a.audit.solver == b.audit.solver);
    CHECK(a.audit.memory == b.audit.memory);
    CHECK(a.reading.missing == b.reading.missing);
    CHECK(a.accept == b.accept);
    CHECK(a.colour == b.colour);
  }
  CHECK(bare.value().accept == audit::Overall::fragile);
  CHECK_FALSE(bare.value().accept_repaired);
  CHECK_FALSE(bare.value().quiet);
  CHECK(bare.value().audit.memory == std::uint64_t{128} << 20);
}

TEST_CASE("values arrive where they belong") {
  const Result<CheckOptions> parsed = parse_check({"a.csv",
                                                   "--response",
                                                   "\"net income\"",
                                                   "--complete",
                                                   "age,\"a, b\"",
                                                   "--focus",
                                                   "levels(region), age^2",
                                                   "--protect=age",
                                                   "--contrast",
                                                   "-age",
                                                   "--contrast",
                                                   "[x = 1]",
                                                   "--recorded",
                                                   "age=0.5",
                                                   "--recorded",
                                                   "\"a=b\"=exact",
                                                   "--missing",
                                                   ".,-9",
                                                   "--separator",
                                                   "tab",
                                                   "--decimal-mark",
                                                   ",",
                                                   "--threads",
                                                   "7",
                                                   "--memory",
                                                   "2G",
                                                   "--undefined",
                                                   "stop",
                                                   "--solver",
                                                   "qr",
                                                   "--accept-repaired",
                                                   "guarded",
                                                   "--weight",
                                                   "w",
                                                   "--rows",
                                                   "-x > 0",
                                                   "-"});
  REQUIRE(parsed);
  const CheckOptions& options = parsed.value();
  using Names = std::vector<std::string>;
  CHECK(options.files == Names{"a.csv", "-"});
  CHECK(options.audit.design.response == "net income");
  CHECK(options.audit.design.complete == Names{"age", "a, b"});
  CHECK(options.audit.design.focus == Names{"levels(region)", "age^2"});
  CHECK(options.audit.design.protect == Names{"age"});
  CHECK(options.audit.design.weight == "w");
  CHECK(options.audit.design.rows == "-x > 0");
  CHECK(options.audit.design.undefined == design::Undefined::stop);
  CHECK(options.audit.contrasts == Names{"-age", "[x = 1]"});
  REQUIRE(options.audit.recorded.size() == 2);
  CHECK(options.audit.recorded[0].column == "age");
  CHECK(options.audit.recorded[0].step == 0.5);
  CHECK(options.audit.recorded[1].column == "a=b");
  CHECK(options.audit.recorded[1].step == 0);
  CHECK(options.audit.solver == audit::Solver::qr);
  CHECK(options.audit.threads == 7);
  CHECK(options.audit.memory == std::uint64_t{2} << 30);
  CHECK(options.reading.missing == Names{".", "-9"});
  CHECK(options.reading.separator == '\t');
  CHECK(options.reading.decimal_mark == ',');
  CHECK(options.accept_repaired == audit::Overall::guarded);
}

TEST_CASE("names are split outside quotes and brackets") {
  struct Case {
    std::string text;
    std::vector<std::string> names;
  };
  const Case cases[] = {
      {"", {}},
      {" , ,", {}},
      {"age", {"age"}},
      {" age , income ", {"age", "income"}},
      {"\"a, b\",c", {"\"a, b\"", "c"}},
      {"levels(region, against = north), x", {"levels(region, against = north)", "x"}},
      {"[region = \"a,b\"] , hinge(x, 4) * y", {"[region = \"a,b\"]", "hinge(x, 4) * y"}},
      {"\"say \"\"a,b\"\"\", c", {"\"say \"\"a,b\"\"\"", "c"}},
  };
  for (const Case& c : cases) {
    CAPTURE(c.text);
    CHECK(split_names(c.text) == c.names);
  }
}

TEST_CASE("a quoted name is the name") {
  const std::vector<std::pair<std::string, std::string>> cases = {
      {"age", "age"},
      {"\"net income\"", "net income"},
      {"\"say \"\"x\"\"\"", "say \"x\""},
      {"\"", "\""},
      {"\"\"", ""},
      {"\"open", "\"open"},
      {"a\"b", "a\"b"},
  };
  for (const auto& [written, name] : cases) {
    CAPTURE(written);
    CHECK(unquoted(written) == name);
  }
}

TEST_CASE("tokens keep the empty one") {
  using Names = std::vector<std::string>;
  CHECK(split_tokens("") == Names{""});
  CHECK(split_tokens(",NA") == Names{"", "NA"});
  CHECK(split_tokens("NA, .") == Names{"NA", " ."});
  CHECK(split_tokens("a,,") == Names{"a", "", ""});
}

TEST_CASE("sizes") {
  const std::vector<std::pair<std::string, std::optional<std::uint64_t>>> cases = {
      {"4096", 4096},
      {"4096B", 4096},
      {"1k", 1024},
      {"1.5K", 1536},
      {"2kB", 2048},
      {"128MB", std::uint64_t{128} << 20},
      {"1.5G", std::uint64_t{3} << 29},
      {"0", std::nullopt},
      {"", std::nullopt},
      {"MB", std::nullopt},
      {"-1", std::nullopt},
      {"1e3", std::nullopt},
      {"12 MB", std::nullopt},
      {"1.2.3", std::nullopt},
      {"4T", std::nullopt},
      {"99999999999G", std::nullopt},
  };
  for (const auto& [text, bytes] : cases) {
    CAPTURE(text);
    CHECK(parse_size(text) == bytes);
  }
}

TEST_CASE("the line of progress") {
  const auto text = [](std::uint64_t rows, std::uint64_t read, std::uint64_t total,
                       double seconds) {
    return progress_text("folding rows", {rows, read, total}, seconds);
  };
  CHECK(text(1'200'000, 175'000'000, 290'000'000, 3) ==
        "folding rows: 1,200,000 rows, 175 of 290 MB (60 %), about 2 s left");
  CHECK(text(1, 1'000'000, 100'000'000, 3) == "folding rows: 1 row, 1 of 100 MB (1 %)");
  CHECK(text(10, 5'000'000, 0, 3) == "folding rows: 10 rows, 5 MB");  // a pipe: no end is known
  // A compressed file may be read past the size that was noted when it was opened.
  CHECK(text(10, 3'000'000, 2'000'000, 3) ==
        "folding rows: 10 rows, 3 of 2 MB (100 %), about 0 s left");
}

}  // namespace gramproof::command
