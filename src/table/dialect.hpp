// src/table/dialect.hpp - which separator and which decimal mark a file is written with.
//
// Separator. Candidates are comma, semicolon, tab and bar. A candidate fits when the header and
// every record of the sample have the same number of cells, at least two. Of several that fit, the
// one under which most data cells are numbers wins (so `price, EUR;qty, kg` over `1,5;2` is read by
// semicolons), then the one with more columns, then the order above. If none fits, the one that
// cuts the header into most cells: a ragged row is named later. If none cuts the header there is
// one column; the separator is then the comma, or the semicolon where the cells are numbers with a
// decimal comma. Decimal mark. A comma, if the separator is none, and a cell of the sample is a
// number only so and none is one only with a point. Without any fraction in the sample the question
// stays open, and the survey settles it on the whole data.
#pragma once

#include <string_view>

#include "table/source.hpp"

namespace gramproof::table {

struct Dialect {
  char separator = ',';
  char decimal_mark = '.';
  bool mark_certain = true;  ///< false: '.' for want of evidence
};

/// `sample`: the first bytes of the file, from the header on; an unfinished last record is left out
/// of account unless `whole`. What `options` sets is taken as it is. O(sample).
[[nodiscard]] Dialect recognise_dialect(std::string_view sample, bool whole,
                                        const ReadOptions& options);

}  // namespace gramproof::table
