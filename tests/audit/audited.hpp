// tests/audit/audited.hpp - whole audits of data that are written out.
#pragma once

#include <doctest/doctest.h>

#include <functional>
#include <string>
#include <utility>
#include <vector>

#include "audit/run.hpp"
#include "support/random_numbers.hpp"
#include "support/scratch.hpp"

namespace gramproof::audit {

inline Result<Audit> tried(const std::string& text, const Request& request) {
  const test::Scratch scratch;
  Result<table::Source> source = table::Source::open({scratch.file("data.csv", text)}, {});
  REQUIRE(source);
  return run(source.value(), request);
}

inline Audit audited(const std::string& text, const Request& request) {
  Result<Audit> result = tried(text, request);
  if (!result) FAIL(to_line(result.error()));
  return std::move(result.value());
}

inline Audit audited(const std::string& text, const std::string& design) {
  Request request;
  request.design.design = design;
  return audited(text, request);
}

/// Rows written by a function of the row number and a seeded source.
inline std::string rows(const std::string& header, int count, std::uint64_t seed,
                        const std::function<std::string(int, test::Random&)>& row) {
  test::Random random(seed);
  std::string text = header + "\n";
  for (int i = 0; i < count; ++i) text += row(i, random) + "\n";
  return text;
}

inline std::vector<std::string> labels(const Audit& audit, const std::vector<int>& columns) {
  std::vector<std::string> names;
  for (const int j : columns)
    names.push_back(audit.design.columns[static_cast<std::size_t>(j)].label);
  return names;
}

inline std::vector<const RelationFinding*> relations_at(const Audit& audit, Standing standing) {
  std::vector<const RelationFinding*> found;
  for (const RelationFinding& relation : audit.relations) {
    if (relation.standing == standing) found.push_back(&relation);
  }
  return found;
}

}  // namespace gramproof::audit
