// What rounding does to a design: X held as doubles.
#include <doctest/doctest.h>
#include <fmt/format.h>

#include <functional>
#include <string>

#include "audit/run.hpp"
#include "support/random_numbers.hpp"
#include "support/scratch.hpp"

namespace gramproof::audit {
namespace {

using test::Random;
using test::Scratch;

Audit audited(const std::string& text, const std::string& design) {
  const Scratch scratch;
  Result<table::Source> source = table::Source::open({scratch.file("data.csv", text)}, {});
  REQUIRE(source);
  Request request;
  request.design.design = design;
  Result<Audit> result = run(source.value(), request);
  if (!result) FAIL(to_line(result.error()));
  return std::move(result.value());
}

std::string rows(const std::string& header, int count, std::uint64_t seed,
                 const std::function<std::string(Random&)>& row) {
  Random random(seed);
  std::string text = header + "\n";
  for (int i = 0; i < count; ++i) text += row(random) + "\n";
  return text;
}

std::string cents(std::int64_t amount) {
  return fmt::format("{}.{:02d}", amount / 100, amount % 100);
}

}  // namespace

TEST_CASE("the rank of the doubles beside that of the decimals") {
  struct Case {
    std::string why, text, design;
    std::uint64_t rank, doubles;
    int passes;
  };
  const auto parts = [](int count, std::int64_t unit) {
    return rows("heat,light,total", count, 11, [unit](Random& random) {
      const auto heat = unit * random.whole(1, 99999), light = unit * random.whole(1, 99999);
      return cents(heat) + "," + cents(light) + "," + cents(heat + light);
    });
  };
  const auto pair = [](const std::string& more) {
    return rows("a,b", 50, 12, [&more](Random& random) {
      const auto a = random.whole(1, 9);
      return fmt::format("{},{}{}", a, a, random.whole(0, 1) == 0 ? more : "");
    });
  };
  const std::vector<Case> cases = {
      {"parts and total in cents: exact in decimals, off in doubles", parts(300, 1),
       "constant, heat, light, total", 3, 4, 2},
      {"the sample shows it as well where it does not hold all rows", parts(9000, 1),
       "constant, heat, light, total", 3, 4, 3},
      {"whole amounts are doubles, and no pass is spent on them", parts(9000, 100),
       "constant, heat, light, total", 3, 3, 3},
      {"quarters are doubles too, which a pass has to find out", parts(9000, 25),
       "constant, heat, light, total", 3, 3, 4},
      {"apart in the 20th digit only", pair(".00000000000000000001"), "constant, a, b", 3, 2, 2},
      {"apart in the 15th", pair(".000000000000001"), "constant, a, b", 3, 3, 2},
      {"a sum that is rounded as it is computed", parts(300, 1),
       "constant, heat, light, heat + light", 3, 4, 2},
      {"twice a column is no sum that rounds", parts(300, 1), "constant, heat, heat + heat", 2, 2,
       2},
  };
  for (const Case& c : cases) {
    CAPTURE(c.why);
    const Audit audit = audited(c.text, c.design);
    CHECK(audit.rank.rank == c.rank);
    REQUIRE(audit.rank.rank_of_the_doubles);
    CHECK(*audit.rank.rank_of_the_doubles == c.doubles);
    CHECK(audit.rank.numerical == c.rank);
    CHECK(audit.passes == c.passes);
  }
}

TEST_CASE("one row beyond the sample can be the one that doubles set apart") {
  // Halves but for one row: only there does the sum of two doubles differ from the third.
  std::string text = rows("heat,light,total", 20000, 13, [](Random& random) {
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
