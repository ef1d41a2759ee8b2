// One pass over the data: the same bytes for any number of threads, and the same figures as a plain
// computation on rows held whole.
#include <doctest/doctest.h>
#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <map>
#include <string>
#include <vector>

#include "scan/opened.hpp"
#include "scan/pass.hpp"
#include "support/random_numbers.hpp"
#include "support/scratch.hpp"

namespace gramproof {
namespace {

using test::Random;
using test::Scanned;
using test::scanned;
using test::Scratch;

constexpr std::uint64_t seed = 20261201;

struct Row {
  std::string region;
  int age = 0;
  double weight = 1;
  bool missing = false;
};

/// 10,000 rows, three leaves of the tree and a part: a factor, a whole number, a decimal, a weight,
/// some missing cells.
std::string survey_text(std::vector<Row>& rows) {
  Random random(seed);
  const std::vector<std::string> regions = {"north", "south", "east", "far"};
  std::string text = "region,age,price,w\n";
  for (int i = 0; i < 10'000; ++i) {
    Row row;
    // "far" is rare: three rows in all.
    row.region = i == 17 || i == 5'000 || i == 9'998
                     ? "far"
                     : regions[static_cast<std::size_t>(random.whole(0, 2))];
    row.age = static_cast<int>(random.whole(18, 90));
    row.missing = random.whole(0, 49) == 0 && row.region != "far";
    row.weight = static_cast<double>(random.whole(0, 8)) / 4;
    if (row.region == "far") row.weight = 1;
    text += fmt::format("{},{},{}.{:02d},{}\n", row.region,
                        row.missing ? "NA" : std::to_string(row.age), random.whole(1, 999),
                        random.whole(0, 99), row.weight);
    rows.push_back(row);
  }
  return text;
}

design::Request survey_request() {
  design::Request request;
  request.design = "constant, age, age^2, levels(region), price, price * age";
  return request;
}

bool same_bytes(const Matrix& a, const Matrix& b) {
  return a.rows() == b.rows() && a.cols() == b.cols() &&
         std::equal(a.data(), a.data() + a.size(), b.data(), [](double x, double y) {
           return std::signbit(x) == std::signbit(y) && x == y;
         });
}

}  // namespace

TEST_CASE("a digest has the same bytes for any number of threads") {
  CAPTURE(seed);
  Scratch scratch;
  std::vector<Row> rows;
  const std::string path = scratch.file("survey.csv", survey_text(rows));
  design::Request request = survey_request();
  request.weight = "w";
  const Scanned one = scanned(path, request, 1);
  for (const unsigned threads : {2U, 3U, 8U}) {
    CAPTURE(threads);
    const Scanned many = scanned(path, request, threads);
    CHECK(same_bytes(one.digest.factor.r, many.digest.factor.r));
    CHECK(one.digest.factor.exponents == many.digest.factor.exponents);
    CHECK(one.digest.sample.row == many.digest.sample.row);
    CHECK(one.digest.random_combination == many.digest.random_combination);
    CHECK(one.digest.sum_of_weights == many.digest.sum_of_weights);
    REQUIRE(one.digest.noise.size() == many.digest.noise.size());
    for (std::size_t i = 0; i < one.digest.noise.size(); ++i) {
      CHECK(same_bytes(one.digest.noise[i].absolute, many.digest.noise[i].absolute));
    }
    for (std::size_t j = 0; j < one.digest.columns.size(); ++j) {
      CHECK(one.digest.columns[j].mean == many.digest.columns[j].mean);
    }
  }
}

TEST_CASE("rows are used, excluded and counted by column") {
  Scratch scratch;
  std::vector<Row> rows;
  const std::string path = scratch.file("survey.csv", survey_text(rows));
  design::Request request = survey_request();
  request.weight = "w";
  const Scanned result = scanned(path, request, 2);
  std::uint64_t used = 0, missing = 0, weightless = 0;
  double weights = 0;
  for (const Row& row : rows) {
    missing += row.missing ? 1 : 0;
    weightless += !row.missing && row.weight == 0 ? 1 : 0;
    if (row.missing || row.weight == 0) continue;
    ++used;
    weights += row.weight;
  }
  CHECK(result.digest.rows_read == 10'000);
  CHECK(result.digest.rows_used == used);
  CHECK(result.digest.sum_of_weights == weights);  // quarters: exact in doubles
  std::map<design::Exclusion::Reason, std::uint64_t> excluded;
  for (const design::Exclusion& entry : result.digest.excluded)
    excluded[entry.reason] += entry.rows;
  CHECK(excluded[design::Exclusion::Reason::missing] == missing);
  CHECK(excluded[design::Exclusion::Reason::weight_zero] == weightless);
}

TEST_CASE("the folded factor has the inner products of the rows held whole") {
  // R'R against X'X in long double. Both sides are backward stable sums: an entry is within c (rows
  // + k) u |x_i||x_j| at the very worst, and within a few dozen u |x_i||x_j| in practice; a lost
  // leaf or row changes it by 1e-4 or more.
  Scratch scratch;
  std::vector<Row> rows;
  const std::string text = survey_text(rows);
  const std::string path = scratch.file("survey.csv", text);
  design::Request request = survey_request();
  request.design = "constant, age, price, price * age";
  const Scanned result = scanned(path, request, 2);
  std::vector<std::array<long double, 4>> whole;
  std::size_t at = text.find('\n') + 1;
  for (const Row& row : rows) {
    const std::size_t end = text.find('\n', at);
    const std::string line = text.substr(at, end - at);
    at = end + 1;
    if (row.missing) continue;
    const std::size_t second = line.find(',', line.find(',') + 1);
    const long double price = std::stold(line.substr(second + 1));
    whole.push_back({1.0L, static_cast<long double>(row.age), price, price * row.age});
  }
  const factor::Factor& factor = result.digest.factor;
  REQUIRE(factor.rows == static_cast<Index>(whole.size()));
  for (std::size_t a = 0; a < 4; ++a) {
    for (std::size_t b = 0; b < 4; ++b) {
      long double expected = 0, length_a = 0, length_b = 0;
      for (const auto& row : whole) {
        expected += row[a] * row[b];
        length_a += row[a] * row[a];
        length_b += row[b] * row[b];
      }
      const auto i = static_cast<Index>(a), j = static_cast<Index>(b);
      const double product = std::ldexp(factor.r.col(i).dot(factor.r.col(j)),
                                        factor.exponents[a] + factor.exponents[b]);
      const long double scale = std::sqrt(length_a * length_b);
      CHECK(std::abs(static_cast<long double>(product) - expected) <= 200 * unit_roundoff * scale);
    }
  }
}

TEST_CASE("the sample holds rare levels whatever their hash") {
  Scratch scratch;
  std::vector<Row> rows;
  const std::string path = scratch.file("survey.csv", survey_text(rows));
  const Scanned result = scanned(path, survey_request(), 2);
  const std::vector<std::uint64_t>& sampled = result.digest.sample.row;
  CHECK(std::is_sorted(sampled.begin(), sampled.end()));
  CHECK(sampled.size() >= scan::sample_rows);
  CHECK(sampled.size() < 10'000);
  CHECK(std::binary_search(sampled.begin(), sampled.end(), std::uint64_t{18}));
  CHECK(std::binary_search(sampled.begin(), sampled.end(), std::uint64_t{5'001}));
}

TEST_CASE("the most frequent level is taken out after the scan") {
  Scratch scratch;
  std::vector<Row> rows;
  const std::string path = scratch.file("survey.csv", survey_text(rows));
  const Scanned result = scanned(path, survey_request(), 2);
  std::map<std::string, int> counts;
  for (const Row& row : rows) counts[row.region] += row.missing ? 0 : 1;
  const auto most =
      std::max_element(counts.begin(), counts.end(),
                       [](const auto& a, const auto& b) { return a.second < b.second; });
  CHECK(result.settled.design.columns.size() == 8);
  for (const design::DesignColumn& column : result.settled.design.columns) {
    CHECK(column.label != "[region = " + most->first + "]");
  }
  CHECK(result.digest.factor.r.cols() == 9);
}

TEST_CASE("0/1 columns that never meet are told from those that do once") {
  Scratch scratch;
  std::string text = "a,b,c\n";
  for (int i = 0; i < 6'000; ++i)
    text += i % 3 == 0 ? "1,0,0\n" : i % 3 == 1 ? "0,1,0\n" : "0,0,1\n";
  text += "1,0,1\n";
  design::Request request;
  request.design = "constant, a, b, c";
  const Scanned result = scanned(scratch.file("flags.csv", text), request, 2);
  CHECK(result.digest.never_together[1][2]);
  CHECK(result.digest.never_together[2][3]);
  CHECK_FALSE(result.digest.never_together[1][3]);
  CHECK_FALSE(result.digest.never_together[3][1]);
}

TEST_CASE("noise of a square is carried by its source, not by a cell of its own") {
  // For x and x^2 the slopes of one cell are 1 and 2x: the sums are n, 2 sum x and 4 sum x^2, small
  // whole numbers here.
  Scratch scratch;
  std::string text = "x\n";
  double sum = 0, squares = 0;
  for (int i = 1; i <= 5'000; ++i) {
    const int tenths = i % 97;
    text += fmt::format("{}.{}\n", tenths, i % 2 == 0 ? 0 : 5);
    const double x = tenths + (i % 2 == 0 ? 0.0 : 0.5);
    sum += x;
    squares += x * x;
  }
  design::Request request;
  request.design = "constant, x, x^2";
  const Scanned result = scanned(scratch.file("x.csv", text), request, 2);
  REQUIRE(result.digest.noise.size() == 1);
  const scan::SourceNoise& noise = result.digest.noise.front();
  REQUIRE(noise.dependents == std::vector<int>{1, 2});
  const auto entry = [&](int a, int b) {
    return std::ldexp(noise.absolute(a, b), noise.exponents[static_cast<std::size_t>(a)] +
                                                noise.exponents[static_cast<std::size_t>(b)]);
  };
  CHECK(entry(0, 0) == doctest::Approx(5'000).epsilon(1e-12));
  CHECK(entry(0, 1) == doctest::Approx(2 * sum).epsilon(1e-12));
  CHECK(entry(1, 1) == doctest::Approx(4 * squares).epsilon(1e-12));
}

TEST_CASE("a further pass tests integer vectors on every row and keeps the violators") {
  Scratch scratch;
  std::string text = "men,women,total\n";
  for (int i = 0; i < 9'000; ++i)
    text += fmt::format("{},{},{}\n", i, i % 7, i == 4'321 ? i + i % 7 + 90 : i + i % 7);
  design::Request request;
  request.design = "constant, men, women, total";
  Scanned result = scanned(scratch.file("heads.csv", text), request, 2);
  const std::vector<exact::NullVector> vectors = {{0, 1, 1, -1, 0}, {0, 1, -1, 0, 0}};
  Result<std::vector<scan::TestedVector>> tested =
      scan::test_on_all_rows(result.source, result.schema, result.settled.design, vectors, {2, {}});
  REQUIRE(tested);
  CHECK(tested.value()[0].holding == 8'999);
  CHECK(tested.value()[0].violating == 1);
  CHECK(tested.value()[0].largest_residual == 90);
  REQUIRE(tested.value()[0].violators.rows == 1);
  CHECK(tested.value()[0].violators.row[0] == 4'322);
  CHECK(tested.value()[0].violators.line[0] == 4'323);
  CHECK(tested.value()[1].violators.rows == scan::most_violators);
  CHECK(tested.value()[1].holding + tested.value()[1].violating == 9'000);
}

}  // namespace gramproof
