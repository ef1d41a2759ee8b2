// The figures: conditioning, inflation, families, recorded precision.
#include <algorithm>
#include <cmath>

#include "report/document_parts.hpp"

namespace gramproof::report {
namespace {

/// Digits that hold: whole doubles are written, so a count below nothing says nothing more than 0.
double digits(double value) {
  return std::isfinite(value) ? std::max(value, 0.0) : 0.0;
}

Json row_of(const Matrix& matrix, Index row) {
  Json numbers = Json::array();
  for (Index j = 0; j < matrix.cols(); ++j) numbers.push_back(finite_or_null(matrix(row, j)));
  return numbers;
}

}  // namespace

Json conditioning_part(const audit::Audit& audit) {
  const audit::Conditioning& conditioning = audit.conditioning;
  Json part = Json::object();
  put_numbers(part, "singular_values", conditioning.singular_values);
  part["complete"] = conditioning.complete;
  put_number(part, "condition_number", conditioning.condition_number);
  put_numbers(part, "condition_indices", conditioning.condition_indices);
  part["proportions"] = Json::array();
  part["pivot_order"] = labels_of(audit, conditioning.pivot_order);
  part["proportions_rows"] = Json::array();
  for (const int row : conditioning.proportions_rows) {
    if (row < 0 || row >= conditioning.proportions.rows()) continue;
    part["proportions"].push_back(row_of(conditioning.proportions, row));
    part["proportions_rows"].push_back(row);
  }
  part["tied_rows"] = conditioning.tied_rows;
  put_numbers(part, "raw_singular_values", conditioning.raw_singular_values);
  put_number(part, "raw_condition_number", conditioning.raw_condition_number);
  put_number(part, "log10_determinant", conditioning.log10_determinant);
  put_number(part, "log10_determinant_correlation", conditioning.log10_determinant_correlation);
  part["digits"] = {
      {"qr", digits(conditioning.digits.qr)},
      {"normal_equations", digits(conditioning.digits.normal_equations)},
      {"qr_single", digits(conditioning.digits.qr_single)},
      {"normal_equations_single", digits(conditioning.digits.normal_equations_single)}};
  part["known_digits"] = digits(conditioning.known_digits);
  part["known_digits_raw"] = digits(conditioning.known_digits_raw);
  return part;
}

Json inflation_part(const audit::Audit& audit) {
  Json list = Json::array();
  for (const audit::Inflation& inflation : audit.inflation) {
    Json part = Json::object();
    part["column"] = label_of(audit, inflation.column);
    put_number(part, "vif", inflation.vif);
    put_number(part, "vif_uncentred", inflation.vif_uncentred);
    put_number(part, "r_squared", inflation.r_squared);
    put_number(part, "own_share", inflation.own_share);
    put_number(part, "standard_error_per_sigma", inflation.standard_error_per_sigma);
    list.push_back(std::move(part));
  }
  return list;
}

Json between_part(const audit::Audit& audit) {
  const audit::BetweenFamilies& between = audit.between;
  const auto name = [&](int family) -> Json {
    if (family < 0 || static_cast<std::size_t>(family) >= audit.design.families.size())
      return nullptr;
    return audit.design.families[static_cast<std::size_t>(family)].name;
  };
  Json part = Json::object();
  part["families"] = Json::array();
  for (const int family : between.families) part["families"].push_back(name(family));
  put_numbers(part, "indices", between.indices);
  part["proportions"] = Json::array();
  for (Index i = 0; i < between.proportions.rows(); ++i) {
    part["proportions"].push_back(row_of(between.proportions, i));
  }
  part["inflation"] = Json::array();
  for (const audit::FamilyInflation& inflation : between.inflation) {
    Json entry = {{"family", name(inflation.family)}, {"dimensions", inflation.dimensions}};
    put_number(entry, "generalised_vif", inflation.generalised_vif);
    put_number(entry, "per_dimension", inflation.per_dimension);
    part["inflation"].push_back(std::move(entry));
  }
  return part;
}

/// Directions close to the rounding: each ratio is below 3, so finite.
Json close_directions(const audit::Audit& audit, const std::vector<audit::NoisyDirection>& close) {
  Json list = Json::array();
  for (const audit::NoisyDirection& direction : close) {
    list.push_back({{"ratio", direction.ratio}, {"columns", labels_of(audit, direction.columns)}});
  }
  return list;
}

Json recording_part(const audit::Audit& audit) {
  const audit::Recording& recording = audit.recording;
  Json part = Json::object();
  part["steps"] = Json::array();
  for (const audit::Step& step : recording.steps) {
    part["steps"].push_back({{"column", table_name_of(audit, step.column)},
                             {"step", finite_or_null(step.step)},
                             {"how", audit::word_of(step.how)}});
  }
  put_numbers(part, "distance_ratios", recording.distance_ratios);
  part["close"] = close_directions(audit, recording.close);
  put_numbers(part, "distance_ratios_whole_rounded", recording.distance_ratios_whole_rounded);
  part["close_whole_rounded"] = close_directions(audit, recording.close_whole_rounded);
  part["whole_numbers_matter"] = recording.whole_numbers_matter;
  part["attenuation"] = Json::array();
  for (std::size_t i = 0; i < recording.attenuation.size() && i < audit.kept.size(); ++i) {
    // Where no noise reaches a coefficient there is nothing to report.
    if (!recording.attenuation[i]) continue;
    Json entry = {{"column", label_of(audit, audit.kept[i])}};
    put_number(entry, "value", *recording.attenuation[i]);
    part["attenuation"].push_back(std::move(entry));
  }
  return part;
}

}  // namespace gramproof::report
