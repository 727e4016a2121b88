#pragma once

#include "solver/heat.hpp"
#include "solver/settings.hpp"
#include "solver/stored_temperature.hpp"

/// The temperature a run starts from.
namespace lidwright {

/// Base, modes and noise of the settings; a stored temperature, interpolated when its mesh is
/// another, replaces the base. With ghosts; the same field on any number of ranks. Throws
/// std::invalid_argument when the stored field covers another region. Collective.
CellField initial_temperature(const HeatOperator&, const InitialSettings&,
                              const StoredTemperature&);

/// The discrete conductive profile of the rows of cells: walls and sources of the operator, no
/// flow. At least one wall must fix the temperature (io/case_rules.cpp sees to it).
std::vector<double> conductive_profile(const HeatOperator&);

}  // namespace lidwright
