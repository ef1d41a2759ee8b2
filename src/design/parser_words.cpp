// The parts of the grammar that begin with a word, a number, a quote or an opening mark.
#include <utility>

#include "design/parser.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

struct FunctionWord {
  std::string_view word;
  Function kind;
  std::size_t least, most;  ///< arguments
};

constexpr FunctionWord function_words[] = {
    {"log", Function::log, 1, 1},      {"sqrt", Function::sqrt, 1, 1},
    {"exp", Function::exp, 1, 1},      {"asinh", Function::asinh, 1, 1},
    {"abs", Function::absolute, 1, 1}, {"min", Function::minimum, 2, 64},
    {"max", Function::maximum, 2, 64}, {"hinge", Function::hinge, 2, 2},
};

/// Words of the language whose columns are not built.
constexpr std::string_view words_to_come[] = {"lag",  "difference", "effects",
                                              "year", "month",      "day_number"};

}  // namespace

Node Parser::primary() {
  if (failed()) return {};
  if (at_symbol("(")) return parenthesised();
  if (at_symbol("[")) return bracket();
  switch (token().kind) {
    case TokenKind::number:
      return number();
    case TokenKind::quoted:
      return quoted_name();
    case TokenKind::word:
      return word();
    default:
      return fail(token().at, "a column, a number or a function is expected before " + here());
  }
}

Node Parser::parenthesised() {
  if (!enter(token().at)) return {};
  const std::size_t at = token().at;
  ++at_;
  Node node = in_bracket_ > 0 ? condition() : sum();
  leave();
  if (!failed() && !at_symbol(")") && token().kind == TokenKind::end) {
    return fail(at, "this parenthesis is not closed");
  }
  expect(")");
  return failed() ? Node{} : node;
}

Node Parser::bracket() {
  if (!enter(token().at)) return {};
  Node node;
  node.kind = NodeKind::bracket;
  node.at = token().at;
  ++at_;
  ++in_bracket_;
  if (++bracket_depth_ > most_brackets) {
    return fail(node.at,
                "brackets are nested more than " + std::to_string(most_brackets) + " deep");
  }
  Node inside = condition();
  leave();
  --bracket_depth_;
  if (!failed() && token().kind == TokenKind::end)
    return fail(node.at, "this bracket is not closed");
  if (!needs_condition(inside)) return {};
  if (!expect("]")) return {};
  --in_bracket_;
  node.operands.push_back(std::move(inside));
  return node;
}

Node Parser::number() {
  Node node;
  node.kind = NodeKind::number;
  node.at = token().at;
  node.text = token().text;
  switch (table::parse_number(token().text, '.', node.number)) {
    case table::NumberStatus::number:
      ++at_;
      return node;
    case table::NumberStatus::too_long:
      return fail(node.at, "a number may have at most 1,000 significant digits");
    case table::NumberStatus::out_of_range:
      return fail(node.at, "the number is out of range",
                  "numbers lie between 1e-305 and 1e305 in size");
    default:
      return fail(node.at, here() + " is not a number");
  }
}

Node Parser::quoted_name() {
  Node node;
  node.kind = NodeKind::name;
  node.at = token().at;
  node.text = token().text;
  ++at_;
  return node;
}

Node Parser::word() {
  if (is_reserved(token().text)) return reserved_word();
  Node node = quoted_name();
  if (at_symbol("(")) {
    return fail(node.at, "no function is called `" + node.text + "`",
                "functions are log sqrt exp asinh abs min max hinge; a product is written *");
  }
  return node;
}

Node Parser::reserved_word() {
  const std::string taken = token().text;
  Node node;
  node.at = token().at;
  ++at_;
  if (taken == "constant" || taken == "rest") {
    node.kind = taken == "rest" ? NodeKind::rest : NodeKind::constant;
    return node;
  }
  if (taken == "row" && !at_symbol("(")) {
    node.kind = NodeKind::row;
    return node;
  }
  if (!at_symbol("(")) {
    return fail(node.at, "`" + taken + "` is a word of the design language",
                "a column of that name is written " + in_quotes(taken));
  }
  for (const std::string_view coming : words_to_come) {
    if (taken != coming) continue;
    return fail(node.at, "`" + taken + "` is not built yet",
                "make the column beforehand and name it here");
  }
  if (!enter(node.at)) return {};
  for (const FunctionWord& known : function_words) {
    if (taken != known.word) continue;
    node = function(known.kind, known.least, known.most);
  }
  if (taken == "levels") node = set_of_levels(NodeKind::levels);
  if (taken == "all_levels") node = set_of_levels(NodeKind::all_levels);
  if (taken == "steps") node = steps();
  if (taken == "columns") node = quoted_argument(NodeKind::columns);
  if (taken == "column") node = quoted_argument(NodeKind::column);
  leave();
  if (!failed() && node.operands.empty() && node.text.empty()) {
    return fail(node.at, "`" + taken + "` is no function",
                "a column of that name is written " + in_quotes(taken));
  }
  return failed() ? Node{} : node;
}

