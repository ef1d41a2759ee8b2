// src/design/syntax.hpp - the parse tree of a design: what was written and where, before any name
// is looked up.
#pragma once

#include <cstddef>
#include <cstdint>
#include <memory>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include "base/result.hpp"
#include "design/bind.hpp"
#include "design/expression.hpp"

namespace gramproof::design {

/// Deepest nesting of parentheses, brackets, functions and signs, and most operations of one term:
/// with both, the depth of every tree and so of every recursion over trees is bounded.
inline constexpr int most_nesting = 64;
inline constexpr int most_operations = 1000;
inline constexpr int largest_exponent = 64;

/// Deepest nesting of brackets in brackets: a comparison near a tie evaluates its operands twice,
/// so each level may double the work.
inline constexpr int most_brackets = 8;

enum class NodeKind : std::uint8_t {
  name,
  number,
  constant,
  row,
  rest,
  columns,     ///< text: the pattern
  levels,      ///< operand 0: the column; words: the level after `against =`, if any
  all_levels,  ///< operand 0: the column
  steps,       ///< operand 0: the column; words: the levels, ascending
  column,      ///< column("b"); text: the name
  negative,    ///< -operand
  add,
  subtract,
  multiply,
  divide,
  power,
  function,
  bracket,  ///< operand 0: a condition
  compare,  ///< the kinds from here on are conditions
  both,
  either,
  negation,
};

enum class Function : std::uint8_t { log, sqrt, exp, asinh, absolute, minimum, maximum, hinge };

/// A level as written: a plain word, a quoted text or a number.
struct Word {
  std::size_t at = 0;
  std::string text;
};

struct Node {
  NodeKind kind = NodeKind::number;
  std::size_t at = 0;  ///< byte in the text, from 0
  std::string text;    ///< name, pattern, or number as written
  Function function = Function::log;
  Comparison comparison = Comparison::equal;
  int exponent = 1;
  table::Number number;
  std::vector<Node> operands;
  std::vector<Word> words;
};

[[nodiscard]] inline bool is_condition(const Node& node) {
  return node.kind >= NodeKind::compare;
}

/// True for sets of columns: levels, steps, columns, rest, and products that hold one.
[[nodiscard]] bool is_set(const Node& node);

/// A text of the analyst and how messages name a place in it.
struct SourceText {
  std::string text;
  std::string name;  ///< an option ("--design") or a file

  /// "--design:14" (character, from 1) or "design.txt:2:5" (line and character).
  [[nodiscard]] std::string where(std::size_t at) const;
  [[nodiscard]] Error error(std::size_t at, std::string what, std::string hint = {}) const;
};

struct Syntax {
  SourceText design;
  SourceText rows;
  std::vector<Node> terms;
  std::optional<Node> condition;
};

/// One arithmetic expression (a contrast). Errors: as parse().
[[nodiscard]] Result<Node> parse_sum(const SourceText& source);

}  // namespace gramproof::design
