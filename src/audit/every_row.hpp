// src/audit/every_row.hpp - asks something of every used row, and lets rows that matter join the
// sample.
#pragma once

#include <functional>
#include <string>
#include <vector>

#include "base/result.hpp"
#include "design/design.hpp"
#include "scan/digest.hpp"
#include "scan/examine.hpp"
#include "table/survey.hpp"

namespace gramproof::audit {

/// A further pass over the data.
using ExaminingPass = std::function<Result<std::vector<scan::Examined>>(const scan::Examiner&)>;

/// Answers from the sample where it holds all used rows, else by a further pass, which is counted.
class EveryRow {
 public:
  EveryRow(const design::Design& design, const table::Schema& schema,
           const std::vector<std::string>& file_names, scan::Digest& digest, ExaminingPass pass)
      : design_(design),
        schema_(schema),
        file_names_(file_names),
        digest_(digest),
        pass_(std::move(pass)) {}

  [[nodiscard]] Result<std::vector<scan::Examined>> ask(const scan::Examiner& examiner);

  /// Of the sample alone.
  [[nodiscard]] Result<std::vector<scan::Examined>> ask_sample(
      const scan::Examiner& examiner) const;

  /// The sample's design rows in doubles, as the fold has seen them.
  [[nodiscard]] Result<Matrix> sample_values() const;
  [[nodiscard]] const table::Piece& sample() const { return digest_.sample; }
  [[nodiscard]] bool sample_is_everything() const {
    return digest_.sample.rows == digest_.rows_used;
  }
  /// Appends the violating rows that the sample does not hold yet. Returns how many.
  std::size_t join(const std::vector<scan::Examined>& answers);

  [[nodiscard]] const design::Design& design() const { return design_; }
  [[nodiscard]] const table::Schema& schema() const { return schema_; }
  [[nodiscard]] const scan::Digest& digest() const { return digest_; }
  [[nodiscard]] int passes() const { return passes_; }

 private:
  const design::Design& design_;
  const table::Schema& schema_;
  const std::vector<std::string>& file_names_;
  scan::Digest& digest_;
  ExaminingPass pass_;
  int passes_ = 0;
};

}  // namespace gramproof::audit
