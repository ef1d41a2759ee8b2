// tests/exact/told.hpp - relations as they are told: from small matrices with levels.
#pragma once

#include <string>
#include <vector>

#include "exact/matrix.hpp"
#include "exact/relations.hpp"

namespace gramproof::test {

using Texts = std::vector<std::string>;

/// The readable basis of all relations of the matrix, described.
[[nodiscard]] std::vector<exact::Relation> relations_of(const Matrix& matrix);

/// Adds a text column with the given level in each row.
void add_text_column(Matrix& matrix, const std::string& name, const std::vector<int>& codes,
                     const Texts& levels);

/// all_levels(name), or all_levels(name) * the design column `factor`.
void add_all_levels(Matrix& matrix, const std::string& name, int factor = -1);

[[nodiscard]] bool has(const std::vector<exact::Relation>& relations, const std::string& text,
                       exact::Cause cause);

/// All of them, to be read where a check fails.
[[nodiscard]] std::string all_texts(const std::vector<exact::Relation>& relations);

}  // namespace gramproof::test
