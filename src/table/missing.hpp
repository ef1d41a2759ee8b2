// src/table/missing.hpp - which cells count as missing.
#pragma once

#include <algorithm>
#include <string>
#include <string_view>
#include <vector>

namespace gramproof::table {

/// The texts that mean "missing". A cell is compared after blanks around it are taken off, quoted
/// or not, and with exact case: `na` is a text where the list says `NA`. A blank cell is missing
/// only if "" is in the list.
class MissingTexts {
 public:
  MissingTexts() = default;
  explicit MissingTexts(std::vector<std::string> texts) : texts_(std::move(texts)) {
    for (const std::string& text : texts_) {
      longest_ = std::max(longest_, text.size());
      like_numbers_ |= text.find_first_of("0123456789") != std::string::npos;
    }
  }

  /// `text` has no blanks around it. O(number of texts).
  [[nodiscard]] bool contains(std::string_view text) const {
    if (text.size() > longest_) return false;
    return std::find(texts_.begin(), texts_.end(), text) != texts_.end();
  }
  /// Some text could be a number (-99): the list must be asked before a cell is read as one.
  [[nodiscard]] bool like_numbers() const { return like_numbers_; }

 private:
  std::vector<std::string> texts_;
  std::size_t longest_ = 0;
  bool like_numbers_ = false;
};

}  // namespace gramproof::table
