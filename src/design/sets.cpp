#include "design/sets.hpp"

#include <algorithm>
#include <limits>
#include <numeric>
#include <utility>

#include "base/text.hpp"
#include "design/build.hpp"
#include "design/canonical.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

constexpr std::uint64_t beyond_count = std::numeric_limits<std::uint64_t>::max();

std::uint64_t product_of(std::uint64_t a, std::uint64_t b) {
  std::uint64_t product = 0;
  return __builtin_mul_overflow(a, b, &product) ? beyond_count : product;
}

std::uint64_t sum_of(std::uint64_t a, std::uint64_t b) {
  std::uint64_t sum = 0;
  return __builtin_add_overflow(a, b, &sum) ? beyond_count : sum;
}

/// `*` stands for any run of characters, `?` for one. O(pattern * name), without recursion.
bool matches_pattern(std::string_view pattern, std::string_view name) {
  std::size_t p = 0, n = 0, star = std::string_view::npos, resume = 0;
  while (n < name.size()) {
    if (p < pattern.size() && pattern[p] == '*') {
      star = p++;
      resume = n;
    } else if (p < pattern.size() && (pattern[p] == '?' || pattern[p] == name[n])) {
      // `?` takes a whole UTF-8 character.
      const bool any = pattern[p] == '?';
      ++p;
      ++n;
      while (any && n < name.size() && (static_cast<unsigned char>(name[n]) & 0xC0) == 0x80) ++n;
    } else if (star != std::string_view::npos) {
      p = star + 1;
      n = ++resume;
    } else {
      return false;
    }
  }
  return std::all_of(pattern.begin() + static_cast<std::ptrdiff_t>(p), pattern.end(),
                     [](char c) { return c == '*'; });
}

std::string listed(const std::vector<std::string>& names) {
  std::string text;
  for (std::size_t i = 0; i < names.size() && i < 5; ++i)
    text += (i > 0 ? ", " : "") + in_quotes(names[i]);
  if (names.size() > 5) text += " and " + grouped(names.size() - 5) + " more";
  return text;
}

}  // namespace

std::vector<int> listing_order(const table::ColumnFacts& facts) {
  std::vector<int> order(facts.levels.size());
  std::iota(order.begin(), order.end(), 0);
  const bool numeric = facts.kind == table::ColumnKind::numeric;
  std::sort(order.begin(), order.end(), [&](int a, int b) {
    const table::Level& left = facts.levels[static_cast<std::size_t>(a)];
    const table::Level& right = facts.levels[static_cast<std::size_t>(b)];
    if (!numeric) return left.text < right.text;
    if (left.value.value != right.value.value) return left.value.value < right.value.value;
    return table::compare(left.value, right.value) < 0;
  });
  return order;
}

std::uint64_t SetMaker::count_table_column(int column, std::size_t at) {
  if (binder_.facts(column).kind == table::ColumnKind::numeric) return 1;
  return binder_.has_listed_levels(column, at) ? binder_.facts(column).levels.size() : 0;
}

std::uint64_t SetMaker::count(const Node& node) {
  if (binder_.failed()) return 0;
  switch (node.kind) {
    case NodeKind::levels:
    case NodeKind::all_levels: {
      const Node& name = node.operands[0];
      const int column = binder_.column(name.at, name.text);
      if (column < 0 || !binder_.has_listed_levels(column, name.at)) return 0;
      return binder_.facts(column).levels.size() - (node.words.empty() ? 0 : 1);
    }
    case NodeKind::steps:
      return node.words.size() - 1;
    case NodeKind::columns: {
      std::uint64_t total = 0;
      for (const int column : matches(node))
        total = sum_of(total, count_table_column(column, node.at));
      return total;
    }
    case NodeKind::multiply: {
      if (!is_set(node)) return 1;
      const std::uint64_t left = count(node.operands[0]);
      return product_of(left, count(node.operands[1]));
    }
    default:
      return 1;
  }
}

