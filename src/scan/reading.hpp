// src/scan/reading.hpp - what every pass shares: which columns to parse, and a piece brought to
// design rows.
#pragma once

#include <string>
#include <vector>

#include "base/result.hpp"
#include "design/design.hpp"
#include "design/rows.hpp"
#include "table/source.hpp"
#include "table/survey.hpp"

namespace gramproof::scan {

/// A parsed piece and its design rows.
struct ExpandedPiece {
  table::Piece piece;
  design::Block block;
};

/// Parses and expands raw pieces of one data set under one design. Thread-safe.
class PieceExpander {
 public:
  PieceExpander(const table::Source& source, const table::Schema& schema,
                const design::Design& design);
  [[nodiscard]] Result<ExpandedPiece> expand(const table::RawPiece& raw) const;

 private:
  const table::Source& source_;
  const table::Schema& schema_;
  const design::Design& design_;
  std::vector<table::Want> wants_;
  std::vector<std::string> file_names_;
};

}  // namespace gramproof::scan
