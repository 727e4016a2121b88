#pragma once

#include "io/case_file.hpp"
#include "io/run_folder.hpp"
#include "mesh/session.hpp"

namespace lidwright {

/// The page about a run that has ended, unless the case wants none. What keeps it from being made
/// (a file of another kind in its place) is told on standard error and does not spoil the run.
/// Collective; throws OutputError on all ranks.
void write_run_report(const Session&, const Case&, const RunPaths&);

}  // namespace lidwright
