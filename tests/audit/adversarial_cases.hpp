// tests/audit/adversarial_cases.hpp - designs that are hard on purpose, each with its design matrix
// in exact numbers, written down apart from the program.
#pragma once

#include <gmpxx.h>

#include <cstdint>
#include <string>
#include <vector>

namespace gramproof::test {

using Numbers = std::vector<std::vector<mpq_class>>;

struct AdversarialCase {
  std::string name;
  std::string csv;
  std::string design;  ///< --design; empty: no option at all
  std::string weight;  ///< --weight; empty: none
  Numbers rows;        ///< n x k: the design matrix on the rows used
  /// The relations with exceptions that were planted: the row numbers that violate each.
  std::vector<std::vector<std::uint64_t>> exceptions;
};

/// Those of fixtures/known/adversarial and of fixtures/reference, audited without any option.
[[nodiscard]] std::vector<AdversarialCase> cases_of_fixtures();
/// Scales from 1e-300 to 1e300, numbers of many digits, ways of writing a number.
[[nodiscard]] std::vector<AdversarialCase> cases_of_numbers(std::uint64_t seed);
/// Classical matrices that nearly are singular, and the same made singular.
[[nodiscard]] std::vector<AdversarialCase> cases_of_matrices(std::uint64_t seed);
/// Levels, products, quotients, weights of zero, relations with exceptions.
[[nodiscard]] std::vector<AdversarialCase> cases_of_designs(std::uint64_t seed);

// --- how cases are made

/// "-12.40e-3" as a fraction.
[[nodiscard]] mpq_class number_of_text(const std::string& text);
/// The decimal that is exactly the number, whose denominator has no prime but 2 and 5.
[[nodiscard]] std::string decimal(const mpq_class& value);
[[nodiscard]] mpq_class power_of_ten(int exponent);

/// A table of numbers.
struct Numeric {
  std::vector<std::string> names;
  std::vector<std::vector<std::string>> cells;
};
[[nodiscard]] std::string csv_of(const Numeric& table);
/// Audited without any option: the constant, then the columns as recorded.
[[nodiscard]] AdversarialCase as_recorded(const std::string& name, const Numeric& table);
/// The same from exact numbers; columns are called x1, x2, ...
[[nodiscard]] AdversarialCase as_recorded(const std::string& name, const Numbers& columns_by_row);

}  // namespace gramproof::test
