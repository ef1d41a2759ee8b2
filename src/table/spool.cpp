#include "table/spool.hpp"

#include <sys/statvfs.h>
#include <unistd.h>

#include <algorithm>
#include <cerrno>
#include <cstdlib>
#include <cstring>
#include <utility>

#include <fmt/format.h>

#include "base/text.hpp"

namespace gramproof::table {
namespace {

constexpr std::uint64_t largest_spool = std::uint64_t{64} << 30;

std::string temporary_folder() {
  const char* const folder = std::getenv("TMPDIR");
  return folder != nullptr && *folder != '\0' ? folder : "/tmp";
}

/// An unlinked file: it vanishes with the process, however the process ends.
Descriptor unlinked_file(const std::string& folder) {
  std::string path = folder + "/gramproof-spool-XXXXXX";
  const int number = mkstemp(path.data());
  if (number >= 0) unlink(path.c_str());
  return Descriptor(number);
}

std::uint64_t half_the_free_space(const std::string& folder) {
  struct statvfs space {};
  if (statvfs(folder.c_str(), &space) != 0) return 0;
  return static_cast<std::uint64_t>(space.f_bavail) * space.f_frsize / 2;
}

class SpoolStream : public ByteStream {
 public:
  explicit SpoolStream(std::shared_ptr<Spool> spool) : spool_(std::move(spool)) {}
  Result<std::size_t> read(char* to, std::size_t size) override {
    auto got = spool_->read(at_, to, size);
    if (got) at_ += got.value();
    return got;
  }
  [[nodiscard]] std::uint64_t stored_bytes() const override { return at_; }

 private:
  std::shared_ptr<Spool> spool_;
  std::uint64_t at_ = 0;
};

}  // namespace

Spool::Spool(Descriptor pipe, std::string name, std::uint64_t most_bytes)
    : pipe_(std::move(pipe)), name_(std::move(name)), most_bytes_(most_bytes) {
  const std::string folder = temporary_folder();
  copy_ = unlinked_file(folder);
  keeping_ = copy_.number() >= 0;
  if (most_bytes_ == 0) most_bytes_ = std::min(largest_spool, half_the_free_space(folder));
}

void Spool::keep(const char* bytes, std::size_t size) {
  if (received_ + size > most_bytes_) keeping_ = false;
  std::size_t done = 0;
  while (keeping_ && done < size) {
    const ssize_t put =
        pwrite(copy_.number(), bytes + done, size - done, static_cast<off_t>(received_ + done));
    if (put > 0) {
      done += static_cast<std::size_t>(put);
    } else if (put == 0 || errno != EINTR) {
      keeping_ = false;  // a full disk is no reason to stop the pass under way
    }
  }
  if (!keeping_) copy_ = Descriptor();
}

Result<std::size_t> Spool::read(std::uint64_t at, char* to, std::size_t size) {
  const bool from_copy = at < received_;
  if (from_copy && !keeping_) {
    return Error{
        ErrorKind::limit, name_,
        fmt::format("a second pass over the data is needed, but they were too large to keep "
                    "a copy of (at most {} bytes)",
                    grouped(most_bytes_)),
        "save the data to a file and name that file, or point TMPDIR to a larger disk"};
  }
  const std::size_t most =
      from_copy ? static_cast<std::size_t>(std::min<std::uint64_t>(size, received_ - at)) : size;
  ssize_t got = 0;
  do {
    got = from_copy ? pread(copy_.number(), to, most, static_cast<off_t>(at))
                    : ::read(pipe_.number(), to, most);
  } while (got < 0 && errno == EINTR);
  if (got < 0) {
    return Error{ErrorKind::io, name_, fmt::format("reading failed: {}", std::strerror(errno)), ""};
  }
  const auto count = static_cast<std::size_t>(got);
  if (!from_copy) {
    if (keeping_) keep(to, count);
    received_ += count;
  }
  return count;
}

std::unique_ptr<ByteStream> open_spool(std::shared_ptr<Spool> spool) {
  return std::make_unique<SpoolStream>(std::move(spool));
}

}  // namespace gramproof::table
