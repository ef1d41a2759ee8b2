// src/audit/verdict.hpp - four grounds and one word. Thresholds are defaults; each finding prints
// value, threshold and source.
//   [BKW80] Belsley, Kuh & Welsch, "Regression Diagnostics", Wiley 1980, ch. 3: indices 10 and 30.
//   [M70] Marquardt, Technometrics 12 (1970) 591-612: VIF 10; [O07] O'Brien, Quality & Quantity 41
//   (2007) 673-690: no law. Digits 3 and 6, the row counts, the ratios sqrt(2) and 3, and 10 and 30
//   between families: our own choice, said so.
#pragma once

#include <string>
#include <vector>

#include "audit/audit.hpp"

namespace gramproof::audit {

struct Thresholds {
  double digits_fail = 3, digits_caution = 6;
  double ratio_fail = 1.4142135623730951, ratio_caution = 3;
  double index_fail = 30, index_caution = 10;
  double per_dimension_caution = 3.1622776601683795;  ///< square root of the VIF 10
  std::int64_t freedom_caution = 10;
  std::uint64_t exception_rows_fail = 30;
};

/// Everything but Audit::verdict must be filled. Grounds other than `identified` are those of the
/// kept columns; but where nothing worse than a relation within rounding stands against the design,
/// `computable` is that of the design as written, and fails.
[[nodiscard]] Verdict verdict_of(const Audit& audit, const std::vector<int>& coefficients_lost);

[[nodiscard]] Ground identified_ground(const Audit& audit);
[[nodiscard]] Ground computable_ground(const Audit& audit);
/// A relation within rounding makes the design as written fail; `on_kept` is the ground without the
/// columns left out.
[[nodiscard]] Ground computable_as_written(const Audit& audit, const Ground& on_kept);
[[nodiscard]] Ground recorded_ground(const Audit& audit);
[[nodiscard]] Ground informative_ground(const Audit& audit);

/// Would the digits suffice if each family were orthogonal in itself and to the constant? The
/// condition that is then left is the largest index between families; the change is one of
/// parameters only, so the fitted values stay (Marquardt 1980).
[[nodiscard]] bool centring_cures(const Audit& audit);

/// singular, unreliable, fragile, guarded or sound.
[[nodiscard]] Overall overall_of(const Grounds& grounds);

/// "`a`", "`a` and `b`", "`a`, `b` and 4 more": at most `most` names.
[[nodiscard]] std::string names_in_words(const std::vector<std::string>& names,
                                         std::size_t most = 3);

/// A figure rounded to `digits` significant digits: "14", "2.3", "120,000", "4.7e10".
[[nodiscard]] std::string figure(double value, int digits = 2);

}  // namespace gramproof::audit
