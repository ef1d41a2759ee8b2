#include <fmt/format.h>

#include <cmath>

#include "audit/verdict.hpp"
#include "base/text.hpp"

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
  if (!std::isfinite(value)) return "infinite";
  if (value == 0) return "0";
  const int exponent = static_cast<int>(std::floor(std::log10(std::abs(value))));
  if (exponent < -4 || exponent >= 6) {
    const double mantissa = value / std::pow(10.0, exponent);
    return fmt::format("{:.{}f}e{}", mantissa, digits - 1, exponent);
  }
  if (exponent < digits - 1) return fmt::format("{:.{}f}", value, digits - 1 - exponent);
  const double unit = std::pow(10.0, exponent - digits + 1);
  return (value < 0 ? "-" : "") +
         grouped(static_cast<std::uint64_t>(std::abs(std::round(value / unit) * unit)));
}

}  // namespace gramproof::audit
