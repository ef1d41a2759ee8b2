#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "audit/verdict.hpp"
#include "base/text.hpp"

namespace gramproof::audit {
namespace {

const Thresholds thresholds;

/// Which coefficients will be read: all of them unless some are focused.
class Focus {
 public:
  explicit Focus(const Audit& audit) : audit_(audit) {
    for (std::size_t j = 0; j < audit.design.columns.size(); ++j)
      any_ |= is_focused(audit, static_cast<int>(j));
  }
  [[nodiscard]] bool any() const { return any_; }
  [[nodiscard]] bool reads(int column) const { return !any_ || is_focused(audit_, column); }
  [[nodiscard]] bool reads_family(int family) const {
    const std::vector<int>& columns =
        audit_.design.families[static_cast<std::size_t>(family)].columns;
    return std::any_of(columns.begin(), columns.end(), [&](int column) { return reads(column); });
  }

 private:
  const Audit& audit_;
  bool any_ = false;
};

/// One thing that lowers the ground, with its sentence.
struct Reason {
  Grade grade = Grade::pass;
  std::string sentence;
};

std::vector<std::string> family_names(const Audit& audit, Index row, double least) {
  std::vector<std::pair<double, std::string>> shares;
  const BetweenFamilies& between = audit.between;
  for (std::size_t f = 0; f < between.families.size(); ++f) {
    const double share = between.proportions(row, static_cast<Index>(f));
    if (share >= least) {
      shares.emplace_back(
          -share, audit.design.families[static_cast<std::size_t>(between.families[f])].name);
    }
  }
  std::stable_sort(shares.begin(), shares.end(),
                   [](const auto& a, const auto& b) { return a.first < b.first; });
  std::vector<std::string> names;
  for (auto& [share, name] : shares) names.push_back(std::move(name));
  return names;
}

/// A focused family with half of its variance in the indices from the threshold up (summed, since
/// competing relations share it).
bool index_counts(const Audit& audit, const Focus& focus, double threshold) {
  if (!focus.any()) return true;
  const BetweenFamilies& between = audit.between;
  for (std::size_t f = 0; f < between.families.size(); ++f) {
    if (!focus.reads_family(between.families[f])) continue;
    double share = 0;
    for (Index i = 0; i < between.indices.size(); ++i) {
      if (between.indices[i] >= threshold) share += between.proportions(i, static_cast<Index>(f));
    }
    if (share >= 0.5) return true;
  }
  return false;
}

/// The direction that is told: the worst, or the one from the threshold up in which a focused
/// family has the largest share of its variance.
Index told_direction(const Audit& audit, const Focus& focus, double threshold) {
  const BetweenFamilies& between = audit.between;
  const Index last = between.indices.size() - 1;
  if (!focus.any()) return last;
  Index told = last;
  double most = -1;
  for (Index i = last; i >= 0 && between.indices[i] >= threshold; --i) {
    for (std::size_t f = 0; f < between.families.size(); ++f) {
      const double share = between.proportions(i, static_cast<Index>(f));
      if (!focus.reads_family(between.families[f]) || share <= most) continue;
      most = share;
      told = i;
    }
  }
  return told;
}

Reason index_reason(const Audit& audit, const Focus& focus) {
  const BetweenFamilies& between = audit.between;
  const Index last = between.indices.size() - 1;
  if (last < 1) return {};
  Reason reason;
  double threshold = 0;
  const auto reaches = [&](double limit) {
    return between.indices[last] >= limit && index_counts(audit, focus, limit);
  };
  if (reaches(thresholds.index_fail)) {
    reason.grade = Grade::fail;
    threshold = thresholds.index_fail;
  } else if (reaches(thresholds.index_caution)) {
    reason.grade = Grade::caution;
    threshold = thresholds.index_caution;
  } else {
    return {};
  }
  const Index told = told_direction(audit, focus, threshold);
  std::vector<std::string> names = family_names(audit, told, 0.5);
  if (names.size() < 2) names = family_names(audit, told, 0.2);
  reason.sentence = fmt::format(
      "{} carry nearly the same information (condition index {} between families; 10 is a caution, "
      "30 a failure: Belsley, Kuh & Welsch 1980, ch. 3, applied between families by our own "
      "choice).",
      names.empty() ? "Some families" : names_in_words(names), figure(between.indices[told]));
  return reason;
}

Reason inflation_reason(const Audit& audit, const Focus& focus) {
  // Bases of columns that double precision cannot tell apart say nothing.
  if (audit.conditioning.known_digits < 1) return {};
  const FamilyInflation* worst = nullptr;
  for (const FamilyInflation& entry : audit.between.inflation) {
    if (!focus.reads_family(entry.family)) continue;
    if (worst == nullptr || entry.per_dimension > worst->per_dimension) worst = &entry;
  }
  if (worst == nullptr || !(worst->per_dimension > thresholds.per_dimension_caution)) return {};
  return {Grade::caution,
          fmt::format("`{}` shares most of its variation with the others: standard errors are {} "
                      "times what they would be "
                      "without (generalised VIF by dimension, Fox & Monette 1992; over 3.16, a VIF "
                      "of 10, is a caution: "
                      "Marquardt 1970, and O'Brien 2007 warns that it is no law).",
                      audit.design.families[static_cast<std::size_t>(worst->family)].name,
                      figure(worst->per_dimension))};
}

Reason freedom_reason(const Audit& audit) {
  const std::int64_t freedom = audit.residual_degrees_of_freedom;
  if (freedom >= thresholds.freedom_caution) return {};
  if (freedom <= 0) {
    return {
        Grade::fail,
        fmt::format(
            "{} for {}: no residual degree of freedom is left, so the fit is perfect whatever the "
            "response is, and no standard error can be computed.",
            counted(audit.rows_used, "row", "rows"),
            counted(audit.kept.size(), "coefficient", "coefficients"))};
  }
  return {Grade::caution,
          fmt::format("Only {} left ({} for {}); fewer than 10 is a caution (our own choice).",
                      counted(static_cast<std::uint64_t>(freedom), "residual degree of freedom is",
                              "residual degrees of freedom are"),
                      counted(audit.rows_used, "row", "rows"),
                      counted(audit.kept.size(), "coefficient", "coefficients"))};
}

bool involves_read_column(const RelationFinding& relation, const Focus& focus) {
  return std::any_of(relation.terms.begin(), relation.terms.end(),
                     [&](const RelationTerm& term) { return focus.reads(term.column); });
}

Reason exception_reason(const Audit& audit, const Focus& focus) {
  Reason reason;
  for (const RelationFinding& relation : audit.relations) {
    if (relation.standing != Standing::exact_except || !involves_read_column(relation, focus))
      continue;
    const Grade grade =
        relation.rows_violating <= thresholds.exception_rows_fail ? Grade::fail : Grade::caution;
    if (grade <= reason.grade) continue;
    reason.grade = grade;
    std::string place;
    if (!relation.violations.empty()) {
      place = fmt::format(" ({}{}:{})", relation.rows_violating == 1 ? "" : "the first at ",
                          relation.violations.front().file, relation.violations.front().line);
    }
    reason.sentence = fmt::format(
        "{} in all rows but {}{}: the coefficients rest on {} alone (up to 30 such rows is a "
        "failure, more a caution: our own choice).",
        relation.text, grouped(relation.rows_violating), place,
        relation.rows_violating == 1 ? "that row" : "those rows");
  }
  return reason;
}

Reason rare_reason(const Audit& audit, const Focus& focus) {
  std::vector<std::string> names;
  std::uint64_t fewest = 0;
  for (const RareLevel& level : audit.rare_levels) {
    const bool counts =
        !focus.any() || std::any_of(level.involves.begin(), level.involves.end(),
                                    [&](int column) { return focus.reads(column); });
    if (!counts) continue;
    if (names.empty() || level.rows < fewest) fewest = level.rows;
    names.push_back(level.label);
  }
  if (names.empty()) return {};
  return {Grade::caution,
          fmt::format("{} {} on fewer than 10 rows ({}{}; our own limit).", names_in_words(names),
                      names.size() == 1 ? "rests" : "rest",
                      names.size() == 1 ? "" : "the rarest on ", counted(fewest, "row", "rows"))};
}

std::string all_clear(const Audit& audit, const Focus& focus) {
  const std::string freedom =
      fmt::format("{} residual degrees of freedom",
                  grouped(static_cast<std::uint64_t>(audit.residual_degrees_of_freedom)));
  if (focus.any()) {
    return fmt::format(
        "No coefficient in focus competes with the others in a direction with a condition index of "
        "10 or more between families (Belsley, Kuh & Welsch 1980, ch. 3, applied between families "
        "by our own choice), {}; what the controls do to each other is not graded.",
        freedom);
  }
  const BetweenFamilies& between = audit.between;
  const double index =
      between.indices.size() > 0 ? between.indices[between.indices.size() - 1] : 1.0;
  return fmt::format(
      "No family of columns competes with the others: largest condition index between families {} "
      "(10 is a caution: Belsley, Kuh & Welsch 1980, ch. 3, applied between families by our own "
      "choice), {}.",
      figure(index), freedom);
}

}  // namespace

Ground informative_ground(const Audit& audit) {
  const Focus focus(audit);
  std::vector<Reason> reasons = {freedom_reason(audit), exception_reason(audit, focus),
                                 index_reason(audit, focus), inflation_reason(audit, focus),
                                 rare_reason(audit, focus)};
  std::stable_sort(reasons.begin(), reasons.end(),
                   [](const Reason& a, const Reason& b) { return a.grade > b.grade; });
  Ground ground;
  ground.grade = reasons.front().grade;
  for (const Reason& reason : reasons) {
    if (reason.grade == Grade::pass) continue;
    if (!ground.finding.empty()) ground.finding += " ";
    ground.finding += reason.sentence;
  }
  if (ground.grade == Grade::pass) ground.finding = all_clear(audit, focus);
  return ground;
}

}  // namespace gramproof::audit
