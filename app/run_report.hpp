#pragma once

#include "app/exit_code.hpp"
#include "io/case_file.hpp"
#include "io/run_folder.hpp"
#include "mesh/session.hpp"

namespace lidwright {

/// The page about a run that has ended, unless the case wants none. Nothing is thrown: what keeps
/// it from being made is told on standard error, for the run's results stand without it. Returns
/// `code`, or NotWritten instead of Done when the disk did not take the page. Collective.
ExitCode write_run_report(const Session&, const Case&, const RunPaths&, ExitCode code);

}  // namespace lidwright
