#include "audit/inexact_columns.hpp"

#include <mpfr.h>

#include <algorithm>
#include <cmath>
#include <set>
#include <unordered_map>

namespace gramproof::audit {
namespace {

/// Violating rows of one relation that the next round looks at.
constexpr std::size_t rows_a_violation = 4;
/// Each round settles a column for good or finds a new relation for it; far more than is ever seen.
constexpr int most_rounds = 20;

/// Kept columns that are not exact, those first that are to be kept before others.
std::vector<int> inexact_kept(const design::Design& design, const Identification& found) {
  std::vector<int> columns;
  for (const int column : found.kept) {
    if (!design.columns[static_cast<std::size_t>(column)].exact) columns.push_back(column);
  }
  std::stable_sort(columns.begin(), columns.end(), [&](int a, int b) {
    return place_of_role(design.columns[static_cast<std::size_t>(a)]) <
           place_of_role(design.columns[static_cast<std::size_t>(b)]);
  });
  return columns;
}

/// Places in the sample of those of the rows that it holds.
std::vector<std::size_t> places(const table::Piece& sample,
                                const std::vector<std::uint64_t>& numbers) {
  std::unordered_map<std::uint64_t, std::size_t> place;
  for (std::size_t i = 0; i < sample.rows; ++i) place.emplace(sample.row[i], i);
  std::vector<std::size_t> result;
  for (const std::uint64_t number : numbers) {
    if (const auto found = place.find(number); found != place.end())
      result.push_back(found->second);
  }
  return result;
}

std::vector<scan::PieceAnswer> residuals(const std::vector<exact::RoundingRelation>& relations,
                                         const exact::Enclosures& enclosures,
                                         const table::Piece& piece, const design::Block& block) {
  std::vector<scan::PieceAnswer> answers(relations.size());
  for (std::size_t i = 0; i < block.rows.size(); ++i) {
    exact::RowEnclosures row(enclosures, piece, block.rows[i]);
    for (std::size_t r = 0; r < relations.size(); ++r) {
      const exact::RoundingResidual residual = exact::residual_of(relations[r], row);
      if (!residual.holds) answers[r].violating.push_back(i);
      answers[r].largest_residual =
          std::max(answers[r].largest_residual, std::exp2(residual.log2_size));
    }
  }
  // MPFR keeps constants for each thread.
  mpfr_free_cache();
  return answers;
}

bool any_violated(const std::vector<scan::Examined>& answers) {
  return std::any_of(answers.begin(), answers.end(),
                     [](const scan::Examined& answer) { return answer.violating > 0; });
}

class Rounds {
 public:
  Rounds(EveryRow& every_row, const Identification& found)
      : every_row_(every_row),
        found_(found),
        enclosures_(every_row.design()),
        inexact_(inexact_kept(every_row.design(), found)) {}

  Result<InexactColumns> run() {
    InexactColumns result;
    if (inexact_.empty()) return result;
    for (int round = 0; round < most_rounds; ++round) {
      Result<exact::IntervalRank> rank = rank_of_sample();
      if (!rank) return rank.error();
      result.unsettled = std::move(rank.value().unsettled);
      if (rank.value().relations.empty()) return result;
      const Result<std::vector<scan::Examined>> answers = test(rank.value().relations);
      if (!answers) return answers.error();
      if (any_violated(answers.value())) continue;
      for (std::size_t i = 0; i < answers.value().size(); ++i) {
        result.related.push_back(
            {std::move(rank.value().relations[i]), answers.value()[i].largest_residual});
      }
      return result;
    }
    result.unsettled = inexact_;
    return result;
  }

 private:
  [[nodiscard]] Result<exact::IntervalRank> rank_of_sample() const {
    const Result<Matrix> values = every_row_.sample_values();
    if (!values) return values.error();
    const table::Piece& sample = every_row_.sample();
    return exact::interval_rank({every_row_.design(), sample, values.value(),
                                 found_.rank.certificate->columns,
                                 places(sample, found_.rank.certificate->rows), inexact_,
                                 places(sample, {must_use_.begin(), must_use_.end()})});
  }

  /// On the sample first, which costs no pass; violating rows are looked at in the next round.
  [[nodiscard]] Result<std::vector<scan::Examined>> test(
      const std::vector<exact::RoundingRelation>& relations) {
    const scan::Examiner examiner = [&](const table::Piece& piece, const design::Block& block) {
      return residuals(relations, enclosures_, piece, block);
    };
    Result<std::vector<scan::Examined>> answers = every_row_.ask_sample(examiner);
    if (!answers) return answers;
    if (!any_violated(answers.value()) && !every_row_.sample_is_everything()) {
      answers = every_row_.ask(examiner);
      if (!answers) return answers;
      every_row_.join(answers.value());
    }
    for (const scan::Examined& answer : answers.value()) {
      for (std::size_t i = 0; i < answer.violators.rows && i < rows_a_violation; ++i) {
        must_use_.insert(answer.violators.row[i]);
      }
    }
    return answers;
  }

  EveryRow& every_row_;
  const Identification& found_;
  exact::Enclosures enclosures_;
  std::vector<int> inexact_;
  std::set<std::uint64_t> must_use_;  ///< row numbers
};

}  // namespace

Result<InexactColumns> settle_inexact_columns(EveryRow& every_row, const Identification& found) {
  return Rounds(every_row, found).run();
}

}  // namespace gramproof::audit
