#include "design/binder.hpp"

#include <algorithm>
#include <utility>

#include "base/text.hpp"
#include "design/build.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

Operation operation_of(NodeKind kind) {
  switch (kind) {
    case NodeKind::add:
      return Operation::add;
    case NodeKind::subtract:
      return Operation::subtract;
    case NodeKind::multiply:
      return Operation::multiply;
    default:
      return Operation::divide;
  }
}

Operation operation_of(Function function) {
  switch (function) {
    case Function::log:
      return Operation::log;
    case Function::sqrt:
      return Operation::sqrt;
    case Function::exp:
      return Operation::exp;
    case Function::asinh:
      return Operation::asinh;
    case Function::absolute:
      return Operation::absolute;
    case Function::minimum:
      return Operation::minimum;
    default:
      return Operation::maximum;
  }
}

}  // namespace

std::string did_you_mean(const std::string& word, const std::vector<std::string>& candidates) {
  const auto nearest = nearest_name(word, candidates);
  return nearest ? "did you mean " + in_quotes(*nearest) + "?" : "";
}

std::string known_names(const std::string& word, const std::string& kind,
                        const std::vector<std::string>& names) {
  constexpr std::size_t most_listed = 6;
  const std::string near = did_you_mean(word, names);
  if (!near.empty() || names.empty()) return near;
  std::string list = kind + ": ";
  for (std::size_t i = 0; i < std::min(names.size(), most_listed); ++i) {
    list += (i == 0 ? "" : ", ") + quoted_if_needed(names[i]);
  }
  if (names.size() > most_listed) list += " and " + grouped(names.size() - most_listed) + " more";
  return list;
}

Result<int> find_column(const table::Schema& schema, const std::string& data_name,
                        const std::string& where, const std::string& name) {
  if (const auto found = schema.find(name)) return static_cast<int>(*found);
  std::vector<std::string> names;
  for (const table::ColumnFacts& facts : schema.columns) names.push_back(facts.name);
  return Error{ErrorKind::design, where, "no column " + in_quotes(name) + " in " + data_name,
               known_names(name, "its columns", names)};
}

Binder::Binder(const table::Schema& schema, std::string data_name, const SourceText& source,
               bool row_allowed)
    : schema_(schema),
      data_name_(std::move(data_name)),
      source_(source),
      row_allowed_(row_allowed) {}

void Binder::fail(Error error) {
  if (!failed()) error_ = std::move(error);
}

void Binder::fail(std::size_t at, std::string what, std::string hint) {
  fail(source_.error(at, std::move(what), std::move(hint)));
}

int Binder::column(std::size_t at, const std::string& name) {
  Result<int> found = find_column(schema_, data_name_, source_.where(at), name);
  if (found) return found.value();
  fail(found.error());
  return -1;
}

bool Binder::has_listed_levels(int column, std::size_t at) {
  if (!facts(column).levels_cut) return true;
  fail(at, "column " + in_quotes(facts(column).name) + " has at least " +
               grouped(facts(column).distinct_at_least) + " distinct values, too many to list");
  return false;
}

int Binder::level(int column, const Word& word) {
  if (!has_listed_levels(column, word.at)) return -1;
  const table::ColumnFacts& known = facts(column);
  if (known.kind == table::ColumnKind::text) {
    const auto found = known.code_of.find(word.text);
    if (found != known.code_of.end()) return found->second;
  }
  table::Number number;
  const bool can_match = known.kind == table::ColumnKind::numeric &&
                         table::parse_number(word.text, '.', number) == table::NumberStatus::number;
  std::vector<std::string> texts;
  for (std::size_t i = 0; i < known.levels.size(); ++i) {
    const table::Level& level = known.levels[i];
    if (can_match && table::compare(level.value, number) == 0) return static_cast<int>(i);
    texts.push_back(level.text);
  }
  fail(word.at, "no level " + in_quotes(word.text) + " in column " + in_quotes(known.name),
       known_names(word.text, "its levels", texts));
  return -1;
}

void Binder::text_is_no_number(int column, std::size_t at) {
  const table::ColumnFacts& text = facts(column);
  const std::string name = in_quotes(text.name);
  if (text.numbers * 2 > text.present && text.first_not_number) {
    fail(at,
         name + " is text: " + counted(text.present - text.numbers, "cell is", "cells are") +
             " no number, first " + in_quotes(text.first_not_number->text) + " at " +
             text.first_not_number->where,
         "--missing names the cells that count as missing");
    return;
  }
  fail(at, name + " is a text column where a number is needed",
       "levels(" + quoted_if_needed(text.name) + ") gives a column for each level");
}

bool Binder::is_usable_number(int column, std::size_t at) {
  const table::ColumnFacts& known = facts(column);
  if (known.kind == table::ColumnKind::text) {
    text_is_no_number(column, at);
    return false;
  }
  if (known.first_out_of_range) {
    fail({ErrorKind::data, known.first_out_of_range->where,
          "the number " + in_quotes(known.first_out_of_range->text) + " in column " +
              in_quotes(known.name) + " is out of range",
          "numbers lie between 1e-305 and 1e305 in size"});
    return false;
  }
  return true;
}

ExpressionPtr Binder::number(const Node& node) {
  if (failed()) return nullptr;
  switch (node.kind) {
    case NodeKind::name:
    case NodeKind::column: {
      const int found = column(node.at, node.text);
      return found >= 0 && is_usable_number(found, node.at) ? make_cell(found) : nullptr;
    }
    case NodeKind::number:
      return make_number(node.number);
    case NodeKind::row:
      if (row_allowed_) return make_row_number();
      fail(node.at, "`row` has a meaning in --rows only",
           "a column of that name is written \"row\"");
      return nullptr;
    case NodeKind::constant:
      fail(node.at, "`constant` stands alone as a term", "in arithmetic, write the number 1");
      return nullptr;
    case NodeKind::negative: {
      ExpressionPtr operand = number(node.operands[0]);
      return operand ? make_negative(std::move(operand)) : nullptr;
    }
    case NodeKind::add:
    case NodeKind::subtract:
    case NodeKind::multiply:
    case NodeKind::divide:
      return operation(operation_of(node.kind), node);
    case NodeKind::power: {
      ExpressionPtr base = number(node.operands[0]);
      return base ? make_power(std::move(base), node.exponent) : nullptr;
    }
    case NodeKind::function:
      return function(node);
    case NodeKind::bracket:
      return condition(node.operands[0]);
    case NodeKind::rest:
      fail(node.at, "`rest` stands alone as a term");
      return nullptr;
    default:
      fail(node.at, "a set of columns stands where one column is needed",
           "sets are terms of their own or parts of a product");
      return nullptr;
  }
}

ExpressionPtr Binder::operation(Operation operation, const Node& node) {
  ExpressionPtr left = number(node.operands[0]);
  ExpressionPtr right = left ? number(node.operands[1]) : nullptr;
  if (!right) return nullptr;
  if (operation == Operation::divide && is_number(*right, 0)) {
    fail(node.operands[1].at, "division by zero");
    return nullptr;
  }
  return make_operation(operation, {std::move(left), std::move(right)});
}

ExpressionPtr Binder::function(const Node& node) {
  std::vector<ExpressionPtr> operands;
  for (const Node& operand : node.operands) {
    operands.push_back(number(operand));
    if (failed()) return nullptr;
  }
  if (node.function == Function::hinge) return make_hinge(operands[0], operands[1]);
  return make_operation(operation_of(node.function), std::move(operands));
}

}  // namespace gramproof::design
