// src/exact/fixed_point.cpp
#include "exact/fixed_point.hpp"

#include <algorithm>
#include <array>
#include <cstdlib>
#include <utility>

namespace gramproof::exact {
namespace {

using design::Expression;
using design::Operation;
using Rows = std::vector<std::size_t>;
using Fixed = std::optional<FixedColumn>;

constexpr std::int64_t limit = std::int64_t{1} << 61;

constexpr std::array<std::int64_t, 19> powers_of_ten = [] {
  std::array<std::int64_t, 19> powers{};
  std::int64_t power = 1;
  for (std::size_t i = 0; i < powers.size(); ++i) {
    powers[i] = power;
    if (i + 1 < powers.size()) power *= 10;
  }
  return powers;
}();

bool fits(std::int64_t a, std::int64_t b) {
  return static_cast<__int128>(a) * b < limit;
}

std::int64_t largest_of(const std::vector<std::int64_t>& mantissa) {
  std::int64_t largest = 0;
  for (const std::int64_t m : mantissa) largest = std::max(largest, std::abs(m));
  return largest;
}

/// The column with `decimals` decimals, no fewer than it has.
bool align(FixedColumn& column, std::int32_t decimals) {
  const std::int32_t shift = decimals - column.decimals;
  if (shift == 0) return true;
  column.decimals = decimals;
  if (column.largest == 0) return true;
  if (shift > 18 || !fits(column.largest, powers_of_ten[static_cast<std::size_t>(shift)])) {
    return false;
  }
  const std::int64_t factor = powers_of_ten[static_cast<std::size_t>(shift)];
  for (std::int64_t& m : column.mantissa) m *= factor;
  column.largest *= factor;
  return true;
}

bool align_both(FixedColumn& a, FixedColumn& b) {
  const std::int32_t decimals = std::max(a.decimals, b.decimals);
  return align(a, decimals) && align(b, decimals);
}

FixedColumn same_everywhere(std::int64_t mantissa, std::int32_t decimals, std::size_t rows) {
  return {std::vector<std::int64_t>(rows, mantissa), mantissa == 0 ? 0 : decimals,
          std::abs(mantissa)};
}

/// Brings mantissas with differing decimals to the most that a cell other than 0 has.
bool even_out(const table::PieceColumn& column, const Rows& rows, FixedColumn& result) {
  bool any = false;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (result.mantissa[i] == 0) continue;
    const std::int32_t decimals = column.decimals[rows[i]];
    result.decimals = any ? std::max(result.decimals, decimals) : decimals;
    any = true;
  }
  for (std::size_t i = 0; i < rows.size(); ++i) {
    std::int64_t& m = result.mantissa[i];
    const std::int32_t shift = result.decimals - column.decimals[rows[i]];
    if (m == 0 || shift == 0) continue;
    if (shift > 18) return false;
    const std::int64_t factor = powers_of_ten[static_cast<std::size_t>(shift)];
    if (!fits(std::abs(m), factor)) return false;
    m *= factor;
  }
  return true;
}

Fixed cells(const table::PieceColumn& column, const Rows& rows) {
  if (column.kind != table::ColumnKind::numeric) return std::nullopt;
  for (const table::WideCell& wide : column.wide) {
    if (std::find(rows.begin(), rows.end(), wide.row) != rows.end()) return std::nullopt;
  }
  FixedColumn result;
  result.mantissa.resize(rows.size());
  if (rows.empty()) return result;
  const std::int16_t first = column.decimals[rows.front()];
  int differing = 0;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    result.mantissa[i] = column.mantissa[rows[i]];
    differing |= column.decimals[rows[i]] ^ first;
  }
  result.decimals = first;
  if (differing != 0) {
    result.decimals = 0;
    if (!even_out(column, rows, result)) return std::nullopt;
  }
  result.largest = largest_of(result.mantissa);
  if (result.largest >= limit) return std::nullopt;
  return result;
}

Fixed number(const table::Number& value, std::size_t rows) {
  if (!value.wide.empty()) return std::nullopt;
  return same_everywhere(value.mantissa, value.decimals, rows);
}

Fixed sum(FixedColumn a, FixedColumn b, bool minus) {
  if (!align_both(a, b) || a.largest >= limit - b.largest) return std::nullopt;
  for (std::size_t i = 0; i < a.mantissa.size(); ++i) {
    a.mantissa[i] += minus ? -b.mantissa[i] : b.mantissa[i];
  }
  a.largest = largest_of(a.mantissa);
  return a;
}

Fixed product(FixedColumn a, const FixedColumn& b) {
  if (!fits(a.largest, b.largest)) return std::nullopt;
  for (std::size_t i = 0; i < a.mantissa.size(); ++i) a.mantissa[i] *= b.mantissa[i];
  a.decimals += b.decimals;
  a.largest = largest_of(a.mantissa);
  return a;
}

Fixed power(const FixedColumn& base, int exponent) {
  if (exponent < 1) return std::nullopt;
  Fixed result = base;
  for (int i = 1; i < exponent && result; ++i) result = product(std::move(*result), base);
  return result;
}

/// 1 / n as a decimal number, for n a divisor of a power of ten: x / 1000 stays a decimal.
std::optional<std::pair<std::int64_t, std::int32_t>> reciprocal(const table::Number& n) {
  if (!n.wide.empty() || n.mantissa == 0) return std::nullopt;
  for (std::size_t e = 0; e < powers_of_ten.size(); ++e) {
    if (powers_of_ten[e] % n.mantissa == 0) {
      return std::pair{powers_of_ten[e] / n.mantissa, static_cast<std::int32_t>(e) - n.decimals};
    }
  }
  return std::nullopt;
}

