#include "scan/reading.hpp"

#include <utility>

namespace gramproof::scan {

PieceExpander::PieceExpander(const table::Source& source, const table::Schema& schema,
                             const design::Design& design)
    : source_(source), schema_(schema), design_(design) {
  wants_.assign(schema.columns.size(), table::Want::skip);
  for (const int column : design.used_columns) {
    const auto at = static_cast<std::size_t>(column);
    wants_[at] = schema.columns[at].kind == table::ColumnKind::text ? table::Want::text
                                                                    : table::Want::numeric;
  }
  for (const table::SourceFile& file : source.files()) file_names_.push_back(file.name);
}

Result<ExpandedPiece> PieceExpander::expand(const table::RawPiece& raw) const {
  Result<table::Piece> piece = table::parse_piece(source_, schema_, wants_, raw);
  if (!piece) return piece.error();
  Result<design::Block> block = design::expand(design_, schema_, file_names_, piece.value());
  if (!block) return block.error();
  return ExpandedPiece{std::move(piece.value()), std::move(block.value())};
}

}  // namespace gramproof::scan
