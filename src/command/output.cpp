#include "command/output.hpp"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <climits>
#include <cstdlib>
#include <cstring>
#include <memory>

namespace gramproof::command {
namespace {

Error io_error(const std::string& path, const std::string& doing) {
  return {ErrorKind::io, path, doing + ": " + std::strerror(errno), ""};
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

/// The file a path means once links are followed; the path itself where nothing exists yet.
std::string resolved(const std::string& path) {
  const std::unique_ptr<char, decltype(&std::free)> real(::realpath(path.c_str(), nullptr),
                                                         &std::free);
  return real ? std::string(real.get()) : path;
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

Result<void> write_and_rename(const std::string& path, const std::string& bytes, mode_t mode) {
  const std::string temporary = path + ".part-" + std::to_string(::getpid());
  const int descriptor = ::open(temporary.c_str(), O_WRONLY | O_CREAT | O_EXCL | O_CLOEXEC, mode);
  if (descriptor < 0) return io_error(path, "cannot be created");
  bool good = write_all(descriptor, bytes) && ::fsync(descriptor) == 0;
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

Result<void> write_file(const std::string& path, const std::string& bytes) {
  const std::string target = resolved(path);
  struct stat status {};
  if (::stat(target.c_str(), &status) != 0) return write_and_rename(target, bytes, 0666);
  if (S_ISDIR(status.st_mode)) {
    errno = EISDIR;
    return io_error(path, "cannot be written");
  }
  if (!S_ISREG(status.st_mode)) return write_directly(target, bytes);
  if (::access(target.c_str(), W_OK) != 0) return io_error(path, "cannot be written");
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
