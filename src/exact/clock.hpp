// src/exact/clock.hpp - three columns of which one is the sum of the others; columns that count
// time.
#pragma once

#include <string>

#include "exact/sides.hpp"

namespace gramproof::exact {

/// A word of time as a part of the label: "age" in "age_at_entry", not in "wage".
[[nodiscard]] bool named_for_time(const std::string& label);

/// Three plain columns, one the sum of the other two: what age, period and birth are. Parts of one
/// column, or products, are no clocks.
[[nodiscard]] bool is_sum_of_plain_columns(const design::Design& design, const Sides& sides);

/// Such a sum, without a number, that the last of the three in the design is a part of: it can be
/// written as what the others give (year - age = birth_year).
[[nodiscard]] bool is_plain_difference(const design::Design& design, const Sides& sides);

/// A sum of plain columns, and two of the three are named for time.
[[nodiscard]] bool is_clock_by_name(const design::Design& design, const Sides& sides);

}  // namespace gramproof::exact
