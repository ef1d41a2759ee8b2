#include "audit/rounding_relations.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "audit/doubles_rank.hpp"
#include "audit/exceptions.hpp"
#include "audit/inexact_columns.hpp"
#include "exact/relations.hpp"

namespace gramproof::audit {
namespace {

using exact::RoundingRelation;

const design::DesignColumn& column_of(const design::Design& design, int column) {
  return design.columns[static_cast<std::size_t>(column)];
}

/// The relation in whole numbers; empty where a coefficient is no simple fraction.
exact::NullVector in_integers(const RoundingRelation& relation, std::size_t columns) {
  exact::Integer multiple = 1;
  for (const RoundingRelation::Term& term : relation.terms) {
    if (!term.simple) return {};
    mpz_lcm(multiple.get_mpz_t(), multiple.get_mpz_t(), term.coefficient.get_den_mpz_t());
  }
  exact::NullVector vector(columns + 1, 0);
  for (const RoundingRelation::Term& term : relation.terms) {
    vector[static_cast<std::size_t>(term.column)] =
        term.coefficient.get_num() * (multiple / term.coefficient.get_den());
  }
  exact::make_primitive(vector);
  return vector;
}

/// Ten digits of a positive number, without trailing zeros; a power of ten where it is far from 1.
std::string ten_digits(double value) {
  const std::string text = fmt::format("{:.10g}", value);
  const std::size_t e = text.find('e');
  if (e == std::string::npos) return text;
  return text.substr(0, e) + "\u00b710^" + std::to_string(std::stoi(text.substr(e + 1)));
}

/// The dependent column to the left; nearly equal only, as coefficients are cut at ten digits.
std::string equation_in_numbers(const design::Design& design, const RoundingRelation& relation) {
  std::string text = column_of(design, relation.column).label + " \u2248";
  bool first = true;
  for (const RoundingRelation::Term& term : relation.terms) {
    if (term.column == relation.column) continue;
    const double value = term.coefficient.get_d();
    const std::string size = ten_digits(std::abs(value));
    const std::string minus = first ? " \u2212" : " \u2212 ";
    text += value < 0 ? minus : (first ? " " : " + ");
    const design::DesignColumn& column = column_of(design, term.column);
    text += column.constant ? size : (size == "1" ? "" : size + "\u00b7") + column.label;
    first = false;
  }
  return first ? text + " 0" : text;
}

/// "log(x / 100)" and "log(x)": one column is another and a fixed number.
bool is_shift(const design::Design& design, const RoundingRelation& relation) {
  if (relation.terms.size() != 3) return false;
  return std::all_of(relation.terms.begin(), relation.terms.end(), [&](const auto& term) {
    return column_of(design, term.column).constant || (term.simple && abs(term.coefficient) == 1);
  });
}

RelationFinding in_numbers(const design::Design& design, const RoundingRelation& relation) {
  RelationFinding finding;
  const double sign = relation.terms.front().coefficient < 0 ? -1 : 1;
  for (const RoundingRelation::Term& term : relation.terms) {
    finding.terms.push_back({term.column, "", sign * term.coefficient.get_d()});
    finding.removable.push_back(term.column);
  }
  finding.text = equation_in_numbers(design, relation);
  const bool shift = is_shift(design, relation);
  finding.cause_kind = shift ? "unit_conversion" : "other";
  finding.cause_text =
      shift ? fmt::format(
                  "{} differs from another column by a fixed number, as the logarithms of "
                  "one quantity in two units do.",
                  column_of(design, relation.column).label)
            : fmt::format(
                  "{} can be computed from the other columns named, with coefficients that "
                  "are no simple fractions.",
                  column_of(design, relation.column).label);
  return finding;
}

RelationFinding finding_of(const EveryRow& every_row, const InexactColumns::Related& related) {
  const design::Design& design = every_row.design();
  const scan::Digest& digest = every_row.digest();
  const exact::NullVector vector = in_integers(related.relation, design.columns.size());
  RelationFinding finding;
  if (vector.empty()) {
    finding = in_numbers(design, related.relation);
  } else {
    const exact::Relation relation = exact::describe(
        design, every_row.schema(), vector, summaries_of(digest.columns), digest.rows_used);
    finding = exact_terms(vector, design.columns.size());
    finding.text = relation.text;
    finding.cause_kind = exact::word_of(relation.cause);
    finding.cause_text = relation.cause_text;
    finding.removable = relation.removable;
  }
  finding.standing = Standing::within_rounding;
  finding.rows_holding = digest.rows_used;
  finding.largest_residual_value = related.largest_residual;
  finding.largest_residual =
      related.largest_residual == 0 ? "0" : fmt::format("{:.1e}", related.largest_residual);
  return finding;
}

void insert_sorted(std::vector<int>& columns, int column) {
  const auto place = std::lower_bound(columns.begin(), columns.end(), column);
  if (place == columns.end() || *place != column) columns.insert(place, column);
}

void leave_out(const InexactColumns::Related& related, Identification& found) {
  std::erase(found.kept, related.relation.column);
  insert_sorted(found.left_out, related.relation.column);
  for (const RoundingRelation::Term& term : related.relation.terms) {
    insert_sorted(found.coefficients_lost, term.column);
  }
}

}  // namespace

Result<void> judge_rounding(EveryRow& every_row, Identification& found) {
  Result<InexactColumns> inexact = settle_inexact_columns(every_row, found);
  if (!inexact) return inexact.error();
  InexactColumns& columns = inexact.value();
  if (found.too_few_rows) {
    // Another column could take the place of one that depends on others: nothing is settled.
    for (const InexactColumns::Related& related : columns.related) {
      columns.unsettled.push_back(related.relation.column);
    }
    columns.related.clear();
  }
  std::sort(columns.unsettled.begin(), columns.unsettled.end());
  found.rank.unsettled = std::move(columns.unsettled);
  found.rank.proved = found.rank.unsettled.empty() && columns.related.empty();
  found.rank.numerical = found.rank.rank - columns.related.size();
  for (const InexactColumns::Related& related : columns.related) {
    leave_out(related, found);
    found.relations.push_back(finding_of(every_row, related));
  }
  const Result<std::uint64_t> doubles = rank_of_the_doubles(every_row, found.rank.rank);
  if (!doubles) return doubles.error();
  found.rank.rank_of_the_doubles = doubles.value();
  return {};
}

}  // namespace gramproof::audit
