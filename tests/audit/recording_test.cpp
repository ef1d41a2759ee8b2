// Recorded precision: steps, distance ratios and attenuation against closed forms and an
// independent eigenvalue problem. Tolerances: 64 k u kappa with kappa below 1,000 where no other is
// named.
#include <doctest/doctest.h>

#include <Eigen/Eigenvalues>
#include <cmath>
#include <string>

#include "audit/figures.hpp"
#include "support/folded.hpp"
#include "support/random_numbers.hpp"

namespace {

using namespace gramproof;
using audit::Step;

constexpr double mild = 64 * 8 * unit_roundoff * 1000;

/// Noise of one table column; column a of `slopes` is d x_a / d cell, a row a row of the table.
scan::SourceNoise noise_of(int column, std::vector<int> dependents, const Matrix& slopes) {
  scan::SourceNoise noise;
  noise.column = column;
  noise.exponents.assign(dependents.size(), 0);
  noise.dependents = std::move(dependents);
  noise.absolute = slopes.transpose() * slopes;
  return noise;
}

scan::Digest digest_of(const Matrix& x, std::vector<scan::SourceNoise> noise) {
  scan::Digest digest;
  digest.factor = test::folded_with_ones(x);
  digest.noise = std::move(noise);
  return digest;
}

Step step_of(int column, double step, Step::How how = Step::How::decimals) {
  Step made;
  made.column = column;
  made.step = step;
  made.how = how;
  return made;
}

/// A constant and `columns` columns, uniform between `low` and `high`.
Matrix constant_and_uniform(Index rows, Index columns, double low, double high,
                            std::uint64_t seed) {
  test::Random random(seed);
  Matrix x = Matrix::Ones(rows, columns + 1);
  for (Index j = 1; j <= columns; ++j) {
    for (Index i = 0; i < rows; ++i) x(i, j) = low + (high - low) * random.unit();
  }
  return x;
}

double spread(const Vector& column) {
  return (column.array() - column.mean()).matrix().norm();
}

table::ColumnFacts facts_of(bool whole, int decimals, int digits, double smallest,
                            std::size_t levels) {
  table::ColumnFacts facts;
  facts.all_whole = whole;
  facts.most_decimals = decimals;
  facts.most_significant_digits = digits;
  facts.smallest = smallest;
  facts.levels_cut = levels > 21;
  if (!facts.levels_cut) facts.levels.resize(levels);
  return facts;
}

}  // namespace

TEST_CASE("a column's step is that of its decimals, unless its numbers say otherwise") {
  struct Case {
    std::string why;
    table::ColumnFacts facts;
    double step;
    Step::How how;
  };
  const Case cases[] = {
      {"two decimals", facts_of(false, 2, 6, -3, 100), 0.01, Step::How::decimals},
      {"whole values written with a decimal", facts_of(true, 1, 4, 20, 100), 0.1,
       Step::How::decimals},
      {"ages", facts_of(true, 0, 2, 18, 60), 1, Step::How::whole},
      {"thousands, written 12e3", facts_of(true, -3, 2, 1000, 60), 1000, Step::How::whole},
      {"a 0/1 column", facts_of(true, 0, 1, 0, 2), 0, Step::How::exact_code},
      {"a scale from 1 to 20", facts_of(true, 0, 2, 1, 20), 0, Step::How::exact_code},
      {"one value too many for a code", facts_of(true, 0, 2, 1, 21), 1, Step::How::whole},
      {"few values, but not from 0 or 1", facts_of(true, 0, 2, 2, 5), 1, Step::How::whole},
      {"fourteen digits are decimals", facts_of(false, 12, 14, 0, 100), 1e-12, Step::How::decimals},
      {"fifteen digits were computed in binary", facts_of(false, 13, 15, 0, 100), 0x1p-50,
       Step::How::binary}};
  for (const Case& row : cases) {
    CAPTURE(row.why);
    table::Schema schema;
    schema.columns = {table::ColumnFacts(), row.facts};
    scan::Digest digest;
    digest.noise.resize(1);
    digest.noise[0].column = 1;
    const std::vector<Step> steps = audit::recorded_steps(digest, schema, {});
    REQUIRE(steps.size() == 1);
    CHECK(steps[0].column == 1);
    CHECK(steps[0].how == row.how);
    CHECK(steps[0].step == doctest::Approx(row.step).epsilon(1e-15));
    const std::vector<Step> given = audit::recorded_steps(digest, schema, {{0, 9}, {1, 0.5}});
    CHECK(given[0].how == Step::How::given);
    CHECK(given[0].step == 0.5);
    const std::vector<Step> exact = audit::recorded_steps(digest, schema, {{1, 0}});
    CHECK(exact[0].how == Step::How::given_exact);
    CHECK(exact[0].step == 0);
  }
}

