#include "base/text.hpp"

#include <algorithm>
#include <array>
#include <cstring>

#include <fmt/format.h>

namespace gramproof {
namespace {

struct CodePoint {
  std::uint32_t value = 0;
  std::size_t length = 0;  ///< 0: the bytes are not UTF-8
};

bool is_continuation(unsigned char byte) {
  return (byte & 0xC0) == 0x80;
}

/// Decodes one code point by table 3-7 of the Unicode standard (the same set as RFC 3629): no
/// overlong forms, no surrogates, nothing above U+10FFFF.
CodePoint decode(std::string_view bytes, std::size_t at) {
  const auto byte = [&](std::size_t offset) {
    return at + offset < bytes.size() ? static_cast<unsigned char>(bytes[at + offset])
                                      : static_cast<unsigned char>(0);
  };
  const unsigned char lead = byte(0);
  if (lead < 0x80) return {lead, 1};
  const unsigned char second = byte(1);
  if (lead >= 0xC2 && lead <= 0xDF && is_continuation(second)) {
    return {(lead & 0x1Fu) << 6 | (second & 0x3Fu), 2};
  }
  if ((lead & 0xF0) == 0xE0) {
    const unsigned char lowest = lead == 0xE0 ? 0xA0 : 0x80;
    const unsigned char highest = lead == 0xED ? 0x9F : 0xBF;
    if (second < lowest || second > highest || !is_continuation(byte(2))) return {};
    return {(lead & 0x0Fu) << 12 | (second & 0x3Fu) << 6 | (byte(2) & 0x3Fu), 3};
  }
  if (lead >= 0xF0 && lead <= 0xF4) {
    const unsigned char lowest = lead == 0xF0 ? 0x90 : 0x80;
    const unsigned char highest = lead == 0xF4 ? 0x8F : 0xBF;
    if (second < lowest || second > highest) return {};
    if (!is_continuation(byte(2)) || !is_continuation(byte(3))) return {};
    return {
        (lead & 0x07u) << 18 | (second & 0x3Fu) << 12 | (byte(2) & 0x3Fu) << 6 | (byte(3) & 0x3Fu),
        4};
  }
  return {};
}

/// Characters that move the cursor, hide text or reverse its reading order: C0, DEL, C1,
/// bidirectional marks, overrides and isolates, line and paragraph separators, zero-width
/// characters, the BOM.
bool is_steering(std::uint32_t code) {
  return code < 0x20 || (code >= 0x7F && code < 0xA0) || code == 0xAD || code == 0x61C ||
         (code >= 0x200B && code <= 0x200F) || (code >= 0x2028 && code <= 0x202E) ||
         (code >= 0x2060 && code <= 0x206F) || code == 0xFEFF ||
         (code >= 0xFFF9 && code <= 0xFFFB) || (code >= 0xE0000 && code <= 0xE007F);
}

void append_escape(std::string& out, std::uint32_t code) {
  if (code == '\n') {
    out += "\\n";
  } else if (code == '\t') {
    out += "\\t";
  } else if (code == '\r') {
    out += "\\r";
  } else if (code < 0x100) {
    out += fmt::format("\\x{:02x}", code);
  } else if (code < 0x10000) {
    out += fmt::format("\\u{:04x}", code);
  } else {
    out += fmt::format("\\U{:08x}", code);
  }
}

std::vector<std::uint32_t> code_points(std::string_view text) {
  std::vector<std::uint32_t> codes;
  for (std::size_t at = 0; at < text.size();) {
    const CodePoint point = decode(text, at);
    codes.push_back(point.length == 0 ? static_cast<unsigned char>(text[at]) : point.value);
    at += std::max<std::size_t>(point.length, 1);
  }
  return codes;
}

std::uint32_t lower(std::uint32_t code) {
  return code >= 'A' && code <= 'Z' ? code + 32 : code;
}

/// Optimal string alignment distance (Damerau 1964: insertion, deletion, substitution,
/// transposition of neighbours) in half edits: a change of case costs 1, everything else 2. O(|a|
/// |b|).
std::size_t half_edits(const std::vector<std::uint32_t>& a, const std::vector<std::uint32_t>& b) {
  std::array<std::vector<std::size_t>, 3> rows;
  for (auto& row : rows) row.resize(b.size() + 1);
  for (std::size_t j = 0; j <= b.size(); ++j) rows[0][j] = 2 * j;
  for (std::size_t i = 1; i <= a.size(); ++i) {
    auto& row = rows[i % 3];
    const auto& above = rows[(i + 2) % 3];
    row[0] = 2 * i;
    for (std::size_t j = 1; j <= b.size(); ++j) {
      std::size_t change = 2;
      if (a[i - 1] == b[j - 1]) {
        change = 0;
      } else if (lower(a[i - 1]) == lower(b[j - 1])) {
        change = 1;
      }
      row[j] = std::min({above[j] + 2, row[j - 1] + 2, above[j - 1] + change});
      if (i > 1 && j > 1 && a[i - 1] == b[j - 2] && a[i - 2] == b[j - 1]) {
        row[j] = std::min(row[j], rows[(i + 1) % 3][j - 2] + 2);
      }
    }
  }
  return rows[a.size() % 3][b.size()];
}

}  // namespace

std::string visible(std::string_view text) {
  std::string out;
  out.reserve(text.size());
  for (std::size_t at = 0; at < text.size();) {
    const CodePoint point = decode(text, at);
    if (point.length == 0) {
      append_escape(out, static_cast<unsigned char>(text[at]));
      ++at;
      continue;
    }
    if (is_steering(point.value)) {
      append_escape(out, point.value);
    } else {
      out += text.substr(at, point.length);
    }
    at += point.length;
  }
  return out;
}

std::optional<std::size_t> first_invalid_utf8(std::string_view bytes) {
  for (std::size_t at = 0; at < bytes.size();) {
    // Most text is mostly ASCII: eight such bytes are passed in one step.
    std::uint64_t word = 0;
    if (bytes.size() - at >= sizeof word) {
      std::memcpy(&word, bytes.data() + at, sizeof word);
      if ((word & 0x8080808080808080u) == 0) {
        at += sizeof word;
        continue;
      }
    }
    const CodePoint point = decode(bytes, at);
    if (point.length == 0) return at;
    at += point.length;
  }
  return std::nullopt;
}

std::size_t display_width(std::string_view text) {
  std::size_t width = 0;
  for (const std::uint32_t code : code_points(text)) {
    if (code < 0x300 || code > 0x36F) ++width;
  }
  return width;
}

std::optional<std::string> nearest_name(std::string_view word,
                                        const std::vector<std::string>& candidates) {
  const auto letters = code_points(word);
  if (letters.empty()) return std::nullopt;
  const std::size_t allowed = letters.size() <= 4 ? 2 : 2 * (letters.size() / 3);
  std::size_t best = allowed + 1;
  std::optional<std::string> nearest;
  for (const std::string& candidate : candidates) {
    const auto other = code_points(candidate);
    const std::size_t gap = other.size() > letters.size() ? other.size() - letters.size()
                                                          : letters.size() - other.size();
    if (other.empty() || 2 * gap > allowed) continue;
    // A spelling that differs in case only is a likely slip however long the word is.
    const bool same_but_case =
        std::equal(letters.begin(), letters.end(), other.begin(), other.end(),
                   [](std::uint32_t x, std::uint32_t y) { return lower(x) == lower(y); });
    const std::size_t distance = same_but_case ? 0 : half_edits(letters, other);
    if (distance < best) {
      best = distance;
      nearest = candidate;
    }
  }
  return nearest;
}

std::string grouped(std::uint64_t number) {
  std::string digits = std::to_string(number);
  for (std::size_t at = digits.size(); at > 3;) {
    at -= 3;
    digits.insert(at, ",");
  }
  return digits;
}

std::string counted(std::uint64_t number, std::string_view singular, std::string_view plural) {
  return grouped(number) + " " + std::string(number == 1 ? singular : plural);
}

}  // namespace gramproof
