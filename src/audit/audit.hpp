// src/audit/audit.hpp - every finding about a design, as plain data. Filled by the other files of
// this folder, read by src/report.
#pragma once

#include <cstdint>
#include <limits>
#include <map>
#include <optional>
#include <string>
#include <utility>
#include <vector>

#include "base/numeric.hpp"
#include "design/design.hpp"
#include "design/rows.hpp"
#include "exact/rank.hpp"
#include "scan/digest.hpp"
#include "table/survey.hpp"

namespace gramproof::audit {

// --- verdict
// ---------------------------------------------------------------------------------------------------------

enum class Grade : std::uint8_t { pass, caution, fail };
enum class Overall : std::uint8_t { singular, unreliable, fragile, guarded, sound };  // worst first
enum class Solver : std::uint8_t { normal, qr };

struct Ground {
  Grade grade = Grade::pass;
  std::string finding;  ///< one sentence: measured value, threshold, where the threshold comes from
};

struct Grounds {
  Ground identified, computable, recorded, informative;
};

struct VerdictOnKept {
  Overall overall = Overall::sound;
  Grounds grounds;
};

struct Verdict {
  Overall overall = Overall::sound;
  std::string summary;  ///< one plain sentence: verdict, what repairs it, what is unaffected
  Grounds grounds;
  std::optional<VerdictOnKept> after_leaving_out;  ///< present for a singular design
  std::vector<int> coefficients_lost;              ///< design columns
};

// --- rank and relations
// ----------------------------------------------------------------------------------------------

struct Certificate {
  std::uint64_t prime = 0;
  std::vector<std::uint64_t> rows;  ///< row numbers
  std::vector<int> columns;         ///< design columns
  std::uint64_t residue = 0;        ///< determinant of rows x columns modulo the prime, not zero
  std::uint64_t rows_tested = 0;
};

struct Rank {
  std::uint64_t rank = 0;
  std::uint64_t columns = 0;
  std::uint64_t nullity = 0;
  bool proved = true;  ///< false where a relation holds within rounding, or columns are unsettled
  std::vector<int> unsettled;   ///< columns with log, sqrt, exp or asinh that count as independent
                                ///< without a proof
  std::uint64_t numerical = 0;  ///< rank less the relations that hold within rounding
  std::optional<std::uint64_t> rank_of_the_doubles;  ///< exact rank of X rounded to doubles
  std::optional<Certificate> certificate;
};

enum class Standing : std::uint8_t {
  exact,
  exact_except,
  within_rounding,
  within_recorded_precision,
  near
};

struct Violation {
  std::string file;
  std::uint64_t line = 0, row = 0;
  std::string residual;                                    ///< exact, as a decimal or fraction
  std::vector<std::pair<std::string, std::string>> cells;  ///< source column, cell
};

struct RelationTerm {
  int column = -1;         ///< design column
  std::string exact;       ///< exact standings: integer; near: empty
  double coefficient = 0;  ///< near: number; exact standings: its double
};

struct RelationFinding {
  Standing standing = Standing::exact;
  std::string text;
  std::vector<RelationTerm> terms;
  std::vector<double> errors;  ///< near: standard errors of the coefficients, 0 for the explained
  std::uint64_t rows_holding = 0, rows_violating = 0;
  std::vector<Violation> violations;  ///< at most 50
  std::string largest_residual;       ///< exact standings; "0" when it holds everywhere
  double largest_residual_value = 0;
  std::string cause_kind, cause_text;
  std::vector<int> removable;
  double condition_index = 0;  ///< near only
};

/// A 0/1 column, or what is left when a column or a set of them is 0 beside the constant, that
/// rests on fewer than 10 rows.
struct RareLevel {
  std::string label;
  int column = -1;  ///< design column whose ones are rare; -1 for what is left over
  std::uint64_t rows = 0;
  std::vector<int> involves;  ///< design columns whose coefficients rest on those rows
};

// --- conditioning (methods: 3)
// ---------------------------------------------------------------------------------------

struct Digits {
  double qr = 0,
         normal_equations = 0;  ///< significant decimal digits left in double precision, >= 0
  double qr_single = 0, normal_equations_single = 0;  ///< the same in single precision
};

struct Conditioning {
  Vector singular_values;  ///< of the kept columns with unit length, descending; all, or the
                           ///< extreme ones
  Matrix right_vectors;    ///< kept columns x values: of the unit-length columns
  bool complete = true;
  double condition_number = 1;   ///< scaled; inf when the smallest value is 0
  Vector condition_indices;      ///< ascending
  Matrix proportions;            ///< values x kept columns; each column sums to 1 (complete case)
  std::vector<int> pivot_order;  ///< kept columns by what each adds to those before it
  std::vector<int>
      proportions_rows;  ///< indices into singular_values of the rows that are reported
  std::vector<std::vector<int>>
      tied_rows;  ///< groups of singular values that agree to 12 digits: only their sum is defined
  Vector raw_singular_values;  ///< of sqrt(W) X kept, descending
  double raw_condition_number = 1;
  double log10_determinant = 0;                         ///< of X'WX
  std::optional<double> log10_determinant_correlation;  ///< of the non-constant kept columns; none
                                                        ///< when there are none
  Digits digits;
  double known_digits = 15;  ///< digits that hold in the scaled figures: -log10(64 k u kappa)
  double known_digits_raw =
      15;  ///< the same in the raw singular values, with the raw condition number
};

enum class CentredBy : std::uint8_t { column, span, none };

struct Inflation {
  int column = -1;  ///< design column
  std::optional<double>
      vif;  ///< none: undefined (constant column); inf never (kept columns are independent)
  double vif_uncentred = 1;
  std::optional<double>
      r_squared;  ///< on the other kept columns, centred when the constant is in the span
  std::optional<double> own_share;      ///< 1 - R^2, to its own relative accuracy
  double standard_error_per_sigma = 0;  ///< sqrt of the diagonal of (X'WX)^-1
};

// --- families (methods: 4)
// -------------------------------------------------------------------------------------------

struct FamilyInflation {
  int family = -1;  ///< index into Design::families
  int dimensions = 0;
  double generalised_vif = 1;
  double per_dimension = 1;  ///< generalised_vif ^ (1 / (2 dimensions))
};

struct BetweenFamilies {
  std::vector<int> families;  ///< those with dimension > 0, in order of size of the source set,
                              ///< then design order
  Vector indices;             ///< ascending
  Matrix proportions;         ///< indices x families, each column sums to 1
  std::vector<FamilyInflation> inflation;  ///< aligned with `families`
};

// --- recorded precision (methods: 5)
// ---------------------------------------------------------------------------------

struct Step {
  int column = -1;  ///< table column
  double step = 0;  ///< 0: exact; for `binary` the step relative to the cell, 2^-50
  enum class How : std::uint8_t {
    decimals,
    binary,
    whole,
    exact_code,
    given,
    given_exact
  } how = How::decimals;
};

/// A direction in which the columns stand apart by little more than their rounding.
struct NoisyDirection {
  double ratio = 0;          ///< its distance ratio
  std::vector<int> columns;  ///< design columns that carry it
};

struct Recording {
  std::vector<Step> steps;
  Vector distance_ratios;  ///< ascending, whole numbers taken as exact; empty: no noise (infinite)
  Vector distance_ratios_whole_rounded;  ///< whole numbers taken as rounded to 1
  std::vector<NoisyDirection> close;     ///< those with a ratio below 3, nearest first, at most 10
  std::vector<NoisyDirection> close_whole_rounded;  ///< the same where whole numbers are rounded
  std::vector<std::optional<double>>
      attenuation;  ///< aligned with kept columns; none where no noise reaches the coefficient
  bool whole_numbers_matter = false;  ///< some step is `whole`
};

// --- contrasts
// -------------------------------------------------------------------------------------------------------

struct ContrastFinding {
  std::string text;
  bool estimable = false;
  std::optional<double> standard_error_per_sigma;
  std::string blocking_relation;  ///< when not estimable: the relation that is in the way, as text
};

// --- the whole
// -------------------------------------------------------------------------------------------------------

/// What was asked, for the document's `options` (no threads, memory, paths or colour).
using OptionRecord = std::vector<std::pair<std::string, std::string>>;

struct SourceRecord {
  std::vector<std::pair<std::string, std::uint64_t>> files;  ///< name, rows
  char separator = ',';
  char decimal_mark = '.';
  std::vector<std::string> missing;
};

struct Audit {
  OptionRecord options;
  SourceRecord source;
  table::Schema schema;
  design::Design design;      ///< settled, families assigned
  std::vector<bool> focused;  ///< a design column: named by --focus; may be empty: see is_focused
  std::uint64_t rows_read = 0, rows_used = 0;
  std::vector<design::Exclusion> excluded;
  double sum_of_weights = 0;
  std::vector<scan::ColumnRecord> column_records;  ///< aligned with design.columns
  Vector column_norms;                             ///< (sum w x^2)^1/2, aligned with design.columns
  std::int64_t residual_degrees_of_freedom = 0;    ///< rows used - rank
  int passes = 2;                                  ///< over the data

