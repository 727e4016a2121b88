#pragma once

#include <functional>
#include <string>
#include <vector>

#include "solver/diagnostics.hpp"
#include "solver/settings.hpp"
#include "solver/snapshot.hpp"
#include "solver/stored_temperature.hpp"

/// The steady state of a case by Newton's method on temperature and flow together.
namespace lidwright {

/// One Newton step, as it is reported while it goes on.
struct NewtonStep {
  Grid grid;
  int step = 0;            ///< on this grid, from 0 (the start)
  double residual = 0;     ///< as SettleSettings::tolerance
  double pseudo_time = 0;  ///< of the step that led here; infinity: a full Newton step
  int linear_iterations = 0;
};

/// The steady state on one grid.
struct SteadyState {
  Grid grid;
  bool converged = false;
  double residual = 0;
  std::string remark;  ///< what was seen when it did not converge
  HistoryRow row;
  Snapshot snapshot;
  std::vector<NewtonStep> steps;
};

/// Throws std::invalid_argument when a grid cannot be halved grids - 1 times.
void refuse_unhalvable(const Grid&, int grids);

/// The grid that is `times` times twice as coarse.
Grid halved(Grid, int times);

/// Told after every Newton step (and every stretch of the march to a first guess, with step -1);
/// returns false to stop.
using SettleObserver = std::function<bool(const NewtonStep&)>;

/// Steady states on `grids` grids, each twice as fine as the one before, the last the model's own
/// (what refinement keeps is the map of the grid, see graded_faces). The finer ones start from the
/// coarser ones. Computed on the first rank; the same result on all. Collective; throws SolveError.
std::vector<SteadyState> settle(const Model&, const InitialSettings&, const StoredTemperature&,
                                const SettleSettings&, int grids, MPI_Comm,
                                const SettleObserver& = {});

}  // namespace lidwright
