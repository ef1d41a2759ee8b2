// tests/command/small_tables.hpp - small data for runs of the program.
#pragma once

#include <string>

namespace gramproof::test {

/// age, income, region, size: 40 rows of whole numbers and three regions, everything present.
inline std::string harbour_table() {
  const std::string regions[] = {"north", "south", "east"};
  std::string text = "age,income,region,size\n";
  for (int i = 0; i < 40; ++i) {
    text += std::to_string(20 + i * 17 % 45) + "," + std::to_string(1000 + i * i * 37 % 3000) +
            "," + regions[i * i % 7 % 3] + "," + std::to_string(1 + i * 5 % 9) + "\n";
  }
  return text;
}

/// x and y that have nothing in common: `constant, rest` is sound. `row` replaces the 12th row
/// (line 13) if it is not empty.
inline std::string plain_table(const std::string& row = "") {
  std::string text = "x,y\n";
  for (int i = 0; i < 30; ++i) {
    const std::string here = std::to_string(20 + i * 7 % 30) + "," + std::to_string(i * i % 11);
    text += (i == 11 && !row.empty() ? row : here) + "\n";
  }
  return text;
}

}  // namespace gramproof::test
