// src/recheck/claims.hpp - what was stated beside what was found.
#pragma once

#include <string>
#include <vector>

#include "recheck/document.hpp"
#include "recheck/recheck.hpp"
#include "recheck/rows.hpp"

namespace gramproof::recheck {

/// Collects claims. What depends on which rows are used cannot be checked where that is unsettled.
class ClaimList {
 public:
  explicit ClaimList(bool rows_settled) : rows_settled_(rows_settled) {}
  /// `found`: what was found instead, for a claim that is not upheld.
  /// True if it holds.
  bool add(bool holds, const std::string& claim, const std::string& found = "");
  bool add_on_rows(bool holds, const std::string& claim, const std::string& found = "");
  void not_checked(const std::string& what);
  [[nodiscard]] std::vector<Claim>& claims() { return claims_; }

 private:
  bool rows_settled_;
  std::vector<Claim> claims_;
};

void claim_rows(const Statement& stated, const Found& found, ClaimList& list);
/// Whether the certificate's columns are shown to be independent.
bool claim_rank(const Statement& stated, const Found& found, ClaimList& list);
void claim_relations(const Statement& stated, const Found& found, ClaimList& list);
/// `certified`: what claim_rank() gave.
void claim_choice(const Statement& stated, bool certified, ClaimList& list);
void say_what_was_not_checked(const Statement& stated, ClaimList& list);

}  // namespace gramproof::recheck
