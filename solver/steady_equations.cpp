#include "solver/steady_equations.hpp"

#include <algorithm>
#include <cmath>

#include "solver/solve_error.hpp"

namespace lidwright {
namespace {

/// Far below what the residual is asked for: the flow must not limit Newton's method.
FlowSettings exact_flow() {
  FlowSettings s;
  s.tolerance = 1e-12;
  s.refactor_cost = 10;
  return s;
}

}  // namespace

SteadyEquations::SteadyEquations(const Model& model, HeatFlux flux)
    : model_(model),
      flux_(flux),
      decomposition_(decompose(model, MPI_COMM_SELF)),
      flow_(decomposition_, model.walls, exact_flow()),
      heat_(decomposition_, model.walls, model.heat, flux, model.reference),
      unknowns_(flow_.power()),
      temperature_(decomposition_),
      psi_(decomposition_) {}

void SteadyEquations::set_temperature(const CellField& t) {
  temperature_ = t;
  temperature_.exchange();
  const FlowReport report = flow_.solve(viscosity_of(model_.viscosity, temperature_),
                                        buoyancy(heat_, temperature_, model_.rayleigh), psi_);
  // Round-off may stop it a little earlier where the viscosity varies by many orders.
  if (!report.converged && !(report.error < 1e-8))
    throw SolveError("the flow of a trial temperature did not converge");
  const CellField gain = heat_gain(model_, flow_.power(), heat_, temperature_, psi_);
  gain_ = unknowns_.temperature_vector(gain);
  const HistoryRow row = measure(view());
  const double passing = (std::abs(row.heat_flow_inner) + std::abs(row.heat_flow_outer) +
                          std::abs(row.heat_source) + 2 * std::abs(row.viscous_heating)) /
                         2;
  // Where no heat passes, a temperature of one unit would be a thousandth of what conduction needs.
  const double least = 1e-3 * heat_.mantle().conductive_heat_flow;
  heat_rate_ = std::max(passing, least) / heat_.total_capacity();
  double sum = 0;
  const Geometry& g = decomposition_->geometry();
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i) {
      const double rate = gain[{i, j}] / heat_.capacity({i, j});
      sum += g.volume({i, j}) * rate * rate;
    }
  const double rms = std::sqrt(sum / g.total_volume());
  residual_ = rms == 0 ? 0 : rms / heat_rate_;
}

double SteadyEquations::fastest_change() const {
  const Geometry& g = decomposition_->geometry();
  double most = 0;
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i)
      most = std::max(most, std::abs(gain_[unknowns_.of(Cell{i, j})]) / heat_.capacity({i, j}));
  return most;
}

Eigen::VectorXd SteadyEquations::turning() const {
  const Geometry& g = decomposition_->geometry();
  if (!g.periodic()) return {};
  Eigen::VectorXd v(unknowns_.cells());
  double square = 0;
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i) {
      const double slope = temperature_[{i, j + 1}] - temperature_[{i, j - 1}];
      v[unknowns_.of(Cell{i, j})] = slope;
      square += heat_.capacity({i, j}) * slope * slope;
    }
  if (square < 1e-12 * heat_.total_capacity()) return {};
  return v / std::sqrt(square);
}

Linearised SteadyEquations::linearise() const {
  return lidwright::linearise(model_, flow_.power(), heat_, flux_, unknowns_, temperature_, psi_);
}

}  // namespace lidwright
