// src/recheck/document.hpp - what a verdict document states that can be checked.
//
// Limits on a document: 256 MB, nested at most 50,000 deep, 100,000 design columns, 1,000 exact
// relations.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <map>
#include <optional>
#include <string>
#include <utility>
#include <vector>

#include "base/result.hpp"
#include "recheck/formula.hpp"

namespace gramproof::recheck {

struct StatedFile {
  std::string name;
  std::uint64_t rows = 0;
};

/// Why rows are left out: the reason and the column, empty for the row filter.
using Reason = std::pair<std::string, std::string>;

struct StatedColumn {
  std::string name;
  std::optional<Formula> formula;  ///< none: the tree was too large for the document
  std::optional<std::uint64_t> nonzero_rows;

  [[nodiscard]] bool rational() const { return formula && formula->is_rational(); }
};

struct StatedViolation {
  std::string file;
  std::uint64_t line = 0, row = 0;
  mpq_class residual;
  std::map<std::string, std::string> cells;
};

/// An `exact` or `exact_except` relation.
struct StatedRelation {
  bool except = false;
  std::size_t number = 0;  ///< its place among all relations of the document, from 1
  std::vector<std::pair<std::size_t, mpz_class>> terms;  ///< design column, coefficient
  std::uint64_t rows_holding = 0, rows_violating = 0;
  std::vector<StatedViolation> violations;
  mpq_class largest_residual;
};

struct StatedCertificate {
  mpz_class prime, residue;
  std::vector<std::uint64_t> rows;
  std::vector<std::size_t> columns;
  std::uint64_t rows_tested = 0;
};

struct Statement {
  std::vector<StatedFile> files;
  char separator = ',', decimal_mark = '.';
  std::vector<std::string> missing;
  bool filter_is_known = true;    ///< false: too large for the document
  std::optional<Formula> filter;  ///< none: all rows
  std::optional<std::string> weight;
  std::size_t weight_place = 0;  ///< in `places`, where there is a weight
  std::uint64_t rows_read = 0, rows_used = 0, design_rows = 0;
  std::map<Reason, std::uint64_t> excluded;
  std::vector<StatedColumn> columns;
  std::uint64_t rank = 0, rank_columns = 0, nullity = 0, omitted = 0;
  std::optional<StatedCertificate> certificate;
  std::vector<StatedRelation> relations;
  std::map<std::string, std::size_t> other_relations;  ///< standing, how many
  std::vector<std::string> kept, left_out, lost;
  std::string identified;  ///< the grade
  std::string overall;
  std::size_t figures = 0;  ///< numbers in floating point, which nothing here checks
  /// The rank less the relations that hold within rounding, whose columns are left out too.
  std::uint64_t numerical = 0;
  bool rank_of_the_doubles = false;  ///< the document gives it
  CellPlaces places;  ///< the columns of the data whose cells must be present: all that is read
  std::size_t present_columns = 0;  ///< how many
};

/// Errors (where is `name`): no JSON, beyond a limit, not a verdict document, a key that is absent
/// or of the wrong kind, a column that is not in the design.
[[nodiscard]] Result<Statement> read_document(const std::string& text, const std::string& name);

}  // namespace gramproof::recheck
