// src/exact/interval.hpp - closed intervals of real numbers with MPFR bounds, rounded outwards.
//   [MKC09] Moore, Kearfott & Cloud, "Introduction to Interval Analysis", SIAM 2009.
// Elementary functions and directed rounding are MPFR's (Fousse, Hanrot, Lefevre, Pelissier &
// Zimmermann, ACM Trans. Math. Softw. 33, 2007), correctly rounded at any precision.
#pragma once

#include <gmpxx.h>
#include <mpfr.h>

#include <optional>
#include <string>

namespace gramproof::exact {

/// Encloses a real number: every operation gives an interval that holds every value the operation
/// can have on members of its operands. What is not known at all (a quotient by an interval that
/// holds 0, the logarithm of one that reaches 0) is the whole line, and stays it. Results of binary
/// operations have the precision of the left operand.
class Interval {
 public:
  /// The number 0 at a precision in bits.
  explicit Interval(mpfr_prec_t precision);
  Interval(const mpq_class& value, mpfr_prec_t precision);
  Interval(const Interval& other);
  Interval(Interval&& other) noexcept;
  Interval& operator=(Interval other) noexcept;
  ~Interval();

  static Interval whole_line(mpfr_prec_t precision);

  [[nodiscard]] mpfr_prec_t precision() const { return mpfr_get_prec(low_); }
  [[nodiscard]] bool is_bounded() const;
  [[nodiscard]] bool holds_zero() const;
  [[nodiscard]] bool is_zero() const;  ///< exactly [0, 0]

  Interval& operator+=(const Interval& other);
  Interval& operator-=(const Interval& other);
  Interval& operator*=(const Interval& other);
  Interval& operator/=(const Interval& other);
  /// *this -= a * b without allocation; `space` has this precision and is overwritten.
  void subtract_product(const Interval& a, const Interval& b, Interval& space);

  [[nodiscard]] Interval power(int exponent) const;
  [[nodiscard]] Interval absolute() const;
  [[nodiscard]] Interval log() const;
  /// Of what is not negative of the interval: a used row has a value there.
  [[nodiscard]] Interval sqrt() const;
  [[nodiscard]] Interval exp() const;
  [[nodiscard]] Interval asinh() const;
  static Interval minimum(const Interval& a, const Interval& b);
  static Interval maximum(const Interval& a, const Interval& b);

  /// log2 of the largest and of the smallest absolute value, and of the width: rounded to doubles,
  /// for choices that prove nothing. -inf where it is 0.
  [[nodiscard]] double log2_largest() const;
  [[nodiscard]] double log2_smallest() const;
  [[nodiscard]] double log2_width() const;

  /// The middle, exactly as a rational.
  [[nodiscard]] mpq_class middle() const;
  /// A double within the interval's bounds or next to them, and the largest distance of a member.
  struct Disc {
    double middle = 0, radius = 0;
  };
  [[nodiscard]] Disc disc() const;
  /// The rational of smallest denominator (then numerator) in the interval; none when unbounded.
  /// Continued fractions of the two bounds.
  [[nodiscard]] std::optional<mpq_class> simplest() const;

 private:
  void forget();  ///< becomes the whole line
  void set_product(const Interval& a, const Interval& b);
  template <class Function>
  [[nodiscard]] Interval rising(Function&& function) const;
  template <class Function, class Slope>
  [[nodiscard]] Interval rising(Function&& function, Slope&& slope) const;
  [[nodiscard]] bool is_narrow() const;

  mpfr_t low_, high_;
};

}  // namespace gramproof::exact
