// src/command/name_list.hpp - comma-separated values of options.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

namespace gramproof::command {

/// Splits at commas outside quotes, parentheses and brackets; blanks around a name are dropped, and
/// so are empty names.
[[nodiscard]] std::vector<std::string> split_names(const std::string& text);

/// A column name without its quotes: `"net income"` -> `net income`.
[[nodiscard]] std::string unquoted(const std::string& name);

/// Splits at every comma and keeps empty parts: ',NA' is the empty cell and NA.
[[nodiscard]] std::vector<std::string> split_tokens(const std::string& text);

/// "128MB", "1.5G", "4096": bytes, with k, M, G as powers of 1,024; none if it is no size.
[[nodiscard]] std::optional<std::uint64_t> parse_size(const std::string& text);

}  // namespace gramproof::command
