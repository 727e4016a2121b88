#pragma once

#include "solver/measure.hpp"

namespace lidwright {

/// Sets what a row says of the lid and of what is below it (mobility to downwellings), from the
/// state and from the row's wall temperatures, heat flows and velocities. Collective.
void set_lid(const StateView&, HistoryRow&);

}  // namespace lidwright
