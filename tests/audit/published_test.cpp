// The figures of all designs in fixtures/reference against exact arithmetic, and against what was
// printed. Sources of each design: the files' `origin` and fixtures/reference/README.md.
//
// Tolerance: 64 k u kappa relative, kappa of the unit-length columns. Lower side: folding, merging
// and decomposing are each exact for X + E with |E_j| <= c u |X_j| column by column, so sigma_i and
// what is made of it move by c u kappa at most (Weyl; van der Sluis 1969), the raw singular values
// too, since one-sided rotations do not see the columns' units (Demmel & Veselic 1992). Upper side:
// a program that forms X'X is off by about u kappa^2, which the last test shows to be caught.
#include <doctest/doctest.h>

#include <Eigen/Eigenvalues>
#include <cmath>
#include <string>

#include "audit/figures.hpp"
#include "support/folded.hpp"
#include "support/reference.hpp"

namespace {

using namespace gramproof;
using nlohmann::json;

struct Figures {
  audit::Conditioning conditioning;
  std::vector<audit::Inflation> inflation;
};

std::vector<int> all_columns(Index count) {
  std::vector<int> columns;
  for (int j = 0; j < static_cast<int>(count); ++j) columns.push_back(j);
  return columns;
}

Figures figures_of(const test::Reference& reference) {
  const factor::Factor factor = test::folded_with_ones(reference.x, reference.weights);
  const std::vector<int> kept = all_columns(reference.x.cols());
  std::vector<bool> is_constant;
  for (Index j = 0; j < reference.x.cols(); ++j) {
    is_constant.push_back(reference.x.col(j).minCoeff() == reference.x.col(j).maxCoeff());
  }
  const json& figures = reference.facts.at("figures");
  audit::CentredBy centred_by = audit::CentredBy::none;
  if (figures.contains("vif_centred_by_span")) centred_by = audit::CentredBy::span;
  if (reference.facts.at("constant_column").get<int>() >= 0) {
    centred_by = audit::CentredBy::column;
  }
  const bool singular = figures.contains("log10_determinant_correlation") &&
                        figures.at("log10_determinant_correlation") == "-inf";
  return {audit::conditioning_of(factor, kept, is_constant, singular),
          audit::inflation_of(factor, kept, is_constant, centred_by)};
}

double tolerance_of(const test::Reference& reference) {
  const double kappa = test::number_of(reference.facts.at("figures").at("condition_number"));
  return 64 * static_cast<double>(reference.x.cols()) * unit_roundoff * kappa;
}

double relative_error(double found, const json& exact) {
  const double expected = test::number_of(exact);
  return expected == 0 ? std::abs(found) : std::abs(found - expected) / std::abs(expected);
}

void check_values(const Vector& found, const json& exact, double tolerance) {
  REQUIRE(found.size() == static_cast<Index>(exact.size()));
  for (Index i = 0; i < found.size(); ++i) {
    CAPTURE(i);
    CHECK(relative_error(found[i], exact[static_cast<std::size_t>(i)]) <= tolerance);
  }
}

/// Smallest relative distance between neighbours that are not tied: what a singular vector's error
/// is divided by.
double smallest_gap(const json& values, const json& tied_rows) {
  double gap = 1;
  for (std::size_t i = 0; i + 1 < values.size(); ++i) {
    const bool tied = std::any_of(tied_rows.begin(), tied_rows.end(), [&](const json& group) {
      return std::find(group.begin(), group.end(), i) != group.end() &&
             std::find(group.begin(), group.end(), i + 1) != group.end();
    });
    if (tied) continue;
    const double value = test::number_of(values[i]);
    gap = std::min(gap, (value - test::number_of(values[i + 1])) / value);
  }
  return gap;
}

/// Sum of the exact proportions of column j over the rows tied with row i, divided by their number.
double shared_proportion(const json& exact, const json& tied_rows, std::size_t i, std::size_t j) {
  for (const json& group : tied_rows) {
    if (std::find(group.begin(), group.end(), i) == group.end()) continue;
    double sum = 0;
    for (const json& row : group) sum += test::number_of(exact[row.get<std::size_t>()][j]);
    return sum / static_cast<double>(group.size());
  }
  return test::number_of(exact[i][j]);
}

void check_proportions(const audit::Conditioning& found, const json& figures, double tolerance) {
  const json& exact = figures.at("proportions");
  const json& tied = figures.at("tied_rows");
  const double allowed = tolerance / smallest_gap(figures.at("singular_values"), tied);
  for (Index i = 0; i < found.proportions.rows(); ++i) {
    for (Index j = 0; j < found.proportions.cols(); ++j) {
      CAPTURE(i);
      CAPTURE(j);
      const double expected =
          shared_proportion(exact, tied, static_cast<std::size_t>(i), static_cast<std::size_t>(j));
      CHECK(std::abs(found.proportions(i, j) - expected) <= allowed);
    }
  }
}

void check_inflation(const std::vector<audit::Inflation>& found, const json& figures,
                     double tolerance) {
  const char* centred = figures.contains("vif_centred")           ? "vif_centred"
                        : figures.contains("vif_centred_by_span") ? "vif_centred_by_span"
                                                                  : "vif_uncentred";
  for (std::size_t j = 0; j < found.size(); ++j) {
    CAPTURE(j);
    CHECK(relative_error(found[j].vif_uncentred, figures.at("vif_uncentred")[j]) <= tolerance);
    const json& vif = figures.at(centred)[j];
    REQUIRE(found[j].vif.has_value() == !vif.is_null());
    REQUIRE(found[j].own_share.has_value() == !vif.is_null());
    if (vif.is_null()) continue;
    CHECK(relative_error(*found[j].vif, vif) <= tolerance);
    CHECK(std::abs(*found[j].own_share * test::number_of(vif) - 1) <= tolerance);
    if (figures.contains("own_share") && centred == std::string("vif_centred")) {
      CHECK(relative_error(*found[j].own_share, figures.at("own_share")[j]) <= tolerance);
      CHECK(relative_error(*found[j].r_squared, figures.at("r_squared")[j]) <=
            tolerance +
                2 * unit_roundoff / std::max(1e-3, test::number_of(figures.at("r_squared")[j])));
    }
  }
}

/// Half a unit of the last digit printed.
double half_unit(const std::string& printed) {
  const std::size_t exponent_at = printed.find_first_of("eE");
  const std::string mantissa = printed.substr(0, exponent_at);
  const std::size_t point = mantissa.find('.');
  const int decimals =
      point == std::string::npos ? 0 : static_cast<int>(mantissa.size() - point) - 1;
  const int exponent =
      exponent_at == std::string::npos ? 0 : std::atoi(printed.c_str() + exponent_at + 1);
  return 0.5 * std::pow(10.0, exponent - decimals);
}

/// The product's figure by the name it has in `printed`; NaN where it is undefined.
std::vector<double> figure_named(const std::string& name, const Figures& found) {
  const audit::Conditioning& c = found.conditioning;
  const auto list = [](const Vector& v) { return std::vector<double>(v.begin(), v.end()); };
  if (name == "condition_indices") return list(c.condition_indices);
  if (name == "raw_singular_values") return list(c.raw_singular_values);
  if (name == "squared_singular_values") return list(c.singular_values.cwiseAbs2());
  if (name == "condition_number") return {c.condition_number};
  if (name == "raw_condition_number") return {c.raw_condition_number};
  if (name == "log10_determinant") return {c.log10_determinant};
  if (name == "determinant_correlation") {
    return {std::pow(10.0, c.log10_determinant_correlation.value())};
  }
  if (name == "ln_determinant_correlation") {
    return {c.log10_determinant_correlation.value() * std::log(10.0)};
  }
  std::vector<double> vifs;
  for (const audit::Inflation& entry : found.inflation) {
    vifs.push_back(name == "vif_uncentred" ? entry.vif_uncentred
                                           : entry.vif.value_or(std::nan("")));
  }
  return vifs;
}

}  // namespace

