#include <algorithm>
#include <string>
#include <utility>

#include "audit/adversarial_cases.hpp"
#include "support/random_numbers.hpp"

namespace gramproof::test {
namespace {

using Row = std::vector<mpq_class>;

mpq_class whole(Random& random, std::int64_t low, std::int64_t high) {
  return random.whole(low, high);
}

/// Numbers and a design over them: `table` is what the file holds, `rows` what the design means.
AdversarialCase designed(const std::string& name, const Numbers& table, const std::string& design,
                         Numbers rows) {
  AdversarialCase made = as_recorded(name, table);
  made.design = design;
  made.rows = std::move(rows);
  return made;
}

void add_arithmetic(Random& random, std::vector<AdversarialCase>& cases) {
  Numbers table, products, quotients, squares, thirds;
  for (int i = 0; i < 40; ++i) {
    const mpq_class a = whole(random, 2, 90), b = whole(random, -30, 30), c = whole(random, 1, 9);
    table.push_back({a, b, c, a * b, (a - b) * (a - b)});
    products.push_back({1, a, b, a * b, a * b});
    quotients.push_back({1, a / c, b / c, (a + b) / c});
    squares.push_back({a * a, a * b, b * b, (a - b) * (a - b)});
    thirds.push_back({a / (c * c + 2), b / (c * c + 2), 1 / (c * c + 2), 1});
  }
  cases.push_back(
      designed("a product beside its copy", table, "constant, x1, x2, x1 * x2, x4", products));
  cases.push_back(designed("quotients with one denominator", table,
                           "constant, x1 / x3, x2 / x3, (x1 + x2) / x3", quotients));
  cases.push_back(designed("a square multiplied out", table, "x1^2, x1 * x2, x2^2, x5", squares));
  cases.push_back(designed("quotients that are no decimals, independent", table,
                           "x1 / (x3^2 + 2), x2 / (x3^2 + 2), 1 / (x3^2 + 2), constant", thirds));
}

void add_weights(Random& random, std::vector<AdversarialCase>& cases) {
  Numbers table, used;
  for (int i = 0; i < 60; ++i) {
    const mpq_class a = whole(random, 1, 900), b = whole(random, 1, 900);
    const bool in = i % 4 != 0;
    table.push_back({a, b, a + b + (in ? 0 : 1), in ? 2 : 0});
    if (in) used.push_back({1, a, b, a + b});
  }
  AdversarialCase hidden =
      designed("rows that break the total have weight 0", table, "constant, rest", used);
  hidden.weight = "x4";
  cases.push_back(std::move(hidden));
}

void add_shares(Random& random, std::vector<AdversarialCase>& cases) {
  Numbers whole_shares, thousandths;
  for (int i = 0; i < 50; ++i) {
    const mpq_class a = whole(random, 1, 40), b = whole(random, 1, 40);
    whole_shares.push_back({a, b, 100 - a - b});
    const mpq_class p = a / 1000, q = b / 1000;
    thousandths.push_back({p, q, 1 - p - q, a * b});
  }
  cases.push_back(as_recorded("shares in whole per cents", whole_shares));
  cases.push_back(as_recorded("shares in thousandths", thousandths));
}

/// 0/1 columns for a level among `count`.
Row indicators(std::int64_t level, std::int64_t count) {
  Row row;
  for (std::int64_t l = 0; l < count; ++l) row.emplace_back(l == level ? 1 : 0);
  return row;
}

Row joined(Row left, const Row& right) {
  left.insert(left.end(), right.begin(), right.end());
  return left;
}

void add_levels_by_hand(Random& random, std::vector<AdversarialCase>& cases) {
  Numbers nested, overlapping, steps, pairs;
  for (int i = 0; i < 80; ++i) {
    const std::int64_t town = random.whole(0, 5), fuel = random.whole(0, 2);
    const mpq_class x = whole(random, 1, 99);
    nested.push_back(joined(joined(indicators(town, 6), indicators(town / 2, 3)), {x}));
    overlapping.push_back(joined(joined(indicators(town, 6), indicators(fuel, 3)), {x}));
    steps.push_back({town >= 1 ? 1 : 0, town >= 2 ? 1 : 0, town >= 3 ? 1 : 0,
                     mpq_class(std::min<std::int64_t>(town, 3)), x});
    // An indicator, its complement, their products with x, and x.
    const mpq_class in = fuel == 0 ? 1 : 0;
    pairs.push_back({in, 1 - in, in * x, (1 - in) * x, x});
  }
  cases.push_back(as_recorded("towns inside counties, coded by hand", nested));
  cases.push_back(as_recorded("two full sets of levels, coded by hand", overlapping));
  cases.push_back(as_recorded("steps up to a level and the level itself", steps));
  cases.push_back(as_recorded("a group, its complement, and the slopes of both", pairs));
}

/// A text column in the place of level numbers.
void add_levels(Random& random, std::vector<AdversarialCase>& cases) {
  Numeric table{{"fuel", "size", "x"}, {}};
  Numbers crossed, full;
  const std::vector<std::string> fuels = {"coal", "oil", "wood"}, sizes = {"big", "small"};
  for (int i = 0; i < 72; ++i) {
    // Wood never comes in big; coal is the most frequent fuel, small the most frequent size.
    const std::int64_t fuel = i % 9 < 5 ? 0 : random.whole(1, 2), size = fuel == 2 ? 1 : i % 2;
    const std::int64_t x = random.whole(1, 99);
    table.cells.push_back({fuels[static_cast<std::size_t>(fuel)],
                           sizes[static_cast<std::size_t>(size)], std::to_string(x)});
    const mpq_class oil = fuel == 1 ? 1 : 0, wood = fuel == 2 ? 1 : 0, big = size == 0 ? 1 : 0;
    crossed.push_back({1, oil, wood, big, oil * big, wood * big});
    full.push_back(joined(joined(indicators(fuel, 3), indicators(size, 2)), {1, x}));
  }
  const auto with = [&](const std::string& name, const std::string& design, Numbers rows) {
    AdversarialCase made;
    made.name = name;
    made.csv = csv_of(table);
    made.design = design;
    made.rows = std::move(rows);
    cases.push_back(std::move(made));
  };
  with("an interaction with an empty cell",
       "constant, levels(fuel), levels(size), levels(fuel) * levels(size)", crossed);
  with("all levels of two factors beside the constant",
       "all_levels(fuel), all_levels(size), constant, x", full);
}

void add_exceptions(Random& random, std::vector<AdversarialCase>& cases) {
  const auto typed = [&](const std::string& name, int n, const std::vector<int>& spoilt,
                         std::vector<std::vector<std::uint64_t>> exceptions) {
    Numbers rows;
    for (int i = 0; i < n; ++i) {
      const mpq_class a = whole(random, 1, 9999) / 100, b = whole(random, 1, 9999) / 100;
      const bool bad = std::find(spoilt.begin(), spoilt.end(), i) != spoilt.end();
      rows.push_back(
          {a, b, a + b + (bad ? whole(random, 1, 9) / 100 : mpq_class(0)), whole(random, 1, 99)});
    }
    cases.push_back(as_recorded(name, rows));
    cases.back().exceptions = std::move(exceptions);
  };
  typed("a total in cents, wrong in one row", 200, {77}, {{78}});
  typed("a total in cents, wrong in the last of 6,000 rows", 6000, {5999}, {{6000}});
  typed("a total in cents, wrong in every tenth row", 200,
        {0, 10, 20, 30, 40, 50, 60, 70, 80, 90, 100, 110, 120, 130, 140, 150, 160, 170, 180, 190},
        {});
}

}  // namespace

std::vector<AdversarialCase> cases_of_designs(std::uint64_t seed) {
  Random random(seed);
  std::vector<AdversarialCase> cases;
  add_arithmetic(random, cases);
  add_weights(random, cases);
  add_shares(random, cases);
  add_levels_by_hand(random, cases);
  add_levels(random, cases);
  add_exceptions(random, cases);
  return cases;
}

}  // namespace gramproof::test
