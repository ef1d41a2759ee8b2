// The four grounds at their thresholds, and the word they make together (the design's verdict
// table).
#include <doctest/doctest.h>

#include <functional>
#include <string>
#include <vector>

#include "audit/plain_audit.hpp"
#include "audit/verdict.hpp"

namespace gramproof::audit {
namespace {

using test::plain_audit;

struct Case {
  std::string why;
  std::function<void(Audit&)> spoil;
  Grade grade;
  std::string says;  ///< part of the finding
};

RelationFinding but_for(std::uint64_t rows, const std::vector<int>& columns) {
  RelationFinding finding;
  finding.standing = Standing::exact_except;
  finding.text = "a = b";
  finding.rows_violating = rows;
  finding.rows_holding = 1'000 - rows;
  finding.violations.push_back({"harbour.csv", 12, 11, "9", {}});
  for (const int column : columns) finding.terms.push_back({column, "1", 1});
  return finding;
}

void focus_on(Audit& audit, int column) {
  audit.design.columns[static_cast<std::size_t>(column)].role = design::Role::focus;
}

void spread(Audit& audit, double index, double share_of_a, double share_of_b) {
  audit.between.indices << 1, index;
  audit.between.proportions << 1 - share_of_a, 1 - share_of_b, share_of_a, share_of_b;
}

void check_cases(const std::vector<Case>& cases, Ground (*ground)(const Audit&)) {
  for (const Case& row : cases) {
    Audit audit = plain_audit();
    row.spoil(audit);
    const Ground found = ground(audit);
    CAPTURE(row.why);
    CAPTURE(found.finding);
    CHECK(found.grade == row.grade);
    CHECK(found.finding.find(row.says) != std::string::npos);
    CHECK(found.finding.back() == '.');
  }
}

}  // namespace

TEST_CASE("computable: digits of the normal equations, or of QR where that is the solver") {
  const auto digits = [](double normal, double qr, Solver solver) {
    return [=](Audit& audit) {
      audit.conditioning.digits.normal_equations = normal;
      audit.conditioning.digits.qr = qr;
      audit.solver = solver;
    };
  };
  check_cases(
      {{"at the caution's edge", digits(6.0, 11, Solver::normal), Grade::pass, "6 digits"},
       {"just below it", digits(5.99, 11, Solver::normal), Grade::caution, "5 digits"},
       {"at the failure's edge", digits(3.0, 9.5, Solver::normal), Grade::caution, "3 digits"},
       {"just below it", digits(2.99, 9.5, Solver::normal), Grade::fail, "2 digits"},
       {"nothing left", digits(0.2, 8, Solver::normal), Grade::fail, "no digit"},
       {"QR keeps what the normal equations lose", digits(0.2, 8, Solver::qr), Grade::pass,
        "8 digits"},
       {"QR fails too", digits(0, 2.5, Solver::qr), Grade::fail, "2 digits"}},
      computable_ground);
}

TEST_CASE("a loss of digits inside families comes with its remedy, one between families does not") {
  Audit audit = plain_audit();
  audit.conditioning.digits.normal_equations = 1;
  CHECK(computable_ground(audit).finding.find("centring") != std::string::npos);
  CHECK(verdict_of(audit, {}).summary.find("which centring the columns cures") !=
        std::string::npos);
  spread(audit, 1e6, 0.9, 0.9);
  CHECK(computable_ground(audit).finding.find("centring") == std::string::npos);
  CHECK(verdict_of(audit, {}).summary.find("centring") == std::string::npos);
}

TEST_CASE("recorded: distance ratio under both readings of whole numbers") {
  const auto ratios = [](double exact, double rounded) {
    return [=](Audit& audit) {
      audit.recording.distance_ratios = exact > 0 ? Vector(Vector::Constant(1, exact)) : Vector();
      audit.recording.distance_ratios_whole_rounded =
          rounded > 0 ? Vector(Vector::Constant(1, rounded)) : Vector();
      audit.recording.close = {{exact, {1, 2}}};
      audit.recording.close_whole_rounded = {{rounded, {2}}};
    };
  };
  check_cases({{"no noise at all", ratios(0, 0), Grade::pass, "No column"},
               {"three is enough", ratios(3.0, 0), Grade::pass, "3"},
               {"just below three", ratios(2.99, 0), Grade::caution, "`a` and `b`"},
               {"the root of two is not yet a failure", ratios(1.41422, 0), Grade::caution, "1.4"},
               {"pure rounding", ratios(1.0, 0), Grade::fail, "1"},
               {"only the rounded reading fails: a caution that can be settled", ratios(50, 1.0),
                Grade::caution, "--recorded COLUMN=exact"},
               {"the exact reading fails: the other does not matter", ratios(1.1, 0.9), Grade::fail,
                "`a` and `b`"}},
              recorded_ground);
}

TEST_CASE("informative: indices between families, inflation, rows and exceptions") {
  check_cases(
      {{"nothing to say", [](Audit&) {}, Grade::pass, "1.5"},
       {"index 10", [](Audit& a) { spread(a, 10, 0.9, 0.9); }, Grade::caution, "`a` and `b`"},
       {"index just below 10", [](Audit& a) { spread(a, 9.99, 0.9, 0.9); }, Grade::pass, "10"},
       {"index 30", [](Audit& a) { spread(a, 30, 0.9, 0.9); }, Grade::fail, "Belsley"},
       {"a VIF of 10 is at the edge",
        [](Audit& a) { a.between.inflation[0].per_dimension = 3.162; }, Grade::pass, ""},
       {"a VIF over 10", [](Audit& a) { a.between.inflation[0].per_dimension = 3.17; },
        Grade::caution, "`a` shares"},
       {"nine degrees of freedom", [](Audit& a) { a.residual_degrees_of_freedom = 9; },
        Grade::caution, "9 residual"},
       {"ten degrees of freedom", [](Audit& a) { a.residual_degrees_of_freedom = 10; }, Grade::pass,
        "10"},
       {"none left", [](Audit& a) { a.residual_degrees_of_freedom = 0; }, Grade::fail,
        "no residual degree"},
       {"a rare level",
        [](Audit& a) {
          a.rare_levels.push_back({"[fuel = peat]", 2, 3, {2}});
        },
        Grade::caution, "3 rows"},
       {"30 violating rows",
        [](Audit& a) {
          a.relations.push_back(but_for(30, {1, 2}));
        },
        Grade::fail, "harbour.csv:12"},
       {"31 violating rows",
        [](Audit& a) {
          a.relations.push_back(but_for(31, {1, 2}));
        },
        Grade::caution, "a = b"}},
      informative_ground);
}

TEST_CASE("focus: what is not read does not count") {
  check_cases({{"an index in which the focused family has its share",
                [](Audit& a) {
                  spread(a, 40, 0.9, 0.9);
                  focus_on(a, 1);
                },
                Grade::fail, "`a`"},
               {"an index in which it has none",
                [](Audit& a) {
                  spread(a, 40, 0.1, 0.9);
                  focus_on(a, 1);
                },
                Grade::pass, ""},
               {"inflation of a control",
                [](Audit& a) {
                  a.between.inflation[1].per_dimension = 9;
                  focus_on(a, 1);
                },
                Grade::pass, ""},
               {"an exception among controls",
                [](Audit& a) {
                  a.relations.push_back(but_for(1, {0, 2}));
                  focus_on(a, 1);
                },
                Grade::pass, ""},
               {"an exception that involves it",
                [](Audit& a) {
                  a.relations.push_back(but_for(1, {1, 2}));
                  focus_on(a, 1);
                },
                Grade::fail, "that row"},
               {"a rare level among controls",
                [](Audit& a) {
                  a.rare_levels.push_back({"[fuel = peat]", 2, 3, {2}});
                  focus_on(a, 1);
                },
                Grade::pass, ""},
               {"degrees of freedom always count",
                [](Audit& a) {
                  a.residual_degrees_of_freedom = 0;
                  focus_on(a, 1);
                },
                Grade::fail, ""}},
              informative_ground);
}

TEST_CASE("the overall word is the worst ground's") {
  struct Row {
    std::string why;
    Grade identified, computable, recorded, informative;
    Overall overall;
  };
  const Grade p = Grade::pass, c = Grade::caution, f = Grade::fail;
  const std::vector<Row> rows = {{"nothing", p, p, p, p, Overall::sound},
                                 {"unproved relation", c, p, p, p, Overall::guarded},
                                 {"digits", p, c, p, p, Overall::guarded},
                                 {"rounding", p, p, c, p, Overall::guarded},
                                 {"information", p, p, p, c, Overall::guarded},
                                 {"information fails", p, c, c, f, Overall::fragile},
                                 {"digits fail", p, f, p, f, Overall::unreliable},
                                 {"rounding fails", p, p, f, f, Overall::unreliable},
                                 {"singular before all", f, f, f, f, Overall::singular}};
  for (const Row& row : rows) {
    CAPTURE(row.why);
    const Grounds grounds{
        {row.identified, ""}, {row.computable, ""}, {row.recorded, ""}, {row.informative, ""}};
    CHECK(overall_of(grounds) == row.overall);
  }
}

TEST_CASE(
    "a singular design is told with what repairs it and what becomes of the coefficients read") {
  Audit audit = plain_audit();
  audit.rank.rank = 2;
  audit.rank.nullity = 1;
  audit.kept = {0, 1};
  audit.left_out = {2};
  RelationFinding relation;
  relation.text = "a = b";
  audit.relations.push_back(relation);
  Verdict verdict = verdict_of(audit, {1, 2});
  CHECK(verdict.overall == Overall::singular);
  REQUIRE(verdict.after_leaving_out);
  CHECK(verdict.after_leaving_out->overall == Overall::sound);
  CHECK(verdict.summary ==
        "Singular as written; sound without `b`; the other coefficient is unaffected.");
  CHECK(verdict.grounds.identified.finding.find("a = b") != std::string::npos);
  focus_on(audit, 1);
  verdict = verdict_of(audit, {1, 2});
  CHECK(verdict.summary ==
        "Singular as written; sound without `b`; `a` can no longer be read as written.");
}

TEST_CASE("names and figures in words") {
  CHECK(names_in_words({"a"}) == "`a`");
  CHECK(names_in_words({"a", "b", "c", "d"}) == "`a`, `b`, `c` and `d`");
  CHECK(names_in_words({"a", "b", "c", "d", "e"}) == "`a`, `b`, `c` and 2 more");
  CHECK(figure(14.2) == "14");
  CHECK(figure(2.345) == "2.3");
  CHECK(figure(0.000123) == "0.00012");
  CHECK(figure(123456.0) == "120,000");
  CHECK(figure(4.71e10) == "4.7e10");
}

}  // namespace gramproof::audit
