// What is written, where, and that it is whole.
#include <doctest/doctest.h>
#include <fcntl.h>
#include <stdlib.h>
#include <sys/stat.h>
#include <sys/sysmacros.h>
#include <unistd.h>
#include <zlib.h>
#include <zstd.h>

#include <array>
#include <nlohmann/json.hpp>
#include <thread>

#include "run_program.hpp"
#include "small_tables.hpp"

namespace gramproof::test {
namespace {

namespace fs = std::filesystem;

Scratch& with_data(Scratch& folder) {
  folder.file("plain.csv", plain_table());
  folder.file("harbour.csv", harbour_table());
  return folder;
}

bool is_verdict(const std::string& bytes) {
  const nlohmann::json document = nlohmann::json::parse(bytes, nullptr, false);
  return document.is_object() && document.contains("verdict");
}

/// A device that may be named to the program. A defect that replaced it would harm the whole
/// machine when root runs the tests: root gets a node of its own in the folder, "" where none can
/// be used.
std::string device(const Scratch& folder, const std::string& name, unsigned minor) {
  const fs::path real = fs::path("/dev") / name;
  if (::geteuid() != 0) return real.string();
  constexpr unsigned memory_devices = 1;  // the major number of null and full (null(4), full(4))
  const fs::path own = folder.path() / name;
  const mode_t kind = S_IFCHR | 0600;
  if (::mknod(own.c_str(), kind, ::makedev(memory_devices, minor)) != 0) return "";
  const int opened = ::open(own.c_str(), O_WRONLY | O_CLOEXEC);  // not on a mount without devices
  if (opened < 0) return "";
  ::close(opened);
  return own.string();
}

constexpr unsigned minor_of_null = 3;
constexpr unsigned minor_of_full = 7;

/// The verdict without the description of the files, which names them.
nlohmann::json verdict_of(const std::string& bytes) {
  const nlohmann::json document = nlohmann::json::parse(bytes, nullptr, false);
  REQUIRE(document.is_object());
  return document.at("verdict");
}

/// Output of a run whose standard output is a terminal.
std::string shown_on_terminal(const Scratch& folder, const std::vector<std::string>& arguments,
                              Setting setting) {
  const int terminal = ::posix_openpt(O_RDWR | O_NOCTTY | O_CLOEXEC);
  REQUIRE(terminal >= 0);
  REQUIRE(::grantpt(terminal) == 0);
  REQUIRE(::unlockpt(terminal) == 0);
  setting.output_file = ::ptsname(terminal);
  // Held open, so that the reader waits for the program instead of finding nobody there.
  const int held = ::open(setting.output_file.c_str(), O_RDWR | O_NOCTTY | O_CLOEXEC);
  REQUIRE(held >= 0);
  std::string shown;
  std::thread reader([&] {
    std::array<char, 4096> buffer{};
    ssize_t got = 0;
    while ((got = ::read(terminal, buffer.data(), buffer.size())) > 0)
      shown.append(buffer.data(), static_cast<std::size_t>(got));
  });
  const Run run = run_program(folder, arguments, setting);
  ::close(held);  // the reader meets the end once nobody has the terminal
  reader.join();
  ::close(terminal);
  CAPTURE(run);
  CHECK(run.status == 0);
  return shown;
}

}  // namespace

TEST_CASE("a JSON file is whole, beside the text report") {
  Scratch folder;
  const Run run = run_program(with_data(folder), {"check", "plain.csv", "--json", "v.json"});
  CAPTURE(run);
  CHECK(run.status == 0);
  CHECK(run.errors.empty());
  CHECK(run.output.rfind("Sound: ", 0) == 0);
  CHECK(is_verdict(bytes_of(folder.path() / "v.json")));
  CHECK(names_in(folder) == std::vector<std::string>{"harbour.csv", "plain.csv", "v.json"});
}

TEST_CASE("an existing JSON file is replaced and keeps its permissions") {
  Scratch folder;
  with_data(folder);
  const fs::path file = folder.file("v.json", "as before");
  for (const auto mode : {0600, 0666, 0640}) {
    CAPTURE(mode);
    fs::permissions(file, static_cast<fs::perms>(mode));
    const Run run = run_program(folder, {"check", "plain.csv", "--quiet", "--json", "v.json"});
    CAPTURE(run);
    CHECK(run.status == 0);
    CHECK(is_verdict(bytes_of(file)));
    CHECK(fs::status(file).permissions() == static_cast<fs::perms>(mode));
  }
}

TEST_CASE("a link is followed and stays a link") {
  Scratch folder;
  with_data(folder);
  fs::create_directory(folder.path() / "kept");
  for (const std::string why : {"to nothing yet", "to a file"}) {
    CAPTURE(why);
    if (why == "to nothing yet") {
      fs::create_symlink("kept/v.json", folder.path() / "second");
      fs::create_symlink("second", folder.path() / "first");
    }
    const Run run = run_program(folder, {"check", "plain.csv", "--quiet", "--json", "first"});
    CAPTURE(run);
    CHECK(run.status == 0);
    CHECK(fs::is_symlink(folder.path() / "first"));
    CHECK(fs::is_symlink(folder.path() / "second"));
    CHECK_FALSE(fs::is_symlink(folder.path() / "kept/v.json"));
    CHECK(is_verdict(bytes_of(folder.path() / "kept/v.json")));
  }
}

TEST_CASE("--json - puts the document in the place of the text") {
  Scratch folder;
  with_data(folder);
  const Run dash = run_program(folder, {"check", "plain.csv", "--json", "-"});
  CAPTURE(dash);
  CHECK(dash.status == 0);
  CHECK(is_verdict(dash.output));
  const Run file = run_program(folder, {"check", "plain.csv", "--json", "v.json"});
  CHECK(bytes_of(folder.path() / "v.json") == dash.output);
}

TEST_CASE("--quiet prints nothing, good or bad") {
  Scratch folder;
  with_data(folder);
  const Run good = run_program(folder, {"check", "plain.csv", "--quiet"});
  CAPTURE(good);
  CHECK(good.status == 0);
  CHECK((good.output + good.errors).empty());
  const Run bad =
      run_program(folder, {"check", "plain.csv", "--quiet", "--design", "constant, x, 2 * x"});
  CAPTURE(bad);
  CHECK(bad.status == 1);
  CHECK((bad.output + bad.errors).empty());
}

TEST_CASE("a full device is an error") {
  Scratch folder;
  with_data(folder);
  Setting full;
  full.output_file = device(folder, "full", minor_of_full);
  if (full.output_file.empty()) return;
  for (const std::vector<std::string>& arguments :
       {std::vector<std::string>{"check", "plain.csv"},
        std::vector<std::string>{"check", "plain.csv", "--json", "-"},
        std::vector<std::string>{"check", "plain.csv", "--json", "/dev/stdout"},
        std::vector<std::string>{"check", "--help"}, std::vector<std::string>{"--version"}}) {
    const Run run = run_program(folder, arguments, full);
    CAPTURE(run);
    CHECK(run.status == 2);
    const bool by_name = arguments.back() == "/dev/stdout";
    CHECK(run.errors == std::string("gramproof: ") + (by_name ? "/dev/stdout" : "standard output") +
                            ": cannot be written: No space left on device\n");
  }
  const Run run = run_program(folder, {"check", "plain.csv", "--json", full.output_file});
  CAPTURE(run);
  CHECK(run.status == 2);
  CHECK(run.output.empty());
  CHECK(run.errors ==
        "gramproof: " + full.output_file + ": cannot be written: No space left on device\n");
  CHECK(fs::is_character_file(full.output_file));
}

TEST_CASE("devices and pipes are written directly") {
  Scratch folder;
  with_data(folder);
  const std::string document = run_program(folder, {"check", "plain.csv", "--json", "-"}).output;
  const std::string text = run_program(folder, {"check", "plain.csv"}).output;
  REQUIRE(is_verdict(document));
  for (const std::string name : {"/dev/stdout", "/dev/fd/1", "/proc/self/fd/1"}) {
    const Run run = run_program(folder, {"check", "plain.csv", "--json", name});
    CAPTURE(run);
    CHECK(run.status == 0);
    CHECK(run.output == document + text);
    // The same when standard output is a regular file: neither replaced nor written over.
    Setting file;
    file.output_file = (folder.path() / "out").string();
    CHECK(run_program(folder, {"check", "plain.csv", "--json", name}, file).status == 0);
    CHECK(bytes_of(file.output_file) == document + text);
  }
  const std::string null = device(folder, "null", minor_of_null);
  if (null.empty()) return;
  const Run nothing = run_program(folder, {"check", "plain.csv", "--json", null});
  CAPTURE(nothing);
  CHECK(nothing.status == 0);
  CHECK(nothing.output == text);
  CHECK(fs::is_character_file(null));
}

TEST_CASE("a named pipe is written directly") {
  Scratch folder;
  with_data(folder);
  const fs::path pipe = folder.path() / "pipe";
  REQUIRE(::mkfifo(pipe.c_str(), 0600) == 0);
  std::string got;
  std::thread reader([&] { got = bytes_of(pipe); });
  const Run run = run_program(folder, {"check", "plain.csv", "--quiet", "--json", "pipe"});
  // Should the program not have opened the pipe, the reader is let go.
  const int release = ::open(pipe.c_str(), O_WRONLY | O_NONBLOCK);
  if (release >= 0) ::close(release);
  reader.join();
  CAPTURE(run);
  CHECK(run.status == 0);
  CHECK(is_verdict(got));
  CHECK(fs::is_fifo(pipe));
}

TEST_CASE("a reader that leaves early is no error") {
  Scratch folder;
  with_data(folder);
  Setting gone;
  gone.reader_leaves = true;
  for (const std::vector<std::string>& arguments :
       {std::vector<std::string>{"check", "plain.csv"},
        std::vector<std::string>{"check", "plain.csv", "--json", "-"},
        std::vector<std::string>{"check", "plain.csv", "--json", "/dev/stdout"},
        std::vector<std::string>{"check", "--help"}}) {
    const Run run = run_program(folder, arguments, gone);
    CAPTURE(run);
    CHECK(run.status == 0);
    CHECK(run.errors.empty());
  }
  const Run bad =
      run_program(folder, {"check", "plain.csv", "--design", "constant, x, 2 * x"}, gone);
  CAPTURE(bad);
  CHECK(bad.status == 1);
  CHECK(bad.errors.empty());
}

TEST_CASE("colour") {
  Scratch folder;
  with_data(folder);
  Setting plain;
  plain.environment = {"NO_COLOR=1"};
  const auto escapes = [&](const std::string& when, const Setting& setting) {
    const Run run = run_program(folder, {"check", "plain.csv", "--colour", when}, setting);
    CHECK(run.status == 0);
    return run.output.find('\x1b') != std::string::npos;
  };
  CHECK(escapes("always", {}));
  CHECK(escapes("always", plain));  // said here and now, it outranks a setting for all programs
  CHECK_FALSE(escapes("never", {}));
  CHECK_FALSE(escapes("auto", {}));
  CHECK_FALSE(escapes("auto", plain));
  const auto on_terminal = [&](const std::string& when, const Setting& setting) {
    const std::string shown =
        shown_on_terminal(folder, {"check", "plain.csv", "--colour", when}, setting);
    CHECK(shown.find("Sound") != std::string::npos);
    return shown.find('\x1b') != std::string::npos;
  };
  Setting unsaid;
  unsaid.environment = {"NO_COLOR="};  // set to nothing, it asks for nothing
  CHECK(on_terminal("auto", {}));
  CHECK(on_terminal("auto", unsaid));
  CHECK_FALSE(on_terminal("auto", plain));
  CHECK_FALSE(on_terminal("never", {}));
}

TEST_CASE("the same question gives the same bytes on any number of threads") {
  Scratch folder;
  with_data(folder);
  std::string large = "a,b,c\n";
  for (int i = 0; i < 30000; ++i) {
    large += std::to_string(i % 977) + "." + std::to_string(i % 10) + "," +
             std::to_string(i * 31 % 1009) + "," + std::to_string(i * i % 4001) + "\n";
  }
  folder.file("large.csv", large);
  for (const std::string file : {"large.csv", "harbour.csv"}) {
    CAPTURE(file);
    const std::vector<std::string> question = {"check", file, "--json", "-", "--threads"};
    std::string first;
    for (const std::string threads : {"1", "2", "7"}) {
      CAPTURE(threads);
      std::vector<std::string> arguments = question;
      arguments.push_back(threads);
      const Run run = run_program(folder, arguments);
      REQUIRE(is_verdict(run.output));
      if (first.empty()) first = run.output;
      CHECK(run.output == first);
    }
  }
}

TEST_CASE("a file, a pipe, compressed files and parts give one verdict") {
  Scratch folder;
  with_data(folder);
  const std::string table = harbour_table();
  const std::vector<std::string> design = {"--json", "-", "--design",
                                           "constant, age, age^2, levels(region), size"};
  const auto asked = [&](std::vector<std::string> files, const std::string& input = "") {
    files.insert(files.begin(), "check");
    files.insert(files.end(), design.begin(), design.end());
    Setting setting;
    setting.input = input;
    const Run run = run_program(folder, files, setting);
    CAPTURE(run);
    CHECK(run.errors.empty());
    return verdict_of(run.output);
  };
  const nlohmann::json verdict = asked({"harbour.csv"});
  CHECK(asked({"-"}, table) == verdict);

  const std::string zipped = (folder.path() / "zipped.csv.gz").string();
  gzFile gz = gzopen(zipped.c_str(), "wb");
  REQUIRE(gzwrite(gz, table.data(), static_cast<unsigned>(table.size())) ==
          static_cast<int>(table.size()));
  REQUIRE(gzclose(gz) == Z_OK);
  CHECK(asked({"zipped.csv.gz"}) == verdict);
  CHECK(asked({"-"}, bytes_of(zipped)) == verdict);

  std::string packed(ZSTD_compressBound(table.size()), '\0');
  packed.resize(ZSTD_compress(packed.data(), packed.size(), table.data(), table.size(), 3));
  folder.file("packed.csv.zst", packed);
  CHECK(asked({"packed.csv.zst"}) == verdict);

  const std::size_t header = table.find('\n') + 1, half = table.find('\n', table.size() / 2) + 1;
  folder.file("first.csv", table.substr(0, half));
  folder.file("second.csv", table.substr(0, header) + table.substr(half));
  CHECK(asked({"first.csv", "second.csv"}) == verdict);
}

TEST_CASE("data cannot steer the terminal or the page") {
  Scratch folder;
  const std::string name = "\x1b[31mred\x1b[0m<b>";
  std::string table = plain_table();
  table.replace(0, 1, name);
  folder.file("steer.csv", table);
  const std::string bell = "\x07\xE2\x80\xAE";
  folder.file("level.csv", "x,region\n1,a" + bell + "\n2,b\n3,a" + bell + "\n4,b\n5,b\n9,c\n");
  for (const std::vector<std::string>& arguments :
       {std::vector<std::string>{"check", "steer.csv"},
        std::vector<std::string>{"check", "steer.csv", "--json", "-"},
        std::vector<std::string>{"check", "steer.csv", "--design", "constant, red"},
        std::vector<std::string>{"check", "steer.csv", "--design", "constant, \"" + name + "\", y"},
        std::vector<std::string>{"check", "steer.csv", "--design", name},
        std::vector<std::string>{"check", name + ".csv"},
        std::vector<std::string>{"check", "steer.csv", "--" + name},
        std::vector<std::string>{"check", "level.csv"},
        std::vector<std::string>{"check", "level.csv", "--design", "constant, all_levels(region)"},
        std::vector<std::string>{"check", "level.csv", "--design", "constant, [region = z]"}}) {
    const Run run = run_program(folder, arguments);
    CAPTURE(arguments.back());
    CHECK(run.status != 70);
    const std::string shown = run.output + run.errors;
    CHECK_FALSE(shown.empty());
    for (const std::string steering : {"\x1b", "\x07", "\xE2\x80\xAE"})
      CHECK(shown.find(steering) == std::string::npos);
  }
}

}  // namespace gramproof::test
