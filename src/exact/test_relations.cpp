// src/exact/test_relations.cpp - integer vectors against rows.
#include <algorithm>
#include <map>
#include <optional>
#include <utility>

#include "design/rows.hpp"
#include "exact/fixed_point.hpp"
#include "exact/rank.hpp"

namespace gramproof::exact {
namespace {

using Rows = std::vector<std::size_t>;
using Columns = std::map<std::size_t, std::optional<FixedColumn>>;

/// Rows worked on at a time: the columns of a wide design then stay within a few megabytes.
constexpr std::size_t rows_a_turn = 1024;

Integer power_of_ten(std::int32_t exponent) {
  Integer result;
  mpz_ui_pow_ui(result.get_mpz_t(), 10, static_cast<unsigned long>(exponent));
  return result;
}

/// mpz_class has no constructor from 128-bit words.
Integer to_integer(__int128 value) {
  const bool negative = value < 0;
  const auto magnitude =
      negative ? -static_cast<unsigned __int128>(value) : static_cast<unsigned __int128>(value);
  Integer result = static_cast<unsigned long>(magnitude >> 64);
  result <<= 64;
  result += static_cast<unsigned long>(magnitude);
  return negative ? Integer(-result) : result;
}

/// A sum of integer multiples of fixed columns: sum factor_j * mantissa_j, over 10^decimals.
struct Plan {
  std::vector<std::pair<std::int64_t, const FixedColumn*>> terms;
  Integer offset = 0;  ///< what the column of ones adds
  std::int32_t decimals = 0;
  bool one_word = false;  ///< no partial sum can reach 2^62; else none can reach 2^126
};

/// The plan, if machine words suffice: the sum of |factor| * largest mantissa bounds every partial
/// sum. The bound is computed in integers.
std::optional<Plan> plan_for(const NullVector& vector, const Columns& columns) {
  Plan plan;
  for (const std::size_t j : support_of(vector)) {
    if (j + 1 == vector.size()) continue;
    const auto& column = columns.at(j);
    if (!column) return std::nullopt;
    if (column->largest != 0) plan.decimals = std::max(plan.decimals, column->decimals);
  }
  plan.offset = vector.back() * power_of_ten(plan.decimals);
  Integer bound = abs(plan.offset);
  for (const std::size_t j : support_of(vector)) {
    if (j + 1 == vector.size()) continue;
    const FixedColumn& column = *columns.at(j);
    if (column.largest == 0) continue;
    const Integer factor = vector[j] * power_of_ten(plan.decimals - column.decimals);
    if (mpz_sizeinbase(factor.get_mpz_t(), 2) > 62) return std::nullopt;
    bound += abs(factor) * static_cast<long>(column.largest);
    plan.terms.emplace_back(factor.get_si(), &column);
  }
  const std::size_t bits = mpz_sizeinbase(bound.get_mpz_t(), 2);
  if (bits > 126) return std::nullopt;
  plan.one_word = bits <= 62;
  return plan;
}

template <class Word>
std::vector<Word> sums_of(const Plan& plan, std::size_t rows) {
  // An offset beyond a word would have failed the bound, so its low words hold it.
  Word offset = 0;
  const Integer magnitude = abs(plan.offset);
  const Integer high = magnitude >> 62;
  const Integer low = magnitude - (high << 62);
  offset = static_cast<Word>(low.get_si());
  if constexpr (sizeof(Word) > 8) offset += static_cast<Word>(high.get_si()) << 62;
  std::vector<Word> sums(rows, plan.offset < 0 ? -offset : offset);
  for (const auto& [factor, column] : plan.terms) {
    const std::int64_t* const mantissa = column->mantissa.data();
    for (std::size_t i = 0; i < rows; ++i) sums[i] += static_cast<Word>(factor) * mantissa[i];
  }
  return sums;
}

/// Rows in which some term of the plan is not 0.
std::uint64_t speaking_rows(const Plan& plan, std::size_t rows) {
  if (plan.offset != 0) return rows;
  std::vector<std::int64_t> bits(rows, 0);
  for (const auto& [factor, column] : plan.terms) {
    for (std::size_t i = 0; i < rows; ++i) bits[i] |= column->mantissa[i];
  }
  return rows - static_cast<std::uint64_t>(std::count(bits.begin(), bits.end(), 0));
}

/// Counts a violation and keeps it if it is among the first.
void record(RelationTest& test, std::size_t row_in_piece, std::uint64_t row, mpq_class residual,
            std::size_t most) {
  ++test.violating;
  const mpq_class size = abs(residual);
  if (size > test.largest_residual) test.largest_residual = size;
  if (test.first.size() < most) test.first.push_back({row_in_piece, row, std::move(residual)});
}

template <class Word>
void count_in_words(const Plan& plan, const table::Piece& piece, const Rows& rows, std::size_t most,
                    RelationTest& test) {
  const std::vector<Word> sums = sums_of<Word>(plan, rows.size());
  const Integer denominator = power_of_ten(plan.decimals);
  test.speaking += speaking_rows(plan, rows.size());
  Word largest = 0;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (sums[i] == 0) {
      ++test.holding;
      continue;
    }
    if (test.first.size() < most) {
      mpq_class residual(to_integer(sums[i]), denominator);
      residual.canonicalize();
      record(test, rows[i], piece.row[rows[i]], std::move(residual), most);
    } else {
      ++test.violating;
      largest = std::max(largest, sums[i] < 0 ? -sums[i] : sums[i]);
    }
  }
  mpq_class size(to_integer(largest), denominator);
  size.canonicalize();
  if (size > test.largest_residual) test.largest_residual = size;
}

struct ExactSum {
  mpq_class value = 0;
  bool speaks = false;  ///< some term is not 0
};

/// v . x in one row; none where a value is undefined.
std::optional<ExactSum> exact_sum(const NullVector& vector, const std::vector<std::size_t>& support,
                                  const design::Design& design, const table::Piece& piece,
                                  std::size_t row) {
  ExactSum sum;
  for (const std::size_t j : support) {
    if (j == design.columns.size() || design.columns[j].constant) {
      sum.value += vector[j];
      sum.speaks = true;
      continue;
    }
    const auto value = design::exact_value(*design.columns[j].definition, piece, row);
    if (!value) return std::nullopt;
    sum.value += vector[j] * *value;
    sum.speaks |= *value != 0;
  }
  return sum;
}

void count_in_rationals(const NullVector& vector, const design::Design& design,
                        const table::Piece& piece, const Rows& rows, std::size_t most,
                        RelationTest& test) {
  const std::vector<std::size_t> support = support_of(vector);
  for (const std::size_t row : rows) {
    std::optional<ExactSum> sum = exact_sum(vector, support, design, piece, row);
    // A row with an undefined value is no row of the design, as in residues().
    if (!sum) continue;
    test.speaking += sum->speaks ? 1 : 0;
    if (sum->value == 0) {
      ++test.holding;
    } else {
      record(test, row, piece.row[row], std::move(sum->value), most);
    }
  }
}

void count_turn(const design::Design& design, const table::Piece& piece, const Rows& rows,
                const std::vector<NullVector>& vectors, std::size_t most,
                std::vector<RelationTest>& tests) {
  Columns columns;
  for (const NullVector& vector : vectors) {
    for (const std::size_t j : support_of(vector)) {
      if (j == design.columns.size() || columns.count(j) != 0) continue;
      columns.emplace(j, fixed_point(design.columns[j], piece, rows));
    }
  }
  for (std::size_t v = 0; v < vectors.size(); ++v) {
    const std::optional<Plan> plan = plan_for(vectors[v], columns);
    if (!plan) {
      count_in_rationals(vectors[v], design, piece, rows, most, tests[v]);
    } else if (plan->one_word) {
      count_in_words<std::int64_t>(*plan, piece, rows, most, tests[v]);
    } else {
      count_in_words<__int128>(*plan, piece, rows, most, tests[v]);
    }
  }
}

}  // namespace

std::vector<RelationTest> test_relations(const design::Design& design, const table::Piece& piece,
                                         const Rows& rows, const std::vector<NullVector>& vectors,
                                         std::size_t most) {
  std::vector<RelationTest> tests(vectors.size());
  if (vectors.empty()) return tests;
  for (std::size_t first = 0; first < rows.size(); first += rows_a_turn) {
    const std::size_t end = std::min(rows.size(), first + rows_a_turn);
    const Rows turn(rows.begin() + static_cast<std::ptrdiff_t>(first),
                    rows.begin() + static_cast<std::ptrdiff_t>(end));
    count_turn(design, piece, turn, vectors, most, tests);
  }
  return tests;
}

}  // namespace gramproof::exact
