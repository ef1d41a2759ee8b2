#include "table/byte_stream.hpp"

#include <unistd.h>
#include <zlib.h>
#include <zstd.h>

#include <algorithm>
#include <cstring>
#include <new>
#include <string_view>
#include <utility>
#include <vector>

#include <fmt/format.h>

namespace gramproof::table {
namespace {

constexpr std::size_t stored_chunk = 256 * 1024;
constexpr std::string_view gzip_magic = "\x1f\x8b";
constexpr std::string_view zstd_magic = "\x28\xb5\x2f\xfd";

/// A window on the stored bytes: what was read ahead and not yet used.
class Window {
 public:
  explicit Window(std::unique_ptr<ByteStream> stored)
      : stored_(std::move(stored)), buffer_(stored_chunk) {}

  [[nodiscard]] std::string_view ahead() const { return {buffer_.data() + at_, end_ - at_}; }
  void skip(std::size_t count) { at_ += count; }
  [[nodiscard]] std::uint64_t stored_bytes() const { return stored_->stored_bytes(); }

  /// Makes `count` bytes visible in ahead() unless the file ends before.
  Result<void> see(std::size_t count) {
    while (end_ - at_ < count) {
      if (at_ > 0) {
        std::memmove(buffer_.data(), buffer_.data() + at_, end_ - at_);
        end_ -= at_;
        at_ = 0;
      }
      auto got = stored_->read(buffer_.data() + end_, buffer_.size() - end_);
      if (!got) return got.error();
      if (got.value() == 0) return {};
      end_ += got.value();
    }
    return {};
  }

 private:
  std::unique_ptr<ByteStream> stored_;
  std::vector<char> buffer_;
  std::size_t at_ = 0, end_ = 0;
};

Error truncated(const std::string& name, std::uint64_t bytes) {
  return {ErrorKind::data, name,
          fmt::format("the compressed file is truncated: it ends after {} bytes, inside its data",
                      bytes),
          "the download or copy was probably cut off; get the file again"};
}

Error corrupt(const std::string& name, std::uint64_t bytes, std::string_view detail) {
  return {
      ErrorKind::data, name,
      fmt::format("the compressed data are corrupt within the first {} bytes ({})", bytes, detail),
      "get the file again from where it came"};
}

class PlainStream : public ByteStream {
 public:
  explicit PlainStream(Window window) : window_(std::move(window)) {}
  Result<std::size_t> read(char* to, std::size_t size) override {
    if (auto seen = window_.see(1); !seen) return seen.error();
    const std::size_t count = std::min(size, window_.ahead().size());
    std::memcpy(to, window_.ahead().data(), count);
    window_.skip(count);
    return count;
  }
  [[nodiscard]] std::uint64_t stored_bytes() const override { return window_.stored_bytes(); }

 private:
  Window window_;
};

class GzipStream : public ByteStream {
 public:
  GzipStream(Window window, std::string name) : window_(std::move(window)), name_(std::move(name)) {
    if (inflateInit2(&inflate_, 15 + 16) != Z_OK) throw std::bad_alloc();
  }
  GzipStream(const GzipStream&) = delete;
  GzipStream& operator=(const GzipStream&) = delete;
  ~GzipStream() override { inflateEnd(&inflate_); }
  [[nodiscard]] std::uint64_t stored_bytes() const override { return window_.stored_bytes(); }

  Result<std::size_t> read(char* to, std::size_t size) override {
    while (!ended_) {
      if (auto seen = window_.see(2); !seen) return seen.error();
      if (between_members_) {
        if (auto begun = begin_member(); !begun) return begun.error();
        continue;
      }
      if (window_.ahead().empty()) return truncated(name_, stored_bytes());
      auto got = inflate_some(to, size);
      if (!got || got.value() > 0) return got;
    }
    return std::size_t{0};
  }

 private:
  /// After a member: another member, zero padding (as tape and block devices leave), or the end.
  Result<void> begin_member() {
    if (window_.ahead().starts_with(gzip_magic)) {
      between_members_ = false;
      if (inflateReset(&inflate_) != Z_OK) throw std::bad_alloc();
      return {};
    }
    if (window_.ahead().empty()) {
      ended_ = true;
      return {};
    }
    if (window_.ahead().front() != '\0') {
      return corrupt(name_, stored_bytes(), "bytes that are not gzip follow its end");
    }
    window_.skip(1);
    return {};
  }

