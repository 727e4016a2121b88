#pragma once

#include <mpi.h>

#include <string>

#include "io/case_file.hpp"
#include "io/run_folder.hpp"
#include "solver/stored_temperature.hpp"

/// What every verb that writes a run folder begins with.
namespace lidwright {

/// The folder that was asked for, or runs/NAME of the case file with an ending of the verb's own.
std::string folder_for(const std::string& into, const std::string& case_file,
                       const std::string& ending);

inline ExistingRun existing_run(bool overwrite) {
  return overwrite ? ExistingRun::Overwrite : ExistingRun::Refuse;
}

/// The temperature that initial.from names; none when it is empty. Collective; InputError on all
/// ranks.
StoredTemperature stored_start(MPI_Comm, const Case&);

/// Is a path the folder, or a file in it?
bool same_place(const std::string& path, const std::string& folder);

/// What two sessions of one run must share: everything but how long it goes and what it writes.
std::string fingerprint(Case);

/// Makes the folder, known as a run's from its first file on, with the case as it was read.
/// Collective; throws as RunFolder::create does.
RunFolder start_folder(MPI_Comm, const std::string& path, ExistingRun, const Case&);

}  // namespace lidwright
