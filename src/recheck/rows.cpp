#include "recheck/rows.hpp"

#include <algorithm>
#include <utility>

#include "recheck/algebra.hpp"
#include "recheck/numbers.hpp"
#include "recheck/table.hpp"

namespace gramproof::recheck {
namespace {

using State = Value::State;

class Reading {
 public:
  Reading(const Statement& stated, const std::vector<std::string>& files)
      : stated_(stated),
        files_(files),
        table_(files, stated.separator, stated.places.columns()),
        missing_(stated.places.columns().size()),
        numbers_(stated.places.columns().size()),
        values_(stated.columns.size()) {
    found_.nonzero_rows.resize(stated.columns.size());
    prepare_relations();
    prepare_certificate();
  }

  Result<Found> run() {
    while (true) {
      Result<bool> more = table_.next(row_);
      if (!more) return more.error();
      if (!more.value()) break;
      Result<bool> used = judge();
      if (!used) return used.error();
      if (used.value()) take();
    }
    found_.rows_of_file = table_.rows_of_file();
    for (const std::uint64_t rows : found_.rows_of_file) found_.rows_read += rows;
    return std::move(found_);
  }

 private:
  void prepare_relations() {
    for (std::size_t i = 0; i < stated_.relations.size(); ++i) {
      const StatedRelation& relation = stated_.relations[i];
      FoundRelation found;
      for (const auto& [column, coefficient] : relation.terms)
        found.rational = found.rational && stated_.columns[column].rational();
      found.violation_met.resize(relation.violations.size(), false);
      for (std::size_t v = 0; v < relation.violations.size(); ++v)
        listed_[relation.violations[v].row].emplace_back(i, v);
      found_.relations.push_back(std::move(found));
    }
  }

  void prepare_certificate() {
    if (!stated_.certificate || !prime_fits(stated_.certificate->prime)) return;
    prime_ = stated_.certificate->prime.get_ui();
    const auto& rows = stated_.certificate->rows;
    found_.matrix.resize(rows.size());
    for (std::size_t i = 0; i < rows.size(); ++i) certified_.emplace(rows[i], i);
  }

  [[nodiscard]] std::string place() const {
    return (files_[row_.file] == "-" ? "standard input" : files_[row_.file]) + ":" +
           std::to_string(row_.line);
  }

  [[nodiscard]] RowCells cells() {
    return {&row_.cells, stated_.decimal_mark, static_cast<unsigned long>(row_.number), &numbers_};
  }

  [[nodiscard]] Error unreadable(State state) const {
    if (state == State::too_large)
      return {ErrorKind::limit, place(), "a power of over 10,000,000 bits", ""};
    return {ErrorKind::data, place(), "a cell that the verdict reads as a number is none",
            "are these the data of the verdict?"};
  }
  static bool is_unreadable(State state) {
    return state == State::not_number || state == State::too_large;
  }

  /// Whether the row is used; it is counted where it is not.
  Result<bool> judge() {
    std::fill(numbers_.begin(), numbers_.end(), std::nullopt);
    for (std::size_t i = 0; i < missing_.size(); ++i) {
      const auto& texts = stated_.missing;
      missing_[i] =
          std::find(texts.begin(), texts.end(), without_blanks(row_.cells[i])) != texts.end();
    }
    bool settled = stated_.filter_is_known;
    if (stated_.filter) {
      Result<bool> passes = passes_filter(settled);
      if (!passes || !passes.value()) return passes;
    }
    if (!all_present()) return false;
    Result<bool> weighs = has_weight();
    if (!weighs || !weighs.value()) return weighs;
    Result<bool> defined = evaluate_columns(settled);
    if (!defined) return defined;
    if (!settled) ++found_.unsettled;
    return defined.value() && settled;
  }

  /// A row with a missing cell in the filter is left to the missing.
  Result<bool> passes_filter(bool& settled) {
    const auto& reads = stated_.filter->reads();
    if (std::any_of(reads.begin(), reads.end(), [&](std::size_t i) { return missing_[i]; }))
      return true;
    const Value value = stated_.filter->evaluate(cells());
    if (is_unreadable(value.state)) return unreadable(value.state);
    if (value.state == State::rational && value.number == 1) return true;
    if (value.state == State::rational) ++found_.excluded[{"filter", ""}];
    if (value.state == State::undefined) ++found_.excluded[{"undefined", ""}];
    settled = settled && (value.state == State::rational || value.state == State::undefined);
    return !settled;
  }

  bool all_present() {
    bool all = true;
    for (std::size_t i = 0; i < missing_.size(); ++i) {
      if (!missing_[i]) continue;
      ++found_.excluded[{"missing", stated_.places.columns()[i]}];
      all = false;
    }
    return all;
  }

  Result<bool> has_weight() {
    if (!stated_.weight) return true;
    const auto weight = read_decimal(row_.cells[stated_.weight_place], stated_.decimal_mark);
    if (!weight || *weight < 0) {
      return Error{ErrorKind::data, place(),
                   "the weight \"" + *stated_.weight + "\" is no number from 0 up",
                   "are these the data of the verdict?"};
    }
    if (*weight == 0) ++found_.excluded[{"weight_zero", *stated_.weight}];
    return *weight > 0;
  }

