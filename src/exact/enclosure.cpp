// src/exact/enclosure.cpp
#include "exact/enclosure.hpp"

#include <algorithm>

#include "design/rows.hpp"

namespace gramproof::exact {
namespace {

using design::Expression;
using design::Operation;

bool is_statement(Operation operation) {
  switch (operation) {
    case Operation::compare:
    case Operation::both:
    case Operation::either:
    case Operation::negation:
      return true;
    default:
      return false;
  }
}

void combine(Operation operation, Interval& value, const Interval& next) {
  switch (operation) {
    case Operation::add:
      value += next;
      return;
    case Operation::subtract:
      value -= next;
      return;
    case Operation::multiply:
      value *= next;
      return;
    case Operation::divide:
      value /= next;
      return;
    case Operation::minimum:
      value = Interval::minimum(value, next);
      return;
    default:
      value = Interval::maximum(value, next);
  }
}

}  // namespace

Enclosures::Enclosures(const design::Design& design) : design_(design) {
  for (const design::DesignColumn& column : design.columns) {
    if (column.definition) find_exact(*column.definition);
  }
}

void Enclosures::find_exact(const Expression& expression) {
  if (design::is_exact(expression) || is_statement(expression.operation)) {
    rational_.insert(&expression);
    return;
  }
  for (const design::ExpressionPtr& operand : expression.operands) find_exact(*operand);
}

Interval Enclosures::value(int column, const table::Piece& piece, std::size_t row,
                           mpfr_prec_t precision) const {
  const design::DesignColumn& wanted = design_.columns[static_cast<std::size_t>(column)];
  if (wanted.constant) return Interval(mpq_class(1), precision);
  return of(*wanted.definition, piece, row, precision);
}

Interval Enclosures::of(const Expression& expression, const table::Piece& piece, std::size_t row,
                        mpfr_prec_t precision) const {
  if (rational_.contains(&expression)) {
    const std::optional<mpq_class> value = design::exact_value(expression, piece, row);
    return value ? Interval(*value, precision) : Interval::whole_line(precision);
  }
  Interval value = of(*expression.operands.front(), piece, row, precision);
  switch (expression.operation) {
    case Operation::power:
      return value.power(expression.exponent);
    case Operation::absolute:
      return value.absolute();
    case Operation::log:
      return value.log();
    case Operation::sqrt:
      return value.sqrt();
    case Operation::exp:
      return value.exp();
    case Operation::asinh:
      return value.asinh();
    default:
      break;
  }
  for (std::size_t i = 1; i < expression.operands.size(); ++i) {
    combine(expression.operation, value, of(*expression.operands[i], piece, row, precision));
  }
  return value;
}

const Interval& RowEnclosures::value(int column, mpfr_prec_t precision) {
  const std::pair<int, mpfr_prec_t> key{column, precision};
  const auto known = known_.find(key);
  if (known != known_.end()) return known->second;
  return known_.emplace(key, enclosures_.value(column, piece_, row_, precision)).first->second;
}

}  // namespace gramproof::exact
