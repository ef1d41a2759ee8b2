// Relations that one to five rows break, in whole audits from a file; and designs without any.
#include <algorithm>
#include <cstdio>
#include <map>
#include <string>
#include <vector>

#include "audit/run.hpp"
#include "long/experiments.hpp"
#include "long/named_columns.hpp"
#include "support/random_numbers.hpp"
#include "support/scratch.hpp"

namespace gramproof::test {
namespace {

using Relation = std::map<std::string, std::int64_t>;

struct Broken {
  std::string text;   ///< of the data file
  Relation relation;  ///< empty: none was planted
  std::uint64_t violations = 0;
};

/// Rows 100 to 5,000, at least five a column; columns of small counts, 0/1 and large numbers.
Broken broken_design(Random& random, bool planted) {
  const std::int64_t k = random.whole(3, planted ? 60 : 59);
  const std::int64_t n = random.whole(std::max<std::int64_t>(100, 5 * (k + 2)), 5000);
  Broken made;
  std::vector<std::int64_t> coefficients(static_cast<std::size_t>(k - 1), 0);
  const std::int64_t terms = random.whole(1, std::min<std::int64_t>(6, k - 1));
  for (std::int64_t t = 0; t < terms; ++t)
    coefficients[static_cast<std::size_t>(random.whole(0, k - 2))] = random.whole(1, 12);
  std::vector<std::int64_t> bad;
  for (std::int64_t v = random.whole(1, 5); v > 0; --v) {
    const std::int64_t row = random.whole(0, n - 1);
    if (std::find(bad.begin(), bad.end(), row) == bad.end()) bad.push_back(row);
  }
  for (std::int64_t j = 0; j < k; ++j)
    made.text += (j == 0 ? "" : ",") + column_name(static_cast<std::size_t>(j));
  made.text += "\n";
  for (std::int64_t i = 0; i < n; ++i) {
    std::int64_t last = planted ? 0 : random.whole(-4000, 4000);
    for (std::int64_t j = 0; j + 1 < k; ++j) {
      const std::int64_t reach = j % 3 == 0 ? 1 : j % 3 == 1 ? 9 : 4000;
      const std::int64_t value = random.whole(0, reach);
      if (planted) last += coefficients[static_cast<std::size_t>(j)] * value;
      made.text += std::to_string(value) + ",";
    }
    if (std::find(bad.begin(), bad.end(), i) != bad.end())
      last += random.whole(0, 1) == 0 ? 1 : random.whole(2, 900);
    made.text += std::to_string(last) + "\n";
  }
  if (!planted) return made;
  for (std::size_t j = 0; j < coefficients.size(); ++j) {
    if (coefficients[j] != 0) made.relation[column_name(j)] = coefficients[j];
  }
  made.relation[column_name(coefficients.size())] = -1;
  made.violations = bad.size();
  return made;
}

std::vector<const audit::RelationFinding*> with_exceptions(const audit::Audit& audit) {
  std::vector<const audit::RelationFinding*> found;
  for (const audit::RelationFinding& relation : audit.relations) {
    if (relation.standing == audit::Standing::exact_except) found.push_back(&relation);
  }
  return found;
}

/// The coefficient of the last planted column is -1 or 1 in any primitive multiple.
bool is(const audit::Audit& audit, const audit::RelationFinding& finding, const Relation& wanted) {
  if (finding.terms.size() != wanted.size()) return false;
  const mpz_class sign = mpz_class(finding.terms.back().exact) < 0 ? 1 : -1;
  for (const audit::RelationTerm& term : finding.terms) {
    const auto& label = audit.design.columns[static_cast<std::size_t>(term.column)].label;
    const auto found = wanted.find(label);
    if (found == wanted.end()) return false;
    if (mpz_class(term.exact) != sign * static_cast<long>(found->second)) return false;
  }
  return true;
}

std::string fault_of(const Broken& made) {
  const Scratch scratch;
  auto source = table::Source::open({scratch.file("data.csv", made.text)}, {});
  if (!source) return to_line(source.error());
  audit::Request request;
  request.design.design = "constant, rest";
  const auto audited = audit::run(source.value(), request);
  if (!audited) return to_line(audited.error());
  const auto found = with_exceptions(audited.value());
  if (made.relation.empty()) return found.empty() ? "" : "false finding: " + found.front()->text;
  if (found.size() != 1) return std::to_string(found.size()) + " findings for one";
  if (!is(audited.value(), *found.front(), made.relation)) return "other: " + found.front()->text;
  return found.front()->rows_violating == made.violations ? "" : "violations miscounted";
}

void count(std::uint64_t seed, const std::string& fault, Tally& tally) {
  ++tally.designs;
  ++tally.through_audit;
  if (fault.empty()) {
    ++tally.right;
  } else {
    std::fprintf(stderr, "seed %llu: %s\n", static_cast<unsigned long long>(seed), fault.c_str());
  }
}

}  // namespace

void try_violators(std::uint64_t seed, Tally& tally) {
  Random random(seed);
  count(seed, fault_of(broken_design(random, true)), tally);
}

void try_clean(std::uint64_t seed, Tally& tally) {
  Random random(seed);
  count(seed, fault_of(broken_design(random, false)), tally);
}

}  // namespace gramproof::test
