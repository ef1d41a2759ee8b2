// src/recheck/recheck.hpp - are the proofs in a verdict right? Claim by claim, against the data.
//
// Deliberately simple and slow, and free of floating point and of any code of the prover: it reads
// the text, evaluates the document's definitions in rationals, multiplies the relations out and
// computes a determinant modulo the certificate's prime. It takes the definitions as given: that
// `age^2` is age times age, and that this was what the design asked, is not its business.
#pragma once

#include <string>
#include <vector>

#include "base/result.hpp"

namespace gramproof::recheck {

enum class Outcome { upheld, not_upheld, not_checked };

struct Claim {
  Outcome outcome = Outcome::upheld;
  std::string text;  ///< one line; may hold any character of the document
};

/// Each claim of the document, in the order of the document. `name`: of the document, for errors;
/// `files`: as the document's `source.files`, in that order; "-" is standard input. Errors: nothing
/// could be checked, because the document or the data cannot be read.
[[nodiscard]] Result<std::vector<Claim>> recheck(const std::string& document,
                                                 const std::string& name,
                                                 const std::vector<std::string>& files);

}  // namespace gramproof::recheck
