#include "study/steady_grids.hpp"

#include "solver/found.hpp"

namespace lidwright {

std::vector<SteadyState> settle_on_grids(const Model& model, const InitialSettings& initial,
                                         const StoredTemperature& start,
                                         const SettleSettings& settings, int grids, MPI_Comm comm,
                                         const SettleObserver& observer) {
  std::vector<SteadyState> states = settle(model, initial, start, settings, grids, comm, observer);
  while (!states.empty() && states.back().converged && states.front().converged &&
         static_cast<int>(states.size()) < grids) {
    Model coarse = model;
    coarse.grid = halved(model.grid, static_cast<int>(states.size()));
    SettleSettings from_there = settings;
    from_there.coarsest = coarse.grid.radial;
    std::vector<SteadyState> coarser =
        settle(coarse, initial, stored(states.front().snapshot.temperature), from_there, 1, comm,
               observer);
    if (coarser.empty() || !coarser.front().converged) break;
    states.insert(states.begin(), coarser.front());
  }
  return states;
}

}  // namespace lidwright
