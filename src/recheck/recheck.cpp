#include "recheck/recheck.hpp"

#include <utility>

#include "recheck/claims.hpp"
#include "recheck/document.hpp"
#include "recheck/rows.hpp"

namespace gramproof::recheck {

Result<std::vector<Claim>> recheck(const std::string& document, const std::string& name,
                                   const std::vector<std::string>& files) {
  Result<Statement> stated = read_document(document, name);
  if (!stated) return stated.error();
  Result<Found> found = read_rows(stated.value(), files);
  if (!found) return found.error();
  ClaimList list(found.value().unsettled == 0);
  claim_rows(stated.value(), found.value(), list);
  const bool certified = claim_rank(stated.value(), found.value(), list);
  claim_relations(stated.value(), found.value(), list);
  claim_choice(stated.value(), certified, list);
  say_what_was_not_checked(stated.value(), list);
  return std::move(list.claims());
}

}  // namespace gramproof::recheck
