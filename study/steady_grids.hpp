#pragma once

#include "solver/settle.hpp"

/// Steady states of one case on several grids, for error bars.
namespace lidwright {

/// As `settle`, but grids too coarse to be reached from the start are reached from the finer state
/// instead, if there is a steady state on them. Collective; throws SolveError.
std::vector<SteadyState> settle_on_grids(const Model&, const InitialSettings&,
                                         const StoredTemperature&, const SettleSettings&, int grids,
                                         MPI_Comm, const SettleObserver& = {});

}  // namespace lidwright
