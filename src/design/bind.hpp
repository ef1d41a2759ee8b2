// src/design/bind.hpp - from the text of a design to the columns of a design matrix.
//
// The way of a design: parse() knows the language only; bind() knows the table's columns and
// expands sets with every level that occurs in the file (the provisional design); after the scan
// settle() takes out the levels that no used row has and, for levels(), the one left out. The
// provisional columns are a superset of the final ones, in the same relative order.
#pragma once

#include <cstdint>
#include <functional>
#include <memory>
#include <string>
#include <utility>
#include <vector>

#include "base/result.hpp"
#include "design/design.hpp"
#include "table/survey.hpp"

namespace gramproof::design {

/// What the analyst asks for. Texts are as given; `*_where` names them in messages ("--design", or
/// the file's name).
struct Request {
  std::string design = "constant, rest";
  std::string design_where = "--design";
  std::string rows;              ///< --rows; empty: all
  std::string response, weight;  ///< column names; empty: none
  std::vector<std::string> complete, focus, protect;
  Undefined undefined = Undefined::exclude;
};

struct Syntax;  // parse tree with places; opaque to others

/// Parsed design and condition. Errors: `--design:14` with the character (from 1), or
/// `file:line:character` for a design file, and what was expected; words whose columns are not
/// built say what they wait for. Limits: nesting 64, brackets in brackets 8, 1,000 operations a
/// term. O(length).
[[nodiscard]] Result<std::shared_ptr<const Syntax>> parse(const Request& request);

/// Names of columns inside levels(), all_levels(), steps(): their values must be listed by the
/// survey even if numeric.
[[nodiscard]] std::vector<std::string> columns_with_levels(const Syntax& syntax);

using BytesNeeded = std::function<std::uint64_t(std::uint64_t columns)>;

/// Most design columns bind() may make: a larger design is refused with the count and --memory in
/// the message. The level named by `against` gives no provisional column. Errors: unknown names and
/// levels (with the nearest), text where a number is needed, sets in arithmetic other than
/// products, one label twice, a column spoiled for `rest`, a number out of range, too many columns;
/// the first one met is returned. `bytes_needed` of a number of columns, if given, lets the message
/// say what --memory would do. O(columns made * nodes).
[[nodiscard]] Result<Design> bind(const Syntax& syntax, const Request& request,
                                  const table::Schema& schema, const std::string& data_name,
                                  std::size_t most_columns, const BytesNeeded& bytes_needed = {});

/// Rows used by level: counts[s][i] belongs to level i (index into ColumnFacts::levels) of
/// design.level_sets[s].
using LevelCounts = std::vector<std::vector<std::uint64_t>>;

struct Settled {
  Design design;
  std::vector<int> provisional;  ///< for each final column its index in the provisional design
  /// For each level set the level left out (index into ColumnFacts::levels), or -1.
  std::vector<int> left_out;
};

/// Takes out the columns of levels that no used row has and, for levels(), the one left out:
/// `against`, or the most frequent, ties to the first in listing order. Where no used row has the
/// level of `against`, the most frequent is left out and a note says so. Products keep every
/// combination of the levels that stay, empty cells too (they are a finding). Families and roles
/// are assigned afterwards.
[[nodiscard]] Settled settle(const Design& provisional, const table::Schema& schema,
                             const LevelCounts& counts);

/// Fills Design::families and DesignColumn::family. `never_together[a][b]`: no used row has a 1 in
/// both 0/1 columns a and b (indices of final columns): plain 0/1 columns of the table, coded by
/// hand, are grouped greedily in design order into one family, named after the first, and so are
/// their products with other sources. O(columns^2).
void assign_families(Design& design, const table::Schema& schema,
                     const std::vector<std::vector<bool>>& never_together);

/// F is under G: every column of G is a product with a factor over F's sources alone; false for
/// families not products_only, and for the constant, which is projected out on its own.
[[nodiscard]] bool is_under(const Family& below, const Family& above);

/// One part of a contrast: number * coefficient of a design column.
struct ContrastPart {
  int column = -1;
  table::Number number;
};
/// Parses 'age + 80*age^2' over the labels of a settled design; a part is looked up as a whole
/// before numbers are taken out of it, so that labels which are sums or hold numbers are found.
/// Errors: unknown label with the nearest, a label twice.
[[nodiscard]] Result<std::vector<ContrastPart>> parse_contrast(const std::string& text,
                                                               const Design& design,
                                                               const table::Schema& schema);

/// Resolves names of --focus and --protect (labels, or texts of terms, however spaced) to design
/// columns and sets roles; who is in both is protected. Errors: an unknown name with the nearest; a
/// term without a column on the rows used.
[[nodiscard]] Result<void> assign_roles(Design& design, const std::vector<std::string>& focus,
                                        const std::vector<std::string>& protect);

}  // namespace gramproof::design
