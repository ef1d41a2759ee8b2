// What stands in brackets: comparisons of numbers, of a text column with a level, of two text
// columns, and their logic.
#include <utility>

#include "design/binder.hpp"
#include "design/build.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

bool names_a_column(const Node& node) {
  return node.kind == NodeKind::name || node.kind == NodeKind::column;
}

/// A level beside a text column: a plain word, a quoted text, or a number as it was written.
std::optional<Word> level_word(const Node& node) {
  if (node.kind == NodeKind::name || node.kind == NodeKind::number) return Word{node.at, node.text};
  if (node.kind == NodeKind::negative && node.operands[0].kind == NodeKind::number) {
    return Word{node.at, "-" + node.operands[0].text};
  }
  return std::nullopt;
}

}  // namespace

ExpressionPtr Binder::condition(const Node& node) {
  if (failed()) return nullptr;
  if (node.kind == NodeKind::compare) return comparison(node);
  std::vector<ExpressionPtr> operands;
  for (const Node& operand : node.operands) {
    operands.push_back(condition(operand));
    if (failed()) return nullptr;
  }
  switch (node.kind) {
    case NodeKind::both:
      return make_operation(Operation::both, std::move(operands));
    case NodeKind::either:
      return make_operation(Operation::either, std::move(operands));
    default:
      return make_operation(Operation::negation, std::move(operands));
  }
}

ExpressionPtr Binder::comparison(const Node& node) {
  const Node& left = node.operands[0];
  const Node& right = node.operands[1];
  if (names_a_column(left)) {
    const auto found = schema_.find(left.text);
    if (found && facts(static_cast<int>(*found)).kind == table::ColumnKind::text) {
      return text_comparison(node, static_cast<int>(*found));
    }
    const auto other = names_a_column(right) ? schema_.find(right.text) : std::nullopt;
    if (!found && other && facts(static_cast<int>(*other)).kind == table::ColumnKind::text) {
      fail(left.at, "no column " + in_quotes(left.text) + " in " + data_name_,
           "the column stands on the left: " + quoted_if_needed(right.text) + " = " +
               quoted_if_needed(left.text));
      return nullptr;
    }
  }
  ExpressionPtr below = number(left);
  ExpressionPtr above = below ? number(right) : nullptr;
  return above ? make_compare(std::move(below), node.comparison, std::move(above)) : nullptr;
}

ExpressionPtr Binder::text_comparison(const Node& node, int column) {
  const Node& right = node.operands[1];
  const std::string name = in_quotes(facts(column).name);
  if (node.comparison != Comparison::equal && node.comparison != Comparison::not_equal) {
    fail(node.operands[0].at, name + " is a text column: its levels have no order",
         "compare it with = or !=; steps() makes ordered levels");
    return nullptr;
  }
  ExpressionPtr equal;
  if (right.kind == NodeKind::column) {
    const int other = this->column(right.at, right.text);
    if (other < 0) return nullptr;
    if (facts(other).kind != table::ColumnKind::text) {
      fail(right.at, name + " is a text column, " + in_quotes(right.text) +
                         " a numeric one: they cannot be compared");
      return nullptr;
    }
    if (!has_listed_levels(column, node.operands[0].at) || !has_listed_levels(other, right.at))
      return nullptr;
    equal = make_same_text(column, other, schema_);
  } else {
    const auto word = level_word(right);
    if (!word) {
      fail(right.at, "a level of " + name + " is expected here",
           "a level that is not a plain word is quoted");
      return nullptr;
    }
    const int found = level(column, *word);
    if (found < 0) return nullptr;
    equal = make_is_level(column, found);
  }
  if (node.comparison == Comparison::equal) return equal;
  return make_operation(Operation::negation, {std::move(equal)});
}

}  // namespace gramproof::design
