// src/exact/residue_tree.cpp
#include "exact/residue_tree.hpp"

#include <algorithm>
#include <cstdlib>
#include <string>
#include <utility>

#include "design/rows.hpp"
#include "exact/fixed_point.hpp"
#include "exact/modular.hpp"

namespace gramproof::exact {
namespace {

using design::Expression;
using design::Operation;
using Rows = std::vector<std::size_t>;
using Residues = std::vector<std::uint64_t>;

/// One evaluation: the rows and the modulus do not change on the way down the tree.
class Evaluator {
 public:
  Evaluator(const table::Piece& piece, const Rows& rows, const Modulus& modulus)
      : piece_(piece), rows_(rows), modulus_(modulus) {}

  [[nodiscard]] Residues of(const Expression& e) const {
    if (const auto fixed = fixed_point(e, piece_, rows_)) return of_fixed(*fixed);
    switch (e.operation) {
      case Operation::cell:
        return by_row([&](std::size_t row) {
          return of_number(piece_.columns[static_cast<std::size_t>(e.column)].number(row));
        });
      case Operation::number:
        return Residues(rows_.size(), of_number(e.number));
      case Operation::add:
      case Operation::subtract:
      case Operation::multiply:
      case Operation::divide:
        return arithmetic(e);
      case Operation::power:
        return power(e);
      default:  // order decides the value, and residues have none
        return by_row([&](std::size_t row) { return exactly(e, row); });
    }
  }

  [[nodiscard]] std::uint64_t exactly(const Expression& e, std::size_t row) const {
    const auto value = design::exact_value(e, piece_, row);
    if (!value) return no_residue;
    return residue_of(*value, modulus_.value()).value_or(no_residue);
  }

  [[nodiscard]] Residues of_fixed(const FixedColumn& fixed) const {
    Residues result(rows_.size());
    const std::uint64_t scale = modulus_.power_of_ten(fixed.decimals);
    for (std::size_t i = 0; i < result.size(); ++i) {
      const std::uint64_t m = modulus_.of_short(fixed.mantissa[i]);
      result[i] = fixed.decimals == 0 ? m : modulus_.multiply(m, scale);
    }
    return result;
  }

 private:
  template <class Value>
  [[nodiscard]] Residues by_row(Value&& value) const {
    Residues result(rows_.size());
    for (std::size_t i = 0; i < result.size(); ++i) result[i] = value(rows_[i]);
    return result;
  }

  [[nodiscard]] std::uint64_t of_number(const table::Number& n) const {
    const std::uint64_t mantissa = n.wide.empty() ? modulus_.of(static_cast<__int128>(n.mantissa))
                                                  : modulus_.of(mpz_class(n.wide));
    return modulus_.multiply(mantissa, modulus_.power_of_ten(n.decimals));
  }

  [[nodiscard]] Residues arithmetic(const Expression& e) const {
    Residues left = of(*e.operands[0]);
    const Residues right = of(*e.operands[1]);
    for (std::size_t i = 0; i < left.size(); ++i)
      left[i] = combined(e.operation, left[i], right[i]);
    return left;
  }

  [[nodiscard]] std::uint64_t combined(Operation operation, std::uint64_t a,
                                       std::uint64_t b) const {
    if (a == no_residue || b == no_residue) return no_residue;
    switch (operation) {
      case Operation::add:
        return modulus_.add(a, b);
      case Operation::subtract:
        return modulus_.subtract(a, b);
      case Operation::multiply:
        return modulus_.multiply(a, b);
      default:
        return b == 0 ? no_residue : modulus_.multiply(a, modulus_.inverse(b));
    }
  }

  [[nodiscard]] Residues power(const Expression& e) const {
    Residues base = of(*e.operands[0]);
    const auto exponent = static_cast<std::uint64_t>(std::abs(e.exponent));
    for (std::uint64_t& b : base) {
      if (b == no_residue) continue;
      if (e.exponent < 0) b = b == 0 ? no_residue : modulus_.inverse(b);
      if (b != no_residue) b = modulus_.power(b, exponent);
    }
    return base;
  }

  const table::Piece& piece_;
  const Rows& rows_;
  const Modulus& modulus_;
};

}  // namespace

Residues column_residues(const design::DesignColumn& column, const table::Piece& piece,
                         const Rows& rows, const Modulus& modulus) {
  const Evaluator evaluator(piece, rows, modulus);
  if (column.constant) return Residues(rows.size(), 1);
  Residues result = evaluator.of(*column.definition);
  for (std::size_t i = 0; i < result.size(); ++i) {
    // A factor may cancel the prime that a part of the tree could not divide by.
    if (result[i] == no_residue) result[i] = evaluator.exactly(*column.definition, rows[i]);
  }
  return result;
}

}  // namespace gramproof::exact
