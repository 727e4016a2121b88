#pragma once

#include <vector>

#include "mesh/geometry.hpp"

namespace lidwright {

/// The temperature of a run on its own mesh, on all ranks: what another run may start from.
struct StoredTemperature {
  Shell shell;
  std::vector<double> face_radius, face_lateral;  ///< one more than cells, also when periodic
  std::vector<double> values;                     ///< cells, [lateral][radial]; empty: none

  std::size_t radial_cells() const { return face_radius.size() - 1; }
  std::size_t lateral_cells() const { return face_lateral.size() - 1; }
};

}  // namespace lidwright
