// tests/design/random_tree.hpp - seeded random expression trees over given columns.
#pragma once

#include <random>
#include <vector>

#include "design/build.hpp"

namespace gramproof::test {

/// Draws trees as the parser can make them. Draws use the generator's bits only, so that a seed
/// means the same everywhere.
class RandomTree {
 public:
  struct Choices {
    std::vector<int> numeric;     ///< numeric table columns
    int text = -1;                ///< a text column, or -1
    int levels = 0;               ///< its number of levels
    bool transcendental = false;  ///< log, sqrt, exp, asinh
    bool brackets = true;
  };

  RandomTree(std::uint64_t seed, Choices choices) : bits_(seed), choices_(std::move(choices)) {}

  int below(int bound) { return static_cast<int>(bits_() % static_cast<std::uint64_t>(bound)); }

  design::ExpressionPtr number(int depth) {
    using design::Operation;
    if (depth == 0) return leaf();
    const int kind = below(choices_.transcendental ? 14 : 12);
    switch (kind) {
      case 0:
      case 1:
        return leaf();
      case 2:
      case 3:
        return pair(Operation::add, depth);
      case 4:
        return pair(Operation::subtract, depth);
      case 5:
      case 6:
        return pair(Operation::multiply, depth);
      case 7:
        return pair(Operation::divide, depth);
      case 8:
        return design::make_power(number(depth - 1), below(6) - 2);
      case 9:
        return design::make_operation(Operation::absolute, {number(depth - 1)});
      case 10: {
        const Operation extreme = below(2) == 0 ? Operation::minimum : Operation::maximum;
        return design::make_operation(extreme, {number(depth - 1), number(depth - 1)});
      }
      case 11:
        return choices_.brackets ? condition(depth - 1) : design::make_negative(number(depth - 1));
      default: {
        constexpr Operation functions[] = {Operation::log, Operation::sqrt, Operation::exp,
                                           Operation::asinh};
        return design::make_operation(functions[below(4)], {number(depth - 1)});
      }
    }
  }

  design::ExpressionPtr condition(int depth) {
    using design::Operation;
    const int kind = below(depth == 0 ? 2 : 5);
    if (kind == 0 && choices_.text >= 0)
      return design::make_is_level(choices_.text, below(choices_.levels));
    if (kind <= 1) {
      const auto comparison = static_cast<design::Comparison>(below(6));
      return design::make_compare(number(depth == 0 ? 0 : depth - 1), comparison,
                                  number(depth == 0 ? 0 : depth - 1));
    }
    if (kind == 2) return design::make_operation(Operation::negation, {condition(depth - 1)});
    return design::make_operation(kind == 3 ? Operation::both : Operation::either,
                                  {condition(depth - 1), condition(depth - 1)});
  }

 private:
  design::ExpressionPtr pair(design::Operation operation, int depth) {
    auto left = number(depth - 1);
    return design::make_operation(operation, {std::move(left), number(depth - 1)});
  }

  design::ExpressionPtr leaf() {
    if (below(3) > 0)
      return design::make_cell(
          choices_
              .numeric[static_cast<std::size_t>(below(static_cast<int>(choices_.numeric.size())))]);
    table::Number number;
    const std::string text = std::to_string(below(41) - 20) + (below(2) == 0 ? ".5" : "");
    (void)table::parse_number(text, '.', number);
    return design::make_number(number);
  }

  std::mt19937_64 bits_;
  Choices choices_;
};

}  // namespace gramproof::test
