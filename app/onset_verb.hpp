#pragma once

#include <string>
#include <vector>

#include "app/exit_code.hpp"
#include "app/progress.hpp"
#include "mesh/session.hpp"

/// `lidwright onset`: the critical Rayleigh number of a case, mode by mode, and the disturbance
/// that grows first, into a folder like a run's.
namespace lidwright {

struct OnsetRequest {
  std::string case_file;
  std::vector<std::string> settings;  ///< table.key=value
  std::string into;                   ///< folder; empty: runs/NAME_onset of the case file
  std::string modes;                  ///< "A:B"; empty: from 1 until the least is passed
  bool overwrite = false;             ///< replace a run that is already in the folder
  bool error_bars = true;
  ProgressMode progress = ProgressMode::Automatic;
};

/// Throws InputError, SolveError and OutputError.
ExitCode onset(const Session&, const OnsetRequest&);

}  // namespace lidwright
