// src/design/sets.hpp - sets of columns: levels, steps, patterns and their products, counted before
// they are made.
#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "design/binder.hpp"
#include "design/design.hpp"

namespace gramproof::design {

/// One column of a set.
struct SetColumn {
  ExpressionPtr definition;
  std::vector<LevelUse> levels;
};

/// What a term gives.
struct SetOfColumns {
  std::vector<SetColumn> columns;
  std::string text;         ///< canonical text of the term
  bool is_product = false;  ///< as the right factor of another product it stands in parentheses
};

/// Makes the columns of terms; level sets are entered into `level_sets`, equal ones once.
class SetMaker {
 public:
  SetMaker(Binder& binder, Design& design) : binder_(binder), design_(design) {}

  /// Number of columns the term will give, held at 2^64 - 1. Errors go to the binder. O(columns of
  /// the table), makes nothing.
  std::uint64_t count(const Node& node);
  SetOfColumns make(const Node& node);

  /// Columns for one table column as `rest` and patterns take them: the number, or levels() of a
  /// text column.
  void add_table_column(int column, std::size_t at, SetOfColumns& set);
  std::uint64_t count_table_column(int column, std::size_t at);

 private:
  SetOfColumns levels(const Node& node);
  SetOfColumns steps(const Node& node);
  SetOfColumns matching(const Node& node);
  SetOfColumns product(const Node& node);
  std::vector<int> matches(const Node& node);
  std::vector<int> levels_of_steps(const Node& node, int column);
  int level_set(int column, bool leave_one_out, int against);
  ExpressionPtr bracket(int column, int level) const;
  void add_levels(int set, SetOfColumns& to) const;

  Binder& binder_;
  Design& design_;
};

/// All levels of a column in listing order: as numbers if the column is numeric, else by UTF-8
/// bytes.
[[nodiscard]] std::vector<int> listing_order(const table::ColumnFacts& facts);

}  // namespace gramproof::design
