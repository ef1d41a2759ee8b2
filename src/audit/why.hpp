// src/audit/why.hpp - why a column cannot be kept, or can, and what leaving it out does to the
// others.
//   [S69]  Silvey, "Multicollinearity and imprecise estimation", J. Roy. Statist. Soc. B 31 (1969)
//          539-552: a sum of coefficients is estimable if and only if it is orthogonal to every
//          relation.
//   [FW33] Frisch & Waugh, Econometrica 1 (1933) 387-401; [L63] Lovell, J. Amer. Statist. Assoc. 58
//          (1963) 993-1010: a coefficient rests on the residual of its column on the others.
//   [BG65] Businger & Golub, Numer. Math. 7 (1965) 269-276: QR with column pivoting.
// With c = sum a_j x_j left out, X b = sum (b_j + a_j b_c) x_j: the coefficient of x_j estimates
// b_j + a_j b_c. Everything about exact relations is exact and asks no further pass over the data.
#pragma once

#include <cstdint>
#include <optional>
#include <string>
#include <vector>

#include "audit/audit.hpp"
#include "audit/run.hpp"
#include "base/result.hpp"
#include "exact/exchange.hpp"
#include "factor/factor.hpp"

namespace gramproof::audit {

/// How programs choose which column of a relation goes.
enum class Habit : std::uint8_t {
  first_kept,    ///< first come, first kept: the last column of a relation goes
  last_kept,     ///< last come, first kept: its first column goes
  largest_raw,   ///< the longest remainder next, columns in their own units [BG65]
  largest_unit,  ///< the same, columns scaled to unit length
  gramproof,     ///< protected, focus, constant, as written, most frequent levels last
};

struct HabitOutcome {
  Habit habit = Habit::first_kept;
  std::vector<int> left_out;  ///< design columns, in design order
};

/// What the coefficient of a kept column estimates: its own and a_j times those left out.
struct Estimand {
  int column = -1;
  exact::LinearForm carries;  ///< columns left out, by a_j
};

/// Whether a named sum of coefficients can be estimated [S69], and what is read in its place.
struct WhyContrast {
  std::string text;
  bool estimable = false;
  std::string blocking_relation;  ///< not estimable: a relation that is in the way
  exact::LinearForm on_kept;      ///< the same sum over the coefficients of kept columns
  exact::LinearForm estimates;    ///< what `on_kept` estimates, in coefficients of all columns: the
                                  ///< sum asked for exactly when it is estimable
};

/// Columns that can go together, and what the coefficients of the others then estimate.
struct Choice {
  std::vector<int> without;       ///< design columns left out, in design order
  std::vector<Estimand> changed;  ///< kept columns whose coefficient then carries another
  std::vector<int> untouched;     ///< kept columns whose coefficient does not
};

/// A column that takes part in an exact relation.
struct Dependence {
  RelationFinding relation;              ///< the shortest listed relation through the column
  std::vector<RelationFinding> further;  ///< other listed relations through it, at most 5
  std::size_t further_omitted = 0;
  int since = -1;           ///< design column with which it became dependent, in design order
  bool left_out = false;    ///< by gramproof's own choice
  Choice choice;            ///< this column goes, and of the others those that gramproof keeps last
  exact::LinearForm parts;  ///< the column by what then stays
  std::vector<int> instead;  ///< columns any one of which can go in its place, what else is left
                             ///< out unchanged; no protected ones
};

/// A row on which a coefficient rests.
struct HoldingRow {
  std::string file;
  std::uint64_t line = 0, row = 0;
  double share = 0;  ///< of the sum of squared residuals of the column on the others
  std::vector<std::pair<std::string, std::string>> cells;  ///< source column, cell
};

/// Columns or families that compete in one direction: proportion at least 0.5 there.
struct Competition {
  double index = 0;
  std::vector<int> with;  ///< design columns or indices of families, not the one asked for
};

/// A column in no exact relation.
struct Nearness {
  bool kept = true;  ///< false: left out although no exact relation is proved (see `relations`)
  std::optional<Inflation> inflation;        ///< of kept columns
  std::optional<FamilyInflation> family;     ///< of its family, where that was judged
  std::vector<Competition> between_columns;  ///< scaled condition indices from 10 on
  std::vector<Competition> between_families;
  std::vector<RelationFinding> relations;  ///< those through it that are not exact on every row
  std::vector<RareLevel> rare;
  std::vector<HoldingRow> rare_rows;  ///< the rows of a 0/1 column's rarer value, below 10
  /// (sum w r^2)^2 / sum (w r^2)^2, r the residual on the other kept columns; none where no digit
  /// of it is known.
  std::optional<double> identifying_rows;
  std::vector<HoldingRow> rows;  ///< largest shares first, at most 5
};

struct WhyColumn {
  int column = -1;
  std::optional<Dependence> dependence;
  std::optional<Nearness> nearness;  ///< exactly one of the two
};

enum class AskedFor : std::uint8_t {
  column,          ///< one column of the design
  term,            ///< a term that makes several
  source,          ///< a column of the data that several design columns are made of
  level_left_out,  ///< the level that levels() leaves out, here added to the design
};

struct Why {
  std::string asked;  ///< as written
  AskedFor asked_for = AskedFor::column;
  Audit audit;                     ///< of the design in which the column stands
  std::vector<WhyColumn> columns;  ///< at most `most_columns_asked`
  std::size_t columns_omitted = 0;
  std::vector<HabitOutcome> habits;  ///< empty where nothing has to go
  Choice choice;  ///< of the only column asked for if that can go, else gramproof's own
  std::vector<WhyContrast> contrasts;  ///< under that choice
  std::vector<int> never_removable;    ///< kept columns in no exact relation
  std::vector<int> sometimes;          ///< can go in some choice and stay in another
  std::vector<int> always;             ///< columns of zeros: no choice keeps them
  bool passed_for_rows = false;        ///< a further pass found the rows that hold a column up
};

inline constexpr std::size_t most_columns_asked = 20;

/// Some exact relation uses the column.
[[nodiscard]] bool in_exact_relation(const Audit& audit, int column);

/// Everything about one column that follows from the exact relations of the audit. `keeping`: as
/// keeping_order(). Precondition: in_exact_relation().
[[nodiscard]] Dependence dependence_of(const Audit& audit, int column,
                                       const std::vector<int>& keeping);

/// The choice by which gramproof leaves columns out: keeping_order() from its end.
[[nodiscard]] Choice own_choice(const Audit& audit, const std::vector<int>& keeping);

/// Whether the sum can be estimated, and what it is under a choice. Errors: those of
/// parse_contrast.
[[nodiscard]] Result<WhyContrast> contrast_under(const Audit& audit, const Choice& choice,
                                                 const std::string& text);

/// The figures of a column in no exact relation, but for the rows. O(kept).
[[nodiscard]] Nearness nearness_of(const Audit& audit, int column);

/// The combination of design columns whose value in a row is the residual of `column` on the other
/// kept columns [FW33, L63], over the length of all these residuals: the squares, times the
/// weights, add up to 1. `factor`: scan::Digest::factor; `columns`: of the design. O(kept^3).
[[nodiscard]] Vector residual_direction(const factor::Factor& factor, const std::vector<int>& kept,
                                        int column, Index columns);

/// What each habit leaves out. `factor`: scan::Digest::factor. The order of pivots is
/// floating-point; whether a column is a combination of those before it is not.
[[nodiscard]] std::vector<HabitOutcome> outcomes_of_habits(const Audit& audit,
                                                           const std::vector<int>& keeping,
                                                           const factor::Factor& factor);

/// Audits, and answers for the columns that `asked` names: a label or what parses to one, a term, a
/// column of the data, a level left out. One pass over the data beyond those of run() where a
/// column can be kept; a second audit where it is a level left out. Errors: those of run(); an
/// unknown name, with the nearest.
[[nodiscard]] Result<Why> why(table::Source& source, const Request& request,
                              const std::string& asked);

}  // namespace gramproof::audit
