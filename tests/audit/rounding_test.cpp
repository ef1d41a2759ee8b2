// What rounding does to a design: columns through log and its kind, and X held as doubles.
#include <doctest/doctest.h>
#include <fmt/format.h>

#include <string>
#include <vector>

#include "audit/audited.hpp"

namespace gramproof::audit {
namespace {

using test::Random;

std::vector<const RelationFinding*> within_rounding(const Audit& audit) {
  return relations_at(audit, Standing::within_rounding);
}

std::string cents(std::int64_t amount) {
  return fmt::format("{}.{:02d}", amount / 100, amount % 100);
}

/// Floor area, length and width in metres with area = length * width in all rows but the last
/// `odd`, and the price.
std::string rooms(int count, std::uint64_t seed, int odd = 0) {
  int i = 0;
  return rows("area,length,width,price", count, seed, [&](int, Random& random) {
    const auto length = random.whole(20, 99), width = random.whole(20, 99);
    const auto area = length * width + (++i > count - odd ? 1 : 0);
    return fmt::format("{},{}.{},{}.{},{}", cents(area), length / 10, length % 10, width / 10,
                       width % 10, random.whole(100, 999));
  });
}

}  // namespace

TEST_CASE("columns through functions: proved independent, or related within rounding") {
  struct Case {
    std::string why, design;
    std::vector<std::string> relations, left_out;
    std::string cause;
  };
  const std::vector<Case> cases = {
      {"ordinary use", "constant, log(area), sqrt(length), price", {}, {}, ""},
      {"the logarithm of a product",
       "constant, log(area), log(length), log(width)",
       {"log(length) + log(width) = log(area)"},
       {"log(width)"},
       "parts_and_total"},
      {"twice the same",
       "constant, log(area), log(area^2)",
       {"2\u00b7log(area) = log(area^2)"},
       {"log(area^2)"},
       "multiple"},
      {"in another unit",
       "constant, log(price), log(price / 100)",
       {"log(price / 100) \u2248 \u22124.605170186 + log(price)"},
       {"log(price / 100)"},
       "unit_conversion"},
      {"exact columns are kept before others",
       "constant, sqrt(area^2), area",
       {"sqrt(area^2) = area"},
       {"sqrt(area^2)"},
       "duplicate"},
      {"one number in every row",
       "constant, price, sqrt(price / price + 1)",
       {"sqrt(price / price + 1) \u2248 1.414213562"},
       {"sqrt(price / price + 1)"},
       "other"},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const Audit audit = audited(rooms(200, 21), c.design);
    std::vector<std::string> texts;
    for (const RelationFinding* relation : within_rounding(audit)) {
      texts.push_back(relation->text);
      CHECK(relation->cause_kind == c.cause);
      CHECK(relation->rows_holding == 200);
      CHECK(relation->largest_residual_value < 1e-60);
      CHECK(relation->terms.size() == relation->removable.size());
    }
    CHECK(texts == c.relations);
    CHECK(labels(audit, audit.left_out) == c.left_out);
    CHECK(audit.rank.rank == audit.rank.columns);
    CHECK(audit.rank.numerical == audit.kept.size());
    CHECK(audit.rank.proved == c.relations.empty());
    CHECK(audit.rank.unsettled.empty());
    CHECK(audit.residual_degrees_of_freedom == 200 - static_cast<int>(audit.kept.size()));
    CHECK(audit.conditioning.condition_number < 1e6);
    const Grounds& grounds = audit.verdict.grounds;
    CHECK(grounds.identified.grade == (c.relations.empty() ? Grade::pass : Grade::caution));
    CHECK((grounds.computable.grade == Grade::fail) == !c.relations.empty());
    CHECK((audit.verdict.overall == Overall::unreliable) == !c.relations.empty());
    CHECK(audit.verdict.after_leaving_out.has_value() == !c.relations.empty());
    if (audit.verdict.after_leaving_out) {
      CHECK(audit.verdict.after_leaving_out->overall > Overall::unreliable);
      CHECK(audit.verdict.after_leaving_out->grounds.computable.grade == Grade::pass);
    }
  }
}

TEST_CASE("the column that is kept is the one protected or read") {
  Request request;
  request.design.design = "constant, log(area), log(length), log(width)";
  request.design.protect = {"log(width)"};
  request.design.focus = {"log(length)"};
  request.contrasts = {"log(area) + 2*log(length)", "log(area) + log(length)",
                       "log(length) - log(width)"};
  const Audit audit = audited(rooms(200, 22), request);
  CHECK(labels(audit, audit.left_out) == std::vector<std::string>{"log(area)"});
  REQUIRE(within_rounding(audit).size() == 1);
  CHECK(labels(audit, within_rounding(audit)[0]->removable) ==
        std::vector<std::string>{"log(area)", "log(length)"});
  CHECK(labels(audit, audit.verdict.coefficients_lost) ==
        std::vector<std::string>{"log(area)", "log(length)", "log(width)"});
  // Orthogonal to (1, -1, -1) or not.
  REQUIRE(audit.contrasts.size() == 3);
  CHECK_FALSE(audit.contrasts[0].estimable);
  CHECK(audit.contrasts[0].blocking_relation == "log(length) + log(width) = log(area)");
  CHECK(audit.contrasts[1].estimable);
  CHECK(audit.contrasts[2].estimable);
}

TEST_CASE("an exact relation beside one within rounding: singular, and judged without both") {
  const std::string text = rows("a,b,total", 100, 23, [](int, Random& random) {
    const auto a = random.whole(1, 500), b = random.whole(1, 500);
    return fmt::format("{},{},{}", a, b, a + b);
  });
  const Audit audit = audited(text, "constant, a, b, total, log(a), log(a^3)");
  CHECK(audit.verdict.overall == Overall::singular);
  CHECK(audit.rank.rank == 5);
  CHECK(audit.rank.nullity == 1);
  CHECK(audit.rank.numerical == 4);
  CHECK(labels(audit, audit.left_out) == std::vector<std::string>{"total", "log(a^3)"});
  CHECK(audit.verdict.grounds.computable.grade == Grade::pass);
  CHECK(audit.verdict.after_leaving_out->overall > Overall::unreliable);
}

TEST_CASE("a relation within rounding is tested on every row, not on the sample alone") {
  const std::string design = "constant, log(area), log(length), log(width)";
  const Audit whole = audited(rooms(6000, 24), design);
  REQUIRE(within_rounding(whole).size() == 1);
  CHECK(within_rounding(whole)[0]->rows_holding == 6000);
  CHECK_FALSE(whole.rank.proved);
  // Types, fold, the relation; the doubles are found to differ on the sample.
  CHECK(whole.passes == 3);
  const Audit broken = audited(rooms(6000, 24, 1), design);
  CHECK(within_rounding(broken).empty());
  CHECK(broken.rank.proved);
  CHECK(broken.rank.numerical == 4);
  CHECK(broken.left_out.empty());
}

TEST_CASE("fewer rows than columns: proved as far as rows go") {
  const Audit audit = audited(rooms(3, 25), "constant, price, log(area), log(length)");
  CHECK(audit.rank.rank == 3);
  CHECK(audit.rank.nullity == 1);
  CHECK(audit.rank.proved);
  const Audit related = audited(rooms(3, 25), "constant, log(area), log(area^2), log(price)");
  CHECK_FALSE(related.rank.proved);
  CHECK(within_rounding(related).empty());
  CHECK_FALSE(related.rank.unsettled.empty());
}

TEST_CASE("the rank of the doubles beside that of the decimals") {
  struct Case {
    std::string why, text, design;
    std::uint64_t rank, doubles;
  };
  const auto parts = [](int count, std::int64_t unit) {
    return rows("heat,light,total", count, 11, [unit](int, Random& random) {
      const auto heat = unit * random.whole(1, 99999), light = unit * random.whole(1, 99999);
      return cents(heat) + "," + cents(light) + "," + cents(heat + light);
    });
  };
  const auto pair = [](const std::string& more) {
    return rows("a,b", 50, 12, [&more](int, Random& random) {
      const auto a = random.whole(1, 9);
      return fmt::format("{},{}{}", a, a, random.whole(0, 1) == 0 ? more : "");
    });
  };
  const std::vector<Case> cases = {
      {"parts and total in cents: exact in decimals, off in doubles", parts(300, 1),
       "constant, heat, light, total", 3, 4},
      {"the sample shows it as well where it does not hold all rows", parts(9000, 1),
       "constant, heat, light, total", 3, 4},
      {"whole amounts are doubles, and no pass is spent on them", parts(9000, 100),
       "constant, heat, light, total", 3, 3},
      {"quarters are doubles too, which a pass has to find out", parts(9000, 25),
       "constant, heat, light, total", 3, 3},
      {"apart in the 20th digit only", pair(".00000000000000000001"), "constant, a, b", 3, 2},
      {"apart in the 15th", pair(".000000000000001"), "constant, a, b", 3, 3},
      {"a sum that is rounded as it is computed", parts(300, 1),
       "constant, heat, light, heat + light", 3, 4},
      {"twice a column is no sum that rounds", parts(300, 1), "constant, heat, heat + heat", 2, 2},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const Audit audit = audited(c.text, c.design);
    CHECK(audit.rank.rank == c.rank);
    REQUIRE(audit.rank.rank_of_the_doubles);
    CHECK(*audit.rank.rank_of_the_doubles == c.doubles);
    CHECK(audit.rank.numerical == c.rank);
  }
}

TEST_CASE("a pass for the doubles is spent only where something can be rounded") {
  const auto passes = [](std::int64_t unit) {
    const std::string text = rows("heat,light,total", 9000, 14, [unit](int, Random& random) {
      const auto heat = unit * random.whole(1, 99999), light = unit * random.whole(1, 99999);
      return cents(heat) + "," + cents(light) + "," + cents(heat + light);
    });
    return audited(text, "constant, heat, light, total").passes;
  };
  const int whole_amounts = passes(100);
  CHECK(passes(25) == whole_amounts + 1);  // quarters are doubles, which only the rows can tell
  CHECK(passes(1) == whole_amounts);       // the sample shows that cents are not
}

TEST_CASE("one row beyond the sample can be the one that doubles set apart") {
  // Halves but for one row: only there does the sum of two doubles differ from the third.
  std::string text = rows("heat,light,total", 20000, 13, [](int, Random& random) {
    const auto heat = 50 * random.whole(1, 999), light = 50 * random.whole(1, 999);
    return cents(heat) + "," + cents(light) + "," + cents(heat + light);
  });
  for (const std::string last : {"0.10,0.20,0.30\n", "0.50,0.50,1.00\n"}) {
    CAPTURE(last);
    const Audit audit = audited(text + last, "constant, heat, light, total");
    CHECK(audit.rank.rank == 3);
    CHECK(audit.rank.rank_of_the_doubles == (last[2] == '1' ? 4 : 3));
  }
}

}  // namespace gramproof::audit
