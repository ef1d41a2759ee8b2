// Intervals: what they enclose, against rational arithmetic and against digits made elsewhere.
#include "exact/interval.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <string>
#include <vector>

#include "support/random_numbers.hpp"

using namespace gramproof;
using exact::Interval;

namespace {

/// Exact: bounds of few bits and a rational are compared at a precision that holds both, but for
/// the rational's own 2^-2000.
bool holds(const Interval& interval, const mpq_class& value) {
  Interval difference(2000);
  difference += interval;
  difference -= Interval(value, 2000);
  return difference.holds_zero();
}

/// "-1.25" as a rational.
mpq_class decimal(std::string text) {
  const std::size_t point = text.find('.');
  mpz_class scale = 1;
  if (point != std::string::npos) {
    mpz_ui_pow_ui(scale.get_mpz_t(), 10, text.size() - point - 1);
    text.erase(point, 1);
  }
  mpq_class value(mpz_class(text, 10), scale);
  value.canonicalize();
  return value;
}

mpq_class random_rational(test::Random& random) {
  mpq_class value(static_cast<long>(random.whole(-1000, 1000)),
                  static_cast<unsigned long>(random.whole(1, 999)));
  value.canonicalize();
  return value;
}

}  // namespace

TEST_CASE("random arithmetic: the exact value is never lost") {
  for (std::uint64_t seed = 1; seed <= 400; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    // Eight bits, so that intervals grow wide and reach across 0.
    mpq_class exact = random_rational(random);
    Interval enclosed(exact, 8);
    for (int step = 0; step < 12 && enclosed.is_bounded(); ++step) {
      const mpq_class other = random_rational(random);
      Interval operand(other, 8);
      operand *= Interval(mpq_class(9, 10), 8);
      operand /= Interval(mpq_class(9, 10), 8);
      switch (random.whole(0, 8)) {
        case 0:
          exact += other, enclosed += operand;
          break;
        case 1:
          exact -= other, enclosed -= operand;
          break;
        case 2:
          exact *= other, enclosed *= operand;
          break;
        case 3:
          if (other != 0) exact /= other, enclosed /= operand;
          break;
        case 4: {
          const bool inverse = random.whole(0, 1) == 1 && exact != 0;
          exact = inverse ? mpq_class(1 / (exact * exact * exact)) : mpq_class(exact * exact);
          enclosed = enclosed.power(inverse ? -3 : 2);
          break;
        }
        case 5:
          exact = abs(exact), enclosed = enclosed.absolute();
          break;
        case 6:
          exact = other < exact ? other : exact, enclosed = Interval::minimum(enclosed, operand);
          break;
        case 7:
          exact = exact < other ? other : exact, enclosed = Interval::maximum(enclosed, operand);
          break;
        default: {
          Interval space(8);
          enclosed.subtract_product(operand, Interval(exact, 8), space);
          exact -= other * exact;
        }
      }
      CAPTURE(step);
      if (enclosed.is_bounded()) CHECK(holds(enclosed, exact));
    }
  }
}

TEST_CASE("a product keeps its tightest bounds whatever the signs") {
  // [a, b] out of the enclosure of 1/3 in two bits, which is [1/4, 3/8].
  const auto range = [](long low, long high) {
    Interval third(mpq_class(1, 3), 2);
    Interval unit = third;
    unit -= Interval(mpq_class(1, 4), 64);
    unit /= Interval(mpq_class(1, 8), 64);  // [0, 1] at 2 bits
    Interval result(mpq_class(high - low), 64);
    result *= unit;
    result += Interval(mpq_class(low), 64);
    return result;
  };
  for (const auto& [a, b] : std::vector<std::pair<long, long>>{{-3, -1}, {-2, 5}, {2, 4}, {0, 3}}) {
    for (const auto& [c, d] :
         std::vector<std::pair<long, long>>{{-7, -2}, {-1, 6}, {1, 9}, {-5, 0}, {0, 0}}) {
      CAPTURE(a);
      CAPTURE(c);
      Interval product = range(a, b);
      product *= range(c, d);
      const long least = std::min({a * c, a * d, b * c, b * d});
      const long most = std::max({a * c, a * d, b * c, b * d});
      CHECK(holds(product, least));
      CHECK(holds(product, most));
      CHECK_FALSE(holds(product, mpq_class(least) - mpq_class(1, 1000)));
      CHECK_FALSE(holds(product, mpq_class(most) + mpq_class(1, 1000)));
    }
  }
}

