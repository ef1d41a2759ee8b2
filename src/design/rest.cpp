#include "design/rest.hpp"

#include <utility>

#include "base/text.hpp"
#include "design/words.hpp"

namespace gramproof::design {
namespace {

/// Most distinct values of a whole-number column that a reader may take for a code.
constexpr std::uint64_t most_codes = 10;

Note left_out(const std::string& name, std::string reason) {
  return {"left_out_of_rest",
          (name.empty() ? "The unnamed column" : in_quotes(name)) +
              " is left out of rest: " + std::move(reason) + ".",
          {name}};
}

/// A column of numbers with a few other cells is a slip in the data or a mark for missing, not a
/// set of levels.
bool is_spoiled_number(const table::ColumnFacts& facts) {
  return facts.kind == table::ColumnKind::text && facts.first_not_number &&
         static_cast<double>(facts.numbers) >= 0.9 * static_cast<double>(facts.present);
}

Error spoiled(const table::ColumnFacts& facts) {
  const std::uint64_t others = facts.present - facts.numbers;
  return {ErrorKind::data, facts.first_not_number->where,
          in_quotes(facts.first_not_number->text) + " is no number: column " +
              in_quotes(facts.name) + " has " + counted(others, "such cell", "such cells") +
              " among " + counted(facts.numbers, "number", "numbers"),
          "if it means missing, name it in --missing; or write levels(" +
              quoted_if_needed(facts.name) + ") in the design"};
}

/// Whole numbers with few values, three at least: any two values span the same columns however they
/// are coded.
bool looks_like_a_code(const table::ColumnFacts& facts) {
  return facts.all_whole && !facts.levels_cut && facts.levels.size() >= 3 &&
         facts.levels.size() <= most_codes;
}

bool has_too_many_levels(const table::ColumnFacts& facts, std::uint64_t rows) {
  const std::uint64_t levels = facts.levels_cut ? facts.distinct_at_least : facts.levels.size();
  return levels > rows / 2;
}

}  // namespace

std::vector<int> columns_of_rest(Binder& binder, const std::vector<bool>& has_part,
                                 std::vector<Note>& notes) {
  std::vector<int> taken;
  const table::Schema& schema = binder.schema();
  for (std::size_t c = 0; c < schema.columns.size(); ++c) {
    if (has_part[c]) continue;
    const table::ColumnFacts& facts = schema.columns[c];
    if (facts.name.empty()) {
      notes.push_back(left_out(facts.name, "it looks like a row label"));
    } else if (facts.present == 0) {
      notes.push_back(left_out(facts.name, "it has no present cell"));
    } else if (is_spoiled_number(facts)) {
      binder.fail(spoiled(facts));
      return {};
    } else if (facts.kind == table::ColumnKind::text && has_too_many_levels(facts, schema.rows)) {
      notes.push_back(left_out(facts.name, "its text differs in more than half of the rows"));
    } else {
      taken.push_back(static_cast<int>(c));
      if (facts.kind == table::ColumnKind::text || !looks_like_a_code(facts)) continue;
      notes.push_back({"code_used_as_number",
                       in_quotes(facts.name) + " has " +
                           counted(facts.levels.size(), "value", "values") +
                           " and is used as a number; if it is a code, write levels(" +
                           quoted_if_needed(facts.name) + ").",
                       {facts.name}});
    }
  }
  return taken;
}

}  // namespace gramproof::design
