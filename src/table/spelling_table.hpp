// src/table/spelling_table.hpp - the different texts of one column within one piece, in order of
// first appearance.
#pragma once

#include <cstdint>
#include <cstring>
#include <string_view>
#include <vector>

namespace gramproof::table {

enum class CellClass : std::uint8_t { missing, number, out_of_range, text };

struct Spelling {
  std::string_view text;
  const char* at = nullptr;  ///< the first cell with this text
  std::uint32_t record = 0;  ///< its row within the piece
  std::uint32_t count = 0;
  std::uint32_t hash = 0;
  CellClass kind = CellClass::text;
};

/// Open addressing with linear probing. A piece has few texts and is thrown away soon, so one flat
/// table of numbers beats a map of nodes; it starts small because a table may have 100,000 columns.
class SpellingTable {
 public:
  [[nodiscard]] const std::vector<Spelling>& spellings() const { return spellings_; }

  /// The entry of `text`, new (count 0) if it was not seen before. The text must outlive the table.
  Spelling& find_or_add(std::string_view text) {
    if (2 * (spellings_.size() + 1) > slots_.size()) grow();
    const std::uint32_t hash = hash_of(text);
    std::size_t slot = hash & (slots_.size() - 1);
    while (slots_[slot] != 0) {
      Spelling& found = spellings_[slots_[slot] - 1];
      if (found.hash == hash && found.text == text) return found;
      slot = (slot + 1) & (slots_.size() - 1);
    }
    spellings_.push_back({text, nullptr, 0, 0, hash, CellClass::text});
    slots_[slot] = static_cast<std::uint32_t>(spellings_.size());
    return spellings_.back();
  }

 private:
  /// Eight bytes at a time through a multiplication (multipliers: 2^64 / golden ratio, and an odd
  /// number near 2^63). A piece has at most 4,096 texts, which bounds what chosen collisions could
  /// cost.
  static std::uint32_t hash_of(std::string_view text) {
    std::uint64_t hash = text.size() * 0x9E3779B97F4A7C15u;
    const char* at = text.data();
    std::size_t left = text.size();
    for (; left >= 8; left -= 8, at += 8) {
      std::uint64_t word = 0;
      std::memcpy(&word, at, 8);
      hash = mixed(hash ^ word);
    }
    std::uint64_t word = 0;
    for (std::size_t i = 0; i < left; ++i) {
      word = word << 8 | static_cast<unsigned char>(at[i]);
    }
    return static_cast<std::uint32_t>(mixed(hash ^ word) >> 32);
  }
  static std::uint64_t mixed(std::uint64_t word) {
    word *= 0x9E3779B97F4A7C15u;
    return (word ^ word >> 29) * 0xBF58476D1CE4E5B9u;
  }

  void grow() {
    slots_.assign(slots_.empty() ? 8 : 2 * slots_.size(), 0);
    for (std::size_t i = 0; i < spellings_.size(); ++i) {
      std::size_t slot = spellings_[i].hash & (slots_.size() - 1);
      while (slots_[slot] != 0) slot = (slot + 1) & (slots_.size() - 1);
      slots_[slot] = static_cast<std::uint32_t>(i + 1);
    }
  }

  std::vector<Spelling> spellings_;
  std::vector<std::uint32_t> slots_;  ///< 0: free, else 1 + index into spellings_
};

}  // namespace gramproof::table
