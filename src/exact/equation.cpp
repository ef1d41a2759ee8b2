// src/exact/equation.cpp - relations in writing.
#include <algorithm>
#include <cctype>
#include <utility>

#include "exact/clock.hpp"
#include "exact/relations.hpp"
#include "exact/sides.hpp"

namespace gramproof::exact {
namespace {

constexpr const char* minus = "\u2212";
constexpr const char* times = "\u00b7";
constexpr const char* dots = "\u2026";

constexpr std::size_t long_relation = 12;
constexpr std::size_t long_side = 8;
constexpr std::size_t first_terms = 6;

bool lone_column(const Sides::Terms& side) {
  return side.size() == 1 && side.front().second == 1;
}

/// Decimals beyond these are no figure that anybody chose: the integers read better then.
constexpr int most_decimals = 6;

/// Decimals of a value that has finitely many, else -1.
int decimals_of(const mpq_class& value) {
  mpz_class rest = value.get_den();
  int twos = 0, fives = 0;
  while (mpz_divisible_ui_p(rest.get_mpz_t(), 2) != 0) rest /= 2, ++twos;
  while (mpz_divisible_ui_p(rest.get_mpz_t(), 5) != 0) rest /= 5, ++fives;
  return rest == 1 ? std::max(twos, fives) : -1;
}

/// Divides by what the coefficients of the columns share, where the number stays a short decimal:
/// a + b = 0.5 and not 2 a + 2 b = 1. A single column is always told by its value.
void divide_by_common_factor(Sides& sides) {
  mpz_class factor = 0;
  for (const Sides::Terms* side : {&sides.left, &sides.right}) {
    for (const auto& term : *side) factor = gcd(factor, term.second.get_num());
  }
  if (factor <= 1) return;
  const mpq_class number = sides.number / factor;
  const int decimals = decimals_of(number);
  if (sides.columns() > 1 && (decimals < 0 || decimals > most_decimals)) return;
  for (Sides::Terms* side : {&sides.left, &sides.right}) {
    for (auto& term : *side) term.second /= factor;
  }
  sides.number = number;
}

/// 4000000000 is 4·10^9: nobody counts that many zeros. Nor does anybody read 100 digits: the first
/// say how large it is, and the document has them all.
std::string whole_text(const mpz_class& value) {
  constexpr std::size_t readable_zeros = 6, readable_digits = 30, first_digits = 6;
  std::string digits = value.get_str();
  const std::size_t last = digits.find_last_not_of('0');
  const std::size_t zeros = last == std::string::npos ? 0 : digits.size() - last - 1;
  if (digits.size() - zeros > readable_digits) {
    return digits.substr(0, 1) + "." + digits.substr(1, first_digits - 1) + dots + times + "10^" +
           std::to_string(digits.size() - 1);
  }
  if (zeros <= readable_zeros) return digits;
  const std::string power = "10^" + std::to_string(zeros);
  digits.resize(last + 1);
  return digits == "1" ? power : digits + times + power;
}

/// A label that is a sum needs parentheses in a sum; one that is a product, beside a factor.
std::string label_text(const design::DesignColumn& column, bool beside_factor) {
  const std::string name = name_in_prose(column);
  if (!column.definition) return name;
  using design::Operation;
  const Operation operation = column.definition->operation;
  const bool sum = operation == Operation::add || operation == Operation::subtract;
  const bool product = operation == Operation::multiply || operation == Operation::divide;
  return sum || (product && beside_factor) ? "(" + name + ")" : name;
}

std::string term_text(const design::Design& design, std::size_t column,
                      const mpq_class& coefficient) {
  const design::DesignColumn& named = design.columns[column];
  if (coefficient == 1) return label_text(named, false);
  return number_text(coefficient) + times + label_text(named, true);
}

/// The texts of one side's terms, cut if it is long.
std::vector<std::string> terms_text(const design::Design& design, const Sides::Terms& side,
                                    bool cut) {
  std::vector<std::string> texts;
  for (std::size_t i = 0; i < side.size(); ++i) {
    if (cut && side.size() > long_side && i == first_terms) {
      const std::size_t hidden = side.size() - first_terms - 1;
      texts.push_back(std::string(dots) + " (" + std::to_string(hidden) + " more)");
      i = side.size() - 1;
    }
    texts.push_back(term_text(design, side[i].first, side[i].second));
  }
  return texts;
}

std::string joined(const std::vector<std::string>& texts) {
  std::string result;
  for (const std::string& text : texts) result += (result.empty() ? "" : " + ") + text;
  return result.empty() ? "0" : result;
}

/// The constant keeps its name beside brackets that a set has made: nobody wrote a 1 there.
bool names_constant(const design::Design& design, const Sides& sides) {
  return sides.number == 1 && sides.right.empty() &&
         std::all_of(sides.left.begin(), sides.left.end(),
                     [&](const auto& term) { return !design.columns[term.first].levels.empty(); });
}

/// year - age = birth_year: of three columns the one that is last in the design is what the others
/// give.
std::string difference_text(const design::Design& design, const Sides& sides) {
  return term_text(design, sides.right.front().first, 1) + " " + minus + " " +
         term_text(design, sides.left.front().first, 1) + " = " +
         term_text(design, sides.left.back().first, 1);
}

std::string constant_label(const design::Design& design) {
  for (const design::DesignColumn& column : design.columns) {
    if (column.constant) return column.label;
  }
  return "1";
}

}  // namespace

std::string name_in_prose(const design::DesignColumn& column) {
  const std::string& label = column.label;
  if (label.size() < 3 || label.front() != '"' || label.back() != '"') return label;
  const std::string inside = label.substr(1, label.size() - 2);
  const bool plain = std::all_of(inside.begin(), inside.end(), [](unsigned char c) {
    return std::isalnum(c) != 0 || c == '_' || c >= 0x80;
  });
  return plain ? inside : label;
}

std::string number_text(const mpq_class& value) {
  if (value < 0) return minus + number_text(-value);
  const int places = decimals_of(value);
  if (places < 0) return value.get_str();
  if (places == 0) return whole_text(value.get_num());
  const auto decimals = static_cast<std::size_t>(places);
  mpz_class power;
  mpz_ui_pow_ui(power.get_mpz_t(), 10, decimals);
  std::string digits = mpz_class(value.get_num() * power / value.get_den()).get_str();
  if (digits.size() <= decimals) digits.insert(0, decimals + 1 - digits.size(), '0');
  digits.insert(digits.size() - decimals, ".");
  return digits;
}

Sides sides_of(const design::Design& design, const NullVector& vector) {
  Sides sides;
  for (std::size_t j = 0; j < vector.size(); ++j) {
    if (vector[j] == 0) continue;
    if (j == design.columns.size() || design.columns[j].constant) {
      sides.number -= vector[j];
      sides.has_constant = true;
    } else {
      auto& side = vector[j] > 0 ? sides.left : sides.right;
      side.emplace_back(j, abs(vector[j]));
    }
  }
  const bool swap =
      sides.left.empty() || (!sides.right.empty() && !lone_column(sides.right) &&
                             (lone_column(sides.left) || sides.left.size() < sides.right.size()));
  if (swap) {
    std::swap(sides.left, sides.right);
    sides.number = -sides.number;
  }
  divide_by_common_factor(sides);
  return sides;
}

std::string equation_of(const design::Design& design, const Sides& sides, bool as_difference) {
  if (sides.columns() == 0) return constant_label(design) + " = 0";
  if (as_difference) return difference_text(design, sides);
  const bool cut = sides.columns() > long_relation;
  std::vector<std::string> left = terms_text(design, sides.left, cut);
  std::vector<std::string> right = terms_text(design, sides.right, cut);
  if (names_constant(design, sides)) {
    right.push_back(constant_label(design));
  } else if (sides.right.empty() && sides.number != 0) {
    right.push_back(number_text(sides.number));
  } else if (sides.number != 0) {
    // Beside columns the number goes where it is positive.
    (sides.number > 0 ? right : left).push_back(number_text(abs(sides.number)));
  }
  // a = b + 3 with its only sum to the right would read backwards.
  if (left.size() == 1 && right.size() > 1) std::swap(left, right);
  return joined(left) + " = " + joined(right);
}

std::string equation(const design::Design& design, const NullVector& vector) {
  const Sides sides = sides_of(design, vector);
  const bool as_difference = is_plain_difference(design, sides) && is_clock_by_name(design, sides);
  return equation_of(design, sides, as_difference);
}

}  // namespace gramproof::exact
