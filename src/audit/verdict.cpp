#include "audit/verdict.hpp"

#include <fmt/format.h>

#include <algorithm>

#include "base/text.hpp"

namespace gramproof::audit {
namespace {

std::vector<std::string> labels(const Audit& audit, const std::vector<int>& columns) {
  std::vector<std::string> names;
  for (const int column : columns)
    names.push_back(audit.design.columns[static_cast<std::size_t>(column)].label);
  return names;
}

/// What becomes of the coefficients that will be read, or of the others when none is focused.
std::string fate_of_coefficients(const Audit& audit, const std::vector<int>& lost) {
  std::vector<std::string> focused_lost, focused_safe;
  for (std::size_t j = 0; j < audit.design.columns.size(); ++j) {
    if (!is_focused(audit, static_cast<int>(j))) continue;
    const bool is_lost = std::binary_search(lost.begin(), lost.end(), static_cast<int>(j));
    (is_lost ? focused_lost : focused_safe).push_back(audit.design.columns[j].label);
  }
  if (!focused_lost.empty()) {
    return fmt::format("{} can no longer be read as written", names_in_words(focused_lost));
  }
  if (!focused_safe.empty()) {
    return fmt::format("{} {} unaffected", names_in_words(focused_safe),
                       focused_safe.size() == 1 ? "is" : "are");
  }
  const std::size_t others = audit.design.columns.size() - lost.size();
  if (others == 0) return "no coefficient can be read as written";
  if (others == 1) return "the other coefficient is unaffected";
  return fmt::format("the {} other coefficients are unaffected", grouped(others));
}

bool any_focused(const Audit& audit) {
  for (std::size_t j = 0; j < audit.design.columns.size(); ++j) {
    if (is_focused(audit, static_cast<int>(j))) return true;
  }
  return false;
}

std::string singular_summary(const Audit& audit, Overall after, const std::vector<int>& lost) {
  if (audit.kept.empty())
    return "Singular as written: every column is 0 in all rows used, and no coefficient is left.";
  return fmt::format("Singular as written; {} without {}; {}.", word_of(after),
                     names_in_words(labels(audit, audit.left_out), 6),
                     fate_of_coefficients(audit, lost));
}

/// Not proved singular, but to 60 digits.
std::string rounding_summary(const Audit& audit, Overall after, const std::vector<int>& lost) {
  return fmt::format(
      "Unreliable as written: to 60 digits {} {} by the others, which no computing "
      "can prove; {} without {}; {}.",
      names_in_words(labels(audit, audit.left_out), 6),
      audit.left_out.size() == 1 ? "is determined" : "are determined", word_of(after),
      audit.left_out.size() == 1 ? "it" : "them", fate_of_coefficients(audit, lost));
}

std::string summary_of(const Audit& audit, const Verdict& verdict) {
  const Grounds& grounds = verdict.grounds;
  switch (verdict.overall) {
    case Overall::singular:
      return singular_summary(audit, verdict.after_leaving_out->overall, verdict.coefficients_lost);
    case Overall::unreliable: {
      if (verdict.after_leaving_out) {
        return rounding_summary(audit, verdict.after_leaving_out->overall,
                                verdict.coefficients_lost);
      }
      std::string why;
      if (grounds.computable.grade == Grade::fail) {
        why = "too few digits survive the inversion of X'X";
        if (centring_cures(audit)) why += ", which centring the columns cures";
      }
      if (grounds.recorded.grade == Grade::fail) {
        why += std::string(why.empty() ? "" : ", and ") +
               "a near relation is no more than the rounding of the data";
      }
      return "Unreliable: every coefficient is determined, but " + why + ".";
    }
    case Overall::fragile:
      return "Fragile: X'X can be inverted reliably, but some coefficients keep too little "
             "information of their own to be "
             "read with confidence.";
    case Overall::guarded:
      return "Guarded: X'X can be inverted reliably, with the cautions below.";
    case Overall::sound:
      break;
  }
  const std::string who = any_focused(audit) ? "every coefficient in focus" : "every coefficient";
  return "Sound: X'X can be inverted reliably and " + who + " keeps usable information of its own.";
}

Ground identified_on_kept(const Audit& audit) {
  const std::string kept = counted(audit.kept.size(), "column", "columns");
  if (!audit.rank.unsettled.empty()) {
    return {Grade::pass,
            fmt::format("No relation is known among the {} kept; {} count as independent, which is "
                        "not proved.",
                        kept, names_in_words(labels(audit, audit.rank.unsettled)))};
  }
  return {Grade::pass,
          fmt::format("The {} kept are linearly independent: proved in exact arithmetic.", kept)};
}

}  // namespace

Verdict verdict_of(const Audit& audit, const std::vector<int>& coefficients_lost) {
  Verdict verdict;
  verdict.grounds = {identified_ground(audit), computable_ground(audit), recorded_ground(audit),
                     informative_ground(audit)};
  verdict.coefficients_lost = coefficients_lost;
  const bool singular = verdict.grounds.identified.grade == Grade::fail;
  const bool within_rounding = std::any_of(audit.relations.begin(), audit.relations.end(),
                                           [](const RelationFinding& relation) {
                                             return relation.standing == Standing::within_rounding;
                                           });
  if (singular || within_rounding) {
    VerdictOnKept after;
    after.grounds = verdict.grounds;
    after.grounds.identified = identified_on_kept(audit);
    after.overall = overall_of(after.grounds);
    verdict.after_leaving_out = std::move(after);
  }
  if (!singular)
    verdict.grounds.computable = computable_as_written(audit, verdict.grounds.computable);
  verdict.overall = overall_of(verdict.grounds);
  verdict.summary = summary_of(audit, verdict);
  return verdict;
}

}  // namespace gramproof::audit
