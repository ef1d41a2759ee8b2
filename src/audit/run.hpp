// src/audit/run.hpp - the whole of an audit: open data, bound design, scan, proof, figures,
// verdict.
#pragma once

#include <cstdint>
#include <functional>
#include <optional>
#include <string>
#include <utility>
#include <vector>

#include "audit/audit.hpp"
#include "base/result.hpp"
#include "design/bind.hpp"
#include "table/source.hpp"

namespace gramproof::audit {

/// --recorded COLUMN=STEP or COLUMN=exact.
struct RecordedStep {
  std::string column;
  double step = 0;  ///< 0: exact
};

struct Request {
  design::Request design;
  std::vector<RecordedStep> recorded;
  std::vector<std::string> contrasts;
  Solver solver = Solver::normal;
  unsigned threads = 1;
  std::uint64_t memory = std::uint64_t{128} << 20;  ///< bytes that columns may take
  OptionRecord options;                             ///< what was asked, for the document
  /// Which pass runs (named for a person) and how far it is; may be empty.
  std::function<void(const std::string& pass, const table::Progress&)> on_progress;
  /// Sees what the scan left behind, for questions that go on from it; may be empty.
  std::function<void(const design::Settled&, const scan::Digest&)> on_scanned;
};

/// Audits one design on an open source. Passes: the survey, the fold, and one for each round of
/// proof that the sample alone does not settle. Errors: those of the language, the data and the
/// limits. Nothing is printed.
[[nodiscard]] Result<Audit> run(table::Source& source, const Request& request);

/// Bytes an audit of so many columns needs, by the matrices that are alive at once (see run.cpp).
[[nodiscard]] std::uint64_t memory_needed(std::size_t columns, unsigned threads);

/// The most columns that fit into `memory`, at least 1.
[[nodiscard]] std::size_t most_columns(std::uint64_t memory, unsigned threads);

}  // namespace gramproof::audit
