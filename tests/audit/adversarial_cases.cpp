#include "audit/adversarial_cases.hpp"

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <map>
#include <sstream>
#include <stdexcept>

namespace gramproof::test {
namespace {

Numeric read_table(const std::filesystem::path& path) {
  std::ifstream file(path);
  if (!file) throw std::runtime_error("no fixture " + path.string());
  Numeric table;
  for (std::string line; std::getline(file, line);) {
    std::vector<std::string> cells;
    std::stringstream stream(line);
    for (std::string cell; std::getline(stream, cell, ',');) cells.push_back(cell);
    if (table.names.empty()) {
      table.names = cells;
    } else if (!cells.empty()) {
      table.cells.push_back(cells);
    }
  }
  return table;
}

/// The rows that were spoilt when the fixtures were made (its ORIGIN.md).
std::vector<std::vector<std::uint64_t>> exceptions_of(const std::string& name) {
  static const std::map<std::string, std::vector<std::uint64_t>> spoilt = {
      {"all_but_1_small", {110}},    {"all_but_1_large", {49}},
      {"all_but_2_small", {76, 94}}, {"all_but_5_large", {47, 70, 92, 143, 145}},
      {"almost_constant", {50}},  // ones, and 1.0000000001 in the last row
  };
  const auto found = spoilt.find(name);
  if (found == spoilt.end()) return {};
  return {found->second};
}

}  // namespace

mpq_class power_of_ten(int exponent) {
  mpz_class power;
  mpz_ui_pow_ui(power.get_mpz_t(), 10, static_cast<unsigned long>(std::abs(exponent)));
  return exponent < 0 ? mpq_class(1, power) : mpq_class(power);
}

mpq_class number_of_text(const std::string& text) {
  const std::size_t e = text.find_first_of("eE");
  std::string digits = text.substr(0, e);
  int exponent = e == std::string::npos ? 0 : std::stoi(text.substr(e + 1));
  const std::size_t point = digits.find('.');
  if (point != std::string::npos) {
    exponent -= static_cast<int>(digits.size() - point - 1);
    digits.erase(point, 1);
  }
  if (digits.front() == '+') digits.erase(0, 1);
  return mpz_class(digits, 10) * power_of_ten(exponent);
}

std::string decimal(const mpq_class& value) {
  int places = 0;
  mpq_class scaled = abs(value);
  while (scaled.get_den() != 1) {
    scaled *= 10;
    if (++places > 1000) throw std::invalid_argument("no decimal: " + value.get_str());
  }
  std::string digits = scaled.get_num().get_str();
  const auto point = static_cast<std::size_t>(places);
  if (digits.size() <= point) digits.insert(0, point + 1 - digits.size(), '0');
  if (places > 0) digits.insert(digits.size() - point, ".");
  return (value < 0 ? "-" : "") + digits;
}

std::string csv_of(const Numeric& table) {
  const auto line = [](const std::vector<std::string>& cells) {
    std::string text;
    for (const std::string& cell : cells) text += (text.empty() ? "" : ",") + cell;
    return text + "\n";
  };
  std::string text = line(table.names);
  for (const auto& cells : table.cells) text += line(cells);
  return text;
}

AdversarialCase as_recorded(const std::string& name, const Numeric& table) {
  AdversarialCase made;
  made.name = name;
  made.csv = csv_of(table);
  for (const auto& cells : table.cells) {
    made.rows.push_back({1});
    for (const std::string& cell : cells) made.rows.back().push_back(number_of_text(cell));
  }
  return made;
}

AdversarialCase as_recorded(const std::string& name, const Numbers& columns_by_row) {
  Numeric table;
  for (std::size_t j = 0; j < columns_by_row.front().size(); ++j) {
    table.names.push_back("x" + std::to_string(j + 1));
  }
  for (const auto& row : columns_by_row) {
    table.cells.emplace_back();
    for (const mpq_class& value : row) table.cells.back().push_back(decimal(value));
  }
  return as_recorded(name, table);
}

std::vector<AdversarialCase> cases_of_fixtures() {
  const std::filesystem::path folder = std::string(GRAMPROOF_FIXTURES) + "/known/adversarial";
  std::vector<std::filesystem::path> paths;
  for (const auto& entry : std::filesystem::directory_iterator(folder)) {
    if (entry.path().extension() == ".csv" && entry.path().stem() != "null_spaces") {
      paths.push_back(entry.path());
    }
  }
  std::sort(paths.begin(), paths.end());
  std::vector<AdversarialCase> cases;
  for (const auto& path : paths) {
    cases.push_back(as_recorded(path.stem().string(), read_table(path)));
    cases.back().exceptions = exceptions_of(path.stem().string());
  }
  const std::filesystem::path reference = std::string(GRAMPROOF_FIXTURES) + "/reference/filip.csv";
  const Numeric filip = read_table(reference);
  cases.push_back(as_recorded("Filip's polynomial of degree 10 (NIST), as recorded", filip));
  Numeric replaced = filip;
  // x^7 becomes x^6 - 3 x^2 + x / 4, exactly.
  for (auto& cells : replaced.cells) {
    cells[7] = decimal(number_of_text(cells[6]) - 3 * number_of_text(cells[2]) +
                       number_of_text(cells[1]) / 4);
  }
  cases.push_back(as_recorded("Filip with one power replaced by a combination", replaced));
  return cases;
}

}  // namespace gramproof::test
