#include "command/progress.hpp"

#include <fmt/format.h>
#include <unistd.h>

#include <cmath>
#include <cstdio>

#include "base/text.hpp"

namespace gramproof::command {
namespace {

std::string megabytes(std::uint64_t bytes) {
  return fmt::format("{:.0f}", static_cast<double>(bytes) / 1e6);
}

}  // namespace

std::string progress_text(const std::string& pass, const table::Progress& progress,
                          double seconds) {
  std::string text = fmt::format("{}: {}", pass, counted(progress.rows, "row", "rows"));
  if (progress.bytes_total == 0)
    return text + fmt::format(", {} MB", megabytes(progress.bytes_read));
  const double share = std::min(
      1.0, static_cast<double>(progress.bytes_read) / static_cast<double>(progress.bytes_total));
  text += fmt::format(", {} of {} MB ({:.0f} %)", megabytes(progress.bytes_read),
                      megabytes(progress.bytes_total), 100 * share);
  if (share > 0.02)
    text += fmt::format(", about {:.0f} s left", std::ceil(seconds * (1 - share) / share));
  return text;
}

ProgressLine::ProgressLine(bool wanted)
    : enabled_(wanted && ::isatty(STDERR_FILENO) == 1),
      start_(Clock::now()),
      pass_start_(start_),
      last_(start_) {}

ProgressLine::~ProgressLine() {
  clear();
}

void ProgressLine::show(const std::string& pass, const table::Progress& progress) {
  if (!enabled_) return;
  const Clock::time_point now = Clock::now();
  if (pass != pass_) {
    pass_ = pass;
    pass_start_ = now;
  }
  if (now - start_ < std::chrono::seconds(1) || now - last_ < std::chrono::milliseconds(100))
    return;
  last_ = now;
  shown_ = true;
  const double seconds = std::chrono::duration<double>(now - pass_start_).count();
  std::fputs(("\r\x1b[Kgramproof: " + progress_text(pass, progress, seconds)).c_str(), stderr);
  std::fflush(stderr);
}

void ProgressLine::clear() {
  if (!shown_) return;
  std::fputs("\r\x1b[K", stderr);
  std::fflush(stderr);
  shown_ = false;
}

}  // namespace gramproof::command
