#pragma once

#include <string>
#include <vector>

#include "app/exit_code.hpp"
#include "app/progress.hpp"
#include "mesh/session.hpp"

/// `lidwright check`: what follows from a case before it is run: derived numbers, resolution, cost,
/// and what published laws foresee. Writes nothing.
namespace lidwright {

struct CheckRequest {
  std::string case_file;
  std::vector<std::string> settings;  ///< table.key=value
  bool no_steps = false;              ///< take no steps: no forecast of time and memory
  ProgressMode progress = ProgressMode::Automatic;
};

/// Throws InputError and SolveError.
ExitCode check(const Session&, const CheckRequest&);

}  // namespace lidwright
