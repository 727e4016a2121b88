#pragma once

#include <mpi.h>

#include <optional>
#include <string>
#include <vector>

#include "io/run_folder.hpp"
#include "solver/snapshot.hpp"
#include "solver/topography.hpp"

/// Snapshots for general viewers: fields as VTK, the walls as VTK and CSV, radial profiles and the
/// spectrum of topography as CSV;
/// each listed by time in fields.pvd and walls.pvd. Names, arrays and units: docs/run_folder.md.
namespace lidwright {

/// One line of a time collection.
struct CollectionEntry {
  double time = 0;
  std::string file;  ///< relative to the collection
};

/// The text of a .pvd file, and what can be read back from one.
std::string write_collection(const std::vector<CollectionEntry>&);
std::vector<CollectionEntry> read_collection(const std::string& text);

/// Files of the pieces that the text of a .pvts file lists, relative to it.
std::vector<std::string> pieces_listed(const std::string& text);

/// File of the radial profiles of snapshot n, relative to the run folder.
std::string profiles_name(std::size_t n);

/// Writes the snapshots of one run, numbered from 0. Both members are collective and throw
/// OutputError on all ranks; after a failure the collections list complete snapshots only.
class SnapshotWriter {
 public:
  /// A new run, or one resumed at a time: later snapshots are dropped from the collections and
  /// removed.
  SnapshotWriter(MPI_Comm, RunPaths, std::optional<double> resumed_time = std::nullopt);

  /// A second snapshot of the same time replaces the first (a run resumed at the time of a
  /// snapshot).
  void write(const Snapshot& s) { write(s, moment(s)); }
  /// `state`: what the tables are headed with instead of time and step.
  void write(const Snapshot&, const std::string& state);

  /// Snapshots listed.
  std::size_t count() const { return times_.size(); }

 private:
  static std::string moment(const Snapshot&);
  std::size_t number_for(double time) const;
  void drop_from(std::size_t first) const;
  void write_collections(const std::vector<double>& times) const;

  MPI_Comm comm_;
  RunPaths paths_;
  std::vector<double> times_;
};

/// Radial profiles and wall traces as the CSV text of their files.
/// `state`: "at time 0.25 d^2/kappa, step 9".
std::string profiles_table(const RadialProfiles&, const std::string& state);
std::string walls_table(const WallTrace& inner, const WallTrace& outer, const std::string& state);
/// The spectrum of dynamic topography as the CSV text of its file.
std::string topography_table(const TopographySpectrum&, const std::string& state);

}  // namespace lidwright
