#include <fmt/format.h>

#include <cmath>

#include "audit/verdict.hpp"

namespace gramproof::audit {

std::string names_in_words(const std::vector<std::string>& names, std::size_t most) {
  const std::size_t shown = names.size() <= most + 1 ? names.size() : most;
  std::string text;
  for (std::size_t i = 0; i < shown; ++i) {
    if (i > 0) text += i + 1 == names.size() ? " and " : ", ";
    text += "`" + names[i] + "`";
  }
  if (shown < names.size()) text += fmt::format(" and {} more", names.size() - shown);
  return text;
}

std::string figure(double value, int digits) {
  if (std::isinf(value)) return "infinite";
  const double magnitude = std::abs(value);
  if (magnitude != 0 && (magnitude >= 1e6 || magnitude < 1e-4))
    return fmt::format("{:.{}e}", value, digits - 1);
  if (magnitude >= std::pow(10.0, digits - 1)) return fmt::format("{:.0f}", value);
  return fmt::format("{:.{}g}", value, digits);
}

}  // namespace gramproof::audit
