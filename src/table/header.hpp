// src/table/header.hpp - the names of the columns.
#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "base/result.hpp"

namespace gramproof::table {

/// The names in a header record, blanks around them removed. The first may be empty (an unnamed row
/// label). Errors, each with file:line:column: nothing in the file, a blank first line, an empty
/// name, a name twice, a format fault, a byte that is no UTF-8, more than 100,000 columns.
/// O(bytes).
[[nodiscard]] Result<std::vector<std::string>> read_header(const std::string& file,
                                                           std::string_view record, char separator);

/// For each column of `names`, its table column: index into `wanted`. Error if the two are not the
/// same set; `file` and `first_file` are for the message. O(columns).
[[nodiscard]] Result<std::vector<std::size_t>> match_header(const std::string& file,
                                                            const std::vector<std::string>& names,
                                                            const std::string& first_file,
                                                            const std::vector<std::string>& wanted);

}  // namespace gramproof::table
