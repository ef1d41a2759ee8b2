#include "run_program.hpp"

#include <doctest/doctest.h>
#include <fcntl.h>
#include <limits.h>
#include <poll.h>
#include <signal.h>
#include <spawn.h>
#include <sys/wait.h>

#include <algorithm>
#include <array>
#include <iterator>
#include <ostream>

extern char** environ;

namespace gramproof::test {
namespace {

/// No run of these tests takes seconds: what lasts longer hangs.
constexpr int longest_wait_ms = 120'000;

struct Pipe {
  Pipe() { REQUIRE(::pipe2(ends.data(), O_CLOEXEC) == 0); }
  ~Pipe() {
    close_end(0);
    close_end(1);
  }
  Pipe(const Pipe&) = delete;
  Pipe& operator=(const Pipe&) = delete;
  void close_end(std::size_t end) {
    if (ends[end] >= 0) ::close(ends[end]);
    ends[end] = -1;
  }
  std::array<int, 2> ends{-1, -1};  ///< to read from, to write to
};

std::vector<char*> pointers(std::vector<std::string>& texts) {
  std::vector<char*> result;
  for (std::string& text : texts) result.push_back(text.data());
  result.push_back(nullptr);
  return result;
}

std::vector<std::string> environment_of(const Setting& setting) {
  std::vector<std::string> result = setting.environment;
  for (char** entry = environ; *entry != nullptr; ++entry) {
    if (std::string(*entry).rfind("NO_COLOR=", 0) != 0) result.emplace_back(*entry);
  }
  return result;
}

pid_t start(const Scratch& folder, const std::vector<std::string>& arguments,
            const Setting& setting, const std::array<Pipe, 3>& pipes) {
  posix_spawn_file_actions_t actions;
  posix_spawn_file_actions_init(&actions);
  posix_spawn_file_actions_addchdir_np(&actions, folder.path().c_str());
  posix_spawn_file_actions_adddup2(&actions, pipes[0].ends[0], STDIN_FILENO);
  posix_spawn_file_actions_adddup2(&actions, pipes[1].ends[1], STDOUT_FILENO);
  if (!setting.output_file.empty()) {
    posix_spawn_file_actions_addopen(&actions, STDOUT_FILENO, setting.output_file.c_str(),
                                     O_WRONLY | O_CREAT | O_TRUNC, 0644);
  }
  posix_spawn_file_actions_adddup2(&actions, pipes[2].ends[1], STDERR_FILENO);
  posix_spawnattr_t attributes;
  posix_spawnattr_init(&attributes);
  sigset_t defaults;
  sigemptyset(&defaults);
  sigaddset(&defaults, SIGPIPE);
  posix_spawnattr_setsigdefault(&attributes, &defaults);
  posix_spawnattr_setflags(&attributes, POSIX_SPAWN_SETSIGDEF);
  std::vector<std::string> words = arguments;
  words.insert(words.begin(), GRAMPROOF_EXECUTABLE);
  std::vector<std::string> variables = environment_of(setting);
  pid_t child = -1;
  const int fault = ::posix_spawn(&child, GRAMPROOF_EXECUTABLE, &actions, &attributes,
                                  pointers(words).data(), pointers(variables).data());
  posix_spawn_file_actions_destroy(&actions);
  posix_spawnattr_destroy(&attributes);
  REQUIRE_MESSAGE(fault == 0, GRAMPROOF_EXECUTABLE);
  return child;
}

/// Adds what can be read; closes the pipe at its end.
void take(Pipe& pipe, std::string& text) {
  std::array<char, 65536> buffer{};
  const ssize_t got = ::read(pipe.ends[0], buffer.data(), buffer.size());
  if (got > 0) {
    text.append(buffer.data(), static_cast<std::size_t>(got));
  } else {
    pipe.close_end(0);
  }
}

/// Writes some more of the input; closes the pipe at its end, or when the program has stopped
/// reading.
void give(Pipe& pipe, const std::string& input, std::size_t& given) {
  const std::size_t size = std::min<std::size_t>(input.size() - given, PIPE_BUF);
  const ssize_t put = size == 0 ? -1 : ::write(pipe.ends[1], input.data() + given, size);
  if (put > 0) given += static_cast<std::size_t>(put);
  if (put <= 0 || given == input.size()) pipe.close_end(1);
}

/// False when nothing happened for too long.
bool converse(std::array<Pipe, 3>& pipes, const Setting& setting, Run& run) {
  std::size_t given = 0;
  if (setting.input.empty()) pipes[0].close_end(1);
  while (pipes[1].ends[0] >= 0 || pipes[2].ends[0] >= 0) {
    // poll() passes over negative descriptors.
    std::array<pollfd, 3> waits{{{pipes[0].ends[1], POLLOUT, 0},
                                 {pipes[1].ends[0], POLLIN, 0},
                                 {pipes[2].ends[0], POLLIN, 0}}};
    if (::poll(waits.data(), waits.size(), longest_wait_ms) <= 0) return false;
    if (waits[0].revents != 0) give(pipes[0], setting.input, given);
    if (waits[1].revents != 0) take(pipes[1], run.output);
    if (waits[2].revents != 0) take(pipes[2], run.errors);
  }
  return true;
}

}  // namespace

Run run_program(const Scratch& folder, const std::vector<std::string>& arguments,
                const Setting& setting) {
  ::signal(SIGPIPE, SIG_IGN);
  Run run;
  run.command = "gramproof";
  for (const std::string& argument : arguments) run.command += " '" + argument + "'";
  std::array<Pipe, 3> pipes;
  if (setting.reader_leaves) pipes[1].close_end(0);
  const pid_t child = start(folder, arguments, setting, pipes);
  pipes[0].close_end(0);
  pipes[1].close_end(1);
  pipes[2].close_end(1);
  const bool ended = converse(pipes, setting, run);
  if (!ended) ::kill(child, SIGKILL);
  int status = 0;
  REQUIRE(::waitpid(child, &status, 0) == child);
  if (ended) run.status = WIFSIGNALED(status) ? 128 + WTERMSIG(status) : WEXITSTATUS(status);
  return run;
}

std::ostream& operator<<(std::ostream& stream, const Run& run) {
  return stream << run.command << "\nstatus " << run.status << "\nstandard output:\n"
                << run.output << "\nstandard error:\n"
                << run.errors;
}

std::string bytes_of(const std::filesystem::path& path) {
  std::ifstream file(path, std::ios::binary);
  return {std::istreambuf_iterator<char>(file), {}};
}

std::vector<std::string> names_in(const Scratch& folder) {
  std::vector<std::string> names;
  for (const auto& entry : std::filesystem::directory_iterator(folder.path()))
    names.push_back(entry.path().filename().string());
  std::sort(names.begin(), names.end());
  return names;
}

}  // namespace gramproof::test
