// src/exact/interval.cpp
#include "exact/interval.hpp"

#include <algorithm>
#include <cmath>
#include <limits>
#include <utility>

namespace gramproof::exact {
namespace {

double log2_of(const mpfr_t& value) {
  if (mpfr_zero_p(value)) return -std::numeric_limits<double>::infinity();
  if (!mpfr_number_p(value)) return std::numeric_limits<double>::infinity();
  long exponent = 0;
  const double fraction = mpfr_get_d_2exp(&exponent, value, MPFR_RNDN);
  return std::log2(std::abs(fraction)) + static_cast<double>(exponent);
}

mpq_class rational(const mpfr_t& value) {
  mpq_class result;
  mpfr_get_q(result.get_mpq_t(), value);
  return result;
}

/// The simplest rational in [low, high], 0 < low: the common start of the continued fractions.
mpq_class simplest_between(mpq_class low, mpq_class high) {
  mpz_class above = 1, above_before = 0, below = 0, below_before = 1;
  while (true) {
    mpz_class whole;
    mpz_fdiv_q(whole.get_mpz_t(), low.get_num_mpz_t(), low.get_den_mpz_t());
    const bool last = low == whole || whole + 1 <= high;
    const mpz_class term = low == whole ? whole : (last ? mpz_class(whole + 1) : whole);
    above_before = std::exchange(above, mpz_class(term * above + above_before));
    below_before = std::exchange(below, mpz_class(term * below + below_before));
    if (last) break;
    const mpq_class next = 1 / (high - whole);
    high = 1 / (low - whole);
    low = next;
  }
  mpq_class result(above, below);
  result.canonicalize();
  return result;
}

}  // namespace

Interval::Interval(mpfr_prec_t precision) {
  mpfr_init2(low_, precision);
  mpfr_init2(high_, precision);
  mpfr_set_zero(low_, 1);
  mpfr_set_zero(high_, 1);
}

Interval::Interval(const mpq_class& value, mpfr_prec_t precision) {
  mpfr_init2(low_, precision);
  mpfr_init2(high_, precision);
  mpfr_set_q(low_, value.get_mpq_t(), MPFR_RNDD);
  mpfr_set_q(high_, value.get_mpq_t(), MPFR_RNDU);
}

Interval::Interval(const Interval& other) {
  mpfr_init2(low_, other.precision());
  mpfr_init2(high_, other.precision());
  mpfr_set(low_, other.low_, MPFR_RNDD);
  mpfr_set(high_, other.high_, MPFR_RNDU);
}

Interval::Interval(Interval&& other) noexcept {
  mpfr_init2(low_, MPFR_PREC_MIN);
  mpfr_init2(high_, MPFR_PREC_MIN);
  mpfr_swap(low_, other.low_);
  mpfr_swap(high_, other.high_);
}

Interval& Interval::operator=(Interval other) noexcept {
  mpfr_swap(low_, other.low_);
  mpfr_swap(high_, other.high_);
  return *this;
}

Interval::~Interval() {
  mpfr_clear(low_);
  mpfr_clear(high_);
}

void Interval::forget() {
  mpfr_set_inf(low_, -1);
  mpfr_set_inf(high_, 1);
}

Interval Interval::whole_line(mpfr_prec_t precision) {
  Interval result(precision);
  result.forget();
  return result;
}

bool Interval::is_bounded() const {
  return mpfr_number_p(low_) != 0 && mpfr_number_p(high_) != 0;
}

bool Interval::holds_zero() const {
  return mpfr_sgn(low_) <= 0 && mpfr_sgn(high_) >= 0;
}

bool Interval::is_zero() const {
  return mpfr_zero_p(low_) != 0 && mpfr_zero_p(high_) != 0;
}

Interval& Interval::operator+=(const Interval& other) {
  if (!is_bounded() || !other.is_bounded()) {
    forget();
    return *this;
  }
  mpfr_add(low_, low_, other.low_, MPFR_RNDD);
  mpfr_add(high_, high_, other.high_, MPFR_RNDU);
  return *this;
}

Interval& Interval::operator-=(const Interval& other) {
  if (!is_bounded() || !other.is_bounded()) {
    forget();
    return *this;
  }
  // The operand may be this very interval.
  Interval result(precision());
  mpfr_sub(result.low_, low_, other.high_, MPFR_RNDD);
  mpfr_sub(result.high_, high_, other.low_, MPFR_RNDU);
  mpfr_swap(low_, result.low_);
  mpfr_swap(high_, result.high_);
  return *this;
}

/// The bounds of a product by the signs of the factors, all four products only where both factors
/// hold both signs [MKC09, 2.3]. This interval is neither factor.
void Interval::set_product(const Interval& a, const Interval& b) {
  const bool a_positive = mpfr_sgn(a.low_) >= 0, a_negative = mpfr_sgn(a.high_) <= 0;
  const bool b_positive = mpfr_sgn(b.low_) >= 0, b_negative = mpfr_sgn(b.high_) <= 0;
  if (a_positive || a_negative) {
    // The larger end of b goes with the larger size of a where b is above 0, and so on.
    const mpfr_t &far = a_positive ? a.high_ : a.low_, &near = a_positive ? a.low_ : a.high_;
    const mpfr_t &least = a_positive ? b.low_ : b.high_, &most = a_positive ? b.high_ : b.low_;
    const bool least_positive = a_positive ? b_positive : b_negative;
    const bool most_negative = a_positive ? b_negative : b_positive;
    mpfr_mul(low_, least_positive ? near : far, least, MPFR_RNDD);
    mpfr_mul(high_, most_negative ? near : far, most, MPFR_RNDU);
    return;
  }
  if (b_positive || b_negative) return set_product(b, a);
  Interval other(precision());
  mpfr_mul(low_, a.low_, b.high_, MPFR_RNDD);
  mpfr_mul(other.low_, a.high_, b.low_, MPFR_RNDD);
  mpfr_min(low_, low_, other.low_, MPFR_RNDD);
  mpfr_mul(high_, a.low_, b.low_, MPFR_RNDU);
  mpfr_mul(other.high_, a.high_, b.high_, MPFR_RNDU);
  mpfr_max(high_, high_, other.high_, MPFR_RNDU);
}

Interval& Interval::operator*=(const Interval& other) {
  if (!is_bounded() || !other.is_bounded()) {
    forget();
    return *this;
  }
  Interval product(precision());
  product.set_product(*this, other);
  mpfr_swap(low_, product.low_);
  mpfr_swap(high_, product.high_);
  if (!is_bounded()) forget();
  return *this;
}

void Interval::subtract_product(const Interval& a, const Interval& b, Interval& space) {
  if (!is_bounded() || !a.is_bounded() || !b.is_bounded()) {
    forget();
    return;
  }
  space.set_product(a, b);
  mpfr_sub(low_, low_, space.high_, MPFR_RNDD);
  mpfr_sub(high_, high_, space.low_, MPFR_RNDU);
  if (!is_bounded()) forget();
}

Interval& Interval::operator/=(const Interval& other) {
  if (!is_bounded() || !other.is_bounded() || other.holds_zero()) {
    forget();
    return *this;
  }
  Interval inverse(precision());
  mpfr_ui_div(inverse.low_, 1, other.high_, MPFR_RNDD);
  mpfr_ui_div(inverse.high_, 1, other.low_, MPFR_RNDU);
  return *this *= inverse;
}

Interval Interval::absolute() const {
  Interval result(precision());
  if (!is_bounded()) return whole_line(precision());
  const bool low_is_larger = mpfr_cmpabs(low_, high_) > 0;
  mpfr_abs(result.high_, low_is_larger ? low_ : high_, MPFR_RNDU);
  if (!holds_zero()) mpfr_abs(result.low_, low_is_larger ? high_ : low_, MPFR_RNDD);
  return result;
}

Interval Interval::power(int exponent) const {
  if (!is_bounded()) return *this;
  if (exponent < 0) {
    Interval result(mpq_class(1), precision());
    return result /= power(-exponent);
  }
  Interval result(precision());
  const Interval base = exponent % 2 == 0 ? absolute() : *this;
  mpfr_pow_ui(result.low_, base.low_, static_cast<unsigned long>(exponent), MPFR_RNDD);
  mpfr_pow_ui(result.high_, base.high_, static_cast<unsigned long>(exponent), MPFR_RNDU);
  if (!result.is_bounded()) result.forget();
  return result;
}

/// Of a function that rises throughout.
template <class Function>
Interval Interval::rising(Function&& function) const {
  if (!is_bounded()) return *this;
  Interval result(precision());
  function(result.low_, low_, MPFR_RNDD);
  function(result.high_, high_, MPFR_RNDU);
  if (!result.is_bounded()) result.forget();
  return result;
}

/// Of a function that rises throughout, evaluated once: f(high) <= f(low) + slope (high - low) with
/// a bound on the slope between them, which `slope` makes of f(low), rounded upwards.
template <class Function, class Slope>
Interval Interval::rising(Function&& function, Slope&& slope) const {
  Interval result(precision());
  const bool exact = function(result.low_, low_, MPFR_RNDD) == 0;
  mpfr_set(result.high_, result.low_, MPFR_RNDU);
  if (!exact) mpfr_nextabove(result.high_);
  if (mpfr_equal_p(low_, high_)) return result;
  Interval rise(precision());
  mpfr_sub(rise.low_, high_, low_, MPFR_RNDU);
  slope(rise.high_, result.high_);
  mpfr_mul(rise.high_, rise.high_, rise.low_, MPFR_RNDU);
  mpfr_add(result.high_, result.high_, rise.high_, MPFR_RNDU);
  if (!result.is_bounded()) result.forget();
  return result;
}

/// So narrow that a bound on the slope loses next to nothing against a second evaluation.
bool Interval::is_narrow() const {
  return is_bounded() && log2_width() < std::min(log2_smallest(), 0.0) - 16;
}

Interval Interval::log() const {
  if (mpfr_sgn(low_) <= 0) return whole_line(precision());
  if (!is_narrow()) return rising(mpfr_log);
  // The slope falls from 1 / low.
  return rising(mpfr_log,
                [this](mpfr_t bound, const mpfr_t&) { mpfr_ui_div(bound, 1, low_, MPFR_RNDU); });
}

Interval Interval::sqrt() const {
  if (mpfr_sgn(high_) < 0) return whole_line(precision());
  Interval positive(*this);
  if (mpfr_sgn(positive.low_) < 0 && positive.is_bounded()) mpfr_set_zero(positive.low_, 1);
  return positive.rising(mpfr_sqrt);
}

Interval Interval::exp() const {
  if (!is_narrow()) return rising(mpfr_exp);
  // The slope is at most exp(high) <= 2 exp(low), as high - low < log 2.
  return rising(mpfr_exp, [](mpfr_t bound, const mpfr_t& above) {
    mpfr_mul_2ui(bound, above, 1, MPFR_RNDU);
  });
}

Interval Interval::asinh() const {
  return rising(mpfr_asinh);
}

Interval Interval::minimum(const Interval& a, const Interval& b) {
  Interval result(a.precision());
  if (!a.is_bounded() || !b.is_bounded()) return whole_line(a.precision());
  mpfr_min(result.low_, a.low_, b.low_, MPFR_RNDD);
  mpfr_min(result.high_, a.high_, b.high_, MPFR_RNDU);
  return result;
}

Interval Interval::maximum(const Interval& a, const Interval& b) {
  Interval result(a.precision());
  if (!a.is_bounded() || !b.is_bounded()) return whole_line(a.precision());
  mpfr_max(result.low_, a.low_, b.low_, MPFR_RNDD);
  mpfr_max(result.high_, a.high_, b.high_, MPFR_RNDU);
  return result;
}

double Interval::log2_largest() const {
  return std::max(log2_of(low_), log2_of(high_));
}

double Interval::log2_smallest() const {
  if (holds_zero()) return -std::numeric_limits<double>::infinity();
  return std::min(log2_of(low_), log2_of(high_));
}

double Interval::log2_width() const {
  Interval width(precision());
  mpfr_sub(width.high_, high_, low_, MPFR_RNDU);
  return log2_of(width.high_);
}

mpq_class Interval::middle() const {
  return (rational(low_) + rational(high_)) / 2;
}

Interval::Disc Interval::disc() const {
  Disc disc;
  disc.middle = mpfr_get_d(low_, MPFR_RNDN);
  mpfr_t distance;
  mpfr_init2(distance, 53);
  mpfr_d_sub(distance, disc.middle, low_, MPFR_RNDU);
  const double below = mpfr_get_d(distance, MPFR_RNDU);
  mpfr_sub_d(distance, high_, disc.middle, MPFR_RNDU);
  const double above = mpfr_get_d(distance, MPFR_RNDU);
  mpfr_clear(distance);
  disc.radius = std::max({below, above, 0.0});
  return disc;
}

std::optional<mpq_class> Interval::simplest() const {
  if (!is_bounded()) return std::nullopt;
  if (holds_zero()) return mpq_class(0);
  if (mpfr_sgn(low_) > 0) return simplest_between(rational(low_), rational(high_));
  return -simplest_between(-rational(high_), -rational(low_));
}

}  // namespace gramproof::exact