TEST_CASE("figures of known designs agree with exact arithmetic") {
  const std::vector<std::string> names = test::reference_names();
  REQUIRE(names.size() >= 50);
  for (const std::string& name : names) {
    CAPTURE(name);
    const test::Reference reference = test::load_reference(name);
    const Figures found = figures_of(reference);
    const json& exact = reference.facts.at("figures");
    const double tolerance = tolerance_of(reference);
    const audit::Conditioning& conditioning = found.conditioning;
    REQUIRE(conditioning.complete);
    CHECK(relative_error(conditioning.condition_number, exact.at("condition_number")) <= tolerance);
    CHECK(relative_error(conditioning.raw_condition_number, exact.at("raw_condition_number")) <=
          tolerance);
    check_values(conditioning.singular_values, exact.at("singular_values"), tolerance);
    check_values(conditioning.condition_indices, exact.at("condition_indices"), tolerance);
    check_values(conditioning.raw_singular_values, exact.at("raw_singular_values"), tolerance);
    CHECK(std::abs(conditioning.log10_determinant -
                   test::number_of(exact.at("log10_determinant"))) <= tolerance);
    if (conditioning.log10_determinant_correlation &&
        std::isfinite(*conditioning.log10_determinant_correlation)) {
      CHECK(std::abs(*conditioning.log10_determinant_correlation -
                     test::number_of(exact.at("log10_determinant_correlation"))) <= tolerance);
    }
    check_proportions(conditioning, exact, tolerance);
    check_inflation(found.inflation, exact, tolerance);
  }
}

