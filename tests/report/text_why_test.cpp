// The answer of `why` in words, from audits made by hand.
#include "report/text_why.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <sstream>
#include <string>
#include <vector>

#include "base/text.hpp"
#include "report/sample_audits.hpp"
#include "support/lines.hpp"

namespace {

using namespace gramproof;
using test::lines_of;

/// The text with each run of blanks and line breaks as one blank.
std::string in_one_line(const std::string& text) {
  std::istringstream stream(text);
  std::string line;
  for (std::string word; stream >> word;) line += (line.empty() ? "" : " ") + word;
  return line;
}

bool has(const std::string& text, const std::string& part) {
  return in_one_line(text).find(part) != std::string::npos;
}

/// The exact relations of an audit as its null space.
void take_null_space(audit::Audit& audit) {
  for (const audit::RelationFinding& relation : audit.relations) {
    if (relation.standing != audit::Standing::exact) continue;
    exact::NullVector vector(audit.design.columns.size() + 1, 0);
    for (const audit::RelationTerm& term : relation.terms)
      vector[static_cast<std::size_t>(term.column)] = exact::Integer(term.exact);
    audit.null_space.push_back(std::move(vector));
  }
}

audit::WhyColumn answer_for(const audit::Audit& audit, int column) {
  audit::WhyColumn answer;
  answer.column = column;
  if (audit::in_exact_relation(audit, column)) {
    std::vector<int> keeping = audit.kept;
    keeping.insert(keeping.end(), audit.left_out.begin(), audit.left_out.end());
    answer.dependence = audit::dependence_of(audit, column, keeping);
    return answer;
  }
  answer.nearness = audit::nearness_of(audit, column);
  answer.nearness->identifying_rows = 12.4;
  answer.nearness->rows = {{audit.source.files.empty() ? "data.csv" : audit.source.files[0].first,
                            18,
                            17,
                            0.31,
                            {{"x", "4\x1b[31m"}}}};
  return answer;
}

audit::Why why_of(audit::Audit audit, const std::vector<int>& columns) {
  take_null_space(audit);
  audit::Why why;
  why.asked = "asked\n";
  why.audit = std::move(audit);
  for (const int column : columns) why.columns.push_back(answer_for(why.audit, column));
  if (columns.size() > 1) why.asked_for = audit::AskedFor::source;
  for (int j = 0; j < static_cast<int>(why.audit.design.columns.size()); ++j)
    (audit::in_exact_relation(why.audit, j) ? why.sometimes : why.never_removable).push_back(j);
  if (!why.audit.left_out.empty())
    why.habits = {{audit::Habit::first_kept, why.audit.left_out},
                  {audit::Habit::gramproof, why.audit.left_out}};
  if (why.columns.front().dependence) why.choice = why.columns.front().dependence->choice;
  return why;
}

}  // namespace

TEST_CASE("no line is wider than the page and none steers the terminal") {
  for (const sample::Sample& sample : sample::all()) {
    const int columns = std::min<int>(12, static_cast<int>(sample.audit.design.columns.size()));
    for (int column = -1; column < columns; ++column) {
      std::vector<int> asked = {column};
      if (column < 0) {
        asked.clear();
        for (int j = 0; j < columns; ++j) asked.push_back(j);
      }
      const audit::Why why = why_of(sample.audit, asked);
      for (const int width : {20, 80, 97, 120, 500}) {
        const auto page = static_cast<std::size_t>(std::clamp(width, 80, 120));
        CAPTURE(sample.name);
        CAPTURE(column);
        CAPTURE(width);
        const std::string text = report::text_why(why, {width, false});
        for (const std::string& line : lines_of(text)) {
          CAPTURE(line);
          CHECK(display_width(line) <= page);
          CHECK(visible(line) == line);
          CHECK((line.empty() || line.back() != ' '));
        }
        CHECK_FALSE(first_invalid_utf8(text).has_value());
        CHECK(text.find("\n\n\n") == std::string::npos);
        CHECK(text.back() == '\n');
      }
    }
  }
}

TEST_CASE("a level of a full set: relation, alternatives, meanings, habits, caution") {
  const audit::Why why = why_of(sample::level_set(), {3});
  const std::string text = report::text_why(why, {});
  for (const std::string part :
       {"`[phase = parked]` cannot be kept beside the other columns",
        "constant = [phase = active] + [phase = parked] + [phase = trial]",
        "This holds on all 4,812 rows used. It is proved in whole numbers",
        "until `[phase = trial]` (column 5 of 5) joins",
        "`constant`, `[phase = active]` or `[phase = trial]`.",
        "constant estimates constant + [phase = parked]",
        "[phase = active] estimates [phase = active] \u2212 [phase = parked]",
        "Untouched, with the meaning it has in the equation with all columns: `treated`.",
        "first come, first kept `[phase = parked]`", "documentation of the survey"}) {
    CAPTURE(part);
    CAPTURE(text);
    CHECK(has(text, part));
  }
}

TEST_CASE("a relation that rows break: the rows are named, and what holds the column up") {
  const audit::Why why = why_of(sample::with_exceptions(), {4});
  const std::string text = report::text_why(why, {});
  for (const std::string part :
       {"`total` can be kept", "heat + light + cooking = total", "6 rows break it",
        "harbour.csv:1041 (row 1,040)", "Which rows hold it up", "as if over 12 rows",
        "harbour.csv:18 (row 17): 31% of it"}) {
    CAPTURE(part);
    CAPTURE(text);
    CHECK(has(text, part));
  }
}

TEST_CASE("sums that can be estimated and sums that cannot") {
  audit::Why why = why_of(sample::level_set(), {3});
  why.contrasts = {
      {"[phase = active] - [phase = trial]", true, "", {{2, 1}, {4, -1}}, {{2, 1}, {4, -1}}},
      {"0.5*treated - constant",
       false,
       "a = b",
       {{0, -1}, {1, mpq_class(1, 2)}},
       {{0, -1}, {1, mpq_class(1, 2)}, {3, mpq_class(-7, 3)}}}};
  const std::string text = report::text_why(why, {});
  CAPTURE(text);
  CHECK(has(text, "`[phase = active] - [phase = trial]` can be estimated"));
  CHECK(has(text, "is read as [phase = active] \u2212 [phase = trial]."));
  CHECK(has(text,
            "cannot be estimated: other values of it fit the data equally well. In the way: "
            "a = b."));
  CHECK(has(text,
            "\u2212constant + 0.5\u00b7treated would estimate \u2212constant + "
            "0.5\u00b7treated \u2212 7/3\u00b7[phase = parked] instead"));
}
