#include "design/parser.hpp"

#include <utility>

#include "base/text.hpp"
#include "design/words.hpp"

namespace gramproof::design {

Parser::Parser(const SourceText& source, std::vector<Token> tokens)
    : source_(source), tokens_(std::move(tokens)) {}

bool Parser::at_symbol(std::string_view symbol) const {
  return token().kind == TokenKind::symbol && token().text == symbol;
}

bool Parser::at_word(std::string_view word) const {
  return token().kind == TokenKind::word && token().text == word;
}

/// The token at hand as messages name it.
std::string Parser::here() const {
  if (token().kind == TokenKind::end) return "the end of the text";
  return token().kind == TokenKind::quoted ? in_quotes(token().text) : "`" + token().text + "`";
}

bool Parser::take_symbol(std::string_view symbol) {
  if (failed() || !at_symbol(symbol)) return false;
  ++at_;
  return true;
}

bool Parser::take_word(std::string_view word) {
  if (failed() || !at_word(word)) return false;
  ++at_;
  return true;
}

bool Parser::expect(std::string_view symbol, std::string_view hint) {
  if (failed()) return false;
  if (take_symbol(symbol)) return true;
  const bool is_comparison =
      token().kind == TokenKind::symbol &&
      std::string_view("=!=<=>=").find(token().text) != std::string_view::npos;
  if (hint.empty() && in_bracket_ == 0 && (is_comparison || at_word("is"))) {
    hint = "comparisons stand in brackets, as in [age >= 65]";
  }
  fail(token().at, "`" + std::string(symbol) + "` is expected before " + here(), std::string(hint));
  return false;
}

Node Parser::fail(std::size_t at, std::string what, std::string hint) {
  if (!failed()) error_ = source_.error(at, std::move(what), std::move(hint));
  return {};
}

Node Parser::join(NodeKind kind, std::size_t at, Node left, Node right) {
  if (failed()) return {};
  if (++operations_ > most_operations) {
    return fail(at, "a term may have at most " + grouped(most_operations) + " operations");
  }
  Node node;
  node.kind = kind;
  node.at = left.at;
  node.operands.push_back(std::move(left));
  node.operands.push_back(std::move(right));
  return node;
}

bool Parser::enter(std::size_t at) {
  if (++depth_ <= most_nesting) return !failed();
  fail(at, "nested more than " + std::to_string(most_nesting) + " deep");
  return false;
}

bool Parser::needs_number(const Node& node) {
  if (failed()) return false;
  if (!is_condition(node)) return true;
  fail(node.at, "a comparison cannot be a part of arithmetic as it stands",
       "put it in brackets, as in [age >= 65]");
  return false;
}

bool Parser::needs_condition(const Node& node) {
  if (failed()) return false;
  if (is_condition(node)) return true;
  fail(node.at, "a comparison is expected here", "as in age >= 65");
  return false;
}

std::vector<Node> Parser::design() {
  std::vector<Node> terms;
  if (token().kind == TokenKind::end) fail(token().at, "the design is empty");
  while (!failed()) {
    if (at_symbol(",") || token().kind == TokenKind::end) {
      fail(token().at, "a term is expected before " + here());
    }
    operations_ = 0;
    Node term = sum();
    if (failed()) break;
    terms.push_back(std::move(term));
    if (token().kind == TokenKind::end) break;
    expect(",");
  }
  return terms;
}

Node Parser::whole_condition() {
  in_bracket_ = 1;
  Node node = condition();
  if (!needs_condition(node)) return {};
  if (token().kind == TokenKind::end) return node;
  return fail(token().at, "the condition should end before " + here(),
              "comparisons are joined by and, or");
}

Node Parser::whole_sum() {
  Node node = sum();
  if (failed() || token().kind == TokenKind::end) return node;
  return fail(token().at, "`+` or `-` is expected before " + here());
}

Node Parser::sum() {
  Node left = product();
  while (!failed() && (at_symbol("+") || at_symbol("-"))) {
    const NodeKind kind = at_symbol("+") ? NodeKind::add : NodeKind::subtract;
    const std::size_t at = token().at;
    ++at_;
    Node right = product();
    if (!needs_number(left) || !needs_number(right)) return {};
    left = join(kind, at, std::move(left), std::move(right));
  }
  return left;
}

Node Parser::product() {
  Node left = signed_power();
  while (!failed() && (at_symbol("*") || at_symbol("/"))) {
    const NodeKind kind = at_symbol("*") ? NodeKind::multiply : NodeKind::divide;
    const std::size_t at = token().at;
    ++at_;
    Node right = signed_power();
    if (!needs_number(left) || !needs_number(right)) return {};
    left = join(kind, at, std::move(left), std::move(right));
  }
  return left;
}

Node Parser::signed_power() {
  if (!at_symbol("-") && !at_symbol("+")) return power();
  const std::size_t at = token().at;
  const bool minus = at_symbol("-");
  ++at_;
  if (!enter(at)) return {};
  Node operand = signed_power();
  leave();
  if (!needs_number(operand)) return {};
  if (!minus) return operand;
  Node node;
  node.kind = NodeKind::negative;
  node.at = at;
  node.operands.push_back(std::move(operand));
  return node;
}

Node Parser::power() {
  Node base = primary();
  if (failed() || !at_symbol("^")) return base;
  ++at_;
  if (!needs_number(base)) return {};
  Node node;
  node.kind = NodeKind::power;
  node.at = base.at;
  if (!read_exponent(node.exponent)) return {};
  if (at_symbol("^")) {
    return fail(token().at, "a power of a power needs parentheses", "as in (x^2)^3");
  }
  node.operands.push_back(std::move(base));
  return node;
}

bool Parser::read_exponent(int& exponent) {
  const std::size_t at = token().at;
  const bool negative = take_symbol("-");
  const std::string limit = "an exponent is a whole number from -64 to 64";
  table::Number number;
  if (token().kind != TokenKind::number) {
    fail(at, limit, at_symbol("(") ? "write x^-1 without parentheses" : "");
    return false;
  }
  const auto status = table::parse_number(token().text, '.', number);
  const bool whole =
      status == table::NumberStatus::number && number.wide.empty() &&
      number.value == static_cast<int>(number.value >= 0 && number.value <= 64 ? number.value : -1);
  if (!whole) {
    fail(at, limit, "not " + std::string(negative ? "-" : "") + token().text);
    return false;
  }
  exponent = static_cast<int>(negative ? -number.value : number.value);
  ++at_;
  return true;
}

Node Parser::condition() {
  Node left = conjunction();
  while (!failed() && at_word("or")) {
    const std::size_t at = token().at;
    ++at_;
    Node right = conjunction();
    if (!needs_condition(left) || !needs_condition(right)) return {};
    left = join(NodeKind::either, at, std::move(left), std::move(right));
  }
  return left;
}

Node Parser::conjunction() {
  Node left = denial();
  while (!failed() && at_word("and")) {
    const std::size_t at = token().at;
    ++at_;
    Node right = denial();
    if (!needs_condition(left) || !needs_condition(right)) return {};
    left = join(NodeKind::both, at, std::move(left), std::move(right));
  }
  return left;
}

Node Parser::denial() {
  if (!at_word("not")) return comparison();
  Node node;
  node.kind = NodeKind::negation;
  node.at = token().at;
  ++at_;
  if (!enter(node.at)) return {};
  node.operands.push_back(denial());
  leave();
  return needs_condition(node.operands[0]) ? node : Node{};
}

std::optional<Comparison> Parser::take_comparison() {
  if (take_symbol("=")) return Comparison::equal;
  if (take_symbol("!=")) return Comparison::not_equal;
  if (take_symbol("<")) return Comparison::less;
  if (take_symbol("<=")) return Comparison::less_equal;
  if (take_symbol(">")) return Comparison::greater;
  if (take_symbol(">=")) return Comparison::greater_equal;
  if (!take_word("is")) return std::nullopt;
  return take_word("not") ? Comparison::not_equal : Comparison::equal;
}

Node Parser::comparison() {
  Node left = sum();
  if (failed()) return {};
  const std::size_t at = token().at;
  const auto taken = take_comparison();
  if (!taken) return left;
  Node right = sum();
  if (!needs_number(left) || !needs_number(right)) return {};
  Node node = join(NodeKind::compare, at, std::move(left), std::move(right));
  node.comparison = *taken;
  if (!failed() && take_comparison()) {
    return fail(tokens_[at_ - 1].at, "comparisons cannot be chained",
                "as in [age > 17 and age < 65]");
  }
  return node;
}

}  // namespace gramproof::design
