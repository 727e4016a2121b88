#pragma once

#include <map>
#include <stdexcept>
#include <string>
#include <vector>

#include "solver/snapshot.hpp"

/// The one place that includes VTK: a snapshot's grids as the text of XML files (inline binary,
/// LZ4, Float32).
namespace lidwright {

/// Points, in whole columns, of a rank's piece: its cells' columns and the boundary column shared
/// with the next.
struct PieceExtent {
  int first_column = 0, last_column = 0;  ///< of points, inclusive
};

/// One rank's cells as a structured grid (.vts): radial index fastest, then lateral. Given apart:
/// the stream function with its neighbours' columns up to date. Not collective.
std::string structured_piece(const Snapshot&, const CornerField& stream_function);
PieceExtent extent_of_piece(const Decomposition&);

/// A piece read back: every array of Float32, components of a vector one after another.
struct GridPiece {
  PieceExtent extent;
  int radial_cells = 0;
  std::map<std::string, std::vector<double>> cells, points;
};
struct DamagedGrid : std::runtime_error {
  using std::runtime_error::runtime_error;
};
/// Of the text of a .vts file. Throws DamagedGrid.
GridPiece read_piece(const std::string& text);

/// The index (.pvts) of all pieces, given the file names relative to it.
std::string structured_index(const Snapshot&, const std::vector<PieceExtent>&,
                             const std::vector<std::string>& files);

/// Both walls as lines (.vtp), one cell a column; arrays normal_stress (when present), heat_flux,
/// velocity (Cartesian vector) and wall (0 inner, 1 outer).
std::string wall_lines(const Snapshot&, const Geometry&);

/// Version of the library linked.
std::string vtk_version();

}  // namespace lidwright
