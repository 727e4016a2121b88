#pragma once

#include <string>
#include <vector>

#include "app/exit_code.hpp"
#include "app/progress.hpp"
#include "mesh/session.hpp"

/// `lidwright march`: a case in time, from its initial state or from a checkpoint, into a run
/// folder.
namespace lidwright {

struct MarchRequest {
  std::string case_file;              ///< empty when resuming
  std::vector<std::string> settings;  ///< table.key=value
  std::string into;                   ///< run folder; empty: runs/NAME of the case file
  std::string resume;                 ///< run folder to go on with; empty: a new run
  bool overwrite = false;             ///< replace a run that is already in the folder
  bool from_previous = false;         ///< resume from the checkpoint before the newest
  ProgressMode progress = ProgressMode::Automatic;
};

/// Throws InputError, SolveError and OutputError.
ExitCode march(const Session&, const MarchRequest&);

}  // namespace lidwright
