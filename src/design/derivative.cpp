// Partial derivatives by the rules of calculus, with the parts that vanish left out as they arise.
#include <utility>

#include "design/build.hpp"
#include "design/expression.hpp"

namespace gramproof::design {
namespace {

ExpressionPtr plus(ExpressionPtr left, ExpressionPtr right) {
  if (!left) return right;
  if (!right) return left;
  return make_operation(Operation::add, {std::move(left), std::move(right)});
}

ExpressionPtr minus(ExpressionPtr left, ExpressionPtr right) {
  if (!right) return left;
  if (!left) return make_negative(std::move(right));
  return make_operation(Operation::subtract, {std::move(left), std::move(right)});
}

ExpressionPtr times(ExpressionPtr left, ExpressionPtr right) {
  if (!left || !right) return nullptr;
  if (is_number(*left, 1)) return right;
  if (is_number(*right, 1)) return left;
  return make_operation(Operation::multiply, {std::move(left), std::move(right)});
}

ExpressionPtr over(ExpressionPtr left, ExpressionPtr right) {
  if (!left) return nullptr;
  return make_operation(Operation::divide, {std::move(left), std::move(right)});
}

ExpressionPtr of_quotient(const ExpressionPtr& expression, int column) {
  const ExpressionPtr& above = expression->operands[0];
  const ExpressionPtr& below = expression->operands[1];
  const ExpressionPtr above_slope = derivative(above, column);
  const ExpressionPtr below_slope = derivative(below, column);
  if (!below_slope) return over(above_slope, below);
  return over(minus(times(above_slope, below), times(above, below_slope)), make_power(below, 2));
}

ExpressionPtr of_power(const ExpressionPtr& expression, int column) {
  const int exponent = expression->exponent;
  const ExpressionPtr& base = expression->operands[0];
  ExpressionPtr slope = derivative(base, column);
  if (!slope || exponent == 0) return nullptr;
  if (exponent == 1) return slope;
  ExpressionPtr lower = exponent == 2 ? base : make_power(base, exponent - 1);
  return times(times(make_whole(exponent), std::move(lower)), std::move(slope));
}

/// sign(x) x': at x = 0 the brackets give 0, the middle of the two one-sided slopes.
ExpressionPtr of_absolute(const ExpressionPtr& inside, int column) {
  ExpressionPtr slope = derivative(inside, column);
  if (!slope) return nullptr;
  ExpressionPtr sign =
      make_operation(Operation::subtract, {make_compare(inside, Comparison::greater, make_whole(0)),
                                           make_compare(inside, Comparison::less, make_whole(0))});
  return times(std::move(sign), std::move(slope));
}

/// The sum of the operands' slopes, each times the bracket that says that it is the first to reach
/// the extreme.
ExpressionPtr of_extreme(const ExpressionPtr& expression, int column) {
  const bool least = expression->operation == Operation::minimum;
  const auto& operands = expression->operands;
  ExpressionPtr total;
  for (std::size_t i = 0; i < operands.size(); ++i) {
    ExpressionPtr slope = derivative(operands[i], column);
    if (!slope) continue;
    ExpressionPtr chosen;
    for (std::size_t j = 0; j < operands.size(); ++j) {
      if (j == i) continue;
      const Comparison strict = least ? Comparison::less : Comparison::greater;
      const Comparison weak = least ? Comparison::less_equal : Comparison::greater_equal;
      ExpressionPtr beats = make_compare(operands[i], j < i ? strict : weak, operands[j]);
      chosen =
          chosen ? make_operation(Operation::both, {chosen, std::move(beats)}) : std::move(beats);
    }
    total = plus(std::move(total), times(std::move(slope), std::move(chosen)));
  }
  return total;
}

/// x' / (2 sqrt(x)), and 0 at x = 0, where the slope has no bound: the bracket keeps the
/// denominator from zero there.
ExpressionPtr of_root(const ExpressionPtr& expression, int column) {
  const ExpressionPtr& inside = expression->operands[0];
  ExpressionPtr slope = derivative(inside, column);
  if (!slope) return nullptr;
  const ExpressionPtr zero = make_whole(0);
  ExpressionPtr below =
      plus(times(make_whole(2), expression), make_compare(inside, Comparison::equal, zero));
  ExpressionPtr above = times(make_compare(inside, Comparison::greater, zero), std::move(slope));
  return over(std::move(above), std::move(below));
}

}  // namespace

ExpressionPtr derivative(const ExpressionPtr& expression, int column) {
  const auto& operands = expression->operands;
  const auto slope_of = [&](std::size_t i) { return derivative(operands[i], column); };
  switch (expression->operation) {
    case Operation::cell:
      return expression->column == column ? make_whole(1) : nullptr;
    case Operation::add:
      return plus(slope_of(0), slope_of(1));
    case Operation::subtract:
      return minus(slope_of(0), slope_of(1));
    case Operation::multiply:
      return plus(times(slope_of(0), operands[1]), times(operands[0], slope_of(1)));
    case Operation::divide:
      return of_quotient(expression, column);
    case Operation::power:
      return of_power(expression, column);
    case Operation::absolute:
      return of_absolute(operands[0], column);
    case Operation::minimum:
    case Operation::maximum:
      return of_extreme(expression, column);
    case Operation::log:
      return over(slope_of(0), operands[0]);
    case Operation::sqrt:
      return of_root(expression, column);
    case Operation::exp:
      return times(expression, slope_of(0));
    case Operation::asinh: {
      ExpressionPtr inside = plus(make_power(operands[0], 2), make_whole(1));
      return over(slope_of(0), make_operation(Operation::sqrt, {std::move(inside)}));
    }
    default:
      // Numbers, the row number, brackets, levels and logic do not move with a cell.
      return nullptr;
  }
}

}  // namespace gramproof::design
