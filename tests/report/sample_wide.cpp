#include <fmt/format.h>

#include "report/sample_audits.hpp"
#include "report/sample_parts.hpp"

namespace gramproof::sample {

using audit::Grade;
using audit::Overall;
using audit::RelationFinding;
using audit::Standing;

namespace {

void add_exact_relations(audit::Audit& audit) {
  for (int i = 0; i < 14; ++i) {
    RelationFinding relation;
    relation.text = fmt::format("indicator_{:03} = indicator_{:03}", 10 + i, 200 + i);
    relation.terms = {{10 + i, "1", 1}, {200 + i, "-1", -1}};
    relation.rows_holding = audit.rows_used;
    relation.largest_residual = "0";
    relation.cause_kind = "duplicate";
    relation.cause_text = "One column is a copy of the other";
    relation.removable = {10 + i, 200 + i};
    audit.relations.push_back(relation);
    audit.verdict.coefficients_lost.push_back(10 + i);
  }
  for (int i = 0; i < 14; ++i) audit.verdict.coefficients_lost.push_back(200 + i);
  audit.relations_omitted = 3;
}

void add_near_relations(audit::Audit& audit) {
  for (int i = 0; i < 7; ++i) {
    RelationFinding relation;
    relation.standing = Standing::near;
    relation.text = fmt::format("indicator_{:03} is close to ", 40 + i);
    for (int j = 0; j < 40; ++j) {
      relation.text += fmt::format("{}0.{}·indicator_{:03}", j == 0 ? "" : " + ", 11 + j, 60 + j);
      relation.terms.push_back({60 + j, "", 0.11 + 0.01 * j});
    }
    relation.terms.push_back({40 + i, "", -1});
    relation.condition_index = 300 - 30.5 * i;
    audit.relations.push_back(relation);
  }
}

}  // namespace

audit::Audit wide() {
  std::vector<std::string> names = {"constant"};
  for (int i = 1; i < 300; ++i) names.push_back(fmt::format("indicator_{:03}", i));
  audit::Audit audit = numeric_design(names, 120000);
  for (int i = 13; i >= 0; --i) leave_out(audit, 200 + i);
  add_exact_relations(audit);
  add_near_relations(audit);
  std::vector<double> indices, shares;
  for (std::size_t i = 0; i < audit.kept.size(); ++i) {
    const auto place = static_cast<double>(i);
    indices.push_back(i + 7 < audit.kept.size() ? 1 + place / 20 : 117 + 30.5 * (place - 279));
    shares.push_back(i == 0 ? 0 : 0.9 - 0.003 * place);
  }
  set_indices(audit, indices);
  set_shares(audit, shares);
  for (int i = 0; i < 25; ++i) {
    audit.notes.push_back(
        {"code_used_as_number",
         fmt::format("`indicator_{:03}` holds few whole numbers and may be a code.", i + 1),
         {names[static_cast<std::size_t>(i) + 1]}});
    audit.excluded.push_back(
        {design::Exclusion::Reason::missing, i, static_cast<std::uint64_t>(40 - i)});
  }
  audit.rows_read = 120461;
  audit.verdict.overall = Overall::singular;
  audit.verdict.summary =
      "Singular as written; fragile without 14 of the 300 columns; 272 coefficients are "
      "unaffected.";
  audit.verdict.grounds.identified = {Grade::fail, "17 exact relations hold on all 120,000 rows."};
  audit.verdict.grounds.informative = {
      Grade::fail, "The largest index between families is 300; 30 or more fails."};
  audit.verdict.after_leaving_out = audit::VerdictOnKept{Overall::fragile, audit.verdict.grounds};
  return audit;
}

}  // namespace gramproof::sample
