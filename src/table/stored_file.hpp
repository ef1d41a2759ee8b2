// src/table/stored_file.hpp - a file of the command line as it is stored: opened anew for each
// pass.
//
// A regular file is opened by name for each pass and must be the same each time. Standard input, a
// FIFO or a device can be read once only: its bytes are copied, as they come, to an unlinked file
// in TMPDIR (/tmp without it), so that further passes read the copy. The copy is given up, and the
// reading goes on, when it would pass 64 GB or half of the space that was free at the start; a
// further pass is an error then.
#pragma once

#include <sys/types.h>

#include <cstdint>
#include <memory>
#include <optional>
#include <string>

#include "base/result.hpp"
#include "table/byte_stream.hpp"

namespace gramproof::table {

class Spool;

/// What must not change between passes.
struct FileIdentity {
  dev_t device = 0;
  ino_t inode = 0;
  std::int64_t size = 0;
  std::int64_t seconds = 0, nanoseconds = 0;  ///< of the last modification
  bool operator==(const FileIdentity&) const = default;
};

class StoredFile {
 public:
  /// "-" is standard input. Errors (io): no such file, no permission, a directory.
  [[nodiscard]] static Result<StoredFile> find(const std::string& name);

  [[nodiscard]] const std::string& name() const { return name_; }  ///< "standard input" for "-"
  [[nodiscard]] std::uint64_t bytes() const;                       ///< 0 when unknown
  [[nodiscard]] bool readable_once() const { return spool_ != nullptr; }

  /// The stored bytes from the first one on. Errors (io): the file changed since find(), or cannot
  /// be opened any more, or its spool was given up.
  [[nodiscard]] Result<std::unique_ptr<ByteStream>> open() const;

  /// Error if the file is not what it was at find(); to be asked at the end of a pass.
  [[nodiscard]] Result<void> unchanged() const;

 private:
  StoredFile() = default;
  std::string name_;
  std::optional<FileIdentity> identity_;  ///< regular files
  std::shared_ptr<Spool> spool_;          ///< everything else
};

}  // namespace gramproof::table
