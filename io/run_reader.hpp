#pragma once

#include <optional>
#include <string>
#include <vector>

#include "io/case_file.hpp"
#include "io/history_table.hpp"
#include "io/run_folder.hpp"
#include "io/snapshot.hpp"

/// A run folder read back, for figures and pages. Nothing here is collective; everything throws
/// InputError with the path and what is wrong: no run, a file that is missing, torn or not this
/// program's.
namespace lidwright {

enum class RunKind { March, Settle, Onset };

struct SavedRun {
  RunPaths paths;
  RunKind kind = RunKind::March;
  Case settings;                           ///< of case_as_read.toml; of a branch its first state's
  std::vector<CollectionEntry> snapshots;  ///< of fields.pvd; times are numbers 0, 1, ... of states
  /// Of a march only; empty columns when no row is written yet.
  std::optional<HistoryTable> history;
};
SavedRun open_run(const std::string& folder);

/// The case of snapshot n: along a branch with the value that branch.csv has of that state. Throws
/// InputError as case_along does.
Case settings_of(const SavedRun&, std::size_t n);

/// Fields of one snapshot, in the program's units: cells and corners column by column, the radial
/// index fastest. Float32 precision, as the files have it.
struct SavedFields {
  double time = 0;
  Case settings;  ///< of this snapshot
  Grid grid;      ///< the case's; of an onset's mode with more columns where it needs them
  std::vector<double> temperature, viscosity, strain_rate;  ///< cells
  std::vector<double> velocity_radial, velocity_lateral;    ///< cell middles
  std::vector<double> stream_function;  ///< corners; on a full circle without the repeated column
};

/// Snapshot n of run.snapshots, from however many pieces.
SavedFields read_fields(const SavedRun&, std::size_t n);

/// profiles_NNNN.csv of snapshot n.
NumberTable read_profiles(const SavedRun&, std::size_t n);

}  // namespace lidwright
