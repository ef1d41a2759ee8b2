// src/design/binder.hpp - names of a design looked up in a table: one number a row out of a parse
// tree.
#pragma once

#include <optional>
#include <string>
#include <vector>

#include "design/syntax.hpp"
#include "table/survey.hpp"

namespace gramproof::design {

/// Binds parts of one text. The first error is kept; whatever is bound after it is null or -1.
class Binder {
 public:
  /// `row_allowed`: the text is a row condition, where `row` is the row number.
  Binder(const table::Schema& schema, std::string data_name, const SourceText& source,
         bool row_allowed);

  /// Arithmetic over numeric columns. Null on error.
  ExpressionPtr number(const Node& node);
  /// A comparison or a logical combination of comparisons. Null on error.
  ExpressionPtr condition(const Node& node);
  /// Index of the column called `name`, or -1 and an error that names the nearest.
  int column(std::size_t at, const std::string& name);
  /// Index of the level of a column, or -1 and an error that names the nearest.
  int level(int column, const Word& word);
  /// False and an error if the distinct values of the column were too many to be listed.
  bool has_listed_levels(int column, std::size_t at);
  /// False and an error if the column is text or holds a number out of range.
  bool is_usable_number(int column, std::size_t at);

  [[nodiscard]] bool failed() const { return error_.has_value(); }
  [[nodiscard]] const Error& error() const { return *error_; }
  void fail(Error error);
  void fail(std::size_t at, std::string what, std::string hint = {});
  [[nodiscard]] const table::ColumnFacts& facts(int column) const {
    return schema_.columns[static_cast<std::size_t>(column)];
  }
  [[nodiscard]] const table::Schema& schema() const { return schema_; }
  [[nodiscard]] const std::string& data_name() const { return data_name_; }
  [[nodiscard]] const SourceText& source() const { return source_; }

 private:
  ExpressionPtr operation(Operation operation, const Node& node);
  ExpressionPtr function(const Node& node);
  ExpressionPtr comparison(const Node& node);
  ExpressionPtr text_comparison(const Node& node, int column);
  void text_is_no_number(int column, std::size_t at);

  const table::Schema& schema_;
  std::string data_name_;
  const SourceText& source_;
  bool row_allowed_;
  std::optional<Error> error_;
};

/// Index of the column called `name`, or the error of an unknown name at `where`, with the nearest
/// known name.
[[nodiscard]] Result<int> find_column(const table::Schema& schema, const std::string& data_name,
                                      const std::string& where, const std::string& name);

/// `did you mean "income"?`, or nothing when no candidate is near.
[[nodiscard]] std::string did_you_mean(const std::string& word,
                                       const std::vector<std::string>& candidates);

/// The same, or the first of the names under `kind` when none is near: `its levels: north, south`.
[[nodiscard]] std::string known_names(const std::string& word, const std::string& kind,
                                      const std::vector<std::string>& names);

}  // namespace gramproof::design
