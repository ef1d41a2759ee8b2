#include "command/name_list.hpp"

#include <cmath>

#include "table/number.hpp"

namespace gramproof::command {
namespace {

std::string trimmed(const std::string& text) {
  const std::size_t first = text.find_first_not_of(" \t\n");
  if (first == std::string::npos) return "";
  return text.substr(first, text.find_last_not_of(" \t\n") - first + 1);
}

}  // namespace

std::vector<std::string> split_names(const std::string& text) {
  std::vector<std::string> names;
  std::string name;
  int depth = 0;
  bool quoted = false;
  const auto finish = [&] {
    if (std::string whole = trimmed(name); !whole.empty()) names.push_back(std::move(whole));
    name.clear();
  };
  for (const char c : text) {
    if (c == '"') quoted = !quoted;
    if (!quoted && (c == '(' || c == '[')) ++depth;
    if (!quoted && (c == ')' || c == ']')) --depth;
    if (c == ',' && !quoted && depth == 0) {
      finish();
    } else {
      name += c;
    }
  }
  finish();
  return names;
}

std::string unquoted(const std::string& name) {
  if (name.size() < 2 || name.front() != '"' || name.back() != '"') return name;
  std::string plain;
  for (std::size_t i = 1; i + 1 < name.size(); ++i) {
    plain += name[i];
    if (name[i] == '"' && name[i + 1] == '"' && i + 2 < name.size()) ++i;
  }
  return plain;
}

std::vector<std::string> split_tokens(const std::string& text) {
  std::vector<std::string> tokens(1);
  for (const char c : text) {
    if (c == ',') {
      tokens.emplace_back();
    } else {
      tokens.back() += c;
    }
  }
  return tokens;
}

std::optional<std::uint64_t> parse_size(const std::string& text) {
  const std::size_t digits = text.find_first_not_of("0123456789.");
  table::Number number;
  if (table::parse_number(text.substr(0, digits), '.', number) != table::NumberStatus::number)
    return std::nullopt;
  const std::string unit = digits == std::string::npos ? "" : text.substr(digits);
  double scale = 1;
  if (unit == "k" || unit == "kB" || unit == "K" || unit == "KB") {
    scale = 0x1p10;
  } else if (unit == "M" || unit == "MB") {
    scale = 0x1p20;
  } else if (unit == "G" || unit == "GB") {
    scale = 0x1p30;
  } else if (!unit.empty() && unit != "B") {
    return std::nullopt;
  }
  const double bytes = number.value * scale;
  if (!(bytes >= 1) || bytes > 0x1p62) return std::nullopt;
  return static_cast<std::uint64_t>(bytes);
}

}  // namespace gramproof::command
