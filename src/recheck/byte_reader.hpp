// src/recheck/byte_reader.hpp - the bytes of a file, decompressed where it is gzip or Zstandard.
#pragma once

#include <cstddef>
#include <memory>
#include <string>

#include "base/result.hpp"

namespace gramproof::recheck {

/// Streams: holds two buffers and the decompressor's window, whatever the size of the file.
class ByteReader {
 public:
  /// "-" is standard input. Compression is recognised by the first bytes, not by the name. Errors:
  /// no such file, a directory, no permission.
  [[nodiscard]] static Result<ByteReader> open(const std::string& path);
  ByteReader(ByteReader&&) noexcept;
  ByteReader& operator=(ByteReader&&) noexcept;
  ~ByteReader();

  /// Up to `size` bytes; 0 only at the end. Errors: a read error, a damaged or truncated compressed
  /// file.
  [[nodiscard]] Result<std::size_t> read(char* bytes, std::size_t size);

  struct State;

 private:
  explicit ByteReader(std::unique_ptr<State> state);
  std::unique_ptr<State> state_;
};

}  // namespace gramproof::recheck
