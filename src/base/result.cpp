#include "base/result.hpp"

#include "base/text.hpp"

namespace gramproof {

std::string to_line(const Error& error) {
  std::string line;
  if (!error.where.empty()) line = error.where + ": ";
  line += error.what;
  if (!error.hint.empty()) line += " (" + error.hint + ")";
  return visible(line);
}

}  // namespace gramproof
