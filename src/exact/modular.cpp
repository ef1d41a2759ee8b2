// src/exact/modular.cpp
#include "exact/modular.hpp"

#include <algorithm>
#include <numeric>

#include "exact/fixed_point.hpp"
#include "exact/modulus.hpp"
#include "exact/residue_tree.hpp"

namespace gramproof::exact {
namespace {

using Rows = std::vector<std::size_t>;

/// Sum of hash * value over the rows; rows without a residue are marked and left out.
std::uint64_t combination(const design::DesignColumn& column, const table::Piece& piece,
                          const Rows& rows, const std::vector<std::uint64_t>& hashes,
                          const Modulus& modulus, std::vector<std::uint8_t>& unusable) {
  DotProduct sum;
  if (const auto fixed = fixed_point(column, piece, rows)) {
    for (std::size_t i = 0; i < rows.size(); ++i) {
      sum.add(hashes[i], modulus.of_short(fixed->mantissa[i]));
    }
    return modulus.multiply(sum.residue(modulus), modulus.power_of_ten(fixed->decimals));
  }
  const std::vector<std::uint64_t> values = column_residues(column, piece, rows, modulus);
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (values[i] == no_residue) {
      unusable[i] = 1;
    } else {
      sum.add(hashes[i], values[i]);
    }
  }
  return sum.residue(modulus);
}

Rows without(const Rows& rows, const std::vector<std::uint8_t>& unusable) {
  Rows result;
  for (std::size_t i = 0; i < rows.size(); ++i) {
    if (unusable[i] == 0) result.push_back(rows[i]);
  }
  return result;
}

}  // namespace

std::uint64_t row_hash(std::uint64_t row) {
  // Two rounds of multiply and fold; the multipliers are odd and have about half their bits set.
  std::uint64_t x = (row + 0x5851'e9c3'72d4'b16fULL) * 0xb3c7'52d9'6a1f'8e35ULL;
  x ^= x >> 29;
  x *= 0x9e6b'1d83'c5f2'47abULL;
  x ^= x >> 32;
  x *= 0xd4a9'36f1'8b5c'e207ULL;
  x ^= x >> 31;
  return x % (prime - 1) + 1;
}

std::optional<std::uint64_t> residue_of(const mpq_class& value, std::uint64_t modulus) {
  const Modulus field(modulus);
  const std::uint64_t denominator = field.of(value.get_den());
  if (denominator == 0) return std::nullopt;
  return field.multiply(field.of(value.get_num()), field.inverse(denominator));
}

std::vector<std::uint64_t> residues_of_columns(const design::Design& design,
                                               const table::Piece& piece, const Rows& rows,
                                               const std::vector<int>& columns,
                                               std::uint64_t modulus) {
  const Modulus field(modulus);
  const std::size_t width = columns.size();
  std::vector<std::uint64_t> result(rows.size() * width, 0);
  std::vector<std::uint8_t> unusable(rows.size(), 0);
  for (std::size_t j = 0; j < width; ++j) {
    const auto index = static_cast<std::size_t>(columns[j]);
    if (index == design.columns.size()) {
      for (std::size_t i = 0; i < rows.size(); ++i) result[i * width + j] = 1;
      continue;
    }
    if (!design.columns[index].exact) continue;
    const auto values = column_residues(design.columns[index], piece, rows, field);
    for (std::size_t i = 0; i < rows.size(); ++i) {
      if (values[i] == no_residue) unusable[i] = 1;
      result[i * width + j] = values[i];
    }
  }
  for (std::size_t i = 0; i < rows.size(); ++i) {
    const auto first = result.begin() + static_cast<std::ptrdiff_t>(i * width);
    if (unusable[i] != 0) std::fill_n(first, width, 0);
  }
  return result;
}

std::vector<std::uint64_t> residues(const design::Design& design, const table::Piece& piece,
                                    const Rows& rows, std::uint64_t modulus) {
  std::vector<int> all(design.columns.size() + 1);
  std::iota(all.begin(), all.end(), 0);
  return residues_of_columns(design, piece, rows, all, modulus);
}

void add_random_combination(const design::Design& design, const table::Piece& piece,
                            const Rows& rows, std::span<std::uint64_t> total) {
  const Modulus field(prime);
  std::vector<std::uint64_t> hashes(rows.size());
  for (std::size_t i = 0; i < rows.size(); ++i) hashes[i] = row_hash(piece.row[rows[i]]);
  std::vector<std::uint8_t> unusable(rows.size(), 0);
  std::vector<std::uint64_t> sums(design.columns.size() + 1, 0);
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    if (!design.columns[j].exact) continue;
    sums[j] = combination(design.columns[j], piece, rows, hashes, field, unusable);
  }
  if (std::find(unusable.begin(), unusable.end(), 1) != unusable.end()) {
    add_random_combination(design, piece, without(rows, unusable), total);
    return;
  }
  DotProduct ones;
  for (const std::uint64_t hash : hashes) ones.add(hash, 1);
  sums.back() = ones.residue(field);
  for (std::size_t j = 0; j < sums.size(); ++j) total[j] = field.add(total[j], sums[j]);
}

}  // namespace gramproof::exact
