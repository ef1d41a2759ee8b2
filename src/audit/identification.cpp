#include "audit/identification.hpp"

#include <algorithm>
#include <numeric>
#include <set>

#include "audit/exceptions.hpp"
#include "audit/proved_rank.hpp"
#include "exact/relations.hpp"

namespace gramproof::audit {
namespace {

std::vector<int> support(const exact::NullVector& vector, std::size_t columns) {
  std::vector<int> result;
  for (std::size_t j = 0; j < columns; ++j) {
    if (vector[j] != 0) result.push_back(static_cast<int>(j));
  }
  return result;
}

/// Exact relations as findings, fewest columns first, then design order.
void list_relations(const design::Design& design, const table::Schema& schema,
                    const scan::Digest& digest, Identification& found) {
  std::vector<exact::NullVector> basis = exact::readable_basis(design, found.null_space);
  const std::size_t columns = design.columns.size();
  std::stable_sort(basis.begin(), basis.end(), [&](const auto& left, const auto& right) {
    const std::vector<int> a = support(left, columns), b = support(right, columns);
    return a.size() != b.size() ? a.size() < b.size() : a < b;
  });
  const std::vector<exact::ColumnSummary> seen = summaries_of(digest.columns);
  for (const exact::NullVector& vector : basis) {
    if (found.relations.size() == most_relations) {
      ++found.relations_omitted;
      continue;
    }
    const exact::Relation relation =
        exact::describe(design, schema, vector, seen, digest.rows_used);
    RelationFinding finding = exact_terms(vector, columns);
    finding.standing = Standing::exact;
    finding.text = relation.text;
    finding.cause_kind = exact::word_of(relation.cause);
    finding.cause_text = relation.cause_text;
    finding.removable = relation.removable;
    finding.rows_holding = digest.rows_used;
    finding.largest_residual = "0";
    found.relations.push_back(std::move(finding));
  }
}

/// Columns that are not exact count as independent, as far as there are rows for them.
void fill_kept(const design::Design& design, const exact::SampleRank& rank, std::uint64_t rows_used,
               Identification& found) {
  std::set<int> kept(rank.pivot_columns.begin(), rank.pivot_columns.end());
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    if (!design.columns[j].exact && kept.size() < rows_used) kept.insert(static_cast<int>(j));
  }
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    const int column = static_cast<int>(j);
    (kept.contains(column) ? found.kept : found.left_out).push_back(column);
  }
  found.too_few_rows = found.left_out.size() > rank.null_vectors.size();
  found.rank.columns = design.columns.size();
  found.rank.rank = found.kept.size();
  found.rank.nullity = found.left_out.size();
  found.rank.proved = std::all_of(design.columns.begin(), design.columns.end(),
                                  [](const design::DesignColumn& column) { return column.exact; });
}

void fill_certificate(const design::Design& design, const scan::Digest& digest,
                      const exact::SampleRank& rank, Identification& found) {
  Certificate certificate;
  certificate.prime = rank.prime;
  certificate.columns = rank.pivot_columns;
  for (const std::size_t row : rank.pivot_rows) certificate.rows.push_back(digest.sample.row[row]);
  certificate.residue =
      exact::minor_residue(design, digest.sample, rank.pivot_rows, rank.pivot_columns, rank.prime);
  certificate.rows_tested = rank.null_vectors.empty() ? rank.pivot_rows.size() : digest.rows_used;
  found.rank.certificate = std::move(certificate);
}

/// Is the constant in the span of what is kept, and as a combination of which columns?
Result<void> find_constant(const design::Design& design, const exact::SampleRank& rank,
                           Prover& prover, Identification& found) {
  const int ones = static_cast<int>(design.columns.size());
  for (const int column : rank.pivot_columns) {
    if (!design.columns[static_cast<std::size_t>(column)].constant) continue;
    found.constant_in_span = true;
    found.constant_support = {column};
    return {};
  }
  std::vector<int> order = rank.pivot_columns;
  order.push_back(ones);
  Result<exact::SampleRank> with_ones = prover.rank_of(order);
  if (!with_ones) return with_ones.error();
  for (const exact::NullVector& vector : with_ones.value().null_vectors) {
    if (vector[static_cast<std::size_t>(ones)] == 0) continue;
    found.constant_in_span = true;
    found.constant_support = support(vector, design.columns.size());
  }
  return {};
}

void fill_coefficients_lost(Identification& found, std::size_t columns) {
  std::set<int> lost;
  for (const exact::NullVector& vector : found.null_space) {
    for (const int column : support(vector, columns)) lost.insert(column);
  }
  // Fewer rows than columns, some of them not exact: no single coefficient is determined for sure.
  if (found.too_few_rows) {
    for (std::size_t j = 0; j < columns; ++j) lost.insert(static_cast<int>(j));
  }
  found.coefficients_lost.assign(lost.begin(), lost.end());
}

}  // namespace

std::vector<exact::ColumnSummary> summaries_of(const std::vector<scan::ColumnRecord>& records) {
  std::vector<exact::ColumnSummary> result;
  for (const scan::ColumnRecord& record : records)
    result.push_back({record.min, record.max, record.nonzero_rows});
  return result;
}

Result<Identification> identify(const design::Design& design, const table::Schema& schema,
                                const std::vector<std::string>& file_names, scan::Digest& digest,
                                const RowTester& test_on_all_rows) {
  Identification found;
  Prover prover(design, digest, test_on_all_rows);
  Result<exact::SampleRank> rank = prover.rank_of(keeping_order(design, digest));
  if (!rank) return rank.error();
  found.null_space = rank.value().null_vectors;
  fill_kept(design, rank.value(), digest.rows_used, found);
  fill_certificate(design, digest, rank.value(), found);
  if (Result<void> done = find_constant(design, rank.value(), prover, found); !done)
    return done.error();
  list_relations(design, schema, digest, found);
  fill_coefficients_lost(found, design.columns.size());
  const ExceptionSearch search{design, schema, file_names, digest, rank.value(), found.null_space};
  Result<Exceptions> exceptions = relations_but_for_rows(search, prover);
  if (!exceptions) return exceptions.error();
  for (RelationFinding& finding : exceptions.value().relations)
    found.relations.push_back(std::move(finding));
  found.rare_cells = std::move(exceptions.value().rare_cells);
  found.chance_of_a_miss = exceptions.value().chance_of_a_miss;
  found.passes = prover.passes();
  return found;
}

}  // namespace gramproof::audit
