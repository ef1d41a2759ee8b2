// tests/audit/asked.hpp - a question put to data that are written out.
#pragma once

#include <doctest/doctest.h>

#include <string>
#include <utility>
#include <vector>

#include "audit/why.hpp"
#include "support/scratch.hpp"

namespace gramproof::audit {

inline Result<Why> asked(const std::string& text, const Request& request,
                         const std::string& column) {
  const test::Scratch scratch;
  Result<table::Source> source = table::Source::open({scratch.file("data.csv", text)}, {});
  REQUIRE(source);
  return why(source.value(), request, column);
}

inline Why asked(const std::string& text, const std::string& design, const std::string& column,
                 const std::vector<std::string>& contrasts = {}) {
  Request request;
  request.design.design = design;
  request.contrasts = contrasts;
  Result<Why> result = asked(text, request, column);
  if (!result) FAIL(to_line(result.error()));
  return std::move(result.value());
}

inline std::vector<std::string> labels(const Why& why, const std::vector<int>& columns) {
  std::vector<std::string> names;
  for (const int j : columns)
    names.push_back(why.audit.design.columns[static_cast<std::size_t>(j)].label);
  return names;
}

}  // namespace gramproof::audit
