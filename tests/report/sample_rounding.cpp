// Audits in which rounding has something to hide.
#include <string>

#include "report/sample_audits.hpp"
#include "report/sample_parts.hpp"

namespace gramproof::sample {

using audit::Audit;
using audit::Grade;
using audit::Overall;
using audit::RelationFinding;
using audit::Standing;

namespace {

RelationFinding within_rounding_on(const Audit& audit, const std::string& residual) {
  RelationFinding relation;
  relation.standing = Standing::within_rounding;
  relation.rows_holding = audit.rows_used;
  relation.largest_residual = residual;
  relation.largest_residual_value = std::stod(residual);
  return relation;
}

}  // namespace

Audit within_rounding() {
  Audit audit = numeric_design(
      {"constant", "log(area)", "log(length)", "log(width)", "log(price)", "log(price / 100)"},
      2400);
  for (std::size_t j = 1; j < audit.design.columns.size(); ++j)
    audit.design.columns[j].exact = false;
  leave_out(audit, 5);
  leave_out(audit, 3);
  audit.rank.rank = audit.rank.columns;
  audit.rank.nullity = 0;
  audit.rank.proved = false;
  audit.rank.rank_of_the_doubles = audit.rank.columns;
  RelationFinding product = within_rounding_on(audit, "4.1e-76");
  product.text = "log(length) + log(width) = log(area)";
  product.terms = {{1, "1", 1}, {2, "-1", -1}, {3, "-1", -1}};
  product.cause_kind = "parts_and_total";
  product.cause_text = "log(area) is the sum of log(length) and log(width).";
  product.removable = {1, 2, 3};
  RelationFinding unit = within_rounding_on(audit, "1.4e-76");
  unit.text = "log(price / 100) \u2248 \u22124.605170186 + log(price)";
  unit.terms = {{0, "", 4.605170185988091}, {4, "", -1}, {5, "", 1}};
  unit.cause_kind = "unit_conversion";
  unit.cause_text = "log(price / 100) differs from another column by a fixed number.";
  unit.removable = {0, 4, 5};
  audit.relations = {product, unit};
  audit.verdict.coefficients_lost = {0, 1, 2, 3, 4, 5};
  audit.verdict.overall = Overall::unreliable;
  audit.verdict.summary =
      "Unreliable as written: to 60 digits `log(width)` and `log(price / 100)` are determined by "
      "the others.";
  audit.verdict.after_leaving_out = audit::VerdictOnKept{Overall::sound, audit.verdict.grounds};
  audit.verdict.grounds.identified = {Grade::caution, "A relation holds to 60 digits."};
  audit.verdict.grounds.computable = {Grade::fail, "In doubles a relation is off by rounding."};
  set_indices(audit, {1, 2.31, 4.02, 7.96});
  set_shares(audit, {0, 0.98, 0.61, 0.57});
  return audit;
}

Audit within_recorded_precision() {
  Audit audit = numeric_design({"constant", "rent", "fuel", "other", "metres", "feet"}, 5000);
  RelationFinding shares;
  shares.standing = Standing::within_recorded_precision;
  shares.text = "rent \u2248 100 \u2212 fuel \u2212 other";
  shares.terms = {{1, "", 1}, {0, "", -99.99}, {2, "", 0.9999}, {3, "", 0.9998}};
  shares.rows_holding = 5000;
  shares.largest_residual_value = 0.1499;
  shares.largest_residual = "0.15";
  shares.cause_kind = "fixed_sum";
  shares.cause_text =
      "rent, fuel and other add up to 100 but for the rounding of the recorded numbers: any one of "
      "them follows from the others and the constant.";
  shares.removable = {0, 1, 2, 3};
  RelationFinding units = shares;
  units.text = "feet \u2248 3.2808\u00b7metres";
  units.terms = {{5, "", 1}, {4, "", -3.28084}};
  units.largest_residual_value = 123.4;
  units.largest_residual = "1.2e+02";
  units.cause_kind = "unit_conversion";
  units.cause_text.clear();
  units.removable = {4, 5};
  audit.relations = {shares, units};
  audit.verdict.overall = Overall::unreliable;
  audit.verdict.summary =
      "Unreliable: every coefficient is determined, but a near relation is no more than the "
      "rounding of the data.";
  audit.verdict.grounds.recorded = {Grade::fail, "No row tells the relation from an exact one."};
  set_indices(audit, {1, 2.31, 4.02, 7.96, 1200, 2100});
  set_shares(audit, {0, 0.0001, 0.0001, 0.0001, 0.0002, 0.0002});
  return audit;
}

Audit held_as_doubles() {
  Audit audit = numeric_design({"constant", "heat", "light", "total"}, 1806);
  leave_out(audit, 3);
  audit.rank.rank_of_the_doubles = 4;
  RelationFinding relation;
  relation.text = "heat + light = total";
  relation.terms = {{1, "1", 1}, {2, "1", 1}, {3, "-1", -1}};
  relation.rows_holding = 1806;
  relation.largest_residual = "0";
  relation.cause_kind = "parts_and_total";
  relation.cause_text = "total is the sum of heat and light";
  relation.removable = {1, 2, 3};
  audit.relations = {relation};
  audit.verdict.coefficients_lost = {1, 2, 3};
  audit.verdict.overall = Overall::singular;
  audit.verdict.summary = "Singular as written; sound without `total`.";
  audit.verdict.after_leaving_out = audit::VerdictOnKept{Overall::sound, audit.verdict.grounds};
  audit.verdict.grounds.identified = {Grade::fail, "An exact relation holds on all rows."};
  set_indices(audit, {1, 2.31, 4.02});
  set_shares(audit, {0, 0.98, 0.61});
  return audit;
}

}  // namespace gramproof::sample
