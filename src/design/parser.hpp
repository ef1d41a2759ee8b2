// src/design/parser.hpp - recursive descent over the tokens of a design.
//
//   design     = term { "," term }                      condition  = conjunction { "or" conjunction
//   } term       = sum                                    conjunction = denial { "and" denial } sum
//   = product { ("+" | "-") product }        denial     = "not" denial | comparison product    =
//   signed { ("*" | "/") signed }          comparison = sum [ ("=" | "!=" | "<" ... | "is" ["not"])
//   sum ] signed     = "-" signed | "+" signed | power        bracket    = "[" condition "]" power
//   = primary [ "^" whole number ]           primary    = number | name | "(" ... ")" | bracket |
//   function | set
//
// The first error is kept and ends the reading; a failed parser gives empty nodes.
#pragma once

#include <optional>
#include <string_view>
#include <vector>

#include "design/lexer.hpp"
#include "design/syntax.hpp"

namespace gramproof::design {

class Parser {
 public:
  Parser(const SourceText& source, std::vector<Token> tokens);

  std::vector<Node> design();
  Node whole_condition();
  Node whole_sum();
  [[nodiscard]] const std::optional<Error>& error() const { return error_; }

 private:
  [[nodiscard]] const Token& token() const { return tokens_[at_]; }
  [[nodiscard]] bool at_symbol(std::string_view symbol) const;
  [[nodiscard]] bool at_word(std::string_view word) const;
  [[nodiscard]] std::string here() const;
  bool take_symbol(std::string_view symbol);
  bool take_word(std::string_view word);
  bool expect(std::string_view symbol, std::string_view hint = {});
  [[nodiscard]] bool failed() const { return error_.has_value(); }
  Node fail(std::size_t at, std::string what, std::string hint = {});
  Node join(NodeKind kind, std::size_t at, Node left, Node right);
  bool enter(std::size_t at);
  void leave() { --depth_; }
  bool needs_number(const Node& node);
  bool needs_condition(const Node& node);

  Node sum();
  Node product();
  Node signed_power();
  Node power();
  Node condition();
  Node conjunction();
  Node denial();
  Node comparison();
  std::optional<Comparison> take_comparison();

  // parser_words.cpp
  Node primary();
  Node parenthesised();
  Node bracket();
  Node number();
  Node quoted_name();
  Node word();
  Node reserved_word();
  Node function(Function kind, std::size_t least, std::size_t most);
  Node set_of_levels(NodeKind kind);
  Node steps();
  Node quoted_argument(NodeKind kind);
  std::optional<Word> level();
  Node column_argument();
  bool read_exponent(int& exponent);

  const SourceText& source_;
  std::vector<Token> tokens_;
  std::size_t at_ = 0;
  int depth_ = 0;
  int operations_ = 0;
  int in_bracket_ = 0;  ///< parentheses inside a condition may hold a condition
  int bracket_depth_ = 0;
  std::optional<Error> error_;
};

}  // namespace gramproof::design