TEST_CASE("functions: sixty digits and more") {
  struct Case {
    std::string why;
    Interval value;
    std::string digits;
  };
  const auto of = [](const std::string& text) { return Interval(decimal(text), 300); };
  // Digits by mpmath 1.2.1 at 75 digits, rounded to 60.
  const std::vector<Case> cases = {
      {"log 2", of("2").log(), "0.693147180559945309417232121458176568075500134360255254120680"},
      {"sqrt 2", of("2").sqrt(), "1.414213562373095048801688724209698078569671875376948073176680"},
      {"exp 1", of("1").exp(), "2.718281828459045235360287471352662497757247093699959574966968"},
      {"asinh 1", of("1").asinh(),
       "0.881373587019543025232609324979792309028160328261635410753296"},
      {"log 0.1", of("0.1").log(),
       "-2.302585092994045684017991454684364207601101488628772976033328"},
      {"exp -3", of("-3").exp(), "0.049787068367863942979342415650061776631699592188423215567628"},
      {"asinh -2", of("-2").asinh(),
       "-1.443635475178810342493276740273105269405553003156981558983055"},
      {"nested", of("7").log().sqrt().exp(),
       "4.034808473011892325027585945311007246776271713911058541698604"},
  };
  const mpq_class last_digit(mpz_class(1), mpz_class("1" + std::string(60, '0')));
  for (const Case& c : cases) {
    CAPTURE(c.why);
    mpq_class error = c.value.middle() - decimal(c.digits);
    CHECK(abs(error) <= last_digit);
    CHECK(c.value.log2_width() < -250);
  }
}

TEST_CASE("what a function makes of an interval holds what it makes of its members") {
  for (std::uint64_t seed = 1; seed <= 100; ++seed) {
    CAPTURE(seed);
    test::Random random(seed);
    const mpq_class member(static_cast<long>(random.whole(1, 5000)), 997UL);
    const Interval fine(member, 200);
    const auto holds_all = [](const Interval& outer, const Interval& inner) {
      return holds(outer, inner.middle());
    };
    // Bounds a long way apart are computed twice, narrow ones once and by the slope.
    for (const mpfr_prec_t bits : {3, 40}) {
      CAPTURE(bits);
      const Interval wide(member, bits);
      CHECK(holds_all(wide.log(), fine.log()));
      CHECK(holds_all(wide.sqrt(), fine.sqrt()));
      CHECK(holds_all(wide.exp(), fine.exp()));
      CHECK(holds_all(wide.asinh(), fine.asinh()));
      CHECK(wide.exp().log2_width() < fine.exp().log2_largest() + 6 - static_cast<double>(bits));
      CHECK(wide.log().log2_width() < 6 - static_cast<double>(bits));
    }
  }
}

TEST_CASE("what cannot be known is the whole line and stays it") {
  Interval across(mpq_class(1, 3), 4);
  across -= Interval(mpq_class(1, 3), 4);
  REQUIRE(across.holds_zero());
  CHECK_FALSE(across.log().is_bounded());
  Interval quotient(mpq_class(1), 4);
  quotient /= across;
  CHECK_FALSE(quotient.is_bounded());
  quotient *= Interval(4);
  CHECK_FALSE(quotient.is_bounded());
  CHECK(quotient.holds_zero());
  CHECK(across.sqrt().is_bounded());
  CHECK(holds(across.sqrt(), 0));
  CHECK_FALSE(Interval(mpq_class(-1), 8).log().is_bounded());
  CHECK(Interval(mpq_class(1), 8).log().is_zero());
}

TEST_CASE("the simplest fraction of an enclosure") {
  struct Case {
    std::string why, value, simplest;
    mpfr_prec_t bits;
  };
  const std::vector<Case> cases = {
      {"a third", "1/3", "1/3", 64},
      {"two", "2", "2", 64},
      {"below zero", "-22/7", "-22/7", 64},
      {"zero", "0", "0", 64},
      {"coarse bounds", "1001/3000", "1/3", 6},
      {"above one", "355/113", "355/113", 128},
      {"large", "1000001/3", "1000001/3", 128},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const auto found = Interval(mpq_class(c.value), c.bits).simplest();
    REQUIRE(found);
    CHECK(*found == mpq_class(c.simplest));
  }
  // log 2 is no simple fraction: at 128 bits about 64 bits above and 64 below are needed.
  const auto log_two = Interval(mpq_class(2), 128).log().simplest();
  REQUIRE(log_two);
  CHECK(mpz_sizeinbase(log_two->get_den_mpz_t(), 2) > 50);
  CHECK_FALSE(Interval::whole_line(64).simplest());
}

TEST_CASE("a disc in doubles holds the interval") {
  for (const char* text : {"1/3", "-2/7", "1000000007/3", "0", "1"}) {
    CAPTURE(text);
    const mpq_class value(text);
    const Interval::Disc disc = Interval(value, 128).disc();
    mpq_class distance = mpq_class(disc.middle) - value;
    CHECK(abs(distance) <= mpq_class(disc.radius));
    CHECK(disc.radius <= 0x1p-52 * std::abs(disc.middle));
  }
}