SetOfColumns SetMaker::make(const Node& node) {
  if (binder_.failed()) return {};
  switch (node.kind) {
    case NodeKind::constant:
      return {{{make_whole(1), {}}}, "constant", false};
    case NodeKind::levels:
    case NodeKind::all_levels:
      return levels(node);
    case NodeKind::steps:
      return steps(node);
    case NodeKind::columns:
      return matching(node);
    case NodeKind::multiply:
      if (is_set(node)) return product(node);
      [[fallthrough]];
    default: {
      ExpressionPtr definition = binder_.number(node);
      if (!definition) return {};
      std::string text = canonical_text(*definition, binder_.schema());
      return {{{std::move(definition), {}}}, std::move(text), false};
    }
  }
}

int SetMaker::level_set(int column, bool leave_one_out, int against) {
  for (std::size_t s = 0; s < design_.level_sets.size(); ++s) {
    const LevelSet& set = design_.level_sets[s];
    const bool same =
        set.column == column && set.leave_one_out == leave_one_out && set.against == against;
    if (same) return static_cast<int>(s);
  }
  design_.level_sets.push_back(
      {column, leave_one_out, against, listing_order(binder_.facts(column))});
  return static_cast<int>(design_.level_sets.size()) - 1;
}

ExpressionPtr SetMaker::bracket(int column, int level) const {
  const table::ColumnFacts& facts = binder_.facts(column);
  if (facts.kind == table::ColumnKind::text) return make_is_level(column, level);
  return make_compare(make_cell(column), Comparison::equal,
                      make_number(facts.levels[static_cast<std::size_t>(level)].value));
}

/// The level left out by the analyst's word gives no column, not even a provisional one.
void SetMaker::add_levels(int set, SetOfColumns& to) const {
  const LevelSet& known = design_.level_sets[static_cast<std::size_t>(set)];
  for (const int level : known.order) {
    if (level == known.against) continue;
    to.columns.push_back({bracket(known.column, level), {{set, level}}});
  }
}

SetOfColumns SetMaker::levels(const Node& node) {
  const Node& name = node.operands[0];
  const int column = binder_.column(name.at, name.text);
  if (column < 0 || !binder_.has_listed_levels(column, name.at)) return {};
  const bool numeric = binder_.facts(column).kind == table::ColumnKind::numeric;
  if (numeric && !binder_.is_usable_number(column, name.at)) return {};
  SetOfColumns made;
  const bool leave_one_out = node.kind == NodeKind::levels;
  made.text = (leave_one_out ? "levels(" : "all_levels(") + quoted_if_needed(name.text);
  int against = -1;
  if (!node.words.empty()) {
    against = binder_.level(column, node.words[0]);
    if (against < 0) return {};
    const std::string& text = binder_.facts(column).levels[static_cast<std::size_t>(against)].text;
    made.text += ", against = " + (numeric ? text : quoted_if_needed(text));
  }
  made.text += ")";
  add_levels(level_set(column, leave_one_out, against), made);
  return made;
}

/// Levels as listed by the analyst: each known, none twice, all that the file has.
std::vector<int> SetMaker::levels_of_steps(const Node& node, int column) {
  const table::ColumnFacts& facts = binder_.facts(column);
  std::vector<int> order;
  for (const Word& word : node.words) {
    const int level = binder_.level(column, word);
    if (level < 0) return {};
    if (std::find(order.begin(), order.end(), level) != order.end()) {
      binder_.fail(word.at, "the level " + in_quotes(word.text) + " is listed twice");
      return {};
    }
    order.push_back(level);
  }
  std::vector<std::string> absent;
  for (const int level : listing_order(facts)) {
    if (std::find(order.begin(), order.end(), level) == order.end()) {
      absent.push_back(facts.levels[static_cast<std::size_t>(level)].text);
    }
  }
  if (absent.empty()) return order;
  binder_.fail(node.at, "steps must list all levels of " + in_quotes(facts.name) + ": " +
                            listed(absent) + (absent.size() == 1 ? " is" : " are") + " absent");
  return {};
}

