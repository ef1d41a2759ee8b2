#include "design/bind.hpp"
#include "design/parser.hpp"
#include "design/syntax.hpp"

namespace gramproof::design {
namespace {

void add_columns_with_levels(const Node& node, std::vector<std::string>& names) {
  const bool has_levels = node.kind == NodeKind::levels || node.kind == NodeKind::all_levels ||
                          node.kind == NodeKind::steps;
  if (has_levels) names.push_back(node.operands[0].text);
  for (const Node& operand : node.operands) add_columns_with_levels(operand, names);
}

}  // namespace

Result<std::shared_ptr<const Syntax>> parse(const Request& request) {
  auto syntax = std::make_shared<Syntax>();
  syntax->design = {request.design, request.design_where};
  syntax->rows = {request.rows, "--rows"};
  Result<std::vector<Token>> tokens = tokens_of(syntax->design);
  if (!tokens) return tokens.error();
  Parser parser(syntax->design, std::move(tokens.value()));
  syntax->terms = parser.design();
  if (parser.error()) return *parser.error();
  if (request.rows.empty()) return std::shared_ptr<const Syntax>(std::move(syntax));

  Result<std::vector<Token>> condition_tokens = tokens_of(syntax->rows);
  if (!condition_tokens) return condition_tokens.error();
  Parser condition(syntax->rows, std::move(condition_tokens.value()));
  syntax->condition = condition.whole_condition();
  if (condition.error()) return *condition.error();
  return std::shared_ptr<const Syntax>(std::move(syntax));
}

Result<Node> parse_sum(const SourceText& source) {
  Result<std::vector<Token>> tokens = tokens_of(source);
  if (!tokens) return tokens.error();
  Parser parser(source, std::move(tokens.value()));
  Node node = parser.whole_sum();
  if (parser.error()) return *parser.error();
  return node;
}

std::vector<std::string> columns_with_levels(const Syntax& syntax) {
  std::vector<std::string> names;
  for (const Node& term : syntax.terms) add_columns_with_levels(term, names);
  return names;
}

}  // namespace gramproof::design
