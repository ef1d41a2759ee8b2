// src/recheck/formula.hpp - a document's definition tree, evaluated on the cells of a row.
#pragma once

#include <gmpxx.h>

#include <cstddef>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include <nlohmann/json.hpp>

#include "base/result.hpp"

namespace gramproof::recheck {

using Json = nlohmann::json;

/// The table columns that are read, each with its place in a row's cells.
class CellPlaces {
 public:
  std::size_t place_of(const std::string& column);  ///< added if it is new
  [[nodiscard]] const std::vector<std::string>& columns() const { return columns_; }

 private:
  std::map<std::string, std::size_t> places_;
  std::vector<std::string> columns_;
};

/// What is known of a value without floating point.
struct Value {
  enum class State {
    rational,    ///< `number`
    undefined,   ///< a zero denominator, the logarithm of a number that is not positive
    irrational,  ///< defined, but made with log, sqrt, exp or asinh
    unsettled,   ///< may be undefined: a denominator or logarithm of something irrational
    not_number,  ///< a cell that should be a number is none
    too_large,   ///< a power of over 10,000,000 bits, where GMP could end the program
  };
  State state = State::rational;
  mpq_class number;
};

struct RowCells {
  const std::vector<std::string>* texts = nullptr;  ///< by place, none missing where it is read
  char decimal_mark = '.';
  unsigned long row = 0;
  /// Numbers read in this row, so that a cell is read once; as long as `texts`, cleared a row.
  std::vector<std::optional<Value>>* numbers = nullptr;
};

/// The tree in postfix order. Trees may be 50,000 deep, so that nothing here recurses.
class Formula {
 public:
  /// Errors: a node that is none of those of the document.
  [[nodiscard]] static Result<Formula> compile(const Json& tree, CellPlaces& places);
  /// No log, sqrt, exp or asinh in it.
  [[nodiscard]] bool is_rational() const { return rational_; }
  /// Places of the columns it reads, each once.
  [[nodiscard]] const std::vector<std::size_t>& reads() const { return reads_; }
  [[nodiscard]] Value evaluate(const RowCells& cells) const;

 private:
  enum class Kind {
    cell,
    number,
    row,
    add,
    subtract,
    multiply,
    divide,
    power,
    irrational_everywhere,
    log,
    sqrt,
    compare,
    level,
    same_text,
    both,
    either,
    negation
  };
  struct Node {
    Kind kind = Kind::number;
    std::size_t operands = 0;
    std::size_t place = 0, other_place = 0;
    long exponent = 0;
    std::string text;  ///< of a level or a comparison
    mpq_class number;
  };
  struct Compiler;
  static Value apply(const Node& node, const Value* operands);

  std::vector<Node> nodes_;
  std::vector<std::size_t> reads_;
  bool rational_ = true;
};

}  // namespace gramproof::recheck
