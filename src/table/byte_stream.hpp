// src/table/byte_stream.hpp - the bytes of one file, decompressed, from disk, a pipe or the spool
// of a pipe.
#pragma once

#include <cstddef>
#include <cstdint>
#include <memory>
#include <string>

#include "base/result.hpp"

namespace gramproof::table {

class ByteStream {
 public:
  virtual ~ByteStream() = default;
  /// Up to `size` bytes into `to`; 0 only at the end. Errors: io (the read failed) or data
  /// (truncated or corrupt compressed data), with the file's name in `where`.
  [[nodiscard]] virtual Result<std::size_t> read(char* to, std::size_t size) = 0;
  /// Bytes taken so far from the file as stored.
  [[nodiscard]] virtual std::uint64_t stored_bytes() const = 0;
};

/// A file descriptor that closes itself; -1 when empty.
class Descriptor {
 public:
  explicit Descriptor(int number = -1) : number_(number) {}
  Descriptor(Descriptor&& other) noexcept : number_(other.number_) { other.number_ = -1; }
  Descriptor& operator=(Descriptor&& other) noexcept;
  ~Descriptor();
  [[nodiscard]] int number() const { return number_; }

 private:
  int number_;
};

/// The bytes of `stored` with its compression taken off. The kind is recognised by content: gzip
/// (RFC 1952), Zstandard (RFC 8878), else plain; members and frames may follow each other. `name`
/// is for messages.
[[nodiscard]] Result<std::unique_ptr<ByteStream>> decompressed(std::unique_ptr<ByteStream> stored,
                                                               const std::string& name);

}  // namespace gramproof::table
