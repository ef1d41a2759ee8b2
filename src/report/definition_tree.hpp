// src/report/definition_tree.hpp - the definition of a column as JSON, so that a checker needs no
// parser of the design language.
//
// Nodes, T being a node again:
//   {"cell": "age"}  {"number": "0.5"} (exact decimal)  {"row": true} (row number)
//   {"add": [T, T]}  {"subtract": [T, T]}  {"multiply": [T, ...]}  {"divide": [T, T]}
//   {"power": [T], "exponent": 2}  {"log": [T]}  {"sqrt": [T]}  {"exp": [T]}  {"asinh": [T]}
//   {"compare": "<=", "of": [T, T]}   1 where it holds, else 0; = != < <= > >=
//   {"level": {"column": "region", "is": "north"}}  {"same_text": ["a", "b"]}   1 where it holds,
//   else 0
//   {"and": [T, ...]}  {"or": [T, ...]}  {"not": T}   of 0/1 nodes
// abs, min, max are written out by comparisons.
#pragma once

#include <optional>

#include <nlohmann/json.hpp>

#include "design/expression.hpp"
#include "table/survey.hpp"

namespace gramproof::report {

/// Larger trees are not written: abs, min and max written out repeat their operands, so that
/// nesting them to the language's limit of 64 would give 4^64 nodes.
inline constexpr double most_definition_nodes = 20000;

/// The tree, or none if it would have more than most_definition_nodes nodes. O(nodes written).
[[nodiscard]] std::optional<nlohmann::ordered_json> definition_tree(
    const design::Expression& expression, const table::Schema& schema);

/// Decimals that suffice for every value of the expression on the data, or none where a quotient or
/// a function that is not rational occurs.
[[nodiscard]] std::optional<int> decimals_of(const design::Expression& expression,
                                             const table::Schema& schema);

}  // namespace gramproof::report