TEST_CASE("singular values that are equal are found to be tied, and no others") {
  for (const std::string& name : test::reference_names()) {
    const test::Reference reference = test::load_reference(name);
    // Nearer than this, no two values can be told apart in double precision.
    if (tolerance_of(reference) > 1e-3) continue;
    CAPTURE(name);
    const json tied = figures_of(reference).conditioning.tied_rows;
    CHECK(tied == reference.facts.at("figures").at("tied_rows"));
  }
}

TEST_CASE("printed figures are reproduced to the digits that were printed") {
  int compared = 0;
  for (const std::string& name : test::reference_names()) {
    const test::Reference reference = test::load_reference(name);
    if (!reference.facts.contains("printed")) continue;
    CAPTURE(name);
    const Figures found = figures_of(reference);
    const double tolerance = tolerance_of(reference);
    for (const json& printed : reference.facts.at("printed")) {
      const auto quantity = printed.at("quantity").get<std::string>();
      CAPTURE(quantity);
      const std::vector<double> figures = figure_named(quantity, found);
      const json& values = printed.at("values");
      REQUIRE(figures.size() == values.size());
      for (std::size_t i = 0; i < figures.size(); ++i) {
        if (values[i].is_null()) continue;
        const auto text = values[i].get<std::string>();
        CAPTURE(text);
        const bool logarithm = quantity.find("log") == 0 || quantity.find("ln") == 0;
        const double rounding = tolerance * (logarithm ? 3 : std::abs(figures[i]) * 3);
        CHECK(std::abs(figures[i] - test::number_of(values[i])) <=
              1.0000001 * half_unit(text) + rounding);
        ++compared;
      }
    }
  }
  CHECK(compared > 100);
}

TEST_CASE("the tolerance tells a factor of X from the inverse of X'X") {
  // What a program does that squares the condition number: the smallest eigenvalue of X'X of the
  // unit-length columns. Its relative error is of the order u kappa^2, that is kappa / (64 k) times
  // the tolerance.
  for (const std::string name : {"longley", "filip", "pascal8", "hilbert6", "hilbert8",
                                 "near_1e_06", "near_1e_08", "vandermonde_0to9"}) {
    CAPTURE(name);
    const test::Reference reference = test::load_reference(name);
    const Matrix scaled = reference.x * reference.x.colwise().norm().cwiseInverse().asDiagonal();
    const Matrix products = scaled.transpose() * scaled;
    const Eigen::SelfAdjointEigenSolver<Matrix> solver(products);
    const double mutant = std::sqrt(solver.eigenvalues()[0]);
    const double error =
        relative_error(mutant, reference.facts.at("figures").at("singular_values").back());
    CHECK_FALSE(error <=
                tolerance_of(reference));  // NaN, of a negative eigenvalue, counts as caught
  }
}