  Result<std::size_t> inflate_some(char* to, std::size_t size) {
    const std::string_view ahead = window_.ahead();
    inflate_.next_in = reinterpret_cast<Bytef*>(const_cast<char*>(ahead.data()));
    inflate_.avail_in = static_cast<uInt>(ahead.size());
    const std::size_t most = std::min<std::size_t>(size, 1u << 30);
    inflate_.next_out = reinterpret_cast<Bytef*>(to);
    inflate_.avail_out = static_cast<uInt>(most);
    const int status = inflate(&inflate_, Z_NO_FLUSH);
    window_.skip(ahead.size() - inflate_.avail_in);
    if (status == Z_MEM_ERROR) throw std::bad_alloc();
    if (status != Z_OK && status != Z_STREAM_END && status != Z_BUF_ERROR) {
      return corrupt(name_, stored_bytes(), inflate_.msg != nullptr ? inflate_.msg : "gzip");
    }
    between_members_ = status == Z_STREAM_END;
    return most - inflate_.avail_out;
  }

  Window window_;
  std::string name_;
  z_stream inflate_{};
  bool between_members_ = false;
  bool ended_ = false;
};

class ZstdStream : public ByteStream {
 public:
  ZstdStream(Window window, std::string name)
      : window_(std::move(window)), name_(std::move(name)), context_(ZSTD_createDCtx()) {
    if (context_ == nullptr) throw std::bad_alloc();
  }
  ZstdStream(const ZstdStream&) = delete;
  ZstdStream& operator=(const ZstdStream&) = delete;
  ~ZstdStream() override { ZSTD_freeDCtx(context_); }
  [[nodiscard]] std::uint64_t stored_bytes() const override { return window_.stored_bytes(); }

  Result<std::size_t> read(char* to, std::size_t size) override {
    while (true) {
      if (auto seen = window_.see(1); !seen) return seen.error();
      const std::string_view ahead = window_.ahead();
      // With its input used up the decoder may still hold decoded bytes; only when it gives none
      // and wants more has the file ended too early.
      if (ahead.empty() && between_frames_) return std::size_t{0};
      ZSTD_inBuffer in{ahead.data(), ahead.size(), 0};
      ZSTD_outBuffer out{to, size, 0};
      const std::size_t wanted = ZSTD_decompressStream(context_, &out, &in);
      if (ZSTD_isError(wanted) != 0) {
        return corrupt(name_, stored_bytes(), ZSTD_getErrorName(wanted));
      }
      window_.skip(in.pos);
      between_frames_ = wanted == 0;
      if (out.pos > 0) return out.pos;
      if (ahead.empty() && !between_frames_) return truncated(name_, stored_bytes());
    }
  }

 private:
  Window window_;
  std::string name_;
  ZSTD_DCtx* context_;
  bool between_frames_ = false;
};

/// A Zstandard file may begin with a skippable frame: 0x184D2A50 .. 5F, little endian (RFC
/// 8878, 3.1.2).
bool is_skippable_frame(std::string_view head) {
  return head.size() >= 4 && (static_cast<unsigned char>(head[0]) & 0xF0) == 0x50 &&
         head.substr(1, 3) == "\x2a\x4d\x18";
}

}  // namespace

Descriptor& Descriptor::operator=(Descriptor&& other) noexcept {
  std::swap(number_, other.number_);
  return *this;
}

Descriptor::~Descriptor() {
  if (number_ >= 0) close(number_);
}

Result<std::unique_ptr<ByteStream>> decompressed(std::unique_ptr<ByteStream> stored,
                                                 const std::string& name) {
  Window window(std::move(stored));
  if (auto seen = window.see(4); !seen) return seen.error();
  const std::string_view head = window.ahead();
  std::unique_ptr<ByteStream> stream;
  if (head.starts_with(gzip_magic)) {
    stream = std::make_unique<GzipStream>(std::move(window), name);
  } else if (head.starts_with(zstd_magic) || is_skippable_frame(head)) {
    stream = std::make_unique<ZstdStream>(std::move(window), name);
  } else {
    stream = std::make_unique<PlainStream>(std::move(window));
  }
  return stream;
}

}  // namespace gramproof::table
