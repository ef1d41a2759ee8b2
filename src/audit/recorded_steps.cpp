#include <cmath>

#include "audit/figures.hpp"

namespace gramproof::audit {
namespace {

/// From this many significant digits a column counts as computed in binary: a double has 15 to 17.
constexpr int binary_digits = 15;
/// Relative step of a number that was computed in double precision and printed in full (methods:
/// 5).
constexpr double binary_step = 0x1p-50;
/// Whole numbers from 0 or 1 with at most so many different values are codes or small counts:
/// exact.
constexpr std::size_t most_code_values = 20;

bool looks_like_code(const table::ColumnFacts& facts) {
  return facts.all_whole && !facts.levels_cut && facts.levels.size() <= most_code_values &&
         (facts.smallest == 0 || facts.smallest == 1);
}

Step step_of(int column, const table::ColumnFacts& facts) {
  Step step;
  step.column = column;
  if (looks_like_code(facts)) {
    step.how = Step::How::exact_code;
  } else if (facts.most_significant_digits >= binary_digits) {
    step.how = Step::How::binary;
    step.step = binary_step;
  } else if (facts.all_whole && facts.most_decimals <= 0) {
    step.how = Step::How::whole;
    step.step = std::pow(10.0, -facts.most_decimals);
  } else {
    step.how = Step::How::decimals;
    step.step = std::pow(10.0, -facts.most_decimals);
  }
  return step;
}

}  // namespace

std::vector<Step> recorded_steps(const scan::Digest& digest, const table::Schema& schema,
                                 const std::vector<std::pair<int, double>>& given) {
  std::vector<Step> steps;
  for (const scan::SourceNoise& source : digest.noise) {
    Step step = step_of(source.column, schema.columns[static_cast<std::size_t>(source.column)]);
    for (const auto& [column, size] : given) {
      if (column != source.column) continue;
      step.step = size;
      step.how = size > 0 ? Step::How::given : Step::How::given_exact;
    }
    steps.push_back(step);
  }
  return steps;
}

}  // namespace gramproof::audit
