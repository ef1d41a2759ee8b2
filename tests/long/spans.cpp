#include <cstdio>
#include <numeric>
#include <string>

#include "audit/run.hpp"
#include "exact/rank.hpp"
#include "exact/relations.hpp"
#include "long/experiments.hpp"
#include "long/named_columns.hpp"
#include "long/planted.hpp"
#include "support/scratch.hpp"

namespace gramproof::test {
namespace {

constexpr std::uint64_t one_audit_in = 20;

void complain(std::uint64_t seed, const std::string& what) {
  std::fprintf(stderr, "spans: seed %llu: %s\n", static_cast<unsigned long long>(seed),
               what.c_str());
}

/// Without the entry for the column of ones.
IntegerVectors on_columns(std::vector<exact::NullVector> vectors, std::size_t k) {
  for (exact::NullVector& vector : vectors) vector.resize(k);
  return vectors;
}

std::string as_csv(const PlantedDesign& planted) {
  std::string text;
  for (std::size_t j = 0; j < planted.rows.front().size(); ++j) {
    text += (j == 0 ? "" : ",") + column_name(j);
  }
  for (const auto& row : planted.rows) {
    text += "\n";
    for (std::size_t j = 0; j < row.size(); ++j) text += (j == 0 ? "" : ",") + row[j].get_str();
  }
  return text + "\n";
}

/// What is wrong with an audit of the design; empty if nothing is.
std::string fault_of_audit(const PlantedDesign& planted) {
  const Scratch scratch;
  Result<table::Source> source =
      table::Source::open({scratch.file("planted.csv", as_csv(planted))}, {});
  if (!source) return to_line(source.error());
  audit::Request request;
  request.design.design = "rest";
  const Result<audit::Audit> audit = audit::run(source.value(), request);
  if (!audit) return to_line(audit.error());
  const audit::Audit& found = audit.value();
  const std::size_t k = planted.rows.front().size();
  if (found.rank.nullity != planted.relations.size() || !found.rank.proved) {
    return "the audit's nullity is " + std::to_string(found.rank.nullity);
  }
  if (!same_span(on_columns(found.null_space, k), planted.relations)) {
    return "the audit's null space is another";
  }
  IntegerVectors listed;
  for (const audit::RelationFinding& relation : found.relations) {
    if (relation.standing != audit::Standing::exact) continue;
    listed.emplace_back(k, 0);
    for (const audit::RelationTerm& term : relation.terms) {
      listed.back()[static_cast<std::size_t>(term.column)] = mpz_class(term.exact);
    }
  }
  return same_span(listed, planted.relations) ? "" : "the audit's relations span another space";
}

std::string fault_of_proof(const PlantedDesign& planted) {
  const std::size_t k = planted.rows.front().size();
  const exact::SampleRank rank = rank_of(planted);
  const IntegerVectors proved = on_columns(rank.null_vectors, k);
  if (rank.pivot_columns.size() + planted.relations.size() != k) {
    return "the rank is " + std::to_string(rank.pivot_columns.size());
  }
  if (!annihilate(proved, planted.rows)) return "a null vector does not hold on every row";
  if (!same_span(proved, planted.relations)) return "the null space is another";
  std::vector<exact::NullVector> vectors = rank.null_vectors;
  for (exact::NullVector& vector : vectors) vector.resize(k + 1);
  const IntegerVectors shown = on_columns(exact::readable_basis(named_columns(k), vectors), k);
  if (!annihilate(shown, planted.rows)) return "a relation shown does not hold on every row";
  return same_span(shown, planted.relations) ? "" : "the basis shown spans another space";
}

}  // namespace

void try_span(std::uint64_t seed, Tally& tally) {
  Random random(seed);
  const PlantedDesign planted = planted_design(random, {});
  ++tally.designs;
  std::string fault = fault_of_proof(planted);
  // Drawn, so that a run of every fiftieth seed audits some as well.
  if (fault.empty() && random.whole(1, one_audit_in) == 1) {
    ++tally.through_audit;
    fault = fault_of_audit(planted);
  }
  if (fault.empty()) {
    ++tally.right;
  } else {
    complain(seed, fault);
  }
}

}  // namespace gramproof::test
