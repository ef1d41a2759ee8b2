// src/design/words.hpp - the spelling of names: what is a letter, which words are taken, when a
// name needs quotes.
#pragma once

#include <string>
#include <string_view>

namespace gramproof::design {

/// Bytes from `at` that belong to a name: an ASCII letter, digit or underscore, or a whole
/// non-ASCII character that is no blank, punctuation or symbol. 0: none. O(1).
[[nodiscard]] std::size_t name_bytes_at(std::string_view text, std::size_t at);

/// Words of the design language: a column of that name is written in quotes.
[[nodiscard]] bool is_reserved(std::string_view word);

/// True if the text is read as one name without quotes.
[[nodiscard]] bool is_plain_word(std::string_view text);

/// The text in double quotes, quotes inside doubled.
[[nodiscard]] std::string in_quotes(std::string_view text);

/// A column name or level as the design language writes it: quoted only when needed.
[[nodiscard]] std::string quoted_if_needed(std::string_view text);

}  // namespace gramproof::design