  Rank rank;
  std::vector<RelationFinding> relations;  ///< ordered by standing, number of columns, design order
  std::uint64_t relations_omitted = 0;
  std::vector<exact::NullVector> null_space;  ///< basis of the exact relations, entry for ones zero
  std::vector<RareLevel> rare_levels;
  std::vector<int> kept, left_out;  ///< design columns, in design order
  CentredBy centred_by = CentredBy::none;
  std::vector<std::string>
      constant_from;  ///< centred_by span: labels whose combination is the constant

  Conditioning conditioning;
  std::vector<Inflation> inflation;  ///< aligned with kept
  BetweenFamilies between;
  Recording recording;
  std::vector<ContrastFinding> contrasts;
  Solver solver = Solver::normal;
  Verdict verdict;
  std::vector<design::Note> notes;  ///< design notes and the audit's own
};

/// The column's coefficient will be read (--focus), also where the column is protected besides.
[[nodiscard]] bool is_focused(const Audit& audit, int column);

// Words as in the document.
[[nodiscard]] std::string word_of(Grade grade);
[[nodiscard]] std::string word_of(Overall overall);
[[nodiscard]] std::string word_of(Standing standing);
[[nodiscard]] std::string word_of(CentredBy centred_by);
[[nodiscard]] std::string word_of(Step::How how);

}  // namespace gramproof::audit
