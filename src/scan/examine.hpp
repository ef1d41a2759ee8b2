// src/scan/examine.hpp - a further pass that asks something of every used row.
#pragma once

#include <cstdint>
#include <functional>
#include <string>
#include <vector>

#include "base/result.hpp"
#include "scan/pass.hpp"
#include "table/source.hpp"
#include "table/survey.hpp"

namespace gramproof::scan {

/// What one of the statements examined makes of the used rows of one piece.
struct PieceAnswer {
  std::vector<std::size_t> violating;  ///< places in Block::rows, ascending
  double largest_residual = 0;         ///< over all used rows, in the examiner's own measure
};

/// One answer a statement, always as many. Called from several threads at once.
using Examiner =
    std::function<std::vector<PieceAnswer>(const table::Piece& piece, const design::Block& block)>;

struct Examined {
  std::uint64_t holding = 0, violating = 0;
  double largest_residual = 0;
  table::Piece violators;  ///< the first `most_violators` violating rows
};

/// Every used row, by a pass over the data. Errors: those of reading, parsing and design::expand.
[[nodiscard]] Result<std::vector<Examined>> examine_all_rows(table::Source& source,
                                                             const table::Schema& schema,
                                                             const design::Design& design,
                                                             const Examiner& examiner,
                                                             const PassOptions& options);

/// The same on rows that are at hand, all of them used rows.
[[nodiscard]] Result<std::vector<Examined>> examine_rows(const table::Schema& schema,
                                                         const std::vector<std::string>& file_names,
                                                         const design::Design& design,
                                                         const table::Piece& rows,
                                                         const Examiner& examiner);

}  // namespace gramproof::scan