SetOfColumns SetMaker::steps(const Node& node) {
  const Node& name = node.operands[0];
  const int column = binder_.column(name.at, name.text);
  if (column < 0 || !binder_.has_listed_levels(column, name.at)) return {};
  const bool numeric = binder_.facts(column).kind == table::ColumnKind::numeric;
  if (numeric && !binder_.is_usable_number(column, name.at)) return {};
  const std::vector<int> order = levels_of_steps(node, column);
  if (binder_.failed()) return {};
  SetOfColumns made;
  made.text = "steps(" + quoted_if_needed(name.text) + ", ";
  for (std::size_t i = 0; i < order.size(); ++i) {
    const std::string& text = binder_.facts(column).levels[static_cast<std::size_t>(order[i])].text;
    made.text += (i > 0 ? " < " : "") + (numeric ? text : quoted_if_needed(text));
  }
  made.text += ")";
  for (std::size_t i = 1; i < order.size(); ++i) {
    ExpressionPtr at_least = bracket(column, order[i]);
    for (std::size_t j = i + 1; j < order.size(); ++j) {
      at_least = make_operation(Operation::add, {std::move(at_least), bracket(column, order[j])});
    }
    made.columns.push_back({std::move(at_least), {}});
  }
  return made;
}

std::vector<int> SetMaker::matches(const Node& node) {
  std::vector<int> found;
  std::vector<std::string> names;
  for (std::size_t c = 0; c < binder_.schema().columns.size(); ++c) {
    const std::string& name = binder_.schema().columns[c].name;
    names.push_back(name);
    const int column = static_cast<int>(c);
    const bool reserved_role = column == design_.response || column == design_.weight;
    if (!reserved_role && !name.empty() && matches_pattern(node.text, name))
      found.push_back(column);
  }
  if (found.empty()) {
    binder_.fail(node.at,
                 "no column matches " + in_quotes(node.text) + " in " + binder_.data_name(),
                 did_you_mean(node.text, names));
  }
  return found;
}

void SetMaker::add_table_column(int column, std::size_t at, SetOfColumns& set) {
  if (binder_.facts(column).kind == table::ColumnKind::text) {
    if (binder_.has_listed_levels(column, at)) add_levels(level_set(column, true, -1), set);
  } else if (binder_.is_usable_number(column, at)) {
    set.columns.push_back({make_cell(column), {}});
  }
}

SetOfColumns SetMaker::matching(const Node& node) {
  SetOfColumns made;
  made.text = "columns(" + in_quotes(node.text) + ")";
  for (const int column : matches(node)) add_table_column(column, node.at, made);
  return made;
}

/// Every pair, the left factor turning slowest.
SetOfColumns SetMaker::product(const Node& node) {
  const auto text_of = [&](const SetOfColumns& factor, const Node& from, bool on_the_right) {
    if (!is_set(from))
      return text_of_factor(*factor.columns[0].definition, binder_.schema(), on_the_right);
    return factor.is_product && on_the_right ? "(" + factor.text + ")" : factor.text;
  };
  for (const Node& operand : node.operands) {
    if (operand.kind == NodeKind::constant || operand.kind == NodeKind::rest)
      return binder_.number(operand), SetOfColumns{};
  }
  const SetOfColumns left = make(node.operands[0]);
  const SetOfColumns right = make(node.operands[1]);
  if (binder_.failed()) return {};
  SetOfColumns made;
  made.is_product = true;
  made.text =
      text_of(left, node.operands[0], false) + " * " + text_of(right, node.operands[1], true);
  for (const SetColumn& a : left.columns) {
    for (const SetColumn& b : right.columns) {
      SetColumn both{make_operation(Operation::multiply, {a.definition, b.definition}), a.levels};
      both.levels.insert(both.levels.end(), b.levels.begin(), b.levels.end());
      made.columns.push_back(std::move(both));
    }
  }
  return made;
}

}  // namespace gramproof::design