  Result<bool> evaluate_columns(bool& settled) {
    bool defined = true;
    for (std::size_t j = 0; j < values_.size(); ++j) {
      const StatedColumn& column = stated_.columns[j];
      values_[j] = column.formula ? column.formula->evaluate(cells()) : Value{State::unsettled, {}};
      if (is_unreadable(values_[j].state)) return unreadable(values_[j].state);
      if (values_[j].state == State::unsettled) settled = false;
      if (values_[j].state != State::undefined) continue;
      ++found_.excluded[{"undefined", column.name}];
      defined = false;
    }
    return defined;
  }

  /// A row that is used.
  void take() {
    ++found_.rows_used;
    for (std::size_t j = 0; j < values_.size(); ++j)
      found_.nonzero_rows[j] +=
          values_[j].state == State::rational && values_[j].number != 0 ? 1 : 0;
    const auto listed = listed_.find(row_.number);
    for (std::size_t i = 0; i < found_.relations.size(); ++i) {
      if (!found_.relations[i].rational) continue;
      const mpq_class residual = residual_of(stated_.relations[i]);
      count(found_.relations[i], residual);
      if (listed == listed_.end()) continue;
      for (const auto& [relation, violation] : listed->second) {
        if (relation == i) compare(i, violation, residual);
      }
    }
    const auto certified = certified_.find(row_.number);
    if (certified != certified_.end()) certify(certified->second);
  }

  [[nodiscard]] mpq_class residual_of(const StatedRelation& relation) const {
    mpq_class sum;
    for (const auto& [column, coefficient] : relation.terms)
      sum += coefficient * values_[column].number;
    return sum;
  }

  void count(FoundRelation& relation, const mpq_class& residual) {
    if (residual == 0) {
      ++relation.holding;
      return;
    }
    if (++relation.violating == 1) {
      relation.first_violation = "row " + std::to_string(row_.number) + " (" + place() +
                                 "), where it leaves " + residual.get_str();
    }
    const mpq_class size = abs(residual);
    if (size > relation.largest_residual) relation.largest_residual = size;
  }

  void compare(std::size_t relation, std::size_t number, const mpq_class& residual) {
    const StatedViolation& stated = stated_.relations[relation].violations[number];
    FoundRelation& found = found_.relations[relation];
    const std::string row = "row " + std::to_string(row_.number);
    found.violation_met[number] = true;
    if (residual == 0) found.faults.push_back("in " + row + " it holds");
    if (residual != stated.residual)
      found.faults.push_back(row + " leaves " + residual.get_str() + ", not " +
                             stated.residual.get_str());
    if (stated.line != row_.line)
      found.faults.push_back(row + " is in line " + std::to_string(row_.line) + ", not " +
                             std::to_string(stated.line));
    const bool file_fits =
        row_.file < stated_.files.size() && stated.file == stated_.files[row_.file].name;
    if (!file_fits) found.faults.push_back(row + " is not in the file " + stated.file);
    for (const auto& [column, text] : stated.cells) {
      if (!cell_is(column, text))
        found.faults.push_back("the cell of " + column + " in " + row + " is not \"" + text + "\"");
    }
  }

  /// Numbers are compared as numbers: the document writes 12.40 as 12.4.
  [[nodiscard]] bool cell_is(const std::string& column, const std::string& text) const {
    const auto& columns = stated_.places.columns();
    const auto found = std::find(columns.begin(), columns.end(), column);
    if (found == columns.end()) return false;
    const std::string& cell = row_.cells[static_cast<std::size_t>(found - columns.begin())];
    if (cell == text) return true;
    const std::optional<mpq_class> number = read_decimal(cell, stated_.decimal_mark);
    return number && number == read_decimal(text, '.');
  }

  void certify(std::size_t place) {
    for (const std::size_t column : stated_.certificate->columns) {
      const Value& value = values_[column];
      const auto residue = value.state == State::rational ? modulo(value.number, prime_)
                                                          : std::optional<std::uint64_t>();
      if (!residue) found_.prime_divides = true;
      found_.matrix[place].push_back(residue.value_or(0));
    }
  }

  const Statement& stated_;
  const std::vector<std::string>& files_;
  Table table_;
  Row row_;
  std::vector<bool> missing_;                       ///< by place of the cell
  std::vector<std::optional<Value>> numbers_;       ///< by place of the cell
  std::vector<Value> values_;                       ///< of the design columns
  std::map<std::uint64_t, std::size_t> certified_;  ///< row, place in the certificate
  /// Row, the violations listed for it: relation and number.
  std::map<std::uint64_t, std::vector<std::pair<std::size_t, std::size_t>>> listed_;
  std::uint64_t prime_ = 0;
  Found found_;
};

}  // namespace

bool prime_fits(const mpz_class& prime) {
  return prime > 1 && mpz_sizeinbase(prime.get_mpz_t(), 2) <= 63;
}

Result<Found> read_rows(const Statement& stated, const std::vector<std::string>& files) {
  return Reading(stated, files).run();
}

}  // namespace gramproof::recheck
