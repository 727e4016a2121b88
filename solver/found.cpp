#include "solver/found.hpp"

#include <algorithm>
#include <cmath>

#include "mesh/gather.hpp"

namespace lidwright {
namespace {

/// Plain data of what the first rank found, on all ranks (fields stay on the first).
void broadcast(Found& f, MPI_Comm comm) {
  int numbers[4] = {f.grid.radial, f.grid.lateral, f.converged ? 1 : 0,
                    static_cast<int>(f.remark.size())};
  MPI_Bcast(numbers, 4, MPI_INT, 0, comm);
  f.grid.radial = numbers[0];
  f.grid.lateral = numbers[1];
  f.converged = numbers[2] != 0;
  f.remark.resize(static_cast<std::size_t>(numbers[3]));
  MPI_Bcast(f.remark.data(), numbers[3], MPI_CHAR, 0, comm);
  MPI_Bcast(&f.residual, 1, MPI_DOUBLE, 0, comm);
}

/// What does not close in the budget of heat, over the largest of its terms. Advection counts where
/// the heat capacity varies, as it is no divergence then.
double net_heat(const StateView& view, const HistoryRow& row) {
  double carried = 0;
  if (!view.heat.mantle().uniform_heat_capacity) {
    CellField gain(view.temperature.decomposition_pointer());
    view.heat.add_advection(view.temperature, view.psi, gain);
    for (std::size_t k = 0; k < gain.owned_size(); ++k) carried += gain.owned_data()[k];
    carried = view.heat.decomposition().sum(carried);
  }
  double net = 0, largest = 0;
  for (const double term : {row.heat_flow_inner, -row.heat_flow_outer, row.heat_source,
                            row.viscous_heating, -row.adiabatic_cooling, carried}) {
    net += term;
    largest = std::max(largest, std::abs(term));
  }
  return largest > 0 ? net / largest : 0;
}

}  // namespace

StoredTemperature stored(const CellField& t) {
  const Geometry& g = t.decomposition().geometry();
  StoredTemperature s;
  s.shell = g.shell();
  for (int i = 0; i <= g.radial_cells(); ++i) s.face_radius.push_back(g.face_radius(i));
  for (int j = 0; j <= g.lateral_cells(); ++j) s.face_lateral.push_back(g.face_lateral(j));
  s.values = gather_to_first(t);
  return s;
}

void Found::keep(const SteadyEquations& equations) {
  grid = equations.model().grid;
  residual = equations.residual();
  temperature = stored(equations.temperature());
  psi = gather_to_first(equations.view().psi);
}

SteadyState share(const Model& model, HeatFlux flux, const Found& found, MPI_Comm comm) {
  Model on_grid = model;
  on_grid.grid = found.grid;
  const auto d = decompose(on_grid, comm);
  Power power(d, model.walls);
  const HeatOperator heat(d, model.walls, model.heat, flux, model.reference);
  CellField temperature(d);
  CornerField psi(d);
  scatter_from_first(found.temperature.values, temperature);
  scatter_from_first(found.psi, psi);
  power.set_viscosity(viscosity_of(model.viscosity, temperature));
  const StateView view{power, heat, temperature, psi, model.rayleigh, model.viscosity};
  SteadyState s{found.grid,    found.converged,      found.residual, found.remark,
                measure(view), snapshot(view, true), found.steps};
  s.row.heat_budget_residual = net_heat(view, s.row);
  return s;
}

std::vector<SteadyState> share_all(const Model& model, HeatFlux flux, std::vector<Found> found,
                                   MPI_Comm comm) {
  auto count = static_cast<int>(found.size());
  MPI_Bcast(&count, 1, MPI_INT, 0, comm);
  found.resize(static_cast<std::size_t>(count));
  std::vector<SteadyState> states;
  for (Found& f : found) {
    broadcast(f, comm);
    f.grid.radial_grading = model.grid.radial_grading;
    f.grid.lateral_grading = model.grid.lateral_grading;
    states.push_back(share(model, flux, f, comm));
  }
  return states;
}

}  // namespace lidwright
