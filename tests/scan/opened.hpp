// tests/scan/opened.hpp - a file brought to a scanned design in one call.
#pragma once

#include <doctest/doctest.h>

#include <string>

#include "scan/pass.hpp"
#include "table/survey.hpp"

namespace gramproof::test {

struct Scanned {
  table::Source source;
  table::Schema schema;
  design::Settled settled;
  scan::Digest digest;  ///< settled
};

inline Scanned scanned(const std::string& path, const design::Request& request, unsigned threads) {
  Result<table::Source> source = table::Source::open({path}, {});
  REQUIRE(source);
  Result<std::shared_ptr<const design::Syntax>> syntax = design::parse(request);
  REQUIRE(syntax);
  table::SurveyOptions survey_options;
  survey_options.threads = threads;
  survey_options.list_values = design::columns_with_levels(*syntax.value());
  Result<table::Schema> schema = table::survey(source.value(), survey_options);
  REQUIRE(schema);
  Result<design::Design> design =
      design::bind(*syntax.value(), request, schema.value(), path, 10'000);
  REQUIRE(design);
  Result<scan::Digest> digest =
      scan::scan(source.value(), schema.value(), design.value(), {threads, {}});
  REQUIRE(digest);
  design::Settled settled =
      design::settle(design.value(), schema.value(), digest.value().level_counts);
  scan::Digest settled_digest = scan::settle(digest.value(), settled);
  return {std::move(source.value()), std::move(schema.value()), std::move(settled),
          std::move(settled_digest)};
}

}  // namespace gramproof::test
