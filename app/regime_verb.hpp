#pragma once

#include <string>
#include <vector>

#include "app/exit_code.hpp"
#include "mesh/session.hpp"

/// `lidwright regime`: how the lid of a finished run moves, from its history, at thresholds that
/// can be changed. Writes nothing.
namespace lidwright {

struct RegimeRequest {
  std::string run;                      ///< run folder
  std::vector<std::string> thresholds;  ///< NAME=VALUE
  bool list = false;                    ///< list the thresholds instead
};

/// Throws InputError.
ExitCode regime(const Session&, const RegimeRequest&);

}  // namespace lidwright
