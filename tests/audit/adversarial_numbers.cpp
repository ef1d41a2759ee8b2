#include <string>

#include "audit/adversarial_cases.hpp"
#include "support/random_numbers.hpp"

namespace gramproof::test {
namespace {

/// A whole number of exactly so many digits.
mpz_class digits(Random& random, int count) {
  std::string text(1, static_cast<char>('0' + random.whole(1, 9)));
  while (static_cast<int>(text.size()) < count) text += static_cast<char>('0' + random.whole(0, 9));
  return mpz_class(text);
}

mpz_class bits(Random& random, int count) {
  mpz_class value = 1;
  for (int i = 1; i < count; ++i) value = 2 * value + random.whole(0, 1);
  return value;
}

/// n rows by a function of the row.
template <class Row>
Numbers made(int n, Row&& row) {
  Numbers rows;
  for (int i = 0; i < n; ++i) rows.push_back(row(i));
  return rows;
}

using Row = std::vector<mpq_class>;

void add_scales(Random& random, std::vector<AdversarialCase>& cases) {
  const mpq_class tiny = power_of_ten(-300), huge = power_of_ten(297);
  const auto small = [&] { return mpq_class(random.whole(1, 999)); };
  cases.push_back(as_recorded("1e-300 beside 1e300 and 1, all independent", made(40, [&](int) {
                                return Row{small() * tiny, small(), small() * huge};
                              })));
  cases.push_back(as_recorded("one column in units 10^597 times smaller", made(40, [&](int) {
                                const mpq_class x = small();
                                return Row{x * tiny, small(), x * huge};
                              })));
  cases.push_back(
      as_recorded("1e300 plus 1e-300 is neither in doubles", made(30, [&](int) {
                    const mpq_class a = small() * huge, b = small() * tiny;
                    return Row{a, b, small() < 500 ? mpq_class(a + b) : mpq_class(a - b)};
                  })));
  cases.push_back(as_recorded("a total of 1e250 whose parts differ by 1e-40", made(40, [&](int) {
                                const mpq_class a = small() * power_of_ten(250),
                                                b = small() * power_of_ten(-40);
                                return Row{a, b, a + b};
                              })));
  cases.push_back(as_recorded("rows of very different size", made(40, [&](int i) {
                                const mpq_class s = power_of_ten(10 * i - 200);
                                const mpq_class a = small() * s, b = small() * s;
                                return Row{a, b, 3 * a - 7 * b};
                              })));
}

void add_digits(Random& random, std::vector<AdversarialCase>& cases) {
  cases.push_back(as_recorded("sums of integers of 30 digits", made(40, [&](int) {
                                const mpz_class a = digits(random, 30), b = digits(random, 30);
                                return Row{a, b, mpz_class(a + b)};
                              })));
  cases.push_back(
      as_recorded("the same, off by one unit in a third of the rows", made(40, [&](int i) {
                    const mpz_class a = digits(random, 30), b = digits(random, 30);
                    return Row{a, b, mpz_class(a + b + (i % 3 == 0 ? 1 : 0))};
                  })));
  AdversarialCase one = as_recorded("the same, off by one unit in one row", made(60, [&](int i) {
                                      const mpz_class a = digits(random, 30),
                                                      b = digits(random, 30);
                                      return Row{a, b, mpz_class(a + b + (i == 41 ? 1 : 0))};
                                    }));
  one.exceptions = {{42}};
  cases.push_back(std::move(one));
  cases.push_back(as_recorded(
      "equal but for the last of 25 digits", made(40, [&](int) {
        const mpz_class a = digits(random, 24) * 10;
        return Row{mpz_class(a + random.whole(0, 9)), mpz_class(a + random.whole(0, 9))};
      })));
  cases.push_back(as_recorded("condition 1e40: two columns 1e-40 apart", made(40, [&](int) {
                                const mpq_class a = digits(random, 5);
                                return Row{a, a + digits(random, 5) * power_of_ten(-40)};
                              })));
  cases.push_back(as_recorded("condition 1e40, and the difference beside them", made(40, [&](int) {
                                const mpq_class a = digits(random, 5);
                                const mpq_class b = a + digits(random, 5) * power_of_ten(-40);
                                return Row{a, b, (b - a) * power_of_ten(40)};
                              })));
  cases.push_back(as_recorded("whole numbers above 2^53 that one double holds", made(40, [&](int) {
                                const mpz_class a =
                                    (mpz_class(1) << 60) + 512 * random.whole(1, 99);
                                return Row{a, mpz_class(a + random.whole(0, 40))};
                              })));
  cases.push_back(as_recorded("a third, to 30 decimals", made(40, [&](int) {
                                const mpz_class a = digits(random, 6) * 3 + random.whole(1, 2);
                                const mpz_class scaled = a * power_of_ten(30).get_num() / 3;
                                return Row{a, scaled * power_of_ten(-30)};
                              })));
  cases.push_back(as_recorded("tenths: 0.1 + 0.2 = 0.3", made(40, [&](int) {
                                const mpq_class a(random.whole(1, 99), 10),
                                    b(random.whole(1, 99), 10);
                                return Row{a, b, a + b};
                              })));
}

void add_coefficients(Random& random, std::vector<AdversarialCase>& cases) {
  for (const int size : {112, 400}) {
    const mpz_class p = bits(random, size), q = bits(random, size), r = bits(random, size);
    cases.push_back(
        as_recorded("coefficients of " + std::to_string(size) + " bits", made(40, [&](int) {
                      const mpz_class a = random.whole(-999, 999), b = random.whole(-999, 999);
                      return Row{a, b, mpz_class(p * a + q * b + r)};
                    })));
  }
  // The program's first prime: modulo it the two columns are equal, and a third is zero.
  const mpz_class prime("4611686018427387847");
  cases.push_back(as_recorded("equal modulo the first prime", made(40, [&](int) {
                                const mpz_class a = random.whole(1, 999);
                                return Row{a, mpz_class(a + prime * random.whole(-9, 9))};
                              })));
  cases.push_back(as_recorded(
      "multiples of the first prime", made(40, [&](int) {
        const mpz_class a = random.whole(1, 999), b = random.whole(1, 999);
        return Row{mpz_class(a * prime), mpz_class(b * prime), mpz_class((a - b) * prime)};
      })));
}

void add_spellings(Random& random, std::vector<AdversarialCase>& cases) {
  Numeric twice{{"plain", "spelt"}, {}}, zero{{"x", "nothing"}, {}}, one{{"x", "ones"}, {}};
  const std::vector<std::string> zeros = {"0", "0.000", "-0", "0e5", "-0.0E-7"};
  const std::vector<std::string> ones = {"1", "1.000", "10e-1", "0.1e1", "+1"};
  for (std::size_t i = 0; i < 40; ++i) {
    const std::string x = std::to_string(random.whole(10, 99));
    const std::vector<std::string> forms = {x + ".00", x + "e0", x + "00e-2", "+" + x,
                                            x.substr(0, 1) + "." + x.substr(1) + "E1"};
    twice.cells.push_back({x, forms[i % forms.size()]});
    zero.cells.push_back({x, zeros[i % zeros.size()]});
    one.cells.push_back({x, ones[i % ones.size()]});
  }
  cases.push_back(as_recorded("one number spelt in many ways", twice));
  cases.push_back(as_recorded("zero spelt in many ways", zero));
  cases.push_back(as_recorded("one spelt in many ways", one));
}

}  // namespace

std::vector<AdversarialCase> cases_of_numbers(std::uint64_t seed) {
  Random random(seed);
  std::vector<AdversarialCase> cases;
  add_scales(random, cases);
  add_digits(random, cases);
  add_coefficients(random, cases);
  add_spellings(random, cases);
  return cases;
}

}  // namespace gramproof::test
