#include "report/page.hpp"

#include <algorithm>

#include "base/text.hpp"

namespace gramproof::report {
namespace {

/// True where `letter` opens or closes a group that should stay on one line.
class Group {
 public:
  void take(char letter) {
    if (letter == '`' && depth_ == 0 && !quoted_) ticked_ = !ticked_;
    if (ticked_) return;
    if (letter == '"') quoted_ = !quoted_;
    if (quoted_) return;
    if (letter == '[') ++depth_;
    if (letter == ']' && depth_ > 0) --depth_;
  }
  [[nodiscard]] bool open() const { return ticked_ || quoted_ || depth_ > 0; }

 private:
  bool ticked_ = false;
  bool quoted_ = false;
  int depth_ = 0;
};

std::vector<std::string> words(std::string_view text, bool keep_groups) {
  std::vector<std::string> found;
  std::string word;
  Group group;
  for (const char letter : text) {
    group.take(letter);
    if (letter == ' ' && !(keep_groups && group.open())) {
      if (!word.empty()) found.push_back(word);
      word.clear();
    } else {
      word += letter;
    }
  }
  if (!word.empty()) found.push_back(word);
  return found;
}

/// The longest beginning of `word` that takes at most `width` columns (at least one character).
std::size_t fitting_bytes(std::string_view word, std::size_t width) {
  std::size_t bytes = 0;
  std::size_t at = 0;
  while (at < word.size()) {
    std::size_t next = at + 1;
    while (next < word.size() && (static_cast<unsigned char>(word[next]) & 0xC0) == 0x80) ++next;
    if (display_width(word.substr(0, next)) > width && bytes > 0) break;
    bytes = next;
    at = next;
  }
  return bytes;
}

class Lines {
 public:
  explicit Lines(std::size_t width) : width_(width) {}

  void add(const std::string& word) {
    const std::size_t size = display_width(word);
    if (size > width_) {
      add_long(word);
      return;
    }
    if (!line_.empty() && used_ + 1 + size > width_) flush();
    if (!line_.empty()) {
      line_ += ' ';
      ++used_;
    }
    line_ += word;
    used_ += size;
  }

  std::vector<std::string> finish() {
    flush();
    return std::move(lines_);
  }

 private:
  void add_long(const std::string& word) {
    const std::vector<std::string> parts = words(word, false);
    if (parts.size() > 1) {
      for (const std::string& part : parts) add(part);
      return;
    }
    flush();
    std::string_view rest = word;
    while (display_width(rest) > width_) {
      const std::size_t bytes = fitting_bytes(rest, width_);
      lines_.emplace_back(rest.substr(0, bytes));
      rest.remove_prefix(bytes);
    }
    add(std::string(rest));
  }

  void flush() {
    if (!line_.empty()) lines_.push_back(line_);
    line_.clear();
    used_ = 0;
  }

  std::size_t width_;
  std::size_t used_ = 0;
  std::string line_;
  std::vector<std::string> lines_;
};

}  // namespace

std::vector<std::string> wrapped(std::string_view text, std::size_t width) {
  Lines lines(std::max<std::size_t>(width, 1));
  for (const std::string& word : words(text, true)) lines.add(word);
  return lines.finish();
}

void Page::blank() {
  if (!text_.empty()) text_ += '\n';
}

void Page::heading(std::string_view text) {
  blank();
  paragraph(text, 0, Tone::strong);
}

void Page::paragraph(std::string_view text, std::size_t indent, Tone tone) {
  for (const std::string& part : wrapped(visible(text), width_ - indent)) line(indent, part, tone);
}

void Page::item(std::string_view label, std::size_t label_width, std::string_view text,
                std::size_t indent, Tone tone) {
  const std::string shown = visible(label);
  const std::size_t size = display_width(shown);
  bool first = true;
  for (const std::string& part : wrapped(visible(text), width_ - indent - label_width)) {
    if (first) {
      const std::size_t gap = size < label_width ? label_width - size : 1;
      line(indent, toned(shown, tone) + std::string(gap, ' ') + part, Tone::plain);
    } else {
      line(indent + label_width, part, Tone::plain);
    }
    first = false;
  }
}

void Page::cut(std::string_view text, std::size_t most, std::string_view tail, std::size_t indent,
               std::size_t hanging) {
  // The first line is wrapped like the others and starts further left, so that it stays shorter.
  const std::vector<std::string> parts = wrapped(visible(text), width_ - indent - hanging);
  const bool fits = parts.size() <= most;
  const std::size_t told = fits ? parts.size() : most - 1;
  for (std::size_t i = 0; i < told; ++i)
    line(i == 0 ? indent : indent + hanging, parts[i], Tone::plain);
  if (!fits) paragraph(tail, indent + hanging);
}

void Page::line(std::size_t indent, const std::string& content, Tone tone) {
  text_ += std::string(indent, ' ') + toned(content, tone) + '\n';
}

std::string Page::toned(const std::string& content, Tone tone) const {
  if (!colour_ || tone == Tone::plain) return content;
  // Hues that people who confuse red and green tell apart; the words alone carry the meaning.
  const char* start = "\x1b[1m";
  if (tone == Tone::good) start = "\x1b[36m";
  if (tone == Tone::warning) start = "\x1b[33m";
  if (tone == Tone::bad) start = "\x1b[1;35m";
  return start + content + "\x1b[0m";
}

}  // namespace gramproof::report
