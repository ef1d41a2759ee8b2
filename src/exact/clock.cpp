#include "exact/clock.hpp"

#include <algorithm>
#include <array>
#include <cctype>
#include <string_view>

namespace gramproof::exact {
namespace {

template <class Test>
std::size_t count(const design::Design& design, const Sides& sides, Test&& test) {
  std::size_t found = 0;
  for (const Sides::Terms* side : {&sides.left, &sides.right}) {
    for (const auto& term : *side) found += test(design.columns[term.first]);
  }
  return found;
}

bool all_ones(const Sides::Terms& side) {
  return std::all_of(side.begin(), side.end(), [](const auto& term) { return term.second == 1; });
}

}  // namespace

bool named_for_time(const std::string& label) {
  constexpr std::array<std::string_view, 14> words = {
      "age",    "birth", "born", "year",       "period",   "cohort", "wave",
      "tenure", "time",  "date", "experience", "duration", "entry",  "start"};
  std::string word;
  for (const char c : label + " ") {
    if (std::isalpha(static_cast<unsigned char>(c)) != 0) {
      word += static_cast<char>(std::tolower(static_cast<unsigned char>(c)));
      continue;
    }
    if (std::find(words.begin(), words.end(), word) != words.end()) return true;
    word.clear();
  }
  return false;
}

bool is_sum_of_plain_columns(const design::Design& design, const Sides& sides) {
  if (sides.left.size() != 2 || sides.right.size() != 1) return false;
  return all_ones(sides.left) && all_ones(sides.right) &&
         count(design, sides, [](const design::DesignColumn& column) {
           return column.definition && column.definition->operation == design::Operation::cell;
         }) == 3;
}

bool is_plain_difference(const design::Design& design, const Sides& sides) {
  return is_sum_of_plain_columns(design, sides) && sides.number == 0 &&
         sides.left.back().first > sides.right.front().first;
}

bool is_clock_by_name(const design::Design& design, const Sides& sides) {
  return is_sum_of_plain_columns(design, sides) &&
         count(design, sides, [](const design::DesignColumn& column) {
           return named_for_time(column.label);
         }) >= 2;
}

}  // namespace gramproof::exact
