// src/recheck/numbers.hpp - numbers as they are written, in rationals.
#pragma once

#include <gmpxx.h>

#include <optional>
#include <string_view>

namespace gramproof::recheck {

/// A whole text (blanks around it are ignored): sign, digits with one decimal mark, exponent; at
/// least one digit. None for anything else, and beyond 4,000 characters or an exponent of 4,000,
/// more than any number a verdict can rest on (1,000 digits, 1e-305 to 1e305).
[[nodiscard]] std::optional<mpq_class> read_decimal(std::string_view text, char decimal_mark);

/// An exact value of a document: an integer, a decimal with a point, or a fraction of two of them.
[[nodiscard]] std::optional<mpq_class> read_exact(std::string_view text);

/// An integer of a document, at most 100,000 digits.
[[nodiscard]] std::optional<mpz_class> read_integer(std::string_view text);

}  // namespace gramproof::recheck
