#include "design/lexer.hpp"

#include "base/text.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

bool is_digit(char c) {
  return c >= '0' && c <= '9';
}

bool is_blank(char c) {
  return c == ' ' || c == '\t' || c == '\n' || c == '\r';
}

class Lexer {
 public:
  explicit Lexer(const SourceText& source) : source_(source), text_(source.text) {}

  Result<std::vector<Token>> run() {
    if (const auto bad = first_invalid_utf8(text_)) {
      return source_.error(*bad, "the text is not valid UTF-8 from here on", "save it as UTF-8");
    }
    if (text_.substr(0, 3) == "\xEF\xBB\xBF") at_ = 3;
    while (skip_blanks(), at_ < text_.size()) {
      Result<Token> token = next();
      if (!token) return token.error();
      tokens_.push_back(std::move(token.value()));
    }
    tokens_.push_back({TokenKind::end, text_.size(), ""});
    return std::move(tokens_);
  }

 private:
  void skip_blanks() {
    while (at_ < text_.size() && (is_blank(text_[at_]) || text_[at_] == '#')) {
      if (text_[at_] != '#') {
        ++at_;
        continue;
      }
      at_ = std::min(text_.find('\n', at_), text_.size());
    }
  }

  Result<Token> next() {
    const char c = text_[at_];
    const bool number =
        is_digit(c) || (c == '.' && at_ + 1 < text_.size() && is_digit(text_[at_ + 1]));
    if (number) return take_number();
    if (c == '"') return take_quoted();
    if (name_bytes_at(text_, at_) > 0) return take_word();
    return take_symbol();
  }

  Result<Token> take_number() {
    const std::size_t start = at_;
    take_digits();
    if (at_ < text_.size() && text_[at_] == '.') ++at_;
    take_digits();
    std::size_t exponent = at_;
    if (exponent < text_.size() && (text_[exponent] == 'e' || text_[exponent] == 'E')) {
      ++exponent;
      if (exponent < text_.size() && (text_[exponent] == '+' || text_[exponent] == '-')) ++exponent;
      if (exponent < text_.size() && is_digit(text_[exponent])) {
        at_ = exponent;
        take_digits();
      }
    }
    if (name_bytes_at(text_, at_) > 0) {
      return source_.error(start, "a name cannot begin with a digit",
                           "put the name in quotes, or write * between a number and a name");
    }
    return Token{TokenKind::number, start, std::string(text_.substr(start, at_ - start))};
  }

  void take_digits() {
    while (at_ < text_.size() && is_digit(text_[at_])) ++at_;
  }

  Result<Token> take_quoted() {
    const std::size_t start = at_++;
    std::string content;
    while (at_ < text_.size()) {
      if (text_[at_] != '"') {
        content += text_[at_++];
      } else if (at_ + 1 < text_.size() && text_[at_ + 1] == '"') {
        content += '"';
        at_ += 2;
      } else {
        ++at_;
        return Token{TokenKind::quoted, start, content};
      }
    }
    return source_.error(start, "this quote is not closed",
                         "a quote inside a name is written twice");
  }

  Result<Token> take_word() {
    const std::size_t start = at_;
    while (const std::size_t bytes = name_bytes_at(text_, at_)) at_ += bytes;
    return Token{TokenKind::word, start, std::string(text_.substr(start, at_ - start))};
  }

  Result<Token> take_symbol() {
    const std::size_t start = at_;
    const std::string_view two = text_.substr(at_, 2);
    if (two == "!=" || two == "<=" || two == ">=") {
      at_ += 2;
      return Token{TokenKind::symbol, start, std::string(two)};
    }
    if (std::string_view("+-*/^(),[]=<>").find(text_[at_]) != std::string_view::npos) {
      ++at_;
      return Token{TokenKind::symbol, start, std::string(text_.substr(start, 1))};
    }
    return stray_character(start);
  }

  Error stray_character(std::size_t start) const {
    std::size_t end = start + 1;
    while (end < text_.size() && (static_cast<unsigned char>(text_[end]) & 0xC0) == 0x80) ++end;
    const std::string character(text_.substr(start, end - start));
    std::string hint;
    if (character == "!") hint = "\"not equal\" is written != or is not";
    if (character == "'" || character.substr(0, 2) == "\xE2\x80") {
      hint = "names with blanks or signs stand in straight double quotes";
    }
    if (character == "\xE2\x88\x92" || character == "\xC3\x97" || character == "\xC3\xB7") {
      hint = "arithmetic is written + - * / ^";
    }
    if (character == ":" || character == ";" || character == "~" || character == "|") {
      hint = "terms are parted by commas, products are written *";
    }
    return source_.error(start, "the character " + in_quotes(character) + " has no meaning here",
                         hint);
  }

  const SourceText& source_;
  std::string_view text_;
  std::size_t at_ = 0;
  std::vector<Token> tokens_;
};

}  // namespace

Result<std::vector<Token>> tokens_of(const SourceText& source) {
  return Lexer(source).run();
}

}  // namespace gramproof::design
