#include "recheck/byte_reader.hpp"

#include <sys/stat.h>
#include <zlib.h>
#include <zstd.h>

#include <algorithm>
#include <cerrno>
#include <cstdio>
#include <cstring>
#include <string_view>
#include <utility>
#include <vector>

namespace gramproof::recheck {
namespace {

constexpr std::size_t buffer_size = 256 * 1024;
constexpr std::string_view gzip_mark = "\x1F\x8B";
constexpr std::string_view zstd_mark = "\x28\xB5\x2F\xFD";

struct CloseFile {
  void operator()(std::FILE* file) const {
    if (file != stdin) std::fclose(file);
  }
};
struct FreeZstd {
  void operator()(ZSTD_DStream* stream) const { ZSTD_freeDStream(stream); }
};

enum class Packing { none, gzip, zstd };

}  // namespace

struct ByteReader::State {
  State() = default;
  State(const State&) = delete;
  State& operator=(const State&) = delete;
  ~State() {
    if (packing == Packing::gzip) inflateEnd(&gzip);
  }

  std::string name;
  std::unique_ptr<std::FILE, CloseFile> file;
  std::vector<char> stored = std::vector<char>(buffer_size);
  std::size_t at = 0, size = 0;  ///< what of `stored` is not used yet
  Packing packing = Packing::none;
  bool inside = false;  ///< a compressed frame has begun and not ended
  z_stream gzip{};
  std::unique_ptr<ZSTD_DStream, FreeZstd> zstd;

  [[nodiscard]] Error fault(const std::string& what, const std::string& hint = "") const {
    return {ErrorKind::io, name, what, hint};
  }

  /// Reads stored bytes behind those not used yet; false at the end of the file.
  Result<bool> fill() {
    if (at > 0) std::memmove(stored.data(), stored.data() + at, size - at);
    size -= at;
    at = 0;
    const std::size_t got = std::fread(stored.data() + size, 1, stored.size() - size, file.get());
    if (std::ferror(file.get()) != 0) {
      return fault(std::string("cannot be read: ") + std::strerror(errno));
    }
    size += got;
    return got > 0;
  }

  Result<std::size_t> take_stored(char* bytes, std::size_t wanted) {
    const std::size_t count = std::min(wanted, size - at);
    std::memcpy(bytes, stored.data() + at, count);
    at += count;
    return count;
  }

  Result<std::size_t> take_gzip(char* bytes, std::size_t wanted) {
    gzip.next_in = reinterpret_cast<Bytef*>(stored.data() + at);
    gzip.avail_in = static_cast<uInt>(size - at);
    gzip.next_out = reinterpret_cast<Bytef*>(bytes);
    gzip.avail_out = static_cast<uInt>(wanted);
    const int status = inflate(&gzip, Z_NO_FLUSH);
    at = size - gzip.avail_in;
    if (status != Z_BUF_ERROR) inside = status != Z_STREAM_END;  // that one: nothing happened
    if (status == Z_STREAM_END) inflateReset(&gzip);             // further members may follow
    if (status != Z_OK && status != Z_STREAM_END && status != Z_BUF_ERROR) {
      return fault("the gzip data are damaged");
    }
    return wanted - gzip.avail_out;
  }

  Result<std::size_t> take_zstd(char* bytes, std::size_t wanted) {
    ZSTD_inBuffer in{stored.data() + at, size - at, 0};
    ZSTD_outBuffer out{bytes, wanted, 0};
    const std::size_t status = ZSTD_decompressStream(zstd.get(), &out, &in);
    if (ZSTD_isError(status) != 0) return fault("the Zstandard data are damaged");
    at += in.pos;
    if (in.pos > 0 || out.pos > 0) inside = status != 0;
    return out.pos;
  }

  Result<std::size_t> take(char* bytes, std::size_t wanted) {
    if (packing == Packing::gzip) return take_gzip(bytes, wanted);
    if (packing == Packing::zstd) return take_zstd(bytes, wanted);
    return take_stored(bytes, wanted);
  }

  Result<void> recognise() {
    while (size < zstd_mark.size()) {
      Result<bool> more = fill();
      if (!more) return more.error();
      if (!more.value()) break;
    }
    const std::string_view start(stored.data(), size);
    if (start.starts_with(gzip_mark)) {
      constexpr int window_with_gzip_header = 15 + 16;
      if (inflateInit2(&gzip, window_with_gzip_header) != Z_OK) return fault("zlib cannot start");
      packing = Packing::gzip;
    } else if (start.starts_with(zstd_mark)) {
      zstd.reset(ZSTD_createDStream());
      if (!zstd) return fault("zstd cannot start");
      packing = Packing::zstd;
    }
    return {};
  }
};

ByteReader::ByteReader(std::unique_ptr<State> state) : state_(std::move(state)) {}
ByteReader::ByteReader(ByteReader&&) noexcept = default;
ByteReader& ByteReader::operator=(ByteReader&&) noexcept = default;
ByteReader::~ByteReader() = default;

Result<ByteReader> ByteReader::open(const std::string& path) {
  auto state = std::make_unique<State>();
  state->name = path == "-" ? "standard input" : path;
  struct stat status {};
  if (path != "-" && ::stat(path.c_str(), &status) == 0 && S_ISDIR(status.st_mode)) {
    return state->fault("this is a directory", "name the files in it");
  }
  state->file.reset(path == "-" ? stdin : std::fopen(path.c_str(), "rb"));
  if (!state->file) {
    return state->fault(errno == ENOENT ? "no such file"
                                        : std::string("cannot be opened: ") + std::strerror(errno));
  }
  if (Result<void> done = state->recognise(); !done) return done.error();
  return ByteReader(std::move(state));
}

Result<std::size_t> ByteReader::read(char* bytes, std::size_t size) {
  while (true) {
    const std::size_t before = state_->size - state_->at;
    Result<std::size_t> got = state_->take(bytes, size);
    if (!got || got.value() > 0) return got;
    // A frame's header alone gives nothing: go on while stored bytes are being used up.
    if (state_->size - state_->at < before) continue;
    Result<bool> more = state_->fill();
    if (!more) return more.error();
    if (more.value()) continue;
    if (state_->inside || state_->at < state_->size) {
      return state_->fault("the compressed file ends too early");
    }
    return std::size_t{0};
  }
}

}  // namespace gramproof::recheck