template <class Choice>
FixedColumn chosen(FixedColumn a, const FixedColumn& b, Choice&& choice) {
  for (std::size_t i = 0; i < a.mantissa.size(); ++i) {
    a.mantissa[i] = choice(a.mantissa[i], b.mantissa[i]);
  }
  a.largest = largest_of(a.mantissa);
  return a;
}

FixedColumn holds(design::Comparison comparison, FixedColumn a, const FixedColumn& b) {
  a.decimals = 0;
  using C = design::Comparison;
  const auto with = [&](auto&& relation) {
    return chosen(std::move(a), b, [&](std::int64_t x, std::int64_t y) {
      return static_cast<std::int64_t>(relation(x, y));
    });
  };
  switch (comparison) {
    case C::equal:
      return with([](auto x, auto y) { return x == y; });
    case C::not_equal:
      return with([](auto x, auto y) { return x != y; });
    case C::less:
      return with([](auto x, auto y) { return x < y; });
    case C::less_equal:
      return with([](auto x, auto y) { return x <= y; });
    case C::greater:
      return with([](auto x, auto y) { return x > y; });
    case C::greater_equal:
      return with([](auto x, auto y) { return x >= y; });
  }
  return a;
}

Fixed level(const Expression& e, const table::Piece& piece, const Rows& rows) {
  const table::PieceColumn& column = piece.columns[static_cast<std::size_t>(e.column)];
  if (column.kind != table::ColumnKind::text) return std::nullopt;
  FixedColumn result = same_everywhere(0, 0, rows.size());
  for (std::size_t i = 0; i < rows.size(); ++i) {
    result.mantissa[i] = e.level >= 0 && column.code[rows[i]] == e.level;
  }
  result.largest = 1;
  return result;
}

Fixed two_operands(const Expression& e, FixedColumn a, FixedColumn b) {
  switch (e.operation) {
    case Operation::add:
      return sum(std::move(a), std::move(b), false);
    case Operation::subtract:
      return sum(std::move(a), std::move(b), true);
    case Operation::multiply:
    case Operation::both:
      return product(std::move(a), b);
    default:
      break;
  }
  if (!align_both(a, b)) return std::nullopt;
  if (e.operation == Operation::compare) return holds(e.comparison, std::move(a), b);
  const auto larger = [](std::int64_t x, std::int64_t y) { return std::max(x, y); };
  const auto smaller = [](std::int64_t x, std::int64_t y) { return std::min(x, y); };
  if (e.operation == Operation::minimum) return chosen(std::move(a), b, smaller);
  return chosen(std::move(a), b, larger);  // maximum, and `either` of two 0/1 columns
}

Fixed many_operands(const Expression& e, const table::Piece& piece, const Rows& rows) {
  Fixed result = fixed_point(*e.operands.front(), piece, rows);
  for (std::size_t i = 1; i < e.operands.size() && result; ++i) {
    Fixed next = fixed_point(*e.operands[i], piece, rows);
    if (!next) return std::nullopt;
    result = two_operands(e, std::move(*result), std::move(*next));
  }
  return result;
}

Fixed quotient(const Expression& e, const table::Piece& piece, const Rows& rows) {
  if (e.operands[1]->operation != Operation::number) return std::nullopt;
  const auto factor = reciprocal(e.operands[1]->number);
  if (!factor || std::abs(factor->first) >= limit) return std::nullopt;
  Fixed left = fixed_point(*e.operands[0], piece, rows);
  if (!left) return std::nullopt;
  return product(std::move(*left), same_everywhere(factor->first, factor->second, rows.size()));
}

Fixed one_operand(const Expression& e, FixedColumn a) {
  if (e.operation == Operation::power) return power(a, e.exponent);
  for (std::int64_t& m : a.mantissa) m = e.operation == Operation::negation ? 1 - m : std::abs(m);
  a.largest = largest_of(a.mantissa);
  return a;
}

}  // namespace

std::optional<FixedColumn> fixed_point(const Expression& e, const table::Piece& piece,
                                       const Rows& rows) {
  switch (e.operation) {
    case Operation::cell:
      return cells(piece.columns[static_cast<std::size_t>(e.column)], rows);
    case Operation::number:
      return number(e.number, rows.size());
    case Operation::row_number: {
      FixedColumn result = same_everywhere(0, 0, rows.size());
      for (std::size_t i = 0; i < rows.size(); ++i) {
        result.mantissa[i] = static_cast<std::int64_t>(piece.row[rows[i]]);
      }
      result.largest = largest_of(result.mantissa);
      return result;
    }
    case Operation::is_level:
      return level(e, piece, rows);
    case Operation::add:
    case Operation::subtract:
    case Operation::multiply:
    case Operation::minimum:
    case Operation::maximum:
    case Operation::both:
    case Operation::either:
    case Operation::compare:
      return many_operands(e, piece, rows);
    case Operation::divide:
      return quotient(e, piece, rows);
    case Operation::power:
    case Operation::absolute:
    case Operation::negation: {
      Fixed operand = fixed_point(*e.operands[0], piece, rows);
      if (!operand) return std::nullopt;
      return one_operand(e, std::move(*operand));
    }
    default:
      return std::nullopt;  // log, sqrt, exp, asinh; texts of two columns
  }
}

std::optional<FixedColumn> fixed_point(const design::DesignColumn& column,
                                       const table::Piece& piece, const Rows& rows) {
  if (column.constant) return same_everywhere(1, 0, rows.size());
  return fixed_point(*column.definition, piece, rows);
}

}  // namespace gramproof::exact
