#include "design/words.hpp"

#include <algorithm>
#include <array>
#include <cstdint>

namespace gramproof::design {
namespace {

constexpr std::array<std::string_view, 27> reserved = {
    "abs",      "against",    "all_levels", "and",     "asinh", "column", "columns",
    "constant", "day_number", "difference", "effects", "exp",   "hinge",  "is",
    "lag",      "levels",     "log",        "max",     "min",   "month",  "not",
    "or",       "rest",       "row",        "sqrt",    "steps", "year"};

bool is_word_byte(unsigned char byte) {
  return (byte >= 'a' && byte <= 'z') || (byte >= 'A' && byte <= 'Z') || byte == '_' ||
         (byte >= '0' && byte <= '9');
}

/// Blanks, quotes, dashes, arrows and mathematical signs of Unicode: a typographic quote or minus
/// sign is a slip that has to be named, not a letter.
bool is_letter(std::uint32_t code) {
  if (code < 0xC0) return code == 0xAA || code == 0xB5 || code == 0xBA;
  if (code == 0xD7 || code == 0xF7) return false;
  if (code >= 0x2000 && code <= 0x2BFF) return code >= 0x2070 && code <= 0x214F && code != 0x2116;
  return !(code >= 0x3000 && code <= 0x3004) && code != 0xFEFF;
}

}  // namespace

std::size_t name_bytes_at(std::string_view text, std::size_t at) {
  if (at >= text.size()) return 0;
  const auto lead = static_cast<unsigned char>(text[at]);
  if (lead < 0x80) return is_word_byte(lead) ? 1 : 0;
  const std::size_t length = lead >= 0xF0 ? 4 : (lead >= 0xE0 ? 3 : 2);
  if (at + length > text.size()) return 0;
  std::uint32_t code = lead & (0xFFu >> (length + 1));
  for (std::size_t i = 1; i < length; ++i) {
    code = code << 6 | (static_cast<unsigned char>(text[at + i]) & 0x3Fu);
  }
  return is_letter(code) ? length : 0;
}

bool is_reserved(std::string_view word) {
  return std::find(reserved.begin(), reserved.end(), word) != reserved.end();
}

bool is_plain_word(std::string_view text) {
  if (text.empty() || (text[0] >= '0' && text[0] <= '9') || is_reserved(text)) return false;
  for (std::size_t at = 0; at < text.size();) {
    const std::size_t bytes = name_bytes_at(text, at);
    if (bytes == 0) return false;
    at += bytes;
  }
  return true;
}

std::string in_quotes(std::string_view text) {
  std::string result = "\"";
  for (const char c : text) {
    if (c == '"') result += '"';
    result += c;
  }
  return result + '"';
}

std::string quoted_if_needed(std::string_view text) {
  return is_plain_word(text) ? std::string(text) : in_quotes(text);
}

}  // namespace gramproof::design
