// src/command/progress.hpp - one line on a terminal's standard error while the work lasts.
#pragma once

#include <chrono>
#include <string>

#include "table/source.hpp"

namespace gramproof::command {

/// Shows rows, bytes, share and time left; nothing during the first second, and nothing at all
/// unless standard error is a terminal.
class ProgressLine {
 public:
  explicit ProgressLine(bool wanted);
  ~ProgressLine();
  ProgressLine(const ProgressLine&) = delete;
  ProgressLine& operator=(const ProgressLine&) = delete;
  void show(const std::string& pass, const table::Progress& progress);
  void clear();

 private:
  using Clock = std::chrono::steady_clock;
  bool enabled_;
  bool shown_ = false;
  std::string pass_;
  Clock::time_point start_, pass_start_, last_;
};

/// The line itself: "folding rows: 1,200,000 rows, 175 of 290 MB (60 %), about 2 s left".
[[nodiscard]] std::string progress_text(const std::string& pass, const table::Progress& progress,
                                        double seconds);

}  // namespace gramproof::command
