// src/scan/reading.hpp - what every pass shares: which columns to parse, and a piece brought to
// design rows.
#pragma once

#include <string>
#include <utility>
#include <vector>

#include "base/ordered_work.hpp"
#include "base/result.hpp"
#include "design/design.hpp"
#include "design/rows.hpp"
#include "scan/pass.hpp"
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

/// A further pass over the used rows: `work` makes a Part of an ExpandedPiece in any thread, `take`
/// gets the parts in order of pieces. Errors: those of reading, parsing and design::expand.
template <class Part, class Work, class Take>
[[nodiscard]] Result<void> pass_over(table::Source& source, const table::Schema& schema,
                                     const design::Design& design, const PassOptions& options,
                                     Work&& work, Take&& take) {
  if (Result<void> start = source.rewind(); !start) return start.error();
  const PieceExpander expander(source, schema, design);
  const auto expanded = [&](table::RawPiece raw) -> Result<Part> {
    Result<ExpandedPiece> piece = expander.expand(raw);
    if (!piece) return piece.error();
    return work(piece.value());
  };
  const auto consume = [&](Part part) -> Result<void> {
    take(std::move(part));
    if (options.on_progress) options.on_progress(source.progress());
    return {};
  };
  return run_ordered<table::RawPiece, Part>(
      options.threads, [&] { return source.next(); }, expanded, consume);
}

}  // namespace gramproof::scan
