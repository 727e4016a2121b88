#pragma once

#include <string>

#include "app/exit_code.hpp"
#include "app/progress.hpp"
#include "mesh/session.hpp"

/// `lidwright report`: a run as one page for a browser, without a network.
namespace lidwright {

struct ReportRequest {
  std::string run;         ///< run folder
  std::string onto;        ///< file; empty: RUN/report.html
  bool follow = false;     ///< write it anew while the run goes on
  double every = 30;       ///< seconds between two looks at the run, with `follow`
  bool overwrite = false;  ///< replace a file that is no report of this program
  ProgressMode progress = ProgressMode::Automatic;
};

/// Throws InputError and OutputError.
ExitCode report(const Session&, const ReportRequest&);

}  // namespace lidwright
