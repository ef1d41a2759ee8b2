#include "audit/run.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <utility>

#include "audit/contrasts.hpp"
#include "audit/figures.hpp"
#include "audit/identification.hpp"
#include "audit/rare_levels.hpp"
#include "audit/recorded_relations.hpp"
#include "audit/rounding_relations.hpp"
#include "audit/verdict.hpp"
#include "base/text.hpp"
#include "exact/hidden_relations.hpp"
#include "scan/pass.hpp"
#include "table/survey.hpp"

namespace gramproof::audit {
namespace {

std::function<void(const table::Progress&)> progress_of(const Request& request,
                                                        const std::string& pass) {
  if (!request.on_progress) return {};
  return [&request, pass](const table::Progress& progress) { request.on_progress(pass, progress); };
}

std::string reason_words(const design::Exclusion& entry, const table::Schema& schema,
                         const design::Design& design) {
  using Reason = design::Exclusion::Reason;
  const auto at = static_cast<std::size_t>(std::max(entry.column, 0));
  switch (entry.reason) {
    case Reason::filter:
      return "not kept by --rows";
    case Reason::missing:
      return "missing in \"" + schema.columns[at].name + "\"";
    case Reason::undefined:
      return entry.column < 0 ? "undefined in --rows" : "undefined in " + design.columns[at].label;
    case Reason::weight_zero:
      break;
  }
  return "weight 0";
}

Error no_row_left(const scan::Digest& digest, const table::Schema& schema,
                  const design::Design& design) {
  std::string counts;
  for (const design::Exclusion& entry : digest.excluded) {
    if (!counts.empty()) counts += "; ";
    counts += reason_words(entry, schema, design) + ": " + grouped(entry.rows);
  }
  return {ErrorKind::data, "",
          fmt::format("none of the {} can be used: {}", counted(digest.rows_read, "row", "rows"),
                      counts),
          "a row is used only if every column of the design, the response, the weight and "
          "--complete is present in it"};
}

Result<std::vector<std::pair<int, double>>> steps_given(const Request& request,
                                                        const table::Schema& schema) {
  std::vector<std::pair<int, double>> steps;
  for (const RecordedStep& given : request.recorded) {
    const std::optional<std::size_t> column = schema.find(given.column);
    if (!column) {
      std::vector<std::string> names;
      for (const table::ColumnFacts& facts : schema.columns) names.push_back(facts.name);
      const std::optional<std::string> near = nearest_name(given.column, names);
      return Error{ErrorKind::usage, "--recorded", "no column \"" + given.column + "\" in the data",
                   near ? "did you mean \"" + *near + "\"?" : ""};
    }
    if (schema.columns[*column].kind == table::ColumnKind::text) {
      return Error{ErrorKind::usage, "--recorded",
                   "\"" + given.column + "\" is a text column, which is not rounded",
                   "only columns of numbers have a step"};
    }
    steps.emplace_back(static_cast<int>(*column), given.step);
  }
  return steps;
}

void fill_source(const table::Source& source, Audit& audit) {
  const auto& files = source.files();
  for (std::size_t i = 0; i < files.size(); ++i) {
    audit.source.files.emplace_back(files[i].name, audit.schema.rows_of_file[i]);
  }
  audit.source.separator = source.separator();
  audit.source.decimal_mark = source.decimal_mark();
  audit.source.missing = source.missing();
}

void fill_from_digest(const scan::Digest& digest, Audit& audit) {
  audit.rows_read = digest.rows_read;
  audit.rows_used = digest.rows_used;
  audit.excluded = digest.excluded;
  audit.sum_of_weights = digest.sum_of_weights;
  audit.column_records = digest.columns;
  const Vector lengths = factor::column_lengths(digest.factor);
  audit.column_norms = lengths.head(static_cast<Index>(digest.columns.size()));
}

CentredBy centred_by(const Identification& found, const design::Design& design) {
  if (!found.constant_in_span) return CentredBy::none;
  const bool column =
      found.constant_support.size() == 1 &&
      design.columns[static_cast<std::size_t>(found.constant_support.front())].constant;
  return column ? CentredBy::column : CentredBy::span;
}

void fill_identification(const Identification& found, Audit& audit) {
  audit.rank = found.rank;
  audit.kept = found.kept;
  audit.left_out = found.left_out;
  audit.relations = found.relations;
  audit.relations_omitted = found.relations_omitted;
  audit.null_space = found.null_space;
  audit.centred_by = centred_by(found, audit.design);
  if (audit.centred_by == CentredBy::span) {
    for (const int column : found.constant_support) {
      audit.constant_from.push_back(audit.design.columns[static_cast<std::size_t>(column)].label);
    }
  }
  audit.residual_degrees_of_freedom =
      static_cast<std::int64_t>(audit.rows_used) - static_cast<std::int64_t>(audit.rank.numerical);
}

void fill_figures(const scan::Digest& digest, const std::vector<int>& constant_support,
                  const std::vector<std::pair<int, double>>& given, Audit& audit) {
  std::vector<bool> is_constant;
  for (const int column : audit.kept) {
    const scan::ColumnRecord& record = digest.columns[static_cast<std::size_t>(column)];
    is_constant.push_back(record.min == record.max);
  }
  const bool singular = std::none_of(constant_support.begin(), constant_support.end(),
                                     [&](int column) {
                                       const scan::ColumnRecord& record =
                                           digest.columns[static_cast<std::size_t>(column)];
                                       return record.min == record.max;
                                     }) &&
                        audit.centred_by == CentredBy::span;
  audit.conditioning = conditioning_of(digest.factor, audit.kept, is_constant, singular);
  // Columns that are all zero leave nothing to invert.
  if (audit.kept.empty()) {
    audit.recording.steps = recorded_steps(digest, audit.schema, given);
    return;
  }
  audit.inflation = inflation_of(digest.factor, audit.kept, is_constant, audit.centred_by);
  audit.between = between_families(digest.factor, audit.design, audit.kept, constant_support);
  audit.recording = recording_of(digest, audit.kept, recorded_steps(digest, audit.schema, given));
  for (RelationFinding& near : near_relations(digest.factor, audit.design, audit.kept,
                                              audit.conditioning, most_relations)) {
    audit.relations.push_back(std::move(near));
  }
}

void add_notes(double chance_of_a_miss, Audit& audit) {
  audit.notes = audit.design.notes;
  if (chance_of_a_miss > exact::wanted_chance) {
    audit.notes.push_back({"search_cut",
                           fmt::format("The search for relations that only a few rows break was "
                                       "cut short for its cost: one that 1 % of the rows break "
                                       "would be missed with a probability of {}.",
                                       figure(chance_of_a_miss)),
                           {}});
  }
  std::vector<std::string> protected_out;
  for (const int column : audit.left_out) {
    const design::DesignColumn& out = audit.design.columns[static_cast<std::size_t>(column)];
    if (out.role == design::Role::protect) protected_out.push_back(out.label);
  }
  if (!protected_out.empty()) {
    audit.notes.push_back(
        {"protected_left_out",
         "Not everything that is protected can be kept: " + names_in_words(protected_out, 6) +
             " follows from protected columns before it.",
         protected_out});
  }
  if (!audit.rank.unsettled.empty()) {
    std::vector<std::string> names;
    for (const int column : audit.rank.unsettled)
      names.push_back(audit.design.columns[static_cast<std::size_t>(column)].label);
    audit.notes.push_back({"rank_unsettled",
                           "Whether columns with log, sqrt, exp or asinh are independent of the "
                           "others could not be settled within the budget of a few seconds (about "
                           "150 columns where the columns are nearly dependent).",
                           std::move(names)});
  }
  if (audit.centred_by == CentredBy::none) {
    audit.notes.insert(audit.notes.begin(), {"no_constant",
                                             "The design has no constant and no combination of its "
                                             "columns is one: the fit is forced through the "
                                             "origin, and inflation figures are uncentred.",
                                             {}});
  }
}

struct Bound {
  table::Schema schema;
  design::Settled settled;
  scan::Digest digest;
  std::vector<bool> focused;  ///< a design column: named by --focus
};

/// A role is one word, and protection comes first in it; who is in focus is kept besides.
Result<void> assign_roles(const Request& request, Bound& bound) {
  design::Design& design = bound.settled.design;
  Result<void> focus = design::assign_roles(design, request.design.focus, {});
  if (!focus) return focus;
  for (const design::DesignColumn& column : design.columns)
    bound.focused.push_back(column.role == design::Role::focus);
  return design::assign_roles(design, request.design.focus, request.design.protect);
}

/// What is protected is never proposed for leaving out.
void spare_protected(Audit& audit) {
  for (RelationFinding& relation : audit.relations) {
    std::erase_if(relation.removable, [&](int column) {
      return audit.design.columns[static_cast<std::size_t>(column)].role == design::Role::protect;
    });
  }
}

/// Survey, bind, fold, settle.
Result<Bound> scan_design(table::Source& source, const Request& request) {
  Result<std::shared_ptr<const design::Syntax>> syntax = design::parse(request.design);
  if (!syntax) return syntax.error();
  table::SurveyOptions survey_options;
  survey_options.threads = request.threads;
  survey_options.list_values = design::columns_with_levels(*syntax.value());
  survey_options.on_progress = progress_of(request, "reading types and levels");
  Result<table::Schema> schema = table::survey(source, survey_options);
  if (!schema) return schema.error();
  const std::string data_name =
      source.files().size() == 1 ? source.files().front().name : "the data";
  Result<design::Design> provisional = design::bind(
      *syntax.value(), request.design, schema.value(), data_name,
      most_columns(request.memory, request.threads),
      [&request](std::uint64_t columns) { return memory_needed(columns, request.threads); });
  if (!provisional) return provisional.error();
  const scan::PassOptions pass{request.threads, progress_of(request, "folding rows")};
  Result<scan::Digest> digest = scan::scan(source, schema.value(), provisional.value(), pass);
  if (!digest) return digest.error();
  if (digest.value().rows_used == 0)
    return no_row_left(digest.value(), schema.value(), provisional.value());
  Bound bound;
  bound.settled = design::settle(provisional.value(), schema.value(), digest.value().level_counts);
  if (bound.settled.design.columns.empty()) {
    return Error{ErrorKind::design, request.design.design_where,
                 "the design has no column on the rows used",
                 "a factor with one level left gives none; add `constant` or another term"};
  }
  bound.digest = scan::settle(digest.value(), bound.settled);
  bound.schema = std::move(schema.value());
  if (Result<void> done = assign_roles(request, bound); !done) return done.error();
  design::assign_families(bound.settled.design, bound.schema, bound.digest.never_together);
  return bound;
}

}  // namespace

Result<Audit> run(table::Source& source, const Request& request) {
  Result<Bound> scanned = scan_design(source, request);
  if (!scanned) return scanned.error();
  Bound& bound = scanned.value();
  if (request.on_scanned) request.on_scanned(bound.settled, bound.digest);
  const Result<std::vector<std::pair<int, double>>> given = steps_given(request, bound.schema);
  if (!given) return given.error();
  std::vector<std::string> file_names;
  for (const table::SourceFile& file : source.files()) file_names.push_back(file.name);
  Audit audit;
  audit.options = request.options;
  audit.solver = request.solver;
  audit.schema = std::move(bound.schema);
  audit.design = std::move(bound.settled.design);
  audit.focused = std::move(bound.focused);
  const scan::PassOptions pass{request.threads,
                               progress_of(request, "proving relations on every row")};
  const RowTester tester = [&](const std::vector<exact::NullVector>& vectors) {
    return scan::test_on_all_rows(source, audit.schema, audit.design, vectors, pass);
  };
  Result<Identification> identified =
      identify(audit.design, audit.schema, file_names, bound.digest, tester);
  if (!identified) return identified.error();
  Identification& found = identified.value();
  EveryRow every_row(
      audit.design, audit.schema, file_names, bound.digest, [&](const scan::Examiner& examiner) {
        return scan::examine_all_rows(source, audit.schema, audit.design, examiner, pass);
      });
  if (Result<void> done = judge_rounding(every_row, found); !done) return done.error();
  fill_source(source, audit);
  fill_from_digest(bound.digest, audit);
  fill_identification(found, audit);
  audit.rare_levels = rare_levels(audit.design, audit.schema, bound.digest, bound.settled.left_out,
                                  audit.centred_by != CentredBy::none);
  audit.rare_levels.insert(audit.rare_levels.end(), found.rare_cells.begin(),
                           found.rare_cells.end());
  fill_figures(bound.digest, found.constant_support, given.value(), audit);
  if (Result<void> done = judge_recorded_precision(every_row, audit); !done) return done.error();
  audit.passes += found.passes + every_row.passes();
  spare_protected(audit);
  if (Result<void> done =
          fill_contrasts(request.contrasts, found.too_few_rows, bound.digest, audit);
      !done)
    return done.error();
  add_notes(found.chance_of_a_miss, audit);
  audit.verdict = verdict_of(audit, found.coefficients_lost);
  return audit;
}

/// A leaf block and its extended copy in each thread (4,096 rows), the factors under way between
/// threads and in the merge tree (2 threads + 2, and a dozen levels for 2^24 rows), and about a
/// dozen k x k matrices in the figures.
std::uint64_t memory_needed(std::size_t columns, unsigned threads) {
  const std::uint64_t k = columns + 1;
  const std::uint64_t blocks = std::uint64_t{2} * threads * table::rows_a_piece * k;
  const std::uint64_t factors = (std::uint64_t{2} * threads + 2 + 12 + 12) * k * k;
  return 8 * (blocks + factors);
}

std::size_t most_columns(std::uint64_t memory, unsigned threads) {
  std::size_t low = 1, high = 1'000'000;
  while (low < high) {
    const std::size_t middle = (low + high + 1) / 2;
    if (memory_needed(middle, threads) <= memory) {
      low = middle;
    } else {
      high = middle - 1;
    }
  }
  return low;
}

}  // namespace gramproof::audit
