#pragma once

#include "solver/settle.hpp"

/// Steady states of one case on several grids, for error bars.
namespace lidwright {

/// The grid that is `times` times twice as coarse.
Grid coarsened(Grid, int times);

/// The whole field on the first rank, where it can start another one.
StoredTemperature stored(const CellField&);

/// As `settle`, but grids too coarse to be reached from the start are reached from the finer state
/// instead, if there is a steady state on them. Collective; throws SolveError.
std::vector<SteadyState> settle_on_grids(const Model&, const InitialSettings&,
                                         const StoredTemperature&, const SettleSettings&, int grids,
                                         MPI_Comm, const SettleObserver& = {});

}  // namespace lidwright
