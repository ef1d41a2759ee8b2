// src/exact/essential.cpp - rows that alone keep the design from being singular.
#include <algorithm>

#include "exact/flint_types.hpp"
#include "exact/modular.hpp"
#include "exact/modulus.hpp"
#include "exact/rank.hpp"
#include "exact/row_source.hpp"

namespace gramproof::exact {
namespace {

std::vector<std::size_t> without(const std::vector<std::size_t>& rows, std::size_t left_out) {
  std::vector<std::size_t> result;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (i != left_out) result.push_back(rows[i]);
  }
  return result;
}

/// r - 1 independent rows in r columns leave exactly one relation.
NullVector only_relation(const RowSource& source, const std::vector<int>& columns) {
  SampleRank rank = rank_of_rows(source, columns);
  return rank.null_vectors.empty() ? NullVector{} : std::move(rank.null_vectors.front());
}

}  // namespace

std::vector<std::size_t> essential_rows(const design::Design& design, const table::Piece& sample,
                                        const SampleRank& rank,
                                        const std::vector<std::uint64_t>& random_combination) {
  const Modulus field(prime);
  const std::size_t size = rank.pivot_rows.size();
  if (size == 0) return {};
  const std::vector<std::uint64_t> basis =
      residues_of_columns(design, sample, rank.pivot_rows, rank.pivot_columns, prime);
  // c B = total is solved as B' c = total. The total includes the basis rows themselves, which adds
  // the hash of row i to c_i.
  ResidueMatrix transposed(size, size, prime);
  std::vector<std::uint64_t> total(size), solution(size);
  for (std::size_t j = 0; j < size; ++j) {
    total[j] = random_combination[static_cast<std::size_t>(rank.pivot_columns[j])];
    for (std::size_t i = 0; i < size; ++i) transposed.at(j, i) = basis[i * size + j];
  }
  if (nmod_mat_solve_vec(solution.data(), transposed.get(), total.data()) == 0) return {};
  std::vector<std::size_t> essential;
  for (std::size_t i = 0; i < size; ++i) {
    const std::uint64_t own = row_hash(sample.row[rank.pivot_rows[i]]);
    if (field.subtract(solution[i], own) == 0) essential.push_back(i);
  }
  return essential;
}

NullVector relation_without_row(const design::Design& design, const table::Piece& sample,
                                const SampleRank& rank, std::size_t basis_row) {
  const FlintSession session;
  return only_relation(PieceRows(design, sample, without(rank.pivot_rows, basis_row)),
                       rank.pivot_columns);
}

NullVector relation_without_row(const ExactRows& sample, const SampleRank& rank,
                                std::size_t basis_row) {
  const FlintSession session;
  const std::size_t width = sample.rows.empty() ? 0 : sample.rows.front().size();
  return only_relation(IntegerRows(sample, width, without(rank.pivot_rows, basis_row)),
                       rank.pivot_columns);
}

}  // namespace gramproof::exact
