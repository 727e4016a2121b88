#pragma once

#include <string>
#include <vector>

#include "app/exit_code.hpp"
#include "app/progress.hpp"
#include "mesh/session.hpp"

/// `lidwright verify`: published benchmarks, each with our value, its error bar and a verdict.
namespace lidwright {

struct VerifyRequest {
  std::vector<std::string> names;  ///< empty: all benchmarks
  bool all = false;                ///< slow benchmarks and values too
  bool list = false;               ///< only say which there are
  std::string csv;                 ///< file for the table; empty: none
  std::string from;                ///< folder of benchmarks; empty: the program's own
  ProgressMode progress = ProgressMode::Automatic;
};

/// Names of the program's own benchmarks. Throws InputError when they are missing.
std::vector<std::string> own_benchmarks();

/// Throws InputError and OutputError. What fails to solve is shown, and the rest goes on.
ExitCode verify(const Session&, const VerifyRequest&);

}  // namespace lidwright
