// src/design/design.hpp - terms bound to the columns of a table: the columns of the design matrix
// and where each comes from.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "design/expression.hpp"

namespace gramproof::design {

enum class Role : std::uint8_t { focus, protect, other };
enum class Undefined : std::uint8_t { exclude, stop };

/// A set of brackets made by levels() or all_levels() over one table column.
struct LevelSet {
  int column = -1;            ///< table column
  bool leave_one_out = true;  ///< levels(): one level is left out; all_levels(): none
  int against = -1;  ///< level left out by the analyst's word (no column is made of it); -1: the
                     ///< most frequent on the rows used
  std::vector<int> order;  ///< all levels (indices into ColumnFacts::levels) in listing order:
                           ///< numbers if all are, else UTF-8 bytes
};

/// Says that a column carries the bracket of `level` of `set` (index into Design::level_sets) as a
/// factor.
struct LevelUse {
  int set = -1;
  int level = -1;
};

struct DesignColumn {
  std::string label;  ///< canonical; pastes back into a design
  int term = -1;      ///< index into Design::terms
  int family = -1;    ///< index into Design::families (after assign_families)
  Role role = Role::other;
  ExpressionPtr definition;
  bool exact = true;  ///< is_exact(definition)
  bool zero_one =
      false;  ///< is_zero_one(definition), or a numeric column all of whose cells are 0 or 1
  bool constant = false;     ///< the term `constant`
  std::vector<int> sources;  ///< table columns it is made of, ascending
  std::vector<LevelUse> levels;
};

struct Term {
  std::string text;          ///< canonical text of the term
  std::vector<int> columns;  ///< indices into Design::columns
};

/// Columns over one source, or the products over one set of sources; every other combination is a
/// family of its own.
struct Family {
  std::string
      name;  ///< "age", "region", "region * age", or the label of the only column; "constant"
  std::vector<int> sources;   ///< table columns, ascending; empty for the constant
  std::vector<int> columns;   ///< design columns
  bool products_only = true;  ///< every column is a product of single-source factors: can be under
                              ///< or above another family
};

struct Note {
  std::string
      kind;  ///< stable word, e.g. "code_used_as_number", "main_effect_absent", "left_out_of_rest"
  std::string text;  ///< one sentence for the reader
  std::vector<std::string> columns;
};

struct Design {
  std::string text;  ///< the design as asked, or "constant, rest"
  std::vector<Term> terms;
  std::vector<DesignColumn> columns;
  std::vector<LevelSet> level_sets;
  std::vector<Family> families;
  std::vector<int> used_columns;  ///< table columns whose cells must be present: terms, response,
                                  ///< complete, weight, filter
  std::vector<int>
      read_columns;   ///< used columns that must be read as numbers or codes (all of used_columns)
  int response = -1;  ///< table column
  int weight = -1;    ///< table column
  ExpressionPtr filter;  ///< --rows; null: all rows
  std::string filter_text;
  Undefined undefined = Undefined::exclude;
  std::vector<Note> notes;
};

}  // namespace gramproof::design