TEST_CASE("one noisy column: the ratio is its own spread over that of its rounding") {
  const Index rows = 80;
  const Matrix x = constant_and_uniform(rows, 2, 50, 60, 1);
  const scan::Digest digest = digest_of(x, {noise_of(0, {1}, Matrix::Ones(rows, 1))});
  const double step = 0.5;
  const audit::Recording found = audit::recording_of(digest, {0, 1}, {step_of(0, step)});
  const double expected = spread(x.col(1)) / (step / std::sqrt(12.0) * std::sqrt(rows));
  REQUIRE(found.distance_ratios.size() == 1);
  CHECK(std::abs(found.distance_ratios[0] / expected - 1) <= mild);
  CHECK_FALSE(found.attenuation[0].has_value());
  // Fuller 1987: the share of noise in what the column varies by.
  CHECK(std::abs(found.attenuation[1].value() * expected * expected - 1) <= mild);
  CHECK(found.close.empty());
  CHECK_FALSE(found.whole_numbers_matter);
  // Beside a third column only what that one leaves counts.
  const audit::Recording beside = audit::recording_of(digest, {0, 1, 2}, {step_of(0, step)});
  CHECK(beside.distance_ratios[0] < expected);
  CHECK_FALSE(beside.attenuation[2].has_value());
  // A step ten times as coarse is ten times nearer.
  const audit::Recording coarse = audit::recording_of(digest, {0, 1}, {step_of(0, 10 * step)});
  CHECK(std::abs(coarse.distance_ratios[0] * 10 / expected - 1) <= mild);
}

TEST_CASE("units from 1e-300 to 1e300 change no ratio") {
  const Index rows = 60;
  const Matrix x = constant_and_uniform(rows, 2, 50, 60, 2);
  scan::Digest digest = digest_of(x, {noise_of(0, {1, 2}, Matrix::Random(rows, 2))});
  const audit::Recording plain = audit::recording_of(digest, {0, 1, 2}, {step_of(0, 0.5)});
  Matrix far = x;
  far.col(1) *= 0x1p-990;
  far.col(2) *= 0x1p990;
  digest.factor = test::folded_with_ones(far);
  digest.noise[0].exponents = {-990, 990};
  const audit::Recording found = audit::recording_of(digest, {0, 1, 2}, {step_of(0, 0.5)});
  CHECK(found.distance_ratios == plain.distance_ratios);
  CHECK(found.attenuation == plain.attenuation);
}

TEST_CASE("numbers computed in binary have a step relative to the cell") {
  const Index rows = 50;
  const Matrix x = constant_and_uniform(rows, 1, 1e-3, 1, 3);
  scan::SourceNoise noise = noise_of(0, {1}, Matrix::Ones(rows, 1));
  noise.cell_exponent = 4;  // sums of (cell / 16)^2
  noise.relative = Matrix::Constant(1, 1, x.col(1).squaredNorm() / 256);
  const audit::Recording found =
      audit::recording_of(digest_of(x, {noise}), {0, 1}, {step_of(0, 0x1p-50, Step::How::binary)});
  const double expected = spread(x.col(1)) / (0x1p-50 / std::sqrt(12.0) * x.col(1).norm());
  CHECK(std::abs(found.distance_ratios[0] / expected - 1) <= mild);
}

