#pragma once

#include <mpi.h>

#include <memory>
#include <string>
#include <vector>

#include "mesh/decomposition.hpp"
#include "solver/archive.hpp"
#include "solver/stored_temperature.hpp"

/// Checkpoints: an Archive as an HDF5 file, the same whatever the number of ranks. Layout:
/// docs/run_folder.md. Everything here is collective and throws on all ranks: OutputError when a
/// file cannot be written, InputError when one cannot be used, with the path, what is wrong and the
/// remedy.
namespace lidwright {

struct CheckpointFile {
  long step = 0;
  std::string path;
};

/// FOLDER/step_000001200.h5. Pure.
std::string checkpoint_path(const std::string& folder, long step);

/// Complete or absent, see io/atomic_file. `fingerprint` says which case it belongs to: any text
/// without null bytes. Names in the archive are words, without "/".
void write_checkpoint(const std::string& path, const Archive&, const Decomposition&,
                      const std::string& fingerprint);

/// The archive as it was written, bit for bit; neighbours' columns are up to date.
Archive read_checkpoint(const std::string& path, std::shared_ptr<const Decomposition>,
                        const std::string& fingerprint);

/// Checkpoints in a folder, newest first; none when the folder is not there.
std::vector<CheckpointFile> list_checkpoints(MPI_Comm, const std::string& folder);

/// Keeps the newest `keep` (>= 1), removes the others.
void remove_old_checkpoints(MPI_Comm, const std::string& folder, int keep);

/// Removes those after `step`: a run resumed from there writes them anew.
void remove_checkpoints_after(MPI_Comm, const std::string& folder, long step);

/// Of a checkpoint, a folder of checkpoints or a run folder (then its newest); of any case and
/// mesh. The archive must have a cell field "temperature".
StoredTemperature read_temperature(MPI_Comm, const std::string& path);

}  // namespace lidwright
