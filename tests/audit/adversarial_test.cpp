// Designs that are hard on purpose, through the whole audit: rank, null space and standing, held
// against an elimination in big integers that shares nothing with the program.
#include <doctest/doctest.h>

#include <algorithm>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <set>

#include "audit/adversarial_cases.hpp"
#include "audit/run.hpp"
#include "support/plain_elimination.hpp"
#include "support/scratch.hpp"

namespace gramproof::audit {
namespace {

using test::AdversarialCase;
using test::IntegerVectors;

constexpr std::uint64_t seed = 20'260'301;

std::vector<AdversarialCase> all_cases() {
  std::vector<AdversarialCase> all = test::cases_of_fixtures();
  for (auto* make : {test::cases_of_numbers, test::cases_of_matrices, test::cases_of_designs}) {
    for (AdversarialCase& made : make(seed)) all.push_back(std::move(made));
  }
  return all;
}

/// Rows multiplied by their denominators, which changes neither rank nor null space.
IntegerVectors whole_rows(const test::Numbers& rows) {
  IntegerVectors result;
  for (const auto& row : rows) {
    mpz_class factor = 1;
    for (const mpq_class& value : row) factor = lcm(factor, value.get_den());
    result.emplace_back();
    for (const mpq_class& value : row) {
      result.back().push_back(value.get_num() * (factor / value.get_den()));
    }
  }
  return result;
}

Audit audited(const AdversarialCase& hard) {
  const test::Scratch scratch;
  Result<table::Source> source = table::Source::open({scratch.file("hard.csv", hard.csv)}, {});
  REQUIRE(source);
  Request request;
  if (!hard.design.empty()) request.design.design = hard.design;
  request.design.weight = hard.weight;
  Result<Audit> audit = run(source.value(), request);
  if (!audit) FAIL(to_line(audit.error()));
  return std::move(audit.value());
}

/// The vectors of the relations of one standing, over the design columns.
IntegerVectors listed(const Audit& audit, Standing standing) {
  IntegerVectors vectors;
  for (const RelationFinding& relation : audit.relations) {
    if (relation.standing != standing) continue;
    vectors.emplace_back(audit.design.columns.size(), 0);
    for (const RelationTerm& term : relation.terms) {
      vectors.back()[static_cast<std::size_t>(term.column)] = mpz_class(term.exact);
    }
  }
  return vectors;
}

void check_exact(const AdversarialCase& hard, const Audit& audit) {
  const std::size_t k = hard.rows.front().size();
  REQUIRE(audit.design.columns.size() == k);
  CHECK(audit.rows_used == hard.rows.size());
  const IntegerVectors rows = whole_rows(hard.rows);
  const test::PlainNullSpace truth = test::plain_null_space(rows);
  CHECK(audit.rank.rank == truth.rank);
  CHECK(audit.rank.nullity == k - truth.rank);
  CHECK(audit.rank.proved);
  IntegerVectors found = audit.null_space;
  for (auto& vector : found) vector.resize(k);
  CHECK(test::same_span(found, truth.vectors));
  const IntegerVectors shown = listed(audit, Standing::exact);
  CHECK(shown.size() + audit.relations_omitted == truth.vectors.size());
  CHECK(test::annihilate(shown, rows));
  CHECK(test::plain_null_space(shown).rank == shown.size());
  CHECK((audit.verdict.overall == Overall::singular) == (truth.rank < k));
  REQUIRE(audit.rank.certificate);
  CHECK(audit.rank.certificate->rows.size() == truth.rank);
}

void check_exceptions(const AdversarialCase& hard, const Audit& audit) {
  std::multiset<std::vector<std::uint64_t>> found, planted;
  for (const auto& rows : hard.exceptions) planted.insert(rows);
  for (const RelationFinding& relation : audit.relations) {
    if (relation.standing != Standing::exact_except) continue;
    std::vector<std::uint64_t> rows;
    for (const Violation& violation : relation.violations) rows.push_back(violation.row);
    CHECK(rows.size() == relation.rows_violating);
    found.insert(rows);
  }
  CHECK(found == planted);
}

/// For tests/long/tolerance_table.py: the design matrix in fractions, its exact rank before it.
void write_case(const std::filesystem::path& folder, std::size_t index,
                const AdversarialCase& hard) {
  std::string number = std::to_string(index);
  number.insert(0, number.size() < 3 ? 3 - number.size() : 0, '0');
  std::ofstream file(folder / (number + ".case"));
  file << hard.name << "\n" << test::plain_null_space(whole_rows(hard.rows)).rank << "\n";
  for (const auto& row : hard.rows) {
    for (std::size_t j = 0; j < row.size(); ++j) file << (j == 0 ? "" : " ") << row[j];
    file << "\n";
  }
}

}  // namespace

TEST_CASE("hard designs: rank, null space and standing are right without any option") {
  CAPTURE(seed);
  const std::vector<AdversarialCase> all = all_cases();
  CHECK(all.size() >= 70);
  for (const AdversarialCase& hard : all) {
    CAPTURE(hard.name);
    const Audit audit = audited(hard);
    check_exact(hard, audit);
    check_exceptions(hard, audit);
  }
}

TEST_CASE("Filip and Hilbert: full rank is proved; with a column replaced the relation is told") {
  struct Case {
    std::string name, relation;
  };
  const std::vector<Case> cases = {
      {"Filip's polynomial of degree 10 (NIST), as recorded", ""},
      {"Filip with one power replaced by a combination",
       "x + 4\u00b7\"x^6\" = 12\u00b7\"x^2\" + 4\u00b7\"x^7\""},
      {"12 x 12 Hilbert in decimals", ""},
      {"Hilbert with a column replaced by a combination", "2\u00b7x2 + x12 = 5\u00b7x5 + x9"},
  };
  const std::vector<AdversarialCase> all = all_cases();
  for (const Case& c : cases) {
    CAPTURE(c.name);
    const auto found = std::find_if(
        all.begin(), all.end(), [&](const AdversarialCase& hard) { return hard.name == c.name; });
    REQUIRE(found != all.end());
    AdversarialCase hard = *found;
    if (hard.design.empty()) {
      // Filip's file has its own constant.
      hard.design = "rest";
      for (auto& row : hard.rows) row.erase(row.begin());
    }
    const Audit audit = audited(hard);
    check_exact(hard, audit);
    CHECK(audit.rank.nullity == (c.relation.empty() ? 0 : 1));
    REQUIRE(listed(audit, Standing::exact).size() == audit.rank.nullity);
    if (!c.relation.empty()) CHECK(audit.relations.front().text == c.relation);
  }
}

TEST_CASE("the hard designs are written out where a folder is named for them") {
  const char* folder = std::getenv("GRAMPROOF_CASES");
  if (folder == nullptr) return;
  const std::vector<AdversarialCase> all = all_cases();
  for (std::size_t i = 0; i < all.size(); ++i) write_case(folder, i + 1, all[i]);
  MESSAGE(all.size() << " designs written, seed " << seed);
}

}  // namespace gramproof::audit
