// tests/support/reference.hpp - designs of fixtures/reference with the figures that are true of
// them.
#pragma once

#include <doctest/doctest.h>

#include <algorithm>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <nlohmann/json.hpp>
#include <sstream>
#include <string>
#include <vector>

#include "base/numeric.hpp"

namespace gramproof::test {

struct Reference {
  std::string name;
  std::vector<std::string> labels;
  Matrix x;
  Vector weights;        ///< empty without weights
  nlohmann::json facts;  ///< see fixtures/reference/README.md
};

/// Numbers separated by commas; good for the fixtures, not for data. The C library's strtod rounds
/// correctly, so that the program's own reader is not in the way.
inline std::vector<double> numbers_of(const std::string& line) {
  std::vector<double> numbers;
  std::stringstream cells(line);
  for (std::string cell; std::getline(cells, cell, ',');) {
    char* end = nullptr;
    numbers.push_back(std::strtod(cell.c_str(), &end));
    REQUIRE_MESSAGE(end == cell.c_str() + cell.size(), cell);
  }
  return numbers;
}

inline Reference load_reference(const std::string& name) {
  const std::string path = std::string(GRAMPROOF_FIXTURES) + "/reference/" + name;
  Reference reference;
  reference.name = name;
  std::ifstream facts(path + ".json");
  REQUIRE_MESSAGE(facts.good(), path);
  reference.facts = nlohmann::json::parse(facts);
  std::ifstream table(path + ".csv");
  std::string line;
  REQUIRE_MESSAGE(std::getline(table, line), path);
  std::stringstream header(line);
  for (std::string label; std::getline(header, label, ',');) reference.labels.push_back(label);
  std::vector<std::vector<double>> rows;
  while (std::getline(table, line)) rows.push_back(numbers_of(line));
  Matrix all(static_cast<Index>(rows.size()), static_cast<Index>(reference.labels.size()));
  for (std::size_t i = 0; i < rows.size(); ++i) {
    REQUIRE_MESSAGE(rows[i].size() == reference.labels.size(), path);
    all.row(static_cast<Index>(i)) =
        Eigen::Map<const Eigen::RowVectorXd>(rows[i].data(), all.cols());
  }
  reference.x = all;
  if (reference.facts.at("weight_column").get<bool>()) {
    reference.weights = all.rightCols(1);
    reference.x = all.leftCols(all.cols() - 1);
    reference.labels.pop_back();
  }
  return reference;
}

/// Every design of the folder, by name.
inline std::vector<std::string> reference_names() {
  std::vector<std::string> names;
  for (const auto& entry :
       std::filesystem::directory_iterator(std::string(GRAMPROOF_FIXTURES) + "/reference")) {
    if (entry.path().extension() == ".json") names.push_back(entry.path().stem().string());
  }
  std::sort(names.begin(), names.end());
  return names;
}

/// A figure given as text.
inline double number_of(const nlohmann::json& text) {
  return std::strtod(text.get<std::string>().c_str(), nullptr);
}

}  // namespace gramproof::test
