// src/design/marginality.hpp - products that stand without their factors.
//   Nelder, "A reformulation of linear models", JRSS A 140 (1977) 48-77: a product without its main
//   effects is seldom meant.
#pragma once

#include "design/design.hpp"

namespace gramproof::design {

/// The factors of a product, from left to right, numbers left out; the tree itself if it is no
/// product. Whole powers of products and logical conjunctions are products too.
[[nodiscard]] std::vector<const Expression*> factors_of(const Expression& expression);

/// Adds a note `main_effect_absent` for each term that is a product over two or more table columns
/// and has a factor that no other column gives. A factor beside all_levels() needs no column of its
/// own: the products add up to it.
void note_absent_main_effects(Design& design, const table::Schema& schema);

}  // namespace gramproof::design
