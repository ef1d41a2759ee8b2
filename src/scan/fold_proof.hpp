// src/scan/fold_proof.hpp - the proof of relations while rows are folded, so that no further pass
// is needed.
#pragma once

#include <vector>

#include "design/design.hpp"
#include "exact/echelon.hpp"
#include "exact/rank.hpp"
#include "exact/residual_span.hpp"
#include "scan/digest.hpp"
#include "scan/reading.hpp"
#include "table/piece.hpp"

namespace gramproof::scan {

/// What one piece says about the null vectors of the first.
struct PieceProof {
  exact::ResidualRows residual;
  table::Piece rows;  ///< the rows of residual.rows
};

/// Null vectors of the first piece's rows, over the exact columns of a provisional design and the
/// column of ones, tested on every later piece (methods: 2, item 2). Not attempted for more than
/// 300 columns, nor where the first piece alone leaves vectors that cost more to test than they are
/// likely to be worth: coefficients beyond a machine word, or more than 64 non-zeros a column.
class FoldProof {
 public:
  FoldProof() = default;
  FoldProof(const design::Design& design, const ExpandedPiece& first);

  [[nodiscard]] bool attempted() const { return attempted_; }
  /// Thread-safe.
  [[nodiscard]] PieceProof examine(const design::Design& design, const ExpandedPiece& piece) const;
  /// In order of pieces.
  void take(PieceProof part);
  /// The rows that decide the null space join the sample; sets what the digest says of the proof.
  void finish(Digest& digest) const;

 private:
  bool attempted_ = false;
  std::vector<exact::NullVector> vectors_;
  table::Piece joining_;
  exact::Echelon span_;
  bool all_hold_ = true;
  std::vector<exact::EntryBound> bounds_;
};

}  // namespace gramproof::scan
