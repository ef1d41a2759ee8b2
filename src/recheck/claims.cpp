// Rows and rank.
#include "recheck/claims.hpp"

#include <algorithm>

#include "base/text.hpp"
#include "recheck/algebra.hpp"

namespace gramproof::recheck {
namespace {

std::string rows_text(std::uint64_t rows) {
  return counted(rows, "row", "rows");
}

std::string reason_text(const Reason& reason) {
  if (reason.first == "filter") return "the row filter";
  if (reason.first == "missing") return "no value in " + reason.second;
  if (reason.first == "weight_zero") return "a weight of zero";
  return reason.second.empty() ? "a row filter that is undefined"
                               : reason.second + " being undefined";
}

void claim_exclusions(const Statement& stated, const Found& found, ClaimList& list) {
  for (const auto& [reason, rows] : stated.excluded) {
    const auto here = found.excluded.find(reason);
    const std::uint64_t count = here == found.excluded.end() ? 0 : here->second;
    list.add_on_rows(rows == count, rows_text(rows) + " left out for " + reason_text(reason),
                     "it is " + grouped(count));
  }
  std::string others;
  for (const auto& [reason, rows] : found.excluded) {
    if (!stated.excluded.contains(reason)) others = rows_text(rows) + " for " + reason_text(reason);
  }
  list.add_on_rows(others.empty(), "no row is left out for another reason", others);
}

std::size_t irrational_columns(const Statement& stated) {
  return static_cast<std::size_t>(
      std::count_if(stated.columns.begin(), stated.columns.end(),
                    [](const StatedColumn& column) { return !column.rational(); }));
}

/// The determinant is what it is said to be and not zero.
bool claim_determinant(const StatedCertificate& certificate, const Found& found, ClaimList& list) {
  const std::size_t size = certificate.columns.size();
  const std::string claim = "their determinant is " + certificate.residue.get_str() +
                            " modulo the prime, not 0: these " +
                            counted(size, "column is", "columns are") + " independent";
  if (found.prime_divides)
    return list.add_on_rows(false, claim, "a value among them has no residue modulo the prime");
  const bool square = certificate.rows.size() == size &&
                      std::all_of(found.matrix.begin(), found.matrix.end(),
                                  [&](const auto& row) { return row.size() == size; });
  if (found.matrix.size() != size || !square)
    return list.add_on_rows(false, claim, "it cannot be computed from rows that are not used");
  const std::uint64_t value = determinant(found.matrix, certificate.prime.get_ui());
  return list.add_on_rows(value != 0 && certificate.residue == mpz_class(value), claim,
                          "it is " + std::to_string(value));
}

/// Whether its columns are shown to be independent.
bool claim_certificate(const Statement& stated, const Found& found, ClaimList& list) {
  const StatedCertificate& certificate = *stated.certificate;
  constexpr int trials = 40;  // a composite passes with a probability below 4^-40 (Rabin 1980)
  const bool fits = prime_fits(certificate.prime);
  const bool prime = fits && mpz_probab_prime_p(certificate.prime.get_mpz_t(), trials) > 0;
  list.add(prime, "the certificate's prime " + certificate.prime.get_str() + " is a prime",
           fits ? "it has factors" : "this checker takes primes below 2^63");
  std::string unused;
  for (std::size_t i = 0; i < found.matrix.size(); ++i) {
    if (found.matrix[i].empty() && !certificate.columns.empty() && unused.empty())
      unused = "row " + std::to_string(certificate.rows[i]) + " is not, or is named twice";
  }
  list.add_on_rows(unused.empty() && fits,
                   "the certificate's " + rows_text(certificate.rows.size()) +
                       " are among the rows used" +
                       (stated.weight ? ", with weights above zero" : ""),
                   unused);
  const bool independent = prime && claim_determinant(certificate, found, list);
  // Without a relation to test, the rows of the certificate suffice.
  const bool all = certificate.rows_tested == found.rows_used;
  const bool enough = stated.nullity == 0 && certificate.rows_tested <= found.rows_used;
  list.add_on_rows(all || enough,
                   rows_text(certificate.rows_tested) + " tested are " +
                       (stated.nullity == 0 ? "among the rows used" : "all rows used"),
                   "the rows used are " + grouped(found.rows_used));
  return independent;
}

/// `proved`: how many columns are shown to be independent.
void claim_lower_bound(const Statement& stated, std::size_t proved, ClaimList& list) {
  const std::size_t irrational = irrational_columns(stated);
  const std::string shown = "shown to be independent are " + grouped(proved);
  if (irrational == 0) {
    list.add_on_rows(proved == stated.rank, "the rank is at least " + grouped(stated.rank), shown);
    return;
  }
  const std::uint64_t rational = stated.rank - std::min<std::uint64_t>(irrational, stated.rank);
  list.add_on_rows(
      proved == rational && stated.rank >= irrational,
      "the rank of the columns without log, sqrt, exp or asinh is at least " + grouped(rational),
      shown);
  list.not_checked("that the other " + counted(irrational, "column adds", "columns add") + " " +
                   grouped(irrational) + " to the rank");
}

}  // namespace

bool ClaimList::add(bool holds, const std::string& claim, const std::string& found) {
  const bool explain = !holds && !found.empty();
  claims_.push_back(
      {holds ? Outcome::upheld : Outcome::not_upheld, claim + (explain ? ": " + found : "")});
  return holds;
}

bool ClaimList::add_on_rows(bool holds, const std::string& claim, const std::string& found) {
  if (rows_settled_) return add(holds, claim, found);
  not_checked(claim);
  return false;
}

void ClaimList::not_checked(const std::string& what) {
  claims_.push_back({Outcome::not_checked, what});
}

void claim_rows(const Statement& stated, const Found& found, ClaimList& list) {
  list.add(stated.files.size() == found.rows_of_file.size(),
           "the data are " + counted(stated.files.size(), "file", "files"),
           counted(found.rows_of_file.size(), "was given", "were given"));
  const std::size_t files = std::min(stated.files.size(), found.rows_of_file.size());
  for (std::size_t i = 0; i < files; ++i) {
    list.add(stated.files[i].rows == found.rows_of_file[i],
             stated.files[i].name + " has " + rows_text(stated.files[i].rows),
             "it has " + grouped(found.rows_of_file[i]));
  }
  list.add(stated.rows_read == found.rows_read, rows_text(stated.rows_read) + " in all",
           "it is " + grouped(found.rows_read));
  if (found.unsettled > 0)
    list.not_checked("whether " + rows_text(found.unsettled) +
                     " are used: that rests on values that are not rational, or on a definition "
                     "too large for the document");
  list.add_on_rows(stated.rows_used == found.rows_used && stated.design_rows == found.rows_used,
                   rows_text(stated.rows_used) + " used", "it is " + grouped(found.rows_used));
  claim_exclusions(stated, found, list);
  std::string wrong;
  for (std::size_t j = 0; j < stated.columns.size(); ++j) {
    const StatedColumn& column = stated.columns[j];
    if (!column.rational() || !column.nonzero_rows || !wrong.empty()) continue;
    if (*column.nonzero_rows != found.nonzero_rows[j])
      wrong = column.name + " in " + grouped(found.nonzero_rows[j]) + ", not " +
              grouped(*column.nonzero_rows);
  }
  list.add_on_rows(wrong.empty(), "in how many rows each column is not zero", wrong);
}

bool claim_rank(const Statement& stated, const Found& found, ClaimList& list) {
  const std::uint64_t columns = stated.columns.size();
  list.add(stated.rank_columns == columns,
           "the design has " + counted(stated.rank_columns, "column", "columns"),
           "the document defines " + grouped(columns));
  list.add(stated.rank <= columns && stated.nullity == columns - stated.rank,
           "rank " + grouped(stated.rank) + " and nullity " + grouped(stated.nullity) +
               " together are the columns");
  const bool independent = stated.certificate && claim_certificate(stated, found, list);
  claim_lower_bound(stated, independent ? stated.certificate->columns.size() : 0, list);
  return independent;
}

}  // namespace gramproof::recheck
