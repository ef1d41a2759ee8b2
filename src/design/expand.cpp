#include <algorithm>
#include <cmath>
#include <utility>

#include <fmt/format.h>

#include "design/rows.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

constexpr double smallest_magnitude = 1e-305;
constexpr double largest_magnitude = 1e305;

/// Zero or within the range; false for NaN and infinity. No branches, so that loops over rows are
/// vectorised.
bool is_usable(double value) {
  const double magnitude = std::abs(value);
  return (value == 0) | ((magnitude >= smallest_magnitude) & (magnitude <= largest_magnitude));
}

class Expansion {
 public:
  Expansion(const Design& design, const table::Schema& schema,
            const std::vector<std::string>& file_names, const table::Piece& piece)
      : design_(design),
        schema_(schema),
        file_names_(file_names),
        piece_(piece),
        out_(piece.rows, 0) {}

  Result<Block> run() {
    if (Result<void> done = apply_filter(); !done) return done.error();
    take_out_missing();
    if (Result<void> done = take_weights(); !done) return done.error();
    for (std::size_t r = 0; r < piece_.rows; ++r) {
      if (out_[r] == 0) block_.rows.push_back(r);
    }
    const auto columns = static_cast<Index>(design_.columns.size());
    block_.values.resize(static_cast<Index>(block_.rows.size()), columns);
    undefined_.assign(block_.rows.size(), 0);
    for (Index j = 0; j < columns; ++j) {
      if (Result<void> done = fill(static_cast<std::size_t>(j)); !done) return done.error();
    }
    take_out_undefined();
    gather_weights();
    block_.rows_excluded = piece_.rows - block_.rows.size();
    return std::move(block_);
  }

 private:
  [[nodiscard]] const std::vector<std::uint8_t>& missing(int column) const {
    return piece_.columns[static_cast<std::size_t>(column)].missing;
  }

  [[nodiscard]] std::string where(std::size_t row) const {
    const std::size_t file = piece_.file_of_row.empty() ? piece_.file : piece_.file_of_row[row];
    return file_names_[file] + ":" + std::to_string(piece_.line[row]);
  }

  void exclude(Exclusion::Reason reason, int column, std::uint64_t rows) {
    if (rows > 0) block_.excluded.push_back({reason, column, rows});
  }

  /// Rows in which the condition is decided and does not hold; a row with a missing cell in it is
  /// left to the missing.
  Result<void> apply_filter() {
    if (!design_.filter) return {};
    std::vector<std::size_t> rows;
    const std::vector<int> columns = columns_of(*design_.filter);
    for (std::size_t r = 0; r < piece_.rows; ++r) {
      const bool whole =
          std::none_of(columns.begin(), columns.end(), [&](int c) { return missing(c)[r] != 0; });
      if (whole) rows.push_back(r);
    }
    const Vector holds = evaluate(*design_.filter, piece_, rows);
    std::uint64_t filtered = 0, undefined = 0;
    for (std::size_t i = 0; i < rows.size(); ++i) {
      const double value = holds[static_cast<Index>(i)];
      if (value == 1) continue;
      out_[rows[i]] = 1;
      if (value == 0) {
        ++filtered;
        continue;
      }
      if (design_.undefined == Undefined::stop) {
        return undefined_error("the condition of --rows", rows[i]);
      }
      ++undefined;
    }
    exclude(Exclusion::Reason::filter, -1, filtered);
    exclude(Exclusion::Reason::undefined, -1, undefined);
    return {};
  }

  /// Two steps, so that a row is counted in each column that lacks a cell.
  void take_out_missing() {
    const std::vector<std::uint8_t> before = out_;
    for (const int column : design_.used_columns) {
      const auto& marks = missing(column);
      if (std::find(marks.begin(), marks.end(), 1) == marks.end()) continue;
      std::uint64_t rows = 0;
      for (std::size_t r = 0; r < piece_.rows; ++r) {
        const bool here = marks[r] != 0 && before[r] == 0;
        rows += here ? 1 : 0;
        out_[r] = static_cast<std::uint8_t>(out_[r] | (here ? 1 : 0));
      }
      exclude(Exclusion::Reason::missing, column, rows);
    }
  }

