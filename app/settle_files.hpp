#pragma once

#include <string>

#include "io/case_file.hpp"
#include "io/run_folder.hpp"
#include "io/snapshot.hpp"
#include "solver/settle.hpp"

/// Steady states into a run folder: fields, walls, profiles, a picture, and a checkpoint from which
/// other runs can start. Collective; throws OutputError on all ranks.
namespace lidwright {

class SteadyFiles {
 public:
  SteadyFiles(MPI_Comm comm, const RunPaths& paths) : paths_(paths), snapshots_(comm, paths) {}

  /// Numbered from 0; returns the number. `at`: the parameter's value, "" when there is none.
  int write(const Case&, SteadyState, const std::string& at);

 private:
  RunPaths paths_;
  SnapshotWriter snapshots_;
};

}  // namespace lidwright
