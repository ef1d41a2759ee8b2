#include "report/sample_audits.hpp"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>

#include "report/sample_parts.hpp"

namespace gramproof::sample {

using audit::Audit;
using audit::Grade;
using audit::Overall;
using audit::RelationFinding;
using audit::Standing;

Audit sound() {
  Audit audit = numeric_design({"constant", "age", "tenure", "income"}, 2400);
  set_indices(audit, {1, 1.874, 3.204, 7.412});
  set_shares(audit, {0, 0.71, 0.684, 0.93});
  return audit;
}

Audit level_set() {
  Audit audit = numeric_design({"constant", "treated"}, 4812);
  audit.design.text = "constant, treated, all_levels(phase)";
  add_levels(audit, "phase", {"active", "parked", "trial"});
  audit.rows_read = 4870;
  audit.excluded = {{design::Exclusion::Reason::missing, 1, 41},
                    {design::Exclusion::Reason::missing, 0, 22}};
  leave_out(audit, 3);
  RelationFinding relation;
  relation.text = "constant = [phase = active] + [phase = parked] + [phase = trial]";
  relation.terms = {{0, "1", 1}, {2, "-1", -1}, {3, "-1", -1}, {4, "-1", -1}};
  relation.rows_holding = 4812;
  relation.largest_residual = "0";
  relation.cause_kind = "level_set";
  relation.cause_text =
      "Every row has exactly one phase, so the brackets of all phases add up to the constant";
  relation.removable = {0, 2, 3, 4};
  audit.relations.push_back(relation);
  audit.verdict.coefficients_lost = {0, 2, 3, 4};
  audit.verdict.overall = Overall::singular;
  audit.verdict.summary =
      "Singular as written; sound without `[phase = parked]`; `treated` is unaffected.";
  audit.verdict.grounds.identified = {
      Grade::fail, "1 exact relation holds on all 4,812 rows: 5 columns have rank 4."};
  audit.verdict.after_leaving_out = audit::VerdictOnKept{Overall::sound, audit.verdict.grounds};
  audit.verdict.after_leaving_out->grounds.identified = {Grade::pass,
                                                         "The 4 columns kept are independent."};
  set_indices(audit, {1, 1.31, 2.02, 4.96});
  set_shares(audit, {0, 0.98, 0.61, 0.57});
  return audit;
}

Audit with_exceptions() {
  Audit audit = numeric_design({"constant", "heat", "light", "cooking", "total"}, 1806);
  audit.source.files = {{"harbour.csv", 1806}};
  RelationFinding relation;
  relation.standing = Standing::exact_except;
  relation.text = "heat + light + cooking = total";
  relation.terms = {{1, "1", 1}, {2, "1", 1}, {3, "1", 1}, {4, "-1", -1}};
  relation.rows_holding = 1800;
  relation.rows_violating = 6;
  for (const int row : {17, 230, 231, 1040, 1533, 1790}) {
    relation.violations.push_back({"harbour.csv",
                                   static_cast<std::uint64_t>(row) + 1,
                                   static_cast<std::uint64_t>(row),
                                   row == 1040 ? "530" : "-0.01",
                                   {{"heat", "412.10"},
                                    {"light", "96.40"},
                                    {"cooking", "51.99"},
                                    {"total", row == 1040 ? "30.49" : "560.50"}}});
  }
  relation.largest_residual = "530";
  relation.largest_residual_value = 530;
  relation.cause_kind = "parts_and_total";
  relation.cause_text = "`total` is the sum of its parts";
  relation.removable = {1, 2, 3, 4};
  audit.relations.push_back(relation);
  set_indices(audit, {1, 1.6, 2.9, 4.4, 18.62});
  set_shares(audit, {0, 0.2, 0.31, 0.27, 0.011});
  audit.verdict.overall = Overall::fragile;
  audit.verdict.summary =
      "Fragile: `heat + light + cooking = total` holds in all but 6 rows; sound without `total`.";
  audit.verdict.grounds.informative = {
      Grade::fail, "A relation is violated in 6 rows only; at most 30 fail (our own threshold)."};
  return audit;
}

Audit near() {
  Audit audit = numeric_design({"constant", "price", "cost", "age"}, 950);
  add_square(audit, 3);
  audit.column_records.resize(audit.design.columns.size());
  RelationFinding relation;
  relation.standing = Standing::near;
  relation.text = "price is close to 1.31·cost + 4.2";
  relation.terms = {{0, "", -4.2}, {1, "", 1}, {2, "", -1.31}};
  relation.condition_index = 87.4321;
  relation.cause_kind = "near";
  audit.relations.push_back(relation);
  set_indices(audit, {1, 2.2, 6.8, 34.71, 87.4321});
  audit.conditioning.proportions(4, 1) = 0.97;
  audit.conditioning.proportions(4, 2) = 0.98;
  set_shares(audit, {0, 0.0021, 0.00204, 0.0112, 0.0113});
  set_between(audit, {{"price", 1}, {"cost", 1}, {"age", 2}}, {1, 1.2, 1.4, 31.92});
  audit.between.proportions(3, 0) = 0.99;
  audit.between.proportions(3, 1) = 0.99;
  audit.verdict.overall = Overall::fragile;
  audit.verdict.summary =
      "Fragile: `price` and `cost` nearly coincide; sound without either of them.";
  audit.verdict.grounds.informative = {
      Grade::fail,
      "The largest index between families is 31.92; 30 or more fails (30 is that of Belsley, Kuh & "
      "Welsch 1980, ch. 3; using it between families is our choice)."};
  audit.recording.steps = {{0, 0.01, audit::Step::How::decimals},
                           {1, 0.1, audit::Step::How::decimals},
                           {2, 1, audit::Step::How::whole}};
  audit.recording.distance_ratios = Vector::Constant(1, 12.4);
  audit.recording.distance_ratios_whole_rounded = Vector::Constant(1, 2.61);
  audit.recording.close = {{1.0, {1, 2}}};
  audit.recording.close_whole_rounded = {{1.0, {3, 4}}};
  audit.recording.whole_numbers_matter = true;
  audit.recording.attenuation = {std::nullopt, 0.0068, 0.0041, 0.0001, 0.0001};
  return audit;
}

Audit more_columns_than_rows() {
  std::vector<std::string> names = {"constant"};
  for (int i = 1; i <= 9; ++i) names.push_back(fmt::format("item_{}", i));
  Audit audit = numeric_design(names, 6);
  for (int column = 9; column >= 6; --column) leave_out(audit, column);
  audit.residual_degrees_of_freedom = 0;
  for (int i = 0; i < 4; ++i) {
    RelationFinding relation;
    relation.text =
        fmt::format("{}·item_1 + {}·item_2 + {}·item_3 + 5·item_4 = {}·item_5 + item_{}", i + 2,
                    2 * i + 1, 3 * i + 7, i + 1, i + 6);
    relation.terms = {{1, "2", 2}, {2, "1", 1}, {6 + i, "-1", -1}};
    relation.rows_holding = 6;
    relation.largest_residual = "0";
    relation.cause_kind = "too_few_rows";
    relation.cause_text = "6 rows cannot determine more than 6 coefficients";
    relation.removable = {1, 2, 3, 4, 5, 6 + i};
    audit.relations.push_back(relation);
  }
  audit.verdict.coefficients_lost = {1, 2, 3, 4, 5, 6, 7, 8, 9};
  audit.verdict.overall = Overall::singular;
  audit.verdict.summary =
      "Singular as written and fragile without 4 of the columns: 10 columns, but only 6 rows.";
  audit.verdict.grounds.identified = {Grade::fail, "4 exact relations hold on all 6 rows."};
  audit.verdict.grounds.informative = {Grade::fail, "No residual degree of freedom is left."};
  audit.verdict.after_leaving_out = audit::VerdictOnKept{Overall::fragile, audit.verdict.grounds};
  set_indices(audit, {1, 2, 3, 5, 9, 13.3});
  set_shares(audit, {0, 0.2, 0.11, 0.31, 0.09, 0.06});
  return audit;
}

Audit no_constant() {
  Audit audit = numeric_design({"north", "south"}, 52);
  audit.centred_by = audit::CentredBy::none;
  set_indices(audit, {1, 1.05});
  set_shares(audit, {0.99, 0.99});
  audit.notes.push_back({"no_constant",
                         "The constant is not a combination of the columns: VIFs and "
                         "own shares are those of the uncentred columns.",
                         {}});
  return audit;
}

Audit focus() {
  Audit audit = numeric_design({"constant", "schooling", "experience"}, 3011);
  audit.design.text = "constant, schooling, experience, levels(region)";
  add_levels(audit, "region", {"east", "south"});
  audit.design.columns[1].role = design::Role::focus;
  audit.design.columns[4].role = design::Role::protect;
  table::ColumnFacts weight;
  weight.name = "weight";
  audit.schema.columns.push_back(weight);
  audit.design.weight = 3;
  audit.excluded = {{design::Exclusion::Reason::weight_zero, -1, 12},
                    {design::Exclusion::Reason::filter, -1, 340},
                    {design::Exclusion::Reason::undefined, 1, 2}};
  audit.rows_read = 3365;
  audit.design.filter_text = "age >= 18";
  audit.design.filter = node(design::Operation::compare, {cell(1), number("18")});
  audit.options = {{"design", audit.design.text}, {"focus", "schooling"}, {"solver", "qr"}};
  audit.solver = audit::Solver::qr;
  set_indices(audit, {1, 1.7, 2.5, 4.1, 12.03});
  set_shares(audit, {0, 0.24, 0.25, 0.9, 0.91});
  set_between(audit, {{"schooling", 1}, {"experience", 1}, {"region", 2}}, {1, 1.3, 1.6, 2.9});
  audit.contrasts = {{"schooling + 10*experience", true, 0.0041, ""},
                     {"region_sum", false, std::nullopt, "east + south = constant"}};
  audit.rare_levels = {{"[region = east]", 3, 4, {3}}, {"[region = north]", -1, 1, {3}}};
  audit.verdict.overall = Overall::guarded;
  audit.verdict.summary = "Guarded: usable, but two levels of `region` rest on fewer than 10 rows.";
  audit.verdict.grounds.informative = {Grade::caution,
                                       "2 levels rest on fewer than 10 rows (our own threshold)."};
  return audit;
}

Audit beyond_doubles() {
  Audit audit = numeric_design({"constant", "year", "signal"}, 77);
  set_indices(audit, {1, 41.7, 3.1e15});
  audit.conditioning.known_digits = -1.8;
  audit.conditioning.known_digits_raw = -2.4;
  audit.conditioning.digits = {0.5, 0, 0, 0};
  set_shares(audit, {0, 1e-19, 2e-19});
  audit.verdict.overall = Overall::unreliable;
  audit.verdict.summary = "Unreliable: no digit of the inverse survives double precision.";
  audit.verdict.grounds.computable = {
      Grade::fail, "The normal equations keep no digit; fewer than 3 fail (our own threshold)."};
  return audit;
}

Audit hostile() {
  const std::string steering = "pay\x1b[31m\nroll\xe2\x80\xae";
  Audit audit =
      numeric_design({"constant", steering, std::string(190, 'x'), "ünïcödé \"quoted"}, 40);
  audit.source.files = {{"/tmp/\x1b]0;title\x07.csv", 40}};
  audit.verdict.summary = "Sound, `" + steering + "` included.";
  audit.notes.push_back(
      {"code_used_as_number", "`" + steering + "` looks like a code.", {steering}});
  set_indices(audit, {1, 2, 3, 4});
  set_shares(audit, {0, 0.5, 0.4, 0.3});
  return audit;
}

std::vector<Sample> all() {
  return {{"sound", sound()},
          {"level_set", level_set()},
          {"with_exceptions", with_exceptions()},
          {"near", near()},
          {"wide", wide()},
          {"more_columns_than_rows", more_columns_than_rows()},
          {"no_constant", no_constant()},
          {"focus", focus()},
          {"beyond_doubles", beyond_doubles()},
          {"hostile", hostile()},
          {"within_rounding", within_rounding()},
          {"within_recorded_precision", within_recorded_precision()},
          {"held_as_doubles", held_as_doubles()}};
}

}  // namespace gramproof::sample