  Result<void> take_weights() {
    if (design_.weight < 0) return {};
    const auto& weights = piece_.columns[static_cast<std::size_t>(design_.weight)].value;
    std::uint64_t zero = 0;
    for (std::size_t r = 0; r < piece_.rows; ++r) {
      if (out_[r] != 0) continue;
      if (!(weights[r] >= 0) || std::isinf(weights[r])) {
        return Error{ErrorKind::data, where(r),
                     "the weight " +
                         in_quotes(schema_.columns[static_cast<std::size_t>(design_.weight)].name) +
                         " is " + fmt::format("{}", weights[r]),
                     "weights are numbers from 0 up"};
      }
      if (weights[r] > 0) continue;
      out_[r] = 1;
      ++zero;
    }
    exclude(Exclusion::Reason::weight_zero, -1, zero);
    return {};
  }

  Error undefined_error(const std::string& what, std::size_t row) const {
    return {ErrorKind::data, where(row), what + " is undefined in this row",
            "--undefined exclude leaves such rows out"};
  }

  [[nodiscard]] bool all_usable(const double* values) const {
    std::uint64_t unusable = 0;
    for (std::size_t i = 0; i < block_.rows.size(); ++i) unusable += is_usable(values[i]) ? 0 : 1;
    return unusable == 0;
  }

  Result<void> fill(std::size_t j) {
    const DesignColumn& column = design_.columns[j];
    const auto at = static_cast<Index>(j);
    block_.values.col(at) = evaluate(*column.definition, piece_, block_.rows);
    // Cells keep their range by the table's own check, brackets by construction.
    if (column.definition->operation == Operation::cell ||
        column.definition->operation == Operation::is_level)
      return {};
    if (all_usable(block_.values.col(at).data())) return {};
    std::uint64_t undefined = 0;
    for (std::size_t i = 0; i < block_.rows.size(); ++i) {
      double& value = block_.values(static_cast<Index>(i), at);
      if (is_usable(value)) continue;
      if (Result<void> done = look_closer(column, i, value); !done) return done;
      if (value == value) continue;
      if (design_.undefined == Undefined::stop)
        return undefined_error(column.label, block_.rows[i]);
      undefined_[i] = 1;
      ++undefined;
    }
    exclude(Exclusion::Reason::undefined, static_cast<int>(j), undefined);
    return {};
  }

  /// A value that is no usable double: the exact value, where there is one, says whether it is
  /// undefined, usable after all (an intermediate result left the range), or out of range.
  Result<void> look_closer(const DesignColumn& column, std::size_t i, double& value) const {
    const std::size_t row = block_.rows[i];
    std::string size = fmt::format("{}", value);
    if (column.exact) {
      const auto exact = exact_value(*column.definition, piece_, row);
      value = exact ? exact->get_d() : std::nan("");
      if (exact && *exact == 0) return {};
      size = fmt::format("{}", value);
    }
    if (value != value || (value != 0 && is_usable(value))) return {};
    return Error{ErrorKind::data, where(row), column.label + " is out of range: " + size,
                 "values lie between 1e-305 and 1e305 in size; change the unit"};
  }

  void take_out_undefined() {
    if (std::find(undefined_.begin(), undefined_.end(), 1) == undefined_.end()) return;
    std::vector<std::size_t> rows;
    std::vector<Index> kept;
    for (std::size_t i = 0; i < block_.rows.size(); ++i) {
      if (undefined_[i] != 0) continue;
      rows.push_back(block_.rows[i]);
      kept.push_back(static_cast<Index>(i));
    }
    Matrix values = block_.values(kept, Eigen::all);
    block_.values = std::move(values);
    block_.rows = std::move(rows);
  }

  void gather_weights() {
    if (design_.weight < 0) return;
    const auto& weights = piece_.columns[static_cast<std::size_t>(design_.weight)].value;
    block_.weights.resize(static_cast<Index>(block_.rows.size()));
    for (std::size_t i = 0; i < block_.rows.size(); ++i)
      block_.weights[static_cast<Index>(i)] = weights[block_.rows[i]];
  }

  const Design& design_;
  const table::Schema& schema_;
  const std::vector<std::string>& file_names_;
  const table::Piece& piece_;
  std::vector<std::uint8_t> out_;  ///< a row of the piece: 1 if it is excluded
  std::vector<std::uint8_t>
      undefined_;  ///< an entry of block_.rows: 1 if a column is undefined there
  Block block_;
};

}  // namespace

Result<Block> expand(const Design& design, const table::Schema& schema,
                     const std::vector<std::string>& file_names, const table::Piece& piece) {
  return Expansion(design, schema, file_names, piece).run();
}

}  // namespace gramproof::design
