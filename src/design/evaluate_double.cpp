// Values of trees in doubles, one operation over all rows at a time.
#include <cmath>
#include <limits>

#include "design/decide.hpp"
#include "design/rows.hpp"

namespace gramproof::design {
namespace {

constexpr double undefined = std::numeric_limits<double>::quiet_NaN();
constexpr double tiny = std::numeric_limits<double>::denorm_min();

/// A product or power that underflows to zero must not be taken for a zero: the smallest double
/// stands for it and fails every later check of the range.
double kept_from_zero(double value, bool is_zero, bool negative) {
  return value == 0 && !is_zero ? (negative ? -tiny : tiny) : value;
}

double whole_power(double base, int exponent) {
  if (base != base) return undefined;
  if (exponent == 0) return 1;
  if (base == 0) return exponent < 0 ? undefined : 0;
  double value = 0;
  switch (exponent) {
    case 1:
      return base;
    case 3:
      value = base * base * base;
      break;
    case -1:
      value = 1 / base;
      break;
    default:
      value = std::pow(base, exponent);
  }
  return kept_from_zero(value, false, base < 0 && exponent % 2 != 0);
}

double function_value(Operation operation, double x) {
  switch (operation) {
    case Operation::absolute:
      return std::abs(x);
    case Operation::log:
      return x > 0 ? std::log(x) : undefined;
    case Operation::sqrt:
      return x >= 0 ? std::sqrt(x) : undefined;
    case Operation::exp:
      return kept_from_zero(std::exp(x), false, false);
    case Operation::asinh:
      return std::asinh(x);
    default:
      return x == 0 ? 1.0 : (x == x ? 0.0 : undefined);  // negation
  }
}

double pair_value(Operation operation, double a, double b) {
  switch (operation) {
    case Operation::divide:
      return b == 0 ? undefined
                    : kept_from_zero(a / b, a == 0 || std::isinf(b),
                                     std::signbit(a) != std::signbit(b));
    case Operation::minimum:
      return b < a || b != b ? b : a;
    case Operation::maximum:
      return b > a || b != b ? b : a;
    case Operation::both:
      return a != a || b != b ? undefined : static_cast<double>(a != 0 && b != 0);
    default:
      return a != a || b != b ? undefined : static_cast<double>(a != 0 || b != 0);
  }
}

class Evaluator {
 public:
  Evaluator(const table::Piece& piece, const std::vector<std::size_t>& rows)
      : piece_(piece), rows_(rows), size_(static_cast<Index>(rows.size())) {}

  void into(const Expression& expression, double* out) const {
    switch (expression.operation) {
      case Operation::cell:
        return gather(piece_.columns[static_cast<std::size_t>(expression.column)].value, out);
      case Operation::number:
        return fill(out, expression.number.value);
      case Operation::row_number:
        for (Index i = 0; i < size_; ++i) out[i] = static_cast<double>(piece_.row[row(i)]);
        return;
      case Operation::is_level:
      case Operation::same_text:
        return text_holds(expression, out);
      case Operation::compare:
        return compared(expression, out);
      case Operation::power:
        decided_operand(expression, expression.exponent < 0, out);
        if (expression.exponent == 2) return square(out);
        for (Index i = 0; i < size_; ++i) out[i] = whole_power(out[i], expression.exponent);
        return;
      case Operation::log:
      case Operation::sqrt:
      case Operation::exp:
      case Operation::asinh:
      case Operation::absolute:
      case Operation::negation: {
        const bool sign_matters =
            expression.operation == Operation::log || expression.operation == Operation::sqrt;
        decided_operand(expression, sign_matters, out);
        for (Index i = 0; i < size_; ++i) out[i] = function_value(expression.operation, out[i]);
        return;
      }
      default:
        return folded(expression, out);
    }
  }

 private:
  [[nodiscard]] std::size_t row(Index i) const { return rows_[static_cast<std::size_t>(i)]; }

  void fill(double* out, double value) const { std::fill(out, out + size_, value); }

  void gather(const std::vector<double>& from, double* out) const {
    if (rows_.size() == piece_.rows) {
      std::copy(from.begin(), from.end(), out);
      return;
    }
    for (Index i = 0; i < size_; ++i) out[i] = from[row(i)];
  }

