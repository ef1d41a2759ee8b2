// src/base/text.hpp - small services for words: neutral output, nearest name, UTF-8.
#pragma once

#include <cstddef>
#include <cstdint>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace gramproof {

/// The text with control, escape and bidirectional-override characters replaced by visible escapes
/// (`\x1b`,
/// `\u202e`) and invalid UTF-8 bytes by `\xNN`, so that data can never steer a terminal. Line
/// breaks become `\n`.
[[nodiscard]] std::string visible(std::string_view text);

/// Offset of the first byte that is not part of valid UTF-8 (RFC 3629), or none.
[[nodiscard]] std::optional<std::size_t> first_invalid_utf8(std::string_view bytes);

/// Terminal columns the text takes, counting one a code point (combining marks U+0300-U+036F count
/// nothing).
[[nodiscard]] std::size_t display_width(std::string_view text);

/// The candidate nearest to `word` by edit distance with transpositions (Damerau 1964), if it is
/// near enough to be a likely slip: at most 1 edit for up to 4 characters, else at most a third of
/// the length. Case counts half an edit.
[[nodiscard]] std::optional<std::string> nearest_name(std::string_view word,
                                                      const std::vector<std::string>& candidates);

/// 1234567 -> "1,234,567".
[[nodiscard]] std::string grouped(std::uint64_t number);

/// "1 row", "2 rows": the count, grouped, with the noun in the right number.
[[nodiscard]] std::string counted(std::uint64_t number, std::string_view singular,
                                  std::string_view plural);

}  // namespace gramproof
