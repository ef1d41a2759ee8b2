// Near relations and the figures behind them: condition indices, who shares in them, what is left
// of double precision.
#include <algorithm>
#include <cmath>
#include <limits>

#include <fmt/format.h>

#include "base/text.hpp"
#include "report/number_text.hpp"
#include "report/text_parts.hpp"

namespace gramproof::report {
namespace {

using audit::RelationFinding;
using audit::Standing;

// [BKW80] ch. 3: an index of 30 is a strong relation, one of 10 a weak one; a column competes where
// at least half the variance of its coefficient comes from the direction.
constexpr double strong_index = 30;
constexpr double weak_index = 10;
constexpr double large_proportion = 0.5;

std::string index_text(const audit::Audit& audit, double index) {
  return size_or_bound(index, known_digits_of_index(audit, index), largest_known_condition(audit));
}

/// Rows of `proportions` with an index at least `threshold`.
std::vector<Index> rows_from(const Vector& indices, double threshold) {
  std::vector<Index> rows;
  for (Index i = 0; i < indices.size(); ++i) {
    if (!(indices[i] < threshold)) rows.push_back(i);
  }
  return rows;
}

/// Columns of `proportions` whose sum over `rows` reaches one half.
std::vector<int> sharing(const Matrix& proportions, const std::vector<Index>& rows) {
  std::vector<int> columns;
  for (Index j = 0; j < proportions.cols(); ++j) {
    double sum = 0;
    for (const Index i : rows) {
      if (i < proportions.rows()) sum += proportions(i, j);
    }
    if (sum >= large_proportion) columns.push_back(static_cast<int>(j));
  }
  return columns;
}

/// Columns for whose coefficients the strong indices together account for half the variance.
std::vector<int> competing_columns(const audit::Audit& audit) {
  const audit::Conditioning& conditioning = audit.conditioning;
  std::vector<int> columns;
  // Of a direction that is nothing but rounding nobody can say whose it is.
  if (!(conditioning.known_digits >= 1)) return columns;
  for (const int place :
       sharing(conditioning.proportions, rows_from(conditioning.condition_indices, strong_index))) {
    columns.push_back(audit.kept.at(static_cast<std::size_t>(place)));
  }
  return columns;
}

/// Kept columns with half the variance of their coefficient in the one direction of this index.
std::vector<int> sharing_the_index(const audit::Audit& audit, double index) {
  const Vector& indices = audit.conditioning.condition_indices;
  std::vector<int> columns;
  if (!(known_digits_of_index(audit, index) >= 1)) return columns;
  for (Index i = 0; i < indices.size(); ++i) {
    // The index of a near relation is a copy of one of these.
    if (indices[i] != index) continue;
    for (const int place : sharing(audit.conditioning.proportions, {i})) {
      columns.push_back(audit.kept.at(static_cast<std::size_t>(place)));
    }
    return columns;
  }
  return columns;
}

void write_near_relations(const audit::Audit& audit, Page& page) {
  const auto relations = standing_at(audit, Standing::near);
  const std::size_t told = std::min<std::size_t>(relations.size(), 3);
  for (std::size_t i = 0; i < told; ++i) {
    const RelationFinding& relation = *relations[i];
    write_equation(relation, i + 1, page, 4);
    std::string text =
        fmt::format("Condition index {}.", index_text(audit, relation.condition_index));
    const std::vector<int> columns = sharing_the_index(audit, relation.condition_index);
    if (!columns.empty()) {
      text += fmt::format(" At least half the variance of the coefficient{} of {} comes from it.",
                          columns.size() == 1 ? "" : "s", names_of(audit, columns));
    }
    if (!relation.cause_text.empty()) text += " " + relation.cause_text;
    page.paragraph(text, 5);
  }
  if (relations.size() == told) return;
  page.blank();
  page.paragraph(
      not_shown(relations.size() - told, "further near relation", "further near relations"), 2);
}

std::string plural_of_indices(std::size_t number) {
  return counted(number, "index", "indices");
}

/// How many directions of the column space are weak, in one sentence.
std::string indices_sentence(const audit::Audit& audit) {
  const audit::Conditioning& conditioning = audit.conditioning;
  const std::size_t all = static_cast<std::size_t>(conditioning.condition_indices.size());
  const std::size_t strong = rows_from(conditioning.condition_indices, strong_index).size();
  const std::size_t weak = rows_from(conditioning.condition_indices, weak_index).size() - strong;
  if (strong == 0 && weak == 0) {
    return fmt::format("{} computed {} below 10.",
                       all == 1 ? "The one index" : fmt::format("All {}", plural_of_indices(all)),
                       all == 1 ? "is" : "are");
  }
  std::string text = fmt::format("Of {} computed, ", plural_of_indices(all));
  if (strong > 0)
    text +=
        fmt::format("{} 30 or more", strong == 1 ? "1 is" : fmt::format("{} are", grouped(strong)));
  if (strong > 0 && weak > 0) text += ", ";
  if (weak > 0)
    text += fmt::format("{} between 10 and 30",
                        weak == 1 ? "1 is" : fmt::format("{} are", grouped(weak)));
  return text + fmt::format(" and {} below 10.", grouped(all - strong - weak));
}

void write_uncentred_figures(const audit::Audit& audit, Page& page) {
  page.paragraph(
      fmt::format(
          "Condition number: {}. It is the longest combination of the kept columns, each scaled "
          "to length one, over the shortest; a condition index is the same for one direction. "
          "From 30 on a relation counts as strong (Belsley, Kuh & Welsch 1980, ch. 3). {}",
          index_text(audit, audit.conditioning.condition_number), indices_sentence(audit)),
      2);
  const std::vector<int> columns = competing_columns(audit);
  if (!columns.empty()) {
    page.paragraph(
        fmt::format("The directions with an index of 30 or more together bring at least half the "
                    "variance of the coefficient{} of {}.",
                    columns.size() == 1 ? "" : "s", names_of(audit, columns)),
        2);
  }
  page.paragraph(
      "As in their book, nothing is centred here, and the constant counts as a column. Subtracting "
      "means first would make most of these figures smaller; Belsley (1984) objected that this "
      "only "
      "hides relations with the constant.",
      2);
}

std::vector<std::string> family_names(const audit::Audit& audit, const std::vector<int>& places) {
  std::vector<std::string> names;
  for (const int place : places) {
    const int family = audit.between.families.at(static_cast<std::size_t>(place));
    names.push_back("`" + audit.design.families.at(static_cast<std::size_t>(family)).name + "`");
  }
  return names;
}

void write_between_families(const audit::Audit& audit, Page& page) {
  const audit::BetweenFamilies& between = audit.between;
  if (between.indices.size() == 0) return;
  const Index last = between.indices.size() - 1;
  const double largest = between.indices[last];
  std::string text = fmt::format(
      "The `informative` ground asks another question. Columns made from the same source are one "
      "family and are read together, and what a column shares with the constant alone costs its "
      "slope nothing. Between families{} the largest index is {}.",
      // A constant that only several families make together is not set aside.
      audit.centred_by == audit::CentredBy::column ? ", the constant set aside," : "",
      index_text(audit, largest));
  if (largest >= weak_index) {
    const auto names = family_names(audit, sharing(between.proportions, {last}));
    if (names.size() >= 2) text += fmt::format(" It is shared by {}.", listed(names));
    if (names.size() == 1) text += fmt::format(" It falls mainly on {}.", names[0]);
  }
  page.paragraph(text, 2);
}

}  // namespace

void write_competing(const audit::Audit& audit, Page& page) {
  if (audit.conditioning.condition_indices.size() == 0) return;
  const bool near = !standing_at(audit, Standing::near).empty();
  page.heading(near ? "Columns that compete" : "How far the columns are from competing");
  if (near) {
    page.paragraph(
        "These combinations of columns are nearly, but not exactly, in balance: the data say less "
        "about each coefficient alone than about the combination. The nearest is told first; each "
        "further one is looked for with the columns explained before set aside.",
        2);
    write_near_relations(audit, page);
    page.blank();
  }
  write_uncentred_figures(audit, page);
  write_between_families(audit, page);
}

namespace {

std::string whole_digits(double digits) {
  const auto number = static_cast<std::uint64_t>(std::clamp(std::floor(digits), 0.0, 16.0));
  return number == 0 ? "no digit" : "about " + counted(number, "digit", "digits");
}

/// The determinant is a product of k sizes, so k relative errors add up: told while together they
/// leave a digit.
void write_determinants(const audit::Audit& audit, Page& page) {
  const audit::Conditioning& conditioning = audit.conditioning;
  const double known =
      conditioning.known_digits - std::log10(static_cast<double>(audit.kept.size()));
  if (!(known >= 1) || !std::isfinite(conditioning.log10_determinant)) return;
  std::string text =
      fmt::format("The determinant of X'X is {}", power_of_ten(conditioning.log10_determinant));
  const std::optional<double>& correlation = conditioning.log10_determinant_correlation;
  if (correlation && std::isfinite(*correlation)) {
    text += fmt::format(", that of the correlation matrix {}",
                        *correlation > -5 ? figure(std::pow(10, *correlation), std::min(known, 2.0))
                                          : power_of_ten(*correlation));
  }
  page.paragraph(text +
                     ". Determinants change with the number of columns and with units: no verdict "
                     "rests on them.",
                 2);
}

}  // namespace

void write_digits(const audit::Audit& audit, Page& page) {
  const audit::Conditioning& conditioning = audit.conditioning;
  if (conditioning.condition_indices.size() == 0) return;
  const audit::Digits& digits = conditioning.digits;
  page.heading("What arithmetic leaves of the figures");
  page.paragraph(
      fmt::format(
          "In double precision a program that inverts X'X (the normal equations) keeps {}; one "
          "that works on X itself by orthogonal rotations (QR) keeps {}. In single precision "
          "they keep {} and {}. The grade above is for {}.",
          whole_digits(digits.normal_equations), whole_digits(digits.qr),
          whole_digits(digits.normal_equations_single), whole_digits(digits.qr_single),
          audit.solver == audit::Solver::qr ? "QR" : "the normal equations"),
      2);
  page.paragraph(
      fmt::format(
          "Condition number in the units of the data: {}. Other units change this one, not the "
          "one above.",
          size_or_bound(conditioning.raw_condition_number, conditioning.known_digits_raw,
                        largest_known_condition(audit))),
      2);
  write_determinants(audit, page);
}

}  // namespace gramproof::report
