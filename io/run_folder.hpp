#pragma once

#include <mpi.h>

#include <optional>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "io/atomic_file.hpp"

/// The folder of one run. What is in it: docs/run_folder.md.
namespace lidwright {

/// Where each file of a run stands. Pure.
struct RunPaths {
  std::string folder;

  std::string case_file() const { return folder + "/case_as_read.toml"; }
  std::string provenance() const { return folder + "/provenance.toml"; }
  std::string summary() const { return folder + "/summary.toml"; }
  std::string report() const { return folder + "/report.html"; }
  std::string history() const { return folder + "/history.csv"; }
  std::string statistics() const { return folder + "/statistics.csv"; }
  std::string newton() const { return folder + "/newton.csv"; }
  std::string error_bars() const { return folder + "/error_bars.csv"; }
  std::string growth_rates() const { return folder + "/growth_rates.csv"; }
  std::string branch() const { return folder + "/branch.csv"; }
  std::string branch_picture() const { return folder + "/branch.png"; }
  std::string fields_collection() const { return folder + "/fields.pvd"; }
  std::string walls_collection() const { return folder + "/walls.pvd"; }
  std::string fields() const { return folder + "/fields"; }
  std::string walls() const { return folder + "/walls"; }
  std::string profiles() const { return folder + "/profiles"; }
  std::string pictures() const { return folder + "/pictures"; }
  std::string checkpoints() const { return folder + "/checkpoints"; }
};

enum class ExistingRun { Refuse, Overwrite };

/// A run folder that this process holds: while it lives, no other process can open it. Members and
/// makers are collective; makers throw InputError (the folder may not be used) or OutputError (it
/// cannot be written), on all ranks.
class RunFolder {
 public:
  /// Makes the folder (and its parents) for a new run. One that holds a run is refused, or emptied
  /// of the program's own files; foreign files are never touched. Nothing is left behind when it
  /// fails.
  static RunFolder create(MPI_Comm, const std::string& path, ExistingRun);

  /// Refuses what `create` would refuse, before anything that takes long; writes nothing.
  static void refuse_taken(MPI_Comm, const std::string& path, ExistingRun);

  /// Opens the folder of an interrupted run to go on with it; removes files that were never
  /// completed.
  static RunFolder resume(MPI_Comm, const std::string& path);

  const RunPaths& paths() const { return paths_; }

 private:
  explicit RunFolder(std::string path) : paths_{std::move(path)} {}
  void lock();

  RunPaths paths_;
  Descriptor lock_;  ///< first rank only
};

/// A folder's name as it is joined with others: completions of shells end it with a slash.
std::string without_trailing_slash(std::string path);

/// Does the folder hold steady states, which do not go on in time? Not collective.
bool holds_steady_states(const std::string& folder);

/// Does the folder hold a run of this program (a provenance.toml that it wrote)? Not collective.
bool holds_run(const std::string& folder);

/// Does a process write the run at this moment? Always false on a file system without locks. Not
/// collective.
bool run_goes_on(const std::string& folder);

/// The program's own files in a run folder, relative to it, but for provenance.toml. Not
/// collective.
std::vector<std::string> own_files(const RunPaths&);

/// The number in a name that is `before`, then at least `digits` digits, then `after`; nothing for
/// any other name. Pure.
std::optional<long> numbered(std::string_view name, std::string_view before, std::size_t digits,
                             std::string_view after);

/// Least numbers of digits in the names of snapshots and checkpoints.
inline constexpr std::size_t snapshot_digits = 4, checkpoint_digits = 9;

/// First line of provenance.toml, by which a run is known.
inline constexpr std::string_view provenance_mark = "# lidwright run\n";

}  // namespace lidwright
