// src/design/lexer.hpp - the text of a design as tokens.
#pragma once

#include <string>
#include <vector>

#include "base/result.hpp"
#include "design/syntax.hpp"

namespace gramproof::design {

enum class TokenKind : std::uint8_t { word, quoted, number, symbol, end };

struct Token {
  TokenKind kind = TokenKind::end;
  std::size_t at = 0;  ///< byte in the text, from 0
  std::string text;  ///< a word or symbol as written, the content of quotes, the digits of a number
};

/// All tokens, an `end` token last. Blanks, line breaks and comments (`#` to the end of the line)
/// part tokens. Errors: invalid UTF-8, an unclosed quote, a character that begins nothing, a name
/// that begins with a digit. O(length).
[[nodiscard]] Result<std::vector<Token>> tokens_of(const SourceText& source);

}  // namespace gramproof::design
