#include "table/stored_file.hpp"

#include <fcntl.h>
#include <sys/stat.h>
#include <unistd.h>

#include <cerrno>
#include <cstring>
#include <utility>

#include <fmt/format.h>

#include "table/spool.hpp"

namespace gramproof::table {
namespace {

FileIdentity identity_of(const struct stat& status) {
  return {status.st_dev, status.st_ino, status.st_size, status.st_mtim.tv_sec,
          status.st_mtim.tv_nsec};
}

Error cannot_open(const std::string& name, int number) {
  if (number == ENOENT) return {ErrorKind::io, name, "no such file", ""};
  if (number == EACCES) {
    return {ErrorKind::io, name, "no permission to read this file",
            "ask its owner, or copy it to a place of your own"};
  }
  return {ErrorKind::io, name, fmt::format("cannot be opened: {}", std::strerror(number)), ""};
}

Error changed(const std::string& name) {
  return {ErrorKind::io, name, "the file changed while it was being read",
          "wait until nothing writes to it any more, or work on a copy"};
}

class RegularStream : public ByteStream {
 public:
  RegularStream(Descriptor file, std::string name)
      : file_(std::move(file)), name_(std::move(name)) {}
  Result<std::size_t> read(char* to, std::size_t size) override {
    ssize_t got = 0;
    do {
      got = ::read(file_.number(), to, size);
    } while (got < 0 && errno == EINTR);
    if (got < 0) {
      return Error{ErrorKind::io, name_, fmt::format("reading failed: {}", std::strerror(errno)),
                   ""};
    }
    at_ += static_cast<std::uint64_t>(got);
    return static_cast<std::size_t>(got);
  }
  [[nodiscard]] std::uint64_t stored_bytes() const override { return at_; }

 private:
  Descriptor file_;
  std::string name_;
  std::uint64_t at_ = 0;
};

}  // namespace

Result<StoredFile> StoredFile::find(const std::string& name) {
  StoredFile file;
  const bool standard_input = name == "-";
  file.name_ = standard_input ? "standard input" : name;
  Descriptor descriptor(standard_input ? dup(STDIN_FILENO)
                                       : ::open(name.c_str(), O_RDONLY | O_CLOEXEC));
  if (descriptor.number() < 0) return cannot_open(file.name_, errno);
  struct stat status {};
  if (fstat(descriptor.number(), &status) != 0) return cannot_open(file.name_, errno);
  if (S_ISDIR(status.st_mode)) {
    return Error{ErrorKind::io, file.name_, "this is a directory", "name the files in it"};
  }
  // Redirected standard input is a regular file too, but has no name to open again: it is spooled.
  if (S_ISREG(status.st_mode) && !standard_input) {
    file.identity_ = identity_of(status);
  } else {
    file.spool_ = std::make_shared<Spool>(std::move(descriptor), file.name_);
  }
  return file;
}

std::uint64_t StoredFile::bytes() const {
  return identity_ ? static_cast<std::uint64_t>(identity_->size) : 0;
}

Result<std::unique_ptr<ByteStream>> StoredFile::open() const {
  if (spool_ != nullptr) return open_spool(spool_);
  Descriptor descriptor(::open(name_.c_str(), O_RDONLY | O_CLOEXEC));
  if (descriptor.number() < 0) return cannot_open(name_, errno);
  struct stat status {};
  if (fstat(descriptor.number(), &status) != 0) return cannot_open(name_, errno);
  if (identity_of(status) != *identity_) return changed(name_);
  return std::unique_ptr<ByteStream>(std::make_unique<RegularStream>(std::move(descriptor), name_));
}

Result<void> StoredFile::unchanged() const {
  if (!identity_) return {};
  struct stat status {};
  if (stat(name_.c_str(), &status) != 0) return cannot_open(name_, errno);
  if (identity_of(status) != *identity_) return changed(name_);
  return {};
}

}  // namespace gramproof::table
