// Exact values of trees in one row, in rational arithmetic (GMP).
#include <cstdlib>

#include "design/decide.hpp"
#include "design/rows.hpp"

namespace gramproof::design {
namespace {

using Value = std::optional<mpq_class>;

mpz_class power_of_ten(std::int32_t exponent) {
  mpz_class power;
  mpz_ui_pow_ui(power.get_mpz_t(), 10, static_cast<unsigned long>(exponent));
  return power;
}

mpq_class rational(const mpz_class& mantissa, std::int32_t decimals) {
  if (decimals <= 0) return mpq_class(mantissa * power_of_ten(-decimals));
  mpq_class value(mantissa, power_of_ten(decimals));
  value.canonicalize();
  return value;
}

Value power_of(const mpq_class& base, int exponent) {
  if (exponent < 0 && base == 0) return std::nullopt;
  mpz_class above, below;
  const auto times = static_cast<unsigned long>(std::abs(exponent));
  mpz_pow_ui(above.get_mpz_t(), base.get_num().get_mpz_t(), times);
  mpz_pow_ui(below.get_mpz_t(), base.get_den().get_mpz_t(), times);
  mpq_class value = exponent < 0 ? mpq_class(below, above) : mpq_class(above, below);
  value.canonicalize();
  return value;
}

Value truth(bool holds) {
  return mpq_class(holds ? 1 : 0);
}

Value compared(const Expression& expression, const table::Piece& piece, std::size_t row) {
  const Expression& left = *expression.operands[0];
  const Expression& right = *expression.operands[1];
  if (is_exact(left) && is_exact(right)) {
    const auto order = order_of(left, right, piece, row);
    return order ? truth(holds(expression.comparison, *order)) : std::nullopt;
  }
  const double value = evaluate(expression, piece, {row})[0];
  return value == value ? truth(value != 0) : std::nullopt;
}

Value arithmetic(Operation operation, const mpq_class& left, const mpq_class& right) {
  switch (operation) {
    case Operation::add:
      return mpq_class(left + right);
    case Operation::subtract:
      return mpq_class(left - right);
    case Operation::multiply:
      return mpq_class(left * right);
    case Operation::divide:
      return right == 0 ? Value() : Value(mpq_class(left / right));
    case Operation::minimum:
      return right < left ? right : left;
    case Operation::maximum:
      return right > left ? right : left;
    case Operation::both:
      return truth(left != 0 && right != 0);
    default:
      return truth(left != 0 || right != 0);
  }
}

/// Operations that take their operands from left to right, two at a time.
Value folded(const Expression& expression, const table::Piece& piece, std::size_t row) {
  Value value = exact_value(*expression.operands[0], piece, row);
  for (std::size_t i = 1; value && i < expression.operands.size(); ++i) {
    const Value next = exact_value(*expression.operands[i], piece, row);
    if (!next) return std::nullopt;
    value = arithmetic(expression.operation, *value, *next);
  }
  return value;
}

Value text_holds(const Expression& expression, const table::Piece& piece, std::size_t row) {
  const std::int32_t code = piece.columns[static_cast<std::size_t>(expression.column)].code[row];
  if (expression.operation == Operation::is_level)
    return truth(code >= 0 && code == expression.level);
  const std::int32_t other =
      piece.columns[static_cast<std::size_t>(expression.other_column)].code[row];
  return truth(code >= 0 && (*expression.same_level)[static_cast<std::size_t>(code)] == other &&
               other >= 0);
}

}  // namespace

mpq_class exact_number(const table::Number& number) {
  const mpz_class mantissa =
      number.wide.empty() ? mpz_class(static_cast<long>(number.mantissa)) : mpz_class(number.wide);
  return rational(mantissa, number.decimals);
}

std::optional<mpq_class> exact_value(const Expression& expression, const table::Piece& piece,
                                     std::size_t row) {
  switch (expression.operation) {
    case Operation::cell: {
      const table::PieceColumn& column = piece.columns[static_cast<std::size_t>(expression.column)];
      if (column.wide.empty())
        return rational(mpz_class(static_cast<long>(column.mantissa[row])), column.decimals[row]);
      return exact_number(column.number(row));
    }
    case Operation::number:
      return exact_number(expression.number);
    case Operation::row_number:
      return mpq_class(static_cast<unsigned long>(piece.row[row]));
    case Operation::power: {
      const Value base = exact_value(*expression.operands[0], piece, row);
      return base ? power_of(*base, expression.exponent) : std::nullopt;
    }
    case Operation::absolute: {
      const Value inside = exact_value(*expression.operands[0], piece, row);
      return inside ? Value(mpq_class(abs(*inside))) : std::nullopt;
    }
    case Operation::negation: {
      const Value inside = exact_value(*expression.operands[0], piece, row);
      return inside ? truth(*inside == 0) : std::nullopt;
    }
    case Operation::compare:
      return compared(expression, piece, row);
    case Operation::is_level:
    case Operation::same_text:
      return text_holds(expression, piece, row);
    case Operation::log:
    case Operation::sqrt:
    case Operation::exp:
    case Operation::asinh:
      return std::nullopt;
    default:
      return folded(expression, piece, row);
  }
}

}  // namespace gramproof::design
