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
    for (const design::DesignColumn& column : audit.design.columns)
      any_ |= column.role == design::Role::focus;
  }
  [[nodiscard]] bool any() const { return any_; }
  [[nodiscard]] bool reads(int column) const {
    return !any_ ||
           audit_.design.columns[static_cast<std::size_t>(column)].role == design::Role::focus;
  }
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

Reason index_reason(const Audit& audit, const Focus& focus) {
  const BetweenFamilies& between = audit.between;
  const Index last = between.indices.size() - 1;
  if (last < 1) return {};
  const double index = between.indices[last];
  Reason reason;
  if (index >= thresholds.index_fail && index_counts(audit, focus, thresholds.index_fail)) {
    reason.grade = Grade::fail;
  } else if (index >= thresholds.index_caution &&
             index_counts(audit, focus, thresholds.index_caution)) {
    reason.grade = Grade::caution;
  } else {
    return {};
  }
  std::vector<std::string> names = family_names(audit, last, 0.5);
  if (names.size() < 2) names = family_names(audit, last, 0.2);
  reason.sentence = fmt::format(
      "{} carry nearly the same information (condition index {} between families; 10 is a caution, "
      "30 a failure: "
      "Belsley, Kuh & Welsch 1980, ch. 3, applied between families by our own choice).",
      names.empty() ? "Some families" : names_in_words(names), figure(index));
  return reason;
}

Reason inflation_reason(const Audit& audit, const Focus& focus) {
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
            counted(audit.rank.rank, "coefficient", "coefficients"))};
  }
  return {Grade::caution,
          fmt::format("Only {} left ({} for {}); fewer than 10 is a caution (our own choice).",
                      counted(static_cast<std::uint64_t>(freedom), "residual degree of freedom is",
                              "residual degrees of freedom are"),
                      counted(audit.rows_used, "row", "rows"),
                      counted(audit.rank.rank, "coefficient", "coefficients"))};
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
      place = fmt::format(" ({}:{})", relation.violations.front().file,
                          relation.violations.front().line);
    }
    reason.sentence = fmt::format(
        "{} in all rows but {}{}: the coefficients rest on {} alone (up to 30 such rows is a "
        "failure: our own choice).",
        relation.text, grouped(relation.rows_violating), place,
        relation.rows_violating == 1 ? "that row" : "those rows");
  }
  return reason;
}

Reason rare_reason(const Audit& audit, const Focus& focus) {
  std::vector<std::string> names;
  std::uint64_t fewest = 0;
  for (const RareLevel& level : audit.rare_levels) {
    if (level.column >= 0 && !focus.reads(level.column)) continue;
    if (level.column < 0 && focus.any()) continue;
    if (names.empty() || level.rows < fewest) fewest = level.rows;
    names.push_back(level.label);
  }
  if (names.empty()) return {};
  return {Grade::caution,
          fmt::format("{} {} on fewer than 10 rows ({}{}; our own limit).", names_in_words(names),
                      names.size() == 1 ? "rests" : "rest",
                      names.size() == 1 ? "" : "the rarest on ", counted(fewest, "row", "rows"))};
}

std::string all_clear(const Audit& audit) {
  const BetweenFamilies& between = audit.between;
  const double index =
      between.indices.size() > 0 ? between.indices[between.indices.size() - 1] : 1.0;
  return fmt::format(
      "No family of columns competes with the others: largest condition index between families {} "
      "(10 is a "
      "caution: Belsley, Kuh & Welsch 1980, ch. 3, applied between families by our own choice), {} "
      "residual "
      "degrees of freedom.",
      figure(index), grouped(static_cast<std::uint64_t>(audit.residual_degrees_of_freedom)));
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
  if (ground.grade == Grade::pass) ground.finding = all_clear(audit);
  return ground;
}

}  // namespace gramproof::audit
