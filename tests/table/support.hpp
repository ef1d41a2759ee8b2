// tests/table/support.hpp - files made on the fly, and tables read into plain texts.
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/result.hpp"
#include "support/gzip.hpp"
#include "table/source.hpp"
#include "table/survey.hpp"

namespace table_test {

/// A folder that is removed with all its files.
class TemporaryFolder {
 public:
  TemporaryFolder();
  ~TemporaryFolder();
  TemporaryFolder(const TemporaryFolder&) = delete;
  TemporaryFolder& operator=(const TemporaryFolder&) = delete;
  [[nodiscard]] std::string path(const std::string& name) const { return folder_ + "/" + name; }
  /// Writes a file and gives its path.
  std::string write(const std::string& name, std::string_view bytes) const;

 private:
  std::string folder_;
};

using gramproof::test::gzip;
[[nodiscard]] std::string zstd(std::string_view bytes);

/// All cells: plain text of numbers, levels of texts, none where missing.
using Cells = std::vector<std::vector<std::optional<std::string>>>;

struct Table {
  gramproof::table::Schema schema;
  Cells cells;
  std::vector<std::uint64_t> rows, lines;
  std::vector<std::size_t> files;
  std::vector<std::size_t> piece_sizes;
};

/// Surveys and then reads all columns by their kind, or as numbers if `all_numbers`.
[[nodiscard]] gramproof::Result<Table> read_table(gramproof::table::Source& source,
                                                  unsigned threads = 1, bool all_numbers = false);
[[nodiscard]] gramproof::Result<Table> read_table(const std::vector<std::string>& names,
                                                  const gramproof::table::ReadOptions& options = {},
                                                  unsigned threads = 1);

/// The error's line with `folder` and the slash behind it taken out.
[[nodiscard]] std::string line_without(const gramproof::Error& error, const std::string& folder);

}  // namespace table_test
