// src/exact/structural.hpp - relations of the forms that designs are made of.
#pragma once

#include <vector>

#include "design/design.hpp"
#include "exact/null_space.hpp"

namespace gramproof::exact {

/// Relations of the space that have a form people know, primitive, each once: zero columns,
/// multiples and affine copies, sets of levels that add up to the constant, to one another or to a
/// column, runs of neighbours or of columns with a common prefix that add up to a column or to a
/// fixed sum, and three columns of which one is the sum or difference of the others. Every vector
/// is a proved member. O(involved^2) look-ups.
[[nodiscard]] std::vector<NullVector> structural_relations(const design::Design& design,
                                                           const NullSpace& space);

}  // namespace gramproof::exact
