#include "audit/recorded_relations.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "audit/identification.hpp"
#include "base/numeric.hpp"
#include "design/expression.hpp"
#include "design/rows.hpp"
#include "exact/relations.hpp"
#include "scan/examine.hpp"

namespace gramproof::audit {
namespace {

/// How the sum of a relation moves with the cell of one table column.
struct CellEffect {
  int column = -1;  ///< table column
  double half_step = 0;
  bool relative = false;  ///< half_step is relative to the cell
  std::vector<std::pair<double, design::ExpressionPtr>> slopes;  ///< coefficient, derivative
};

/// One near relation, ready to be held against rows.
struct Trial {
  std::size_t finding = 0;  ///< index into Audit::relations
  std::vector<int> columns;
  Vector coefficients, errors;  ///< errors: standard errors of the coefficients
  std::vector<CellEffect> effects;
};

CellEffect effect_of(const Audit& audit, const Step& step, const RelationFinding& relation) {
  CellEffect effect;
  effect.column = step.column;
  effect.half_step = step.step / 2;
  effect.relative = step.how == Step::How::binary;
  for (const RelationTerm& term : relation.terms) {
    const design::DesignColumn& column =
        audit.design.columns[static_cast<std::size_t>(term.column)];
    if (column.constant) continue;
    if (auto slope = design::derivative(column.definition, step.column))
      effect.slopes.emplace_back(term.coefficient, std::move(slope));
  }
  return effect;
}

Trial trial_of(const Audit& audit, std::size_t finding) {
  const RelationFinding& relation = audit.relations[finding];
  Trial trial;
  trial.finding = finding;
  const auto size = static_cast<Index>(relation.terms.size());
  trial.coefficients.resize(size);
  trial.errors.resize(size);
  for (Index i = 0; i < size; ++i) {
    const auto at = static_cast<std::size_t>(i);
    trial.columns.push_back(relation.terms[at].column);
    trial.coefficients[i] = relation.terms[at].coefficient;
    trial.errors[i] = relation.errors[at];
  }
  for (const Step& step : audit.recording.steps) {
    if (step.step == 0 || step.how == Step::How::whole) continue;
    CellEffect effect = effect_of(audit, step, relation);
    if (!effect.slopes.empty()) trial.effects.push_back(std::move(effect));
  }
  return trial;
}

/// What rounding the cells can move the sum by, row by row.
Vector rounding_bound(const Trial& trial, const table::Piece& piece,
                      const std::vector<std::size_t>& rows) {
  Vector bound = Vector::Zero(static_cast<Index>(rows.size()));
  for (const CellEffect& effect : trial.effects) {
    Vector slope = Vector::Zero(bound.size());
    for (const auto& [coefficient, derivative] : effect.slopes)
      slope += coefficient * design::evaluate(*derivative, piece, rows);
    slope = effect.half_step * slope.cwiseAbs();
    if (effect.relative) {
      const auto& cells = piece.columns[static_cast<std::size_t>(effect.column)].value;
      for (Index r = 0; r < slope.size(); ++r)
        slope[r] *= std::abs(cells[rows[static_cast<std::size_t>(r)]]);
    }
    bound += slope;
  }
  return bound;
}

scan::PieceAnswer answer(const Trial& trial, const table::Piece& piece,
                         const design::Block& block) {
  const Matrix x = block.values(Eigen::all, trial.columns);
  const Vector residual = x * trial.coefficients;
  const Matrix sizes = x.cwiseAbs();
  const Vector bound = rounding_bound(trial, piece, block.rows);
  const Vector uncertain = 3 * (sizes * trial.errors);
  // A sum of k products of doubles, each rounded once before: (k + 2) u of the sum of sizes.
  const double products = static_cast<double>(trial.columns.size() + 2) * unit_roundoff;
  const Vector arithmetic = products * (sizes * trial.coefficients.cwiseAbs());
  scan::PieceAnswer result;
  for (Index r = 0; r < residual.size(); ++r) {
    const double size = std::abs(residual[r]);
    result.largest_residual = std::max(result.largest_residual, size);
    const double allowed = bound[r] + std::min(uncertain[r], bound[r]) + arithmetic[r];
    if (!(size <= allowed)) result.violating.push_back(static_cast<std::size_t>(r));
  }
  return result;
}

scan::Examiner examiner_of(const std::vector<Trial>& trials) {
  return [&trials](const table::Piece& piece, const design::Block& block) {
    std::vector<scan::PieceAnswer> answers;
    for (const Trial& trial : trials) answers.push_back(answer(trial, piece, block));
    return answers;
  };
}

std::vector<Trial> those_that_hold(std::vector<Trial> trials,
                                   const std::vector<scan::Examined>& answers) {
  std::vector<Trial> holding;
  for (std::size_t i = 0; i < trials.size(); ++i) {
    if (answers[i].violating == 0 && answers[i].holding > 0)
      holding.push_back(std::move(trials[i]));
  }
  return holding;
}

/// The relation in whole numbers where its coefficients are so within two standard errors.
std::optional<exact::NullVector> whole_coefficients(const RelationFinding& relation,
                                                    std::size_t columns) {
  exact::NullVector vector(columns + 1);
  for (std::size_t i = 0; i < relation.terms.size(); ++i) {
    const double value = relation.terms[i].coefficient;
    const double whole = std::round(value);
    if (whole == 0 || std::abs(whole) > 1e9) return std::nullopt;
    if (std::abs(value - whole) > 2 * relation.errors[i]) return std::nullopt;
    vector[static_cast<std::size_t>(relation.terms[i].column)] = whole;
  }
  exact::make_primitive(vector);
  return vector;
}

/// Two columns that measure one thing, or what the cause of the relation in whole numbers is.
void fill_cause(const Audit& audit, RelationFinding& relation) {
  relation.cause_text.clear();
  const auto vector = whole_coefficients(relation, audit.design.columns.size());
  if (!vector) {
    const auto measuring =
        std::count_if(relation.terms.begin(), relation.terms.end(), [&](const RelationTerm& term) {
          return !audit.design.columns[static_cast<std::size_t>(term.column)].constant;
        });
    relation.cause_kind = measuring == 2 ? "unit_conversion" : "other";
    return;
  }
  const exact::Relation found =
      exact::describe(audit.design, audit.schema, *vector, summaries_of(audit.column_records),
                      audit.rows_used, "but for the rounding of the recorded numbers");
  relation.cause_kind = exact::word_of(found.cause);
  relation.cause_text = found.cause_text;
}

}  // namespace

Result<void> judge_recorded_precision(EveryRow& rows, Audit& audit) {
  std::vector<Trial> trials;
  for (std::size_t i = 0; i < audit.relations.size(); ++i) {
    if (audit.relations[i].standing != Standing::near) continue;
    Trial trial = trial_of(audit, i);
    if (!trial.effects.empty()) trials.push_back(std::move(trial));
  }
  if (trials.empty()) return {};
  Result<std::vector<scan::Examined>> on_sample = rows.ask_sample(examiner_of(trials));
  if (!on_sample) return on_sample.error();
  const std::vector<Trial> promising = those_that_hold(std::move(trials), on_sample.value());
  if (promising.empty()) return {};
  Result<std::vector<scan::Examined>> answers = rows.ask(examiner_of(promising));
  if (!answers) return answers.error();
  for (std::size_t i = 0; i < promising.size(); ++i) {
    const scan::Examined& answer = answers.value()[i];
    if (answer.violating > 0) continue;
    RelationFinding& relation = audit.relations[promising[i].finding];
    relation.standing = Standing::within_recorded_precision;
    relation.rows_holding = answer.holding;
    relation.largest_residual_value = answer.largest_residual;
    relation.largest_residual = fmt::format("{:.2g}", answer.largest_residual);
    fill_cause(audit, relation);
  }
  // In order of standing: those within rounding come before those that are only near.
  std::stable_sort(
      audit.relations.begin(), audit.relations.end(),
      [](const RelationFinding& a, const RelationFinding& b) { return a.standing < b.standing; });
  return {};
}

}  // namespace gramproof::audit
