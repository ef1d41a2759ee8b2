// The verdict, the rank and the relations.
#include <string>

#include "report/document_parts.hpp"

namespace gramproof::report {
namespace {

using audit::RelationFinding;
using audit::Standing;

Json ground_part(const audit::Ground& ground) {
  return {{"grade", audit::word_of(ground.grade)}, {"finding", ground.finding}};
}

Json grounds_part(const audit::Grounds& grounds) {
  return {{"identified", ground_part(grounds.identified)},
          {"computable", ground_part(grounds.computable)},
          {"recorded", ground_part(grounds.recorded)},
          {"informative", ground_part(grounds.informative)}};
}

Json certificate_part(const audit::Audit& audit, const audit::Certificate& certificate) {
  // The prime and the residue exceed 2^53, so that a reader that holds numbers as doubles would
  // change them: strings, as all exact values.
  return {{"prime", std::to_string(certificate.prime)},
          {"rows", certificate.rows},
          {"columns", labels_of(audit, certificate.columns)},
          {"residue", std::to_string(certificate.residue)},
          {"rows_tested", certificate.rows_tested}};
}

Json violation_part(const audit::Violation& violation) {
  Json cells = Json::object();
  for (const auto& [column, cell] : violation.cells) cells[column] = cell;
  return {{"file", violation.file},
          {"line", violation.line},
          {"row", violation.row},
          {"residual", violation.residual},
          {"cells", cells}};
}

Json relation_part(const audit::Audit& audit, const RelationFinding& relation) {
  const bool near = relation.standing == Standing::near;
  Json part = Json::object();
  part["standing"] = audit::word_of(relation.standing);
  part["text"] = relation.text;
  part["terms"] = Json::array();
  for (const audit::RelationTerm& term : relation.terms) {
    // Whole numbers are exact; what is no simple fraction (log 100, say) is a number.
    Json coefficient = term.exact.empty() ? finite_or_null(term.coefficient) : Json(term.exact);
    part["terms"].push_back(
        {{"column", label_of(audit, term.column)}, {"coefficient", std::move(coefficient)}});
  }
  if (near) {
    put_number(part, "condition_index", relation.condition_index);
  } else {
    part["rows_holding"] = relation.rows_holding;
    part["rows_violating"] = relation.rows_violating;
    part["violations"] = Json::array();
    for (const audit::Violation& violation : relation.violations) {
      part["violations"].push_back(violation_part(violation));
    }
    part["largest_residual"] = relation.largest_residual.empty() ? "0" : relation.largest_residual;
  }
  part["cause"] = {{"kind", relation.cause_kind.empty() ? "other" : relation.cause_kind},
                   {"text", relation.cause_text}};
  part["removable"] = labels_of(audit, relation.removable);
  return part;
}

}  // namespace

Json verdict_part(const audit::Audit& audit) {
  const audit::Verdict& verdict = audit.verdict;
  Json part = Json::object();
  part["overall"] = audit::word_of(verdict.overall);
  part["summary"] = verdict.summary;
  part["grounds"] = grounds_part(verdict.grounds);
  part["after_leaving_out"] = nullptr;
  if (verdict.after_leaving_out) {
    part["after_leaving_out"] = {{"overall", audit::word_of(verdict.after_leaving_out->overall)},
                                 {"grounds", grounds_part(verdict.after_leaving_out->grounds)}};
  }
  part["coefficients_lost"] = labels_of(audit, verdict.coefficients_lost);
  return part;
}

Json rank_part(const audit::Audit& audit) {
  const audit::Rank& rank = audit.rank;
  Json part = {{"rank", rank.rank},
               {"columns", rank.columns},
               {"nullity", rank.nullity},
               {"proved", rank.proved},
               {"numerical", rank.numerical}};
  if (rank.rank_of_the_doubles) part["rank_of_the_doubles"] = *rank.rank_of_the_doubles;
  if (rank.certificate) part["certificate"] = certificate_part(audit, *rank.certificate);
  return part;
}

Json relations_part(const audit::Audit& audit) {
  Json list = Json::array();
  for (const RelationFinding& relation : audit.relations) {
    list.push_back(relation_part(audit, relation));
  }
  return list;
}

Json rare_levels_part(const audit::Audit& audit) {
  Json list = Json::array();
  for (const audit::RareLevel& level : audit.rare_levels) {
    list.push_back(
        {{"label", level.label}, {"column", label_of(audit, level.column)}, {"rows", level.rows}});
  }
  return list;
}

Json contrasts_part(const audit::Audit& audit) {
  Json list = Json::array();
  for (const audit::ContrastFinding& contrast : audit.contrasts) {
    Json part = {{"text", contrast.text}, {"estimable", contrast.estimable}};
    put_number(part, "standard_error_per_sigma", contrast.standard_error_per_sigma);
    part["blocking_relation"] =
        contrast.blocking_relation.empty() ? Json(nullptr) : Json(contrast.blocking_relation);
    list.push_back(std::move(part));
  }
  return list;
}

Json notes_part(const audit::Audit& audit) {
  Json list = Json::array();
  for (const design::Note& note : audit.notes) {
    list.push_back({{"kind", note.kind}, {"text", note.text}, {"columns", note.columns}});
  }
  return list;
}

}  // namespace gramproof::report
