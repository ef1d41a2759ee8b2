#include "command/output.hpp"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <cstring>
#include <filesystem>
#include <optional>

namespace gramproof::command {
namespace {

Error io_error(const std::string& path, const std::string& doing, const std::string& hint = "") {
  return {ErrorKind::io, path, doing + ": " + std::strerror(errno), hint};
}

/// Writes all bytes; false with errno set.
bool write_all(int descriptor, const std::string& bytes) {
  std::size_t done = 0;
  while (done < bytes.size()) {
    const ssize_t written = ::write(descriptor, bytes.data() + done, bytes.size() - done);
    if (written < 0 && errno == EINTR) continue;
    if (written < 0) return false;
    done += static_cast<std::size_t>(written);
  }
  return true;
}

/// The number of the descriptor a path stands for: opened anew, /dev/stdout would be written from
/// its start, over what is there.
std::optional<int> descriptor_of(const std::string& path) {
  if (path == "/dev/stdout") return STDOUT_FILENO;
  if (path == "/dev/stderr") return STDERR_FILENO;
  for (const std::string folder : {"/dev/fd/", "/proc/self/fd/"}) {
    if (path.rfind(folder, 0) != 0) continue;
    const std::string digits = path.substr(folder.size());
    if (digits.empty() || digits.size() > 6 ||
        digits.find_first_not_of("0123456789") != std::string::npos)
      return std::nullopt;
    return std::stoi(digits);
  }
  return std::nullopt;
}

/// The file a path means once links are followed, also where the last one leads to nothing yet.
std::string resolved(const std::string& path) {
  constexpr int most_links = 40;  // as many as Linux follows
  std::filesystem::path file = path;
  std::error_code fault;
  for (int i = 0; i < most_links && std::filesystem::is_symlink(file, fault); ++i) {
    const std::filesystem::path next = std::filesystem::read_symlink(file, fault);
    if (fault) break;
    file = next.is_absolute() ? next : file.parent_path() / next;
  }
  return file.string();
}

std::string folder_of(const std::string& path) {
  const std::string folder = std::filesystem::path(path).parent_path().string();
  return folder.empty() ? "." : folder;
}

Result<void> write_directly(const std::string& path, const std::string& bytes) {
  const int descriptor = ::open(path.c_str(), O_WRONLY | O_CLOEXEC);
  if (descriptor < 0) return io_error(path, "cannot be opened for writing");
  const bool written = write_all(descriptor, bytes);
  const int fault = errno;
  const bool closed = ::close(descriptor) == 0;
  if (!written) errno = fault;
  if ((!written || !closed) && errno != EPIPE) return io_error(path, "cannot be written");
  return {};
}

/// `kept` are the permissions of the file that is replaced, if there is one; a new file gets what
/// the user's mask leaves.
Result<void> write_and_rename(const std::string& path, const std::string& bytes,
                              std::optional<mode_t> kept) {
  const std::string temporary = path + ".part-" + std::to_string(::getpid());
  const int descriptor =
      ::open(temporary.c_str(), O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, kept.value_or(0666));
  if (descriptor < 0) return io_error(path, "cannot be created");
  bool good = (!kept || ::fchmod(descriptor, *kept) == 0) && write_all(descriptor, bytes) &&
              ::fsync(descriptor) == 0;
  int fault = errno;
  if (::close(descriptor) != 0 && good) {
    good = false;
    fault = errno;
  }
  if (good && ::rename(temporary.c_str(), path.c_str()) != 0) {
    good = false;
    fault = errno;
  }
  if (good) return {};
  ::unlink(temporary.c_str());
  errno = fault;
  return io_error(path, "cannot be written");
}

}  // namespace

Result<void> can_be_written(const std::string& path) {
  if (descriptor_of(path)) return {};
  const std::string target = resolved(path);
  struct stat status {};
  if (::stat(target.c_str(), &status) == 0) {
    if (S_ISDIR(status.st_mode)) {
      return Error{ErrorKind::io, path, "this is a directory", "name a file in it"};
    }
    if (::access(target.c_str(), W_OK) != 0) return io_error(path, "cannot be written");
    if (!S_ISREG(status.st_mode)) return {};
  }
  const std::string folder = folder_of(target);
  if (::stat(folder.c_str(), &status) != 0 || !S_ISDIR(status.st_mode)) {
    return Error{ErrorKind::io, path, "there is no folder " + folder,
                 "make it first, or name another file"};
  }
  if (::access(folder.c_str(), W_OK | X_OK) != 0) {
    return io_error(path, "no file can be made in " + folder, "name another file");
  }
  return {};
}

Result<void> write_file(const std::string& path, const std::string& bytes) {
  if (const std::optional<int> descriptor = descriptor_of(path)) {
    if (write_all(*descriptor, bytes) || errno == EPIPE) return {};
    return io_error(path, "cannot be written");
  }
  if (Result<void> writable = can_be_written(path); !writable) return writable;
  const std::string target = resolved(path);
  struct stat status {};
  if (::stat(target.c_str(), &status) != 0) return write_and_rename(target, bytes, std::nullopt);
  if (!S_ISREG(status.st_mode)) return write_directly(target, bytes);
  return write_and_rename(target, bytes, status.st_mode & 0777);
}

Result<void> write_standard_output(const std::string& bytes) {
  if (write_all(STDOUT_FILENO, bytes) || errno == EPIPE) return {};
  return io_error("standard output", "cannot be written");
}

void complain(const Error& error) {
  // Nobody is left to tell when standard error fails.
  (void)write_all(STDERR_FILENO, "gramproof: " + to_line(error) + "\n");
}

}  // namespace gramproof::command
