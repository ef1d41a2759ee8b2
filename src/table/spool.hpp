// src/table/spool.hpp - a copy of what can be read only once, so that it can be read again.
#pragma once

#include <cstdint>
#include <memory>
#include <string>

#include "base/result.hpp"
#include "table/byte_stream.hpp"

namespace gramproof::table {

/// Copies a pipe to an unlinked temporary file while it is read for the first time. Not
/// thread-safe: one reader at a time.
class Spool {
 public:
  /// `most_bytes` (0: the rule of stored_file.hpp) bounds the copy; tests lower it.
  Spool(Descriptor pipe, std::string name, std::uint64_t most_bytes = 0);

  /// Bytes from offset `at` on: from the copy, then from the pipe. Errors (io): a read failed, or
  /// the copy was given up and `at` is no longer the pipe's own place.
  [[nodiscard]] Result<std::size_t> read(std::uint64_t at, char* to, std::size_t size);

 private:
  void keep(const char* bytes, std::size_t size);

  Descriptor pipe_, copy_;
  std::string name_;
  std::uint64_t most_bytes_ = 0;
  std::uint64_t received_ = 0;  ///< bytes read from the pipe so far
  bool keeping_ = false;        ///< the copy holds all received bytes
};

/// A stream over a spool from its first byte.
[[nodiscard]] std::unique_ptr<ByteStream> open_spool(std::shared_ptr<Spool> spool);

}  // namespace gramproof::table
