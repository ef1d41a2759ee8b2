// src/exact/clock.hpp - columns that count time.
#pragma once

#include <string>

#include "exact/sides.hpp"

namespace gramproof::exact {

/// A word of time as a part of the label: "age" in "age_at_entry", not in "wage".
[[nodiscard]] bool named_for_time(const std::string& label);

/// Three plain columns, one the sum of the other two: what age, period and birth are. Parts of one
/// column, or products, are no clocks.
[[nodiscard]] bool is_sum_of_plain_columns(const design::Design& design, const Sides& sides);

/// The same, and two of the three are named for time.
[[nodiscard]] bool is_clock_by_name(const design::Design& design, const Sides& sides);

}  // namespace gramproof::exact
