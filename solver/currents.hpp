#pragma once

#include "mesh/field.hpp"

/// Hot currents upwards and cold currents downwards, counted along one row of cells.
namespace lidwright {

struct Currents {
  long plumes = 0;
  long downwellings = 0;
};

/// Share of the way from the mean to the extreme temperature of the row beyond which a cell belongs
/// to a current (the form of the criterion as in Labrosse 2002, Earth Planet. Sci. Lett. 199, 147).
inline constexpr double current_threshold = 0.5;

/// Runs of neighbouring cells that rise and are hotter than mean + threshold (max - mean) of their
/// row, and that sink and are colder than mean - threshold (mean - min). On a full circle the last
/// column is the first one's neighbour. A uniform row has none. T and psi with ghosts. Collective.
Currents count_currents(const CellField& temperature, const CornerField& psi, int row);

}  // namespace lidwright
