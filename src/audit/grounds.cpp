#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "audit/verdict.hpp"
#include "base/text.hpp"

namespace gramproof::audit {
namespace {

const Thresholds thresholds;

std::vector<std::string> named(const Audit& audit, const std::vector<int>& columns) {
  std::vector<std::string> names;
  for (const int column : columns)
    names.push_back(audit.design.columns[static_cast<std::size_t>(column)].label);
  return names;
}

std::vector<std::string> inexact_columns(const Audit& audit) {
  std::vector<std::string> names;
  for (const design::DesignColumn& column : audit.design.columns) {
    if (!column.exact) names.push_back(column.label);
  }
  return names;
}

std::vector<const RelationFinding*> within_rounding(const Audit& audit) {
  std::vector<const RelationFinding*> found;
  for (const RelationFinding& relation : audit.relations) {
    if (relation.standing == Standing::within_rounding) found.push_back(&relation);
  }
  return found;
}

/// "below sqrt(2)" and its like: value against limits, worst first.
Grade grade_below(double value, double fail, double caution) {
  if (value < fail) return Grade::fail;
  return value < caution ? Grade::caution : Grade::pass;
}

/// Whole digits that can be counted on, in words.
std::string digits_in_words(double digits) {
  const int whole = static_cast<int>(std::floor(digits));
  if (whole < 1) return "no digit";
  return "about " + counted(static_cast<std::uint64_t>(whole), "digit", "digits");
}

struct RatioReading {
  Grade grade = Grade::pass;
  double ratio = 0;
  bool any = false;
};

RatioReading read_ratios(const Vector& ratios) {
  RatioReading reading;
  if (ratios.size() == 0) return reading;
  reading.any = true;
  reading.ratio = ratios[0];
  reading.grade = grade_below(reading.ratio, thresholds.ratio_fail, thresholds.ratio_caution);
  return reading;
}

std::string ratio_sentence(const Audit& audit, const std::vector<NoisyDirection>& close) {
  constexpr std::size_t most = 3;
  std::string text;
  for (std::size_t i = 0; i < close.size() && i < most; ++i) {
    text += fmt::format("{}{}: {} times", i == 0 ? "" : "; ",
                        names_in_words(named(audit, close[i].columns)), figure(close[i].ratio));
  }
  if (close.size() > most) text += fmt::format("; and {} more", close.size() - most);
  return fmt::format(
      "In {} the columns stand apart by little more than the rounding of the recorded numbers "
      "alone would make ({}; this distance ratio is about 1 where there is nothing but rounding, "
      "below 1.4 at least half of what separates the columns is rounding, below 3 a ninth: our own "
      "limits).",
      close.size() == 1 ? "one direction" : "some directions", text);
}

/// All columns but the constant are of one family and free of log, sqrt, exp and asinh: powers and
/// the like, which centring or orthogonal polynomials set apart. Functions that agree stay near.
bool is_of_powers(const Audit& audit, const RelationFinding& relation) {
  int family = -1;
  for (const RelationTerm& term : relation.terms) {
    const design::DesignColumn& column =
        audit.design.columns[static_cast<std::size_t>(term.column)];
    if (column.constant) continue;
    if (!column.exact || (family >= 0 && column.family != family)) return false;
    family = column.family;
  }
  return true;
}

}  // namespace

Ground identified_ground(const Audit& audit) {
  if (audit.rank.nullity > 0) {
    std::string finding = fmt::format(
        "{} of {} {} by the others, proved in exact arithmetic on all {} rows used",
        grouped(audit.rank.nullity), counted(audit.rank.columns, "column", "columns"),
        audit.rank.nullity == 1 ? "is determined" : "are determined", grouped(audit.rows_used));
    const auto first = std::find_if(
        audit.relations.begin(), audit.relations.end(), [](const RelationFinding& finding_) {
          return finding_.standing == Standing::exact && !finding_.text.empty();
        });
    if (first == audit.relations.end())
      return {Grade::fail, finding + ": there are fewer rows than columns."};
    finding += ": " + first->text;
    if (audit.rank.nullity > 1) finding += fmt::format(" (and {} more)", audit.rank.nullity - 1);
    return {Grade::fail, finding + "."};
  }
  if (audit.rank.proved) {
    const std::vector<std::string> inexact = inexact_columns(audit);
    return {
        Grade::pass,
        fmt::format("{} linearly independent on the {} rows used: proved in exact arithmetic{}, no "
                    "tolerance decides it.",
                    audit.rank.columns == 1 ? "The only column is"
                                            : "All " + grouped(audit.rank.columns) + " columns are",
                    grouped(audit.rows_used),
                    inexact.empty() ? ""
                                    : ", for " + names_in_words(inexact, 3) +
                                          " with every rounding error enclosed")};
  }
  const std::vector<const RelationFinding*> within = within_rounding(audit);
  if (!within.empty()) {
    return {
        Grade::caution,
        fmt::format("No exact relation is proved on the {} rows used, but {}{} holds to 60 "
                    "digits in every one of them. Values of log, sqrt, exp and asinh can be "
                    "computed as closely as one likes, but no computing proves them equal.",
                    grouped(audit.rows_used), within.front()->text,
                    within.size() == 1 ? "" : fmt::format(" (and {} more)", within.size() - 1))};
  }
  return {
      Grade::pass,
      fmt::format("No exact relation holds among the columns in plain decimals on the {} rows "
                  "used; {} count as independent of the others, which is not proved.",
                  grouped(audit.rows_used), names_in_words(named(audit, audit.rank.unsettled)))};
}

Ground computable_ground(const Audit& audit) {
  const bool normal = audit.solver == Solver::normal;
  const Digits& digits = audit.conditioning.digits;
  const double kept = normal ? digits.normal_equations : digits.qr;
  const Grade grade = grade_below(kept, thresholds.digits_fail, thresholds.digits_caution);
  const std::string condition = audit.conditioning.known_digits < 1
                                    ? std::string("beyond what double precision can tell")
                                    : figure(audit.conditioning.condition_number);
  std::string finding = fmt::format(
      "Solving by {} keeps {} of the 16 that double precision holds ({} would keep {}; condition "
      "number of the unit-length columns {}); fewer than 6 is a caution, fewer than 3 a failure "
      "(our own choice).",
      normal ? "the normal equations" : "QR", digits_in_words(kept),
      normal ? "QR" : "the normal equations",
      digits_in_words(normal ? digits.qr : digits.normal_equations), condition);
  if (grade != Grade::pass && centring_cures(audit)) {
    finding +=
        " The loss comes from powers and from columns far from zero, not from what competes: "
        "centring the columns, or orthogonal polynomials, cures it and leaves the fitted "
        "values as they are.";
  }
  return {grade, std::move(finding)};
}

Ground computable_as_written(const Audit& audit, const Ground& on_kept) {
  const std::vector<const RelationFinding*> within = within_rounding(audit);
  if (within.empty()) return on_kept;
  return {Grade::fail,
          fmt::format("In doubles {} is off by rounding alone, so that the inverse of X'X would be "
                      "made of rounding errors. Without {}: {}",
                      within.front()->text, names_in_words(named(audit, audit.left_out), 3),
                      on_kept.finding)};
}

/// Relations that no row tells from an exact one, given how the numbers were recorded.
std::string within_recorded_sentence(const Audit& audit) {
  const RelationFinding* first = nullptr;
  std::size_t count = 0;
  for (const RelationFinding& relation : audit.relations) {
    if (relation.standing != Standing::within_recorded_precision) continue;
    if (first == nullptr) first = &relation;
    ++count;
  }
  if (first == nullptr) return "";
  return fmt::format(
      "{}{} in every one of the {} rows used, to within the rounding of the recorded "
      "numbers: no row tells it from an exact relation. ",
      first->text, count == 1 ? "" : fmt::format(" (and {} more)", count - 1),
      grouped(audit.rows_used));
}

Ground recorded_ground(const Audit& audit) {
  const Recording& recording = audit.recording;
  const RatioReading exact = read_ratios(recording.distance_ratios);
  const RatioReading rounded = read_ratios(recording.distance_ratios_whole_rounded);
  const std::string within = within_recorded_sentence(audit);
  if (!within.empty()) return {Grade::fail, within + ratio_sentence(audit, recording.close)};
  if (exact.grade != Grade::pass) return {exact.grade, ratio_sentence(audit, recording.close)};
  if (rounded.any && rounded.grade != Grade::pass) {
    return {Grade::caution, ratio_sentence(audit, recording.close_whole_rounded) +
                                " That holds only if whole numbers are rounded values; if they are "
                                "exact counts or codes, say so with "
                                "--recorded COLUMN=exact and this caution goes."};
  }
  if (!exact.any && !rounded.any) {
    return {Grade::pass, "No column carries rounding that could move the design."};
  }
  const double ratio =
      rounded.any && (!exact.any || rounded.ratio < exact.ratio) ? rounded.ratio : exact.ratio;
  return {Grade::pass, fmt::format("Singularity is {} times farther away than the rounding of the "
                                   "recorded numbers (distance ratio; "
                                   "below 3 is a caution, below 1.4 a failure: our own choice).",
                                   figure(ratio))};
}

bool centring_cures(const Audit& audit) {
  const Vector& indices = audit.between.indices;
  if (audit.centred_by != CentredBy::column || indices.size() == 0) return false;
  const double lost = std::log10(indices[indices.size() - 1]);
  const bool normal = audit.solver == Solver::normal;
  const double left = -std::log10(unit_roundoff) - (normal ? 2 : 1) * lost;
  if (left < thresholds.digits_caution) return false;
  return std::all_of(audit.relations.begin(), audit.relations.end(), [&](const auto& relation) {
    return relation.standing != Standing::near || is_of_powers(audit, relation);
  });
}

Overall overall_of(const Grounds& grounds) {
  if (grounds.identified.grade == Grade::fail) return Overall::singular;
  if (grounds.computable.grade == Grade::fail || grounds.recorded.grade == Grade::fail)
    return Overall::unreliable;
  if (grounds.informative.grade == Grade::fail) return Overall::fragile;
  const bool caution =
      grounds.identified.grade == Grade::caution || grounds.computable.grade == Grade::caution ||
      grounds.recorded.grade == Grade::caution || grounds.informative.grade == Grade::caution;
  return caution ? Overall::guarded : Overall::sound;
}

}  // namespace gramproof::audit
