// tests/design/harbour.hpp - an invented table of twelve households and short ways to bind designs
// to it.
#pragma once

#include <string>
#include <utility>
#include <vector>

#include "design/bind.hpp"
#include "support/table_builder.hpp"

namespace gramproof::test {

inline Table harbour() {
  return make_table(
      {"age", "income", "net income", "region", "town", "grade", "treated", "log", "size"},
      {{"25", "1200.50", "1000", "north", "North East", "1", "0", "3", "small"},
       {"30", "1500.00", "1300", "south", "North East", "2", "1", "1", "large"},
       {"41", "2100.25", "1700", "south", "Bay", "2", "0", "4", "not"},
       {"52", "1800.00", "1500", "east", "Bay", "3", "1", "1", "small"},
       {"65", "900.75", "800", "south", "Bay", "1.0", "0", "5", "large"},
       {"70", "1100.10", "950", "north", "Old \"Quay\"", "2", "1", "9", "2-4"},
       {"33", "2500.00", "2000", "east", "Bay", "3", "0", "2", "small"},
       {"48", "1950.40", "1600", "south", "North East", "2", "0", "6", "large"},
       {"57", "1700.00", "1450", "south", "Bay", "1", "1", "5", "small"},
       {"29", "1300.00", "1100", "north", "Bay", "2", "0", "3", "small"},
       {"38", "NA", "1250", "north", "Bay", "3", "0", "5", "large"},
       {"44", "1650.20", "1400", "east", "Bay", "2", "1", "8", "small"}});
}

inline Result<design::Design> bind_request(const design::Request& request,
                                           const table::Schema& schema,
                                           std::size_t most_columns = 1000) {
  const auto syntax = design::parse(request);
  if (!syntax) return syntax.error();
  return design::bind(*syntax.value(), request, schema, "harbour.csv", most_columns);
}

inline Result<design::Design> bind_text(const std::string& text, const table::Schema& schema,
                                        std::size_t most_columns = 1000) {
  design::Request request;
  request.design = text;
  return bind_request(request, schema, most_columns);
}

inline std::vector<std::string> labels_of(const design::Design& design) {
  std::vector<std::string> labels;
  for (const auto& column : design.columns) labels.push_back(column.label);
  return labels;
}

inline std::vector<std::string> kinds_of(const std::vector<design::Note>& notes) {
  std::vector<std::string> kinds;
  for (const auto& note : notes) kinds.push_back(note.kind);
  return kinds;
}

}  // namespace gramproof::test
