#pragma once

#include <array>
#include <string>

#include "solver/archive.hpp"

namespace lidwright {

/// Viscosity of cells, ghosts included, and of their quarters where it varies inside a cell, as it
/// does with the rate of strain: each quarter has the shear of its own corner.
struct ViscosityField {
  CellField cells;                    ///< mean over the volume
  std::array<CellField, 4> quarters;  ///< place: `quarter`; empty: uniform in each cell
  /// With quarters: the shear rate of each over that of its corner. Their mean at a corner is 1.
  /// Otherwise a corner's shear is shared so that its quarters bear one stress.
  std::array<CellField, 4> shares;

  static std::size_t quarter(bool upper, bool right) {
    return 2 * static_cast<std::size_t>(upper) + static_cast<std::size_t>(right);
  }
  bool empty() const { return cells.empty(); }
  bool uniform_in_cells() const { return quarters[0].empty(); }
  double of(Cell c, std::size_t quarter) const {
    return uniform_in_cells() ? cells[c] : quarters[quarter][c];
  }
};

/// From the quarters to the cells' means.
void set_cell_means(ViscosityField&);

void store_viscosity(const ViscosityField&, const std::string& name, Archive&);
/// Empty if nothing is stored under the name. Collective.
ViscosityField restore_viscosity(const std::string& name, const Archive&);

/// All of it on the first rank, cells first, then quarters. Collective.
std::vector<std::vector<double>> gather_to_first(const ViscosityField&);
ViscosityField scatter_from_first(const std::vector<std::vector<double>>&,
                                  const std::shared_ptr<const Decomposition>&);

}  // namespace lidwright
