// src/report/text_report.hpp - the audit as a person reads it: plain sentences, the verdict first.
#pragma once

#include <string>

#include "audit/audit.hpp"

namespace gramproof::report {

struct TextOptions {
  int width = 96;  ///< terminal columns, taken into 80..120
  bool colour =
      false;  ///< ANSI colours for the verdict and the grades; the words alone carry the meaning
};

/// The report. No line is wider than `width` terminal columns; data text is made visible; figures
/// show known digits only. Wide designs are summarised: the worst first, the rest counted.
/// Pure function; cost linear in the findings.
[[nodiscard]] std::string text_report(const audit::Audit& audit, const TextOptions& options);

}  // namespace gramproof::report
