#include "study/steady_grids.hpp"

#include "mesh/gather.hpp"

namespace lidwright {

Grid coarsened(Grid grid, int times) {
  grid.radial >>= times;
  grid.lateral >>= times;
  return grid;
}

StoredTemperature stored(const CellField& t) {
  const Geometry& g = t.decomposition().geometry();
  StoredTemperature s;
  s.shell = g.shell();
  for (int i = 0; i <= g.radial_cells(); ++i) s.face_radius.push_back(g.face_radius(i));
  for (int j = 0; j <= g.lateral_cells(); ++j) s.face_lateral.push_back(g.face_lateral(j));
  s.values = gather_to_first(t);
  return s;
}

std::vector<SteadyState> settle_on_grids(const Model& model, const InitialSettings& initial,
                                         const StoredTemperature& start,
                                         const SettleSettings& settings, int grids, MPI_Comm comm,
                                         const SettleObserver& observer) {
  std::vector<SteadyState> states = settle(model, initial, start, settings, grids, comm, observer);
  while (!states.empty() && states.back().converged && states.front().converged &&
         static_cast<int>(states.size()) < grids) {
    Model coarse = model;
    coarse.grid = coarsened(model.grid, static_cast<int>(states.size()));
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
