// src/design/canonical.hpp - texts of parts of a product, for the texts of terms that are products
// of sets.
#pragma once

#include <string>

#include "design/expression.hpp"

namespace gramproof::design {

/// canonical_text() of the tree as it stands on the left or the right of `*`: in parentheses where
/// the product needs them.
[[nodiscard]] std::string text_of_factor(const Expression& expression, const table::Schema& schema,
                                         bool on_the_right);

/// The condition as --rows writes it: without brackets around it.
[[nodiscard]] std::string text_of_condition(const Expression& expression,
                                            const table::Schema& schema);

}  // namespace gramproof::design
