#pragma once

#include <optional>
#include <string>
#include <vector>

#include "app/exit_code.hpp"
#include "app/progress.hpp"
#include "mesh/session.hpp"

/// `lidwright settle`: the steady state of a case, with error bars, stability or a whole branch of
/// them when asked for, into a folder like a run's.
namespace lidwright {

struct SettleRequest {
  std::string case_file;
  std::vector<std::string> settings;  ///< table.key=value
  std::string into;                   ///< folder; empty: runs/NAME_settle of the case file
  std::optional<std::string> along;   ///< KEY=FROM:TO:COUNT; absent: one steady state
  bool overwrite = false;             ///< replace a run that is already in the folder
  bool stability = false;
  bool error_bars = false;
  ProgressMode progress = ProgressMode::Automatic;
};

/// Throws InputError, SolveError and OutputError.
ExitCode settle(const Session&, const SettleRequest&);

}  // namespace lidwright
