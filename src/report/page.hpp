// src/report/page.hpp - lines of text no wider than a page.
#pragma once

#include <cstddef>
#include <string>
#include <string_view>
#include <vector>

namespace gramproof::report {

enum class Tone { plain, strong, good, warning, bad };

/// Breaks `text` at blanks so that no line takes more than `width` terminal columns. What stands in
/// backticks, square brackets or double quotes stays together where it fits on a line. A longer
/// word is broken between characters. O(length).
[[nodiscard]] std::vector<std::string> wrapped(std::string_view text, std::size_t width);

/// Collects paragraphs. All text passes through visible(): data can never steer the terminal.
class Page {
 public:
  Page(std::size_t width, bool colour) : width_(width), colour_(colour) {}

  void blank();
  /// A blank line and a line of its own.
  void heading(std::string_view text);
  void paragraph(std::string_view text, std::size_t indent = 0, Tone tone = Tone::plain);
  /// A label, then the text, all lines but the first aligned with the start of the text, which
  /// stands `label_width` columns behind the indent.
  void item(std::string_view label, std::size_t label_width, std::string_view text,
            std::size_t indent = 0, Tone tone = Tone::plain);
  /// A paragraph of at most `most` lines, all but the first `hanging` columns further in; if it is
  /// longer, `tail` stands in place of the rest.
  void cut(std::string_view text, std::size_t most, std::string_view tail, std::size_t indent = 0,
           std::size_t hanging = 0);

  [[nodiscard]] const std::string& text() const { return text_; }

 private:
  void line(std::size_t indent, const std::string& content, Tone tone);
  [[nodiscard]] std::string toned(const std::string& content, Tone tone) const;

  std::size_t width_;
  bool colour_;
  std::string text_;
};

}  // namespace gramproof::report
