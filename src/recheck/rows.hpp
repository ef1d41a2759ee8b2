// src/recheck/rows.hpp - one reading of the data: which rows are used, and what holds in them.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "base/result.hpp"
#include "recheck/document.hpp"

namespace gramproof::recheck {

/// What the rows say about one `exact` or `exact_except` relation.
struct FoundRelation {
  bool rational = true;  ///< false: it has columns whose values are not rational; nothing else then
  std::uint64_t holding = 0, violating = 0;
  mpq_class largest_residual;
  std::string first_violation;      ///< "row 7 (a.csv:8), where it leaves 3"; empty if none
  std::vector<bool> violation_met;  ///< of those listed: the row was reached
  std::vector<std::string> faults;  ///< what is wrong with those listed
};

struct Found {
  std::vector<std::uint64_t> rows_of_file;
  std::uint64_t rows_read = 0, rows_used = 0;
  std::map<Reason, std::uint64_t> excluded;
  std::uint64_t unsettled = 0;  ///< rows of which it cannot be said whether they are used
  std::vector<std::uint64_t> nonzero_rows;  ///< of each rational design column
  std::vector<FoundRelation> relations;     ///< as in the statement
  /// Residues of the certificate's rows and columns; an empty row where the row is not used.
  std::vector<std::vector<std::uint64_t>> matrix;
  bool prime_divides = false;  ///< a denominator in them
};

/// Reads every row once and keeps none: memory for k values and the certificate's residues. O(rows
/// * nodes). Errors: those of the table; a cell that is read as a number and is none; a weight that
/// is negative or no number.
[[nodiscard]] Result<Found> read_rows(const Statement& stated,
                                      const std::vector<std::string>& files);

/// Whether the certificate's prime is small enough for the arithmetic of this checker.
[[nodiscard]] bool prime_fits(const mpz_class& prime);

}  // namespace gramproof::recheck