/// After the word of a function: its arguments in parentheses. Inside them a parenthesis is
/// arithmetic again.
Node Parser::function(Function kind, std::size_t least, std::size_t most) {
  Node node;
  node.kind = NodeKind::function;
  node.function = kind;
  node.at = tokens_[at_ - 1].at;
  const std::string name = tokens_[at_ - 1].text;
  const int outside = std::exchange(in_bracket_, 0);
  expect("(");
  do {
    Node argument = sum();
    if (failed()) return {};
    if (++operations_ > most_operations)
      return fail(node.at, "a term may have at most 1,000 operations");
    node.operands.push_back(std::move(argument));
  } while (take_symbol(","));
  in_bracket_ = outside;
  if (!expect(")")) return {};
  const std::size_t count = node.operands.size();
  if (count >= least && count <= most) return node;
  const std::string wanted =
      least == most ? (least == 1 ? "one argument" : "two arguments") : "2 to 64 arguments";
  return fail(node.at, "`" + name + "` takes " + wanted);
}

Node Parser::column_argument() {
  if (failed()) return {};
  if (token().kind == TokenKind::quoted) return quoted_name();
  if (token().kind == TokenKind::word && !is_reserved(token().text)) return quoted_name();
  if (token().kind == TokenKind::word && token().text != "column") return reserved_word();
  return fail(token().at, "the name of a column is expected before " + here());
}

Node Parser::set_of_levels(NodeKind kind) {
  Node node;
  node.kind = kind;
  node.at = tokens_[at_ - 1].at;
  expect("(");
  node.operands.push_back(column_argument());
  if (failed()) return {};
  if (kind == NodeKind::levels && take_symbol(",")) {
    if (!take_word("against")) {
      return fail(token().at, "`against = ` and a level is expected before " + here());
    }
    expect("=");
    const auto against = level();
    if (!against) return {};
    node.words.push_back(*against);
  }
  expect(")");
  return failed() ? Node{} : node;
}

Node Parser::steps() {
  Node node;
  node.kind = NodeKind::steps;
  node.at = tokens_[at_ - 1].at;
  expect("(");
  node.operands.push_back(column_argument());
  expect(",", "steps lists the levels from low to high, as in steps(grade, low < mid < high)");
  do {
    const auto next = level();
    if (!next) return {};
    node.words.push_back(*next);
    if (++operations_ > most_operations)
      return fail(node.at, "`steps` may list at most 1,000 levels");
  } while (take_symbol("<"));
  if (!expect(")")) return {};
  if (node.words.size() >= 2) return node;
  return fail(node.at, "`steps` needs two levels or more", "as in steps(grade, low < mid < high)");
}

std::optional<Word> Parser::level() {
  if (failed()) return std::nullopt;
  Word word{token().at, token().text};
  const bool minus = take_symbol("-");
  if (minus) word.text += token().text;
  const bool plain = !minus && (token().kind == TokenKind::quoted ||
                                (token().kind == TokenKind::word && !is_reserved(token().text)));
  if (plain || token().kind == TokenKind::number) {
    ++at_;
    return word;
  }
  const bool reserved = token().kind == TokenKind::word;
  fail(token().at, "a level is expected before " + here(),
       reserved ? "a level of that name is quoted" : "");
  return std::nullopt;
}

/// column("b") or columns("share_*").
Node Parser::quoted_argument(NodeKind kind) {
  Node node;
  node.kind = kind;
  node.at = tokens_[at_ - 1].at;
  expect("(");
  if (failed()) return {};
  if (token().kind != TokenKind::quoted || token().text.empty()) {
    const bool pattern = kind == NodeKind::columns;
    return fail(
        token().at,
        std::string(pattern ? "a pattern" : "a name") + " in quotes is expected before " + here(),
        pattern ? "as in columns(\"share_*\")" : "as in column(\"b\")");
  }
  node.text = token().text;
  ++at_;
  expect(")");
  return failed() ? Node{} : node;
}

}  // namespace gramproof::design
