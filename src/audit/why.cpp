#include "audit/why.hpp"

#include <algorithm>

#include "audit/identification.hpp"
#include "audit/rare_levels.hpp"
#include "audit/violations.hpp"
#include "audit/why_names.hpp"
#include "scan/row_shares.hpp"

namespace gramproof::audit {
namespace {

constexpr std::size_t most_rows_told = 5;
constexpr std::size_t most_cells_told = 6;

/// What the questions need of the scan.
struct Scanned {
  factor::Factor factor;
  std::vector<int> keeping;
  std::vector<int> left_out_levels;
};

struct Audited {
  Audit audit;
  Scanned scanned;
};

Result<Audited> audited(table::Source& source, Request request) {
  Audited result;
  request.on_scanned = [&](const design::Settled& settled, const scan::Digest& digest) {
    result.scanned.factor = digest.factor;
    result.scanned.keeping = keeping_order(settled.design, digest);
    result.scanned.left_out_levels = settled.left_out;
  };
  Result<Audit> audit = run(source, request);
  if (!audit) return audit.error();
  result.audit = std::move(audit.value());
  return result;
}

/// The same design written out by its labels, with one column more; roles by label too, as terms
/// lose their names.
Request with_column(const Request& request, const Audit& audit, const Meaning& meaning) {
  Request extended = request;
  extended.design.design.clear();
  extended.design.focus.clear();
  extended.design.protect.clear();
  for (std::size_t j = 0; j < audit.design.columns.size(); ++j) {
    const design::DesignColumn& column = audit.design.columns[j];
    extended.design.design += (j == 0 ? "" : ", ") + column.label;
    if (is_focused(audit, static_cast<int>(j))) extended.design.focus.push_back(column.label);
    if (column.role == design::Role::protect) extended.design.protect.push_back(column.label);
    if (static_cast<int>(j) == meaning.after) extended.design.design += ", " + meaning.label;
  }
  return extended;
}

int column_called(const design::Design& design, const std::string& label) {
  for (std::size_t j = 0; j < design.columns.size(); ++j) {
    if (design.columns[j].label == label) return static_cast<int>(j);
  }
  return -1;
}

void fill_standing_of_all(const Audit& audit, Why& why) {
  for (std::size_t j = 0; j < audit.design.columns.size(); ++j) {
    const int column = static_cast<int>(j);
    if (!in_exact_relation(audit, column)) {
      // What is left out all the same, within rounding or for want of rows, has to go.
      const bool kept = std::find(audit.kept.begin(), audit.kept.end(), column) != audit.kept.end();
      if (kept) why.never_removable.push_back(column);
    } else if (audit.column_records[j].nonzero_rows == 0) {
      why.always.push_back(column);
    } else {
      why.sometimes.push_back(column);
    }
  }
}

/// The ones of a rare 0/1 column, or its zeros beside the constant, as a direction; none where
/// neither is rare.
std::optional<Vector> rare_direction(const Audit& audit, int column) {
  const auto at = static_cast<std::size_t>(column);
  if (!audit.design.columns[at].zero_one) return std::nullopt;
  const std::uint64_t ones = audit.column_records[at].nonzero_rows;
  const std::uint64_t zeros = audit.rows_used - ones;
  Vector direction = Vector::Zero(static_cast<Index>(audit.design.columns.size()));
  if (ones > 0 && ones < rare_below) {
    direction[column] = 1;
    return direction;
  }
  if (zeros == 0 || zeros >= rare_below) return std::nullopt;
  for (std::size_t j = 0; j < audit.design.columns.size(); ++j) {
    if (!audit.design.columns[j].constant) continue;
    direction[column] = -1;
    direction[static_cast<Index>(j)] = 1;
    return direction;
  }
  return std::nullopt;
}

/// The column, and those it is nearest to: their cells explain a row.
exact::NullVector columns_to_show(const Audit& audit, int column, const Nearness& near) {
  exact::NullVector shown(audit.design.columns.size() + 1, 0);
  shown[static_cast<std::size_t>(column)] = 1;
  if (near.relations.empty() || near.relations.front().terms.size() > most_cells_told) return shown;
  for (const RelationTerm& term : near.relations.front().terms)
    shown[static_cast<std::size_t>(term.column)] = 1;
  return shown;
}

std::vector<HoldingRow> holding_rows(const Audit& audit, const exact::NullVector& shown,
                                     const scan::RowShares& shares, std::size_t most) {
  std::vector<std::string> file_names;
  for (const auto& [name, rows] : audit.source.files) file_names.push_back(name);
  std::vector<HoldingRow> result;
  for (const scan::SharedRow& shared : shares.largest) {
    if (result.size() == most || !(shared.share > 0)) break;
    scan::TestedVector record;
    record.violators = shared.record;
    record.residuals = {0};
    Violation cells = violations_of(audit.design, audit.schema, file_names, shown, record).front();
    result.push_back({cells.file, cells.line, cells.row, shared.share, std::move(cells.cells)});
  }
  return result;
}

/// Where the answer for one direction of a pass goes.
struct Asked {
  Nearness* near;
  int column;
  bool rare;
};

/// Some digit of the residual must be known before its rows mean anything.
bool residuals_known(const Audit& audit) {
  return audit.conditioning.known_digits >= 1;
}

Result<void> fill_rows(table::Source& source, const Request& request, const Scanned& scanned,
                       Why& why) {
  std::vector<Asked> asked;
  std::vector<Vector> directions;
  const auto columns = static_cast<Index>(why.audit.design.columns.size());
  for (WhyColumn& entry : why.columns) {
    if (!entry.nearness || !entry.nearness->kept) continue;
    if (residuals_known(why.audit)) {
      asked.push_back({&*entry.nearness, entry.column, false});
      directions.push_back(
          residual_direction(scanned.factor, why.audit.kept, entry.column, columns));
    }
    if (std::optional<Vector> rare = rare_direction(why.audit, entry.column)) {
      asked.push_back({&*entry.nearness, entry.column, true});
      directions.push_back(std::move(*rare));
    }
  }
  if (asked.empty()) return {};
  Matrix all(columns, static_cast<Index>(directions.size()));
  for (std::size_t d = 0; d < directions.size(); ++d)
    all.col(static_cast<Index>(d)) = directions[d];
  scan::PassOptions pass;
  pass.threads = request.threads;
  if (request.on_progress) {
    pass.on_progress = [&](const table::Progress& at) {
      request.on_progress("finding the rows that hold a column up", at);
    };
  }
  Result<std::vector<scan::RowShares>> shares = scan::shares_of_rows(
      source, why.audit.schema, why.audit.design, all, std::size_t{rare_below}, pass);
  if (!shares) return shares.error();
  for (std::size_t d = 0; d < asked.size(); ++d) {
    Nearness& near = *asked[d].near;
    const scan::RowShares& found = shares.value()[d];
    const exact::NullVector shown = columns_to_show(why.audit, asked[d].column, near);
    if (asked[d].rare) {
      near.rare_rows = holding_rows(why.audit, shown, found, rare_below);
    } else if (found.squares > 0) {
      near.identifying_rows = found.total * found.total / found.squares;
      near.rows = holding_rows(why.audit, shown, found, most_rows_told);
    }
  }
  why.passed_for_rows = true;
  return {};
}

void fill_columns(const std::vector<int>& columns, const Scanned& scanned, Why& why) {
  for (const int column : columns) {
    if (why.columns.size() == most_columns_asked) {
      ++why.columns_omitted;
      continue;
    }
    WhyColumn entry;
    entry.column = column;
    if (in_exact_relation(why.audit, column)) {
      entry.dependence = dependence_of(why.audit, column, scanned.keeping);
    } else {
      entry.nearness = nearness_of(why.audit, column);
    }
    why.columns.push_back(std::move(entry));
  }
}

Result<void> fill_contrasts(const Request& request, const Scanned& scanned, Why& why) {
  const bool one = why.columns.size() == 1 && why.columns.front().dependence;
  why.choice =
      one ? why.columns.front().dependence->choice : own_choice(why.audit, scanned.keeping);
  for (const std::string& text : request.contrasts) {
    Result<WhyContrast> contrast = contrast_under(why.audit, why.choice, text);
    if (!contrast) return contrast.error();
    // Fewer rows than columns that are not exact: no relation is proved, and nothing is estimable.
    const ContrastFinding& audited = why.audit.contrasts[why.contrasts.size()];
    if (contrast.value().estimable && !audited.estimable) {
      contrast.value().estimable = false;
      contrast.value().blocking_relation = audited.blocking_relation;
      // What it would equal instead is told only where the relation is exact.
      contrast.value().on_kept.clear();
    }
    why.contrasts.push_back(std::move(contrast.value()));
  }
  return {};
}

}  // namespace

Result<Why> why(table::Source& source, const Request& request, const std::string& asked) {
  Result<Audited> first = audited(source, request);
  if (!first) return first.error();
  Audited& found = first.value();
  Result<Meaning> meaning =
      meaning_of(asked, found.audit.design, found.audit.schema, found.scanned.left_out_levels);
  if (!meaning) return meaning.error();
  std::vector<int> columns = meaning.value().columns;
  if (meaning.value().asked_for == AskedFor::level_left_out) {
    Result<Audited> second = audited(source, with_column(request, found.audit, meaning.value()));
    if (!second) return second.error();
    found = std::move(second.value());
    columns = {column_called(found.audit.design, meaning.value().label)};
  }
  Why why;
  why.asked = asked;
  why.asked_for = meaning.value().asked_for;
  why.audit = std::move(found.audit);
  fill_columns(columns, found.scanned, why);
  if (Result<void> done = fill_contrasts(request, found.scanned, why); !done) return done.error();
  if (!why.audit.null_space.empty())
    why.habits = outcomes_of_habits(why.audit, found.scanned.keeping, found.scanned.factor);
  fill_standing_of_all(why.audit, why);
  if (Result<void> done = fill_rows(source, request, found.scanned, why); !done)
    return done.error();
  return why;
}

}  // namespace gramproof::audit