TEST_CASE("ratios are the generalised eigenvalues of X'X against N") {
  // b'X'X b / b'N b, stationary: an independent way to the same numbers where nothing is small.
  const Index rows = 90;
  for (std::uint64_t seed = 1; seed <= 5; ++seed) {
    CAPTURE(seed);
    Matrix x = constant_and_uniform(rows, 3, 1, 4, seed);
    x.col(3) = x.col(1).cwiseProduct(x.col(2));
    Matrix first(rows, 2), second(rows, 2);
    first << Vector::Ones(rows), x.col(2);   // d x1, d (x1 x2) by the cell of x1
    second << Vector::Ones(rows), x.col(1);  // the same by the cell of x2
    const audit::Recording found =
        audit::recording_of(digest_of(x, {noise_of(0, {1, 3}, first), noise_of(1, {2, 3}, second)}),
                            {0, 1, 2, 3}, {step_of(0, 0.3), step_of(1, 0.1)});
    Matrix noise = Matrix::Zero(4, 4);
    const std::vector<Index> one = {1, 3}, two = {2, 3};
    noise(one, one) += 0.09 / 12 * first.transpose() * first;
    noise(two, two) += 0.01 / 12 * second.transpose() * second;
    const Matrix products = x.transpose() * x;
    const Eigen::GeneralizedSelfAdjointEigenSolver<Matrix> solver(noise, products);
    REQUIRE(found.distance_ratios.size() == 3);
    for (Index i = 0; i < 3; ++i) {
      CHECK(std::abs(found.distance_ratios[i] * std::sqrt(solver.eigenvalues()[3 - i]) - 1) <=
            1000 * mild);
    }
    const Matrix carried = products.ldlt().solve(noise);
    for (Index j = 1; j < 4; ++j) {
      CHECK(std::abs(found.attenuation[static_cast<std::size_t>(j)].value() / carried(j, j) - 1) <=
            1000 * mild);
    }
  }
}

TEST_CASE("errors belong to cells: x and x^2 share theirs") {
  // Calendar years: taking the two columns' errors for independent brings singularity nearer by a
  // factor of hundreds, a false alarm.
  const Index rows = 200;
  const Matrix year = constant_and_uniform(rows, 1, 1990, 2020, 7);
  Matrix x(rows, 3);
  x << year, year.col(1).cwiseAbs2();
  Matrix slopes(rows, 2);
  slopes << Vector::Ones(rows), 2 * x.col(1);
  const double shared =
      audit::recording_of(digest_of(x, {noise_of(0, {1, 2}, slopes)}), {0, 1, 2}, {step_of(0, 0.1)})
          .distance_ratios[0];
  const double independent =
      audit::recording_of(
          digest_of(x, {noise_of(0, {1}, slopes.col(0)), noise_of(1, {2}, slopes.col(1))}),
          {0, 1, 2}, {step_of(0, 0.1), step_of(1, 0.1)})
          .distance_ratios[0];
  CHECK(shared > 100 * independent);
  CHECK(shared > 3);
}

