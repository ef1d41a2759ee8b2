#include "design/decide.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "base/numeric.hpp"
#include "design/rows.hpp"

namespace gramproof::design {
namespace {

/// A double and a bound on its distance from the exact value; an infinite bound says that nothing
/// is known.
struct Bounded {
  double value = 0;
  double error = 0;
};

constexpr double unknown_error = std::numeric_limits<double>::infinity();

/// More than any product or quotient loses by underflow.
constexpr double underflow = 1e-307;

/// A bound computed from at most six roundings, each relative u: 16 u more covers them.
double rounded_up(double bound) {
  return bound * (1 + 16 * unit_roundoff);
}

Bounded sum(const Bounded& a, double sign, const Bounded& b) {
  const double value = a.value + sign * b.value;
  return {value, rounded_up(a.error + b.error + unit_roundoff * std::abs(value))};
}

Bounded product(const Bounded& a, const Bounded& b) {
  // Zero times an undefined value is undefined, not zero.
  if (std::isinf(a.error) || std::isinf(b.error)) return {0, unknown_error};
  const bool zero = (a.value == 0 && a.error == 0) || (b.value == 0 && b.error == 0);
  if (zero) return {0, 0};
  const double value = a.value * b.value;
  return {value, rounded_up(std::abs(a.value) * b.error + std::abs(b.value) * a.error +
                            a.error * b.error + unit_roundoff * std::abs(value)) +
                     underflow};
}

/// |a/b - a'/b'| <= (error of a + |a/b| error of b) / (|b| - error of b).
Bounded quotient(const Bounded& a, const Bounded& b) {
  const double least = std::abs(b.value) - b.error;
  if (!(least > 1e-290)) return {0, unknown_error};
  const double value = a.value / b.value;
  return {value,
          rounded_up((a.error + std::abs(value) * b.error) / (least * (1 - 4 * unit_roundoff)) +
                     unit_roundoff * std::abs(value)) +
              underflow};
}

Bounded power(Bounded base, int exponent) {
  if (std::isinf(base.error)) return base;
  Bounded result{1, 0};
  for (int left = std::abs(exponent); left > 0; left /= 2) {
    if (left % 2 == 1) result = product(result, base);
    if (left > 1) base = product(base, base);
  }
  return exponent >= 0 ? result : quotient({1, 0}, result);
}

/// A cell or number is its nearest double; whole numbers that a double holds are that double.
Bounded leaf(double value, std::int64_t mantissa, std::int32_t decimals) {
  const bool whole =
      decimals == 0 && value == static_cast<double>(mantissa) && std::abs(value) < 0x1p53;
  return {value, whole ? 0 : unit_roundoff * std::abs(value)};
}

Bounded bounded(const Expression& expression, const table::Piece& piece, std::size_t row);

Bounded extreme(const Expression& expression, const table::Piece& piece, std::size_t row) {
  Bounded result = bounded(*expression.operands[0], piece, row);
  for (std::size_t i = 1; i < expression.operands.size(); ++i) {
    const Bounded next = bounded(*expression.operands[i], piece, row);
    const bool least = expression.operation == Operation::minimum;
    result.value = least ? std::min(result.value, next.value) : std::max(result.value, next.value);
    result.error = std::max(result.error, next.error);
  }
  return result;
}

Bounded bounded(const Expression& expression, const table::Piece& piece, std::size_t row) {
  const auto operand = [&](std::size_t i) { return bounded(*expression.operands[i], piece, row); };
  switch (expression.operation) {
    case Operation::cell: {
      const table::PieceColumn& column = piece.columns[static_cast<std::size_t>(expression.column)];
      return leaf(column.value[row], column.mantissa[row], column.decimals[row]);
    }
    case Operation::number:
      return leaf(expression.number.value, expression.number.mantissa, expression.number.decimals);
    case Operation::row_number:
      return {static_cast<double>(piece.row[row]), 0};
    case Operation::add:
      return sum(operand(0), 1, operand(1));
    case Operation::subtract:
      return sum(operand(0), -1, operand(1));
    case Operation::multiply:
      return product(operand(0), operand(1));
    case Operation::divide:
      return quotient(operand(0), operand(1));
    case Operation::power:
      return power(operand(0), expression.exponent);
    case Operation::absolute: {
      const Bounded inside = operand(0);
      return {std::abs(inside.value), inside.error};
    }
    case Operation::minimum:
    case Operation::maximum:
      return extreme(expression, piece, row);
    default: {
      // Brackets, levels and logic are 0 or 1 without error.
      const auto value = exact_value(expression, piece, row);
      return value ? Bounded{value->get_d(), 0} : Bounded{0, unknown_error};
    }
  }
}

/// The leaf's exact number.
table::Number number_of(const Expression& expression, const table::Piece& piece, std::size_t row) {
  if (expression.operation == Operation::number) return expression.number;
  if (expression.operation == Operation::cell) {
    return piece.columns[static_cast<std::size_t>(expression.column)].number(row);
  }
  table::Number number;
  number.value = static_cast<double>(piece.row[row]);
  number.mantissa = static_cast<std::int64_t>(piece.row[row]);
  return number;
}

/// A leaf's double, and whether its decimals have at most 15 digits.
struct Leaf {
  double value = 0;
  bool is_short = false;
};

bool has_fifteen_digits(std::int64_t mantissa) {
  constexpr std::int64_t sixteen_digits = 1'000'000'000'000'000;
  return mantissa < sixteen_digits && mantissa > -sixteen_digits;
}

Leaf leaf_of(const Expression& expression, const table::Piece& piece, std::size_t row) {
  if (expression.operation == Operation::number) {
    const table::Number& number = expression.number;
    return {number.value, number.wide.empty() && has_fifteen_digits(number.mantissa)};
  }
  if (expression.operation == Operation::row_number) {
    return {static_cast<double>(piece.row[row]),
            has_fifteen_digits(static_cast<std::int64_t>(piece.row[row]))};
  }
  const table::PieceColumn& column = piece.columns[static_cast<std::size_t>(expression.column)];
  return {column.value[row], column.wide.empty() && has_fifteen_digits(column.mantissa[row])};
}

}  // namespace

bool is_leaf(const Expression& expression) {
  return expression.operation == Operation::cell || expression.operation == Operation::number ||
         expression.operation == Operation::row_number;
}

bool has_certain_zero(const Expression& expression) {
  if (is_leaf(expression)) return true;
  switch (expression.operation) {
    case Operation::multiply:
      return has_certain_zero(*expression.operands[0]) && has_certain_zero(*expression.operands[1]);
    case Operation::power:
    case Operation::absolute:
      return has_certain_zero(*expression.operands[0]);
    default:
      return expression.operation >= Operation::compare;
  }
}

int order_of_leaves(const Expression& left, const Expression& right, const table::Piece& piece,
                    std::size_t row) {
  // Rounding to nearest is monotone, so different doubles are in the order of the decimals. Equal
  // doubles with at most 15 digits each come from equal decimals: neighbouring 15-digit decimals
  // are further apart than doubles.
  const Leaf a = leaf_of(left, piece, row), b = leaf_of(right, piece, row);
  if (a.value != b.value) return a.value < b.value ? -1 : 1;
  if (a.is_short && b.is_short) return 0;
  return table::compare(number_of(left, piece, row), number_of(right, piece, row));
}

bool holds(Comparison comparison, int order) {
  switch (comparison) {
    case Comparison::equal:
      return order == 0;
    case Comparison::not_equal:
      return order != 0;
    case Comparison::less:
      return order < 0;
    case Comparison::less_equal:
      return order <= 0;
    case Comparison::greater:
      return order > 0;
    default:
      return order >= 0;
  }
}

std::optional<int> order_of(const Expression& left, const Expression& right,
                            const table::Piece& piece, std::size_t row) {
  if (is_leaf(left) && is_leaf(right)) {
    return order_of_leaves(left, right, piece, row);
  }
  const Bounded difference = sum(bounded(left, piece, row), -1, bounded(right, piece, row));
  if (std::abs(difference.value) > difference.error) return difference.value < 0 ? -1 : 1;
  if (difference.error == 0) return 0;
  const auto a = exact_value(left, piece, row);
  const auto b = a ? exact_value(right, piece, row) : std::nullopt;
  if (!b) return std::nullopt;
  return cmp(*a, *b) < 0 ? -1 : (cmp(*a, *b) > 0 ? 1 : 0);
}

bool is_certainly_not_zero(const Expression& expression, const table::Piece& piece,
                           std::size_t row) {
  const Bounded value = bounded(expression, piece, row);
  return std::abs(value.value) > value.error;
}

}  // namespace gramproof::design