  void text_holds(const Expression& expression, double* out) const {
    const auto& code = piece_.columns[static_cast<std::size_t>(expression.column)].code;
    if (expression.operation == Operation::is_level) {
      const std::int32_t level =
          expression.level >= 0 ? expression.level : std::numeric_limits<std::int32_t>::min();
      for (Index i = 0; i < size_; ++i) out[i] = code[row(i)] == level ? 1.0 : 0.0;
      return;
    }
    const auto& other = piece_.columns[static_cast<std::size_t>(expression.other_column)].code;
    const auto& same = *expression.same_level;
    for (Index i = 0; i < size_; ++i) {
      const std::int32_t here = code[row(i)];
      const bool equal =
          here >= 0 && other[row(i)] >= 0 && same[static_cast<std::size_t>(here)] == other[row(i)];
      out[i] = equal ? 1.0 : 0.0;
    }
  }

  void square(double* out) const {
    for (Index i = 0; i < size_; ++i) {
      const double value = out[i] * out[i];
      const bool underflow = (value == 0) & (out[i] != 0);
      out[i] = underflow ? tiny : value;
    }
  }

  /// The first operand; where its sign or its zero decides something and doubles cannot tell, its
  /// exact value rounded.
  void decided_operand(const Expression& expression, bool sign_matters, double* out) const {
    into(*expression.operands[0], out);
    if (sign_matters) decide(*expression.operands[0], out);
  }

  void decide(const Expression& operand, double* values) const {
    if (has_certain_zero(operand) || !is_exact(operand)) return;
    for (Index i = 0; i < size_; ++i) {
      if (is_certainly_not_zero(operand, piece_, row(i))) continue;
      const auto exact = exact_value(operand, piece_, row(i));
      values[i] = exact ? kept_from_zero(exact->get_d(), *exact == 0, *exact < 0) : undefined;
    }
  }

  void compared(const Expression& expression, double* out) const {
    const Expression& left = *expression.operands[0];
    const Expression& right = *expression.operands[1];
    if (is_leaf(left) && is_leaf(right)) {
      for (Index i = 0; i < size_; ++i) {
        const int order = order_of_leaves(left, right, piece_, row(i));
        out[i] = holds(expression.comparison, order) ? 1.0 : 0.0;
      }
      return;
    }
    if (is_exact(left) && is_exact(right)) {
      for (Index i = 0; i < size_; ++i) {
        const auto order = order_of(left, right, piece_, row(i));
        out[i] = order ? static_cast<double>(holds(expression.comparison, *order)) : undefined;
      }
      return;
    }
    into(left, out);
    Vector other(size_);
    into(right, other.data());
    for (Index i = 0; i < size_; ++i) {
      const double a = out[i], b = other[i];
      const int order = a < b ? -1 : (a > b ? 1 : 0);
      out[i] =
          a != a || b != b ? undefined : static_cast<double>(holds(expression.comparison, order));
    }
  }

  void folded(const Expression& expression, double* out) const {
    into(*expression.operands[0], out);
    Vector next(size_);
    for (std::size_t o = 1; o < expression.operands.size(); ++o) {
      const Expression& operand = *expression.operands[o];
      into(operand, next.data());
      if (expression.operation == Operation::divide) decide(operand, next.data());
      combine(expression.operation, next.data(), out);
    }
  }

  void combine(Operation operation, const double* next, double* out) const {
    switch (operation) {
      case Operation::add:
        for (Index i = 0; i < size_; ++i) out[i] += next[i];
        return;
      case Operation::subtract:
        for (Index i = 0; i < size_; ++i) out[i] -= next[i];
        return;
      case Operation::multiply:
        for (Index i = 0; i < size_; ++i) {
          const double value = out[i] * next[i];
          const bool underflow = (value == 0) & (out[i] != 0) & (next[i] != 0);
          out[i] = underflow ? tiny : value;
        }
        return;
      default:
        for (Index i = 0; i < size_; ++i) out[i] = pair_value(operation, out[i], next[i]);
    }
  }

  const table::Piece& piece_;
  const std::vector<std::size_t>& rows_;
  Index size_;
};

}  // namespace

Vector evaluate(const Expression& expression, const table::Piece& piece,
                const std::vector<std::size_t>& rows) {
  Vector values(static_cast<Index>(rows.size()));
  Evaluator(piece, rows).into(expression, values.data());
  return values;
}

}  // namespace gramproof::design