TEST_CASE("rounding alone gives a ratio of about 1, a signal beside it more") {
  struct Case {
    std::string why;
    double signal;  ///< standard deviation beside the relation, in those of the rounding
  };
  const Case cases[] = {{"the same length in two units, rounded", 0},
                        {"as much signal as rounding", 1},
                        {"signal enough for a caution", 2.5}};
  const Index rows = 4000;
  const double step = 0.1, deviation = step / std::sqrt(12.0);
  for (const Case& row : cases) {
    for (std::uint64_t seed = 1; seed <= 3; ++seed) {
      CAPTURE(row.why);
      CAPTURE(seed);
      Matrix x = constant_and_uniform(rows, 2, 10, 90, seed);
      test::Random random(seed + 100);
      for (Index i = 0; i < rows; ++i) {
        const double beside = row.signal * deviation * std::sqrt(12.0) * (random.unit() - 0.5);
        x(i, 2) = std::round((2.54 * x(i, 1) + beside) / step) * step;
      }
      const audit::Recording found = audit::recording_of(
          digest_of(x, {noise_of(0, {2}, Matrix::Ones(rows, 1))}), {0, 1, 2}, {step_of(0, step)});
      // ratio^2 - 1 is signal over noise; the sample variance of 4,000 rows is within 5 % of that
      // of the population with six standard errors to spare (a uniform law: 0.9 / sqrt n each).
      const double square = found.distance_ratios[0] * found.distance_ratios[0];
      CHECK(std::abs(square / (1 + row.signal * row.signal) - 1) <= 0.1);
      REQUIRE(found.close.size() == 1);
      CHECK(found.close[0].ratio == found.distance_ratios[0]);
      CHECK(found.close[0].columns == std::vector<int>{1, 2});
    }
  }
}

TEST_CASE("whole numbers are judged both ways") {
  const Index rows = 70;
  const Matrix x = constant_and_uniform(rows, 2, 0, 2, 9);
  const scan::Digest digest = digest_of(
      x, {noise_of(0, {1}, Matrix::Ones(rows, 1)), noise_of(1, {2}, Matrix::Ones(rows, 1))});
  const Step whole = step_of(0, 1, Step::How::whole);
  const audit::Recording both = audit::recording_of(digest, {0, 1, 2}, {whole, step_of(1, 0.01)});
  CHECK(both.whole_numbers_matter);
  CHECK(both.distance_ratios.size() == 1);
  REQUIRE(both.distance_ratios_whole_rounded.size() == 2);
  CHECK(both.distance_ratios_whole_rounded[0] < both.distance_ratios[0]);
  CHECK_FALSE(both.attenuation[1].has_value());  // the graded reading: whole numbers are exact
  CHECK(both.attenuation[2].has_value());
  CHECK(both.close.empty());
  CHECK(both.close_whole_rounded.size() == 1);
  const audit::Recording only =
      audit::recording_of(digest, {0, 1, 2}, {whole, step_of(1, 0, Step::How::given_exact)});
  CHECK(only.distance_ratios.size() == 0);
  CHECK(only.distance_ratios_whole_rounded.size() == 1);
  const audit::Recording given =
      audit::recording_of(digest, {0, 1, 2}, {step_of(0, 1, Step::How::given), step_of(1, 0.01)});
  CHECK_FALSE(given.whole_numbers_matter);
  CHECK(given.distance_ratios.size() == 2);
  CHECK(given.distance_ratios_whole_rounded.size() == 0);
}

TEST_CASE("without noise there is no ratio: infinitely far") {
  const Matrix x = constant_and_uniform(40, 2, 0, 1, 10);
  const audit::Recording bare = audit::recording_of(digest_of(x, {}), {0, 1, 2}, {});
  CHECK(bare.distance_ratios.size() == 0);
  CHECK(bare.attenuation.size() == 3);
  // Noise of a column that is not kept reaches no coefficient.
  const scan::Digest digest = digest_of(x, {noise_of(0, {2}, Matrix::Ones(40, 1))});
  CHECK(audit::recording_of(digest, {0, 1}, {step_of(0, 0.1)}).distance_ratios.size() == 0);
}

TEST_CASE("a factor that is singular in double precision is at distance zero") {
  Matrix x = constant_and_uniform(40, 2, 0, 1, 11);
  scan::Digest digest = digest_of(x, {noise_of(0, {1, 2}, Matrix::Ones(40, 2))});
  digest.factor.r.col(2) = digest.factor.r.col(1);
  const audit::Recording found = audit::recording_of(digest, {0, 1, 2}, {step_of(0, 0.1)});
  REQUIRE(found.distance_ratios.size() >= 1);
  CHECK(found.distance_ratios[0] < 1e-6);
}
