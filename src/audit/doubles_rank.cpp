#include "audit/doubles_rank.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>
#include <optional>

#include "design/rows.hpp"
#include "exact/double_rows.hpp"

namespace gramproof::audit {
namespace {

/// Whole numbers up to here are doubles.
constexpr double largest_whole = 0x1p53;

using Bound = std::optional<double>;

Bound within(double bound) {
  return bound <= largest_whole ? Bound(bound) : std::nullopt;
}

Bound largest_whole_value(const design::Expression& expression, const table::Schema& schema);

/// The operands' bounds brought together; none where one has none.
template <class Combine>
Bound combined(const design::Expression& expression, const table::Schema& schema,
               Combine&& combine) {
  Bound total = largest_whole_value(*expression.operands.front(), schema);
  for (std::size_t i = 1; total && i < expression.operands.size(); ++i) {
    const Bound next = largest_whole_value(*expression.operands[i], schema);
    if (!next) return std::nullopt;
    total = within(combine(*total, *next));
  }
  return total;
}

Bound bound_of_cell(const table::ColumnFacts& facts) {
  const bool whole = facts.kind == table::ColumnKind::numeric && facts.all_whole;
  return whole ? within(facts.largest_magnitude) : std::nullopt;
}

Bound bound_of_power(const design::Expression& expression, const table::Schema& schema) {
  if (expression.exponent < 0) return std::nullopt;
  const Bound base = largest_whole_value(*expression.operands.front(), schema);
  return base ? within(std::pow(std::max(*base, 1.0), expression.exponent)) : std::nullopt;
}

/// A bound on the size of the values where every step is a whole number that doubles hold, so that
/// nothing is rounded in any row; else none.
Bound largest_whole_value(const design::Expression& expression, const table::Schema& schema) {
  using design::Operation;
  if (design::is_zero_one(expression)) return 1;
  switch (expression.operation) {
    case Operation::cell:
      return bound_of_cell(schema.columns[static_cast<std::size_t>(expression.column)]);
    case Operation::number: {
      const mpq_class value = design::exact_number(expression.number);
      return value.get_den() == 1 ? within(std::abs(value.get_d())) : std::nullopt;
    }
    case Operation::row_number:
      return within(static_cast<double>(schema.rows));
    case Operation::add:
    case Operation::subtract:
      return combined(expression, schema, [](double a, double b) { return a + b; });
    case Operation::multiply:
      return combined(expression, schema,
                      [](double a, double b) { return std::max(a, 1.0) * std::max(b, 1.0); });
    case Operation::absolute:
    case Operation::minimum:
    case Operation::maximum:
      return combined(expression, schema, [](double a, double b) { return std::max(a, b); });
    case Operation::power:
      return bound_of_power(expression, schema);
    default:
      return std::nullopt;
  }
}

/// The columns whose doubles obey on every row what they and others of their kind obey on the
/// sample: those that nothing rounds (there the sample settles the relations of all rows) and those
/// with one value.
std::vector<bool> settled_by_sample(const EveryRow& every_row) {
  std::vector<bool> settled;
  const design::Design& design = every_row.design();
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    const scan::ColumnRecord& record = every_row.digest().columns[j];
    const design::DesignColumn& column = design.columns[j];
    settled.push_back(
        record.min == record.max || column.constant ||
        (column.exact && largest_whole_value(*column.definition, every_row.schema()).has_value()));
  }
  return settled;
}

bool rests_on(const exact::NullVector& vector, const std::vector<bool>& columns) {
  for (std::size_t j = 0; j < vector.size(); ++j) {
    if (vector[j] != 0 && !columns[j]) return false;
  }
  return true;
}

scan::Examiner doubles_examiner(const std::vector<exact::NullVector>& vectors) {
  return [&vectors](const table::Piece&, const design::Block& block) {
    std::vector<scan::PieceAnswer> answers;
    for (std::vector<std::size_t>& off : exact::rows_off(block.values, vectors)) {
      answers.push_back({std::move(off), 0});
    }
    return answers;
  };
}

}  // namespace

Result<std::uint64_t> rank_of_the_doubles(EveryRow& every_row, std::uint64_t exact_rank) {
  std::vector<int> order(every_row.design().columns.size());
  std::iota(order.begin(), order.end(), 0);
  const std::vector<bool> settled = settled_by_sample(every_row);
  if (std::find(settled.begin(), settled.end(), false) == settled.end()) return exact_rank;
  while (true) {
    const Result<Matrix> values = every_row.sample_values();
    if (!values) return values.error();
    const exact::SampleRank rank = exact::rank_of_doubles(values.value(), order);
    std::vector<exact::NullVector> open;
    for (const exact::NullVector& vector : rank.null_vectors) {
      if (!rests_on(vector, settled)) open.push_back(vector);
    }
    if (open.empty() || every_row.sample_is_everything()) return rank.pivot_columns.size();
    const Result<std::vector<scan::Examined>> answers = every_row.ask(doubles_examiner(open));
    if (!answers) return answers.error();
    if (every_row.join(answers.value()) == 0) return rank.pivot_columns.size();
  }
}

}  // namespace gramproof::audit
