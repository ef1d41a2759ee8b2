// tests/recheck/small_document.hpp - a small verdict written by hand, and data it is true of.
#pragma once

#include <nlohmann/json.hpp>

namespace gramproof::test {

/// Five rows, of which row 4 lacks a cell: p + q = total in the four used, and in all but row 5
/// twice p is r.
inline const char* const small_data = "p,q,total,r\n1,4,5,2\n2,0,2,4\n0,3,3,0\n,1,1,2\n3,5,8,7\n";

/// The verdict on columns p, q, total, r. The determinant of rows 1, 2, 5 by columns p, q, r:
/// 1*(0*7 - 4*5) - 4*(2*7 - 4*3) + 2*(2*5 - 0*3) = -20 - 8 + 20 = -8; modulo 101 that is 93.
inline nlohmann::json small_document() {
  return nlohmann::json::parse(R"({
    "document": "gramproof.verdict", "schema_version": 1,
    "verdict": {"overall": "singular", "coefficients_lost": ["p", "q", "total"],
                "grounds": {"identified": {"grade": "fail", "finding": "..."}}},
    "source": {"files": [{"name": "data.csv", "rows": 5}], "separator": ",", "decimal_mark": ".",
               "missing": ["", "NA"], "filter": null, "must_be_present": ["p", "q", "total", "r"],
               "rows_read": 5, "rows_used": 4,
               "rows_excluded": [{"reason": "missing", "column": "p", "rows": 1}]},
    "design": {"rows": 4, "weight": null, "columns": [
      {"name": "p", "definition": {"cell": "p"}, "nonzero_rows": 3},
      {"name": "q", "definition": {"cell": "q"}, "nonzero_rows": 3},
      {"name": "total", "definition": {"cell": "total"}, "nonzero_rows": 4},
      {"name": "r", "definition": {"cell": "r"}, "nonzero_rows": 3}]},
    "rank": {"rank": 3, "columns": 4, "nullity": 1,
             "certificate": {"prime": "101", "rows": [1, 2, 5], "columns": ["p", "q", "r"],
                             "residue": "93", "rows_tested": 4}},
    "relations": [
      {"standing": "exact", "terms": [{"column": "p", "coefficient": "1"},
                                      {"column": "q", "coefficient": "1"},
                                      {"column": "total", "coefficient": "-1"}],
       "rows_holding": 4, "rows_violating": 0, "violations": [], "largest_residual": "0"},
      {"standing": "exact_except", "terms": [{"column": "p", "coefficient": "2"},
                                             {"column": "r", "coefficient": "-1"}],
       "rows_holding": 3, "rows_violating": 1, "largest_residual": "1",
       "violations": [{"file": "data.csv", "line": 6, "row": 5, "residual": "-1",
                       "cells": {"p": "3", "r": "7"}}]}],
    "relations_omitted": 0, "kept": ["p", "q", "r"], "left_out": ["total"]
  })");
}

}  // namespace gramproof::test
