// src/command/exit_status.hpp - what a script can rely on.
#pragma once

namespace gramproof::command {

enum ExitStatus : int {
  good_enough = 0,  ///< the verdict is at least what --accept asks
  not_good_enough = 1,
  not_audited = 2,  ///< bad command, design, data or file: nothing was audited
  defect = 70,      ///< a defect of gramproof
};

}  // namespace gramproof::command
