#pragma once

#include <memory>

#include "solver/coupled_solver.hpp"
#include "solver/flow.hpp"
#include "solver/linearised.hpp"
#include "solver/measure.hpp"

/// The steady state of a model as a system of equations for the temperature alone: the flow is
/// solved for exactly at every temperature, so that only the heat residual is left. On one rank.
namespace lidwright {

class SteadyEquations {
 public:
  SteadyEquations(const Model&, HeatFlux);

  /// Solves the flow and the residual. Throws SolveError when the flow does not converge.
  void set_temperature(const CellField&);

  const CellField& temperature() const { return temperature_; }
  /// rms of dT/dt over the rate at which the heat that passes the shell would change its mean
  /// temperature: (heat flow through both walls and of sources and viscous heating, absolutely, /
  /// 2) / heat capacity.
  double residual() const { return residual_; }
  /// That rate itself.
  double heat_rate() const { return heat_rate_; }
  /// By which turning is held (CoupledSolver::hold): far below the rates of other disturbances, as
  /// a coarse grid may have a phase of its own for the pattern, which Newton's method must reach.
  double holding_rate() const { return 1e-3 * heat_rate_; }
  /// dT/d(lateral) of each cell, normalised to v . M v = 1: the turning of the pattern. Empty where
  /// the shell is not periodic or the temperature does not vary along it.
  Eigen::VectorXd turning() const;
  /// Of dT/dt, the largest of all cells.
  double fastest_change() const;
  /// Heat gained by each cell, in the order of its unknowns: minus the heat residual.
  const Eigen::VectorXd& gain() const { return gain_; }
  Linearised linearise() const;

  const Model& model() const { return model_; }
  const Unknowns& unknowns() const { return unknowns_; }
  const HeatOperator& heat() const { return heat_; }
  StateView view() const {
    return {flow_.power(), heat_, temperature_, psi_, model_.rayleigh, model_.viscosity};
  }
  std::shared_ptr<const Decomposition> decomposition() const { return decomposition_; }
  double flow_error() const { return flow_.last_error(); }

 private:
  Model model_;
  HeatFlux flux_;
  std::shared_ptr<const Decomposition> decomposition_;
  FlowSolver flow_;
  HeatOperator heat_;
  Unknowns unknowns_;
  CellField temperature_;
  CornerField psi_;
  Eigen::VectorXd gain_;
  double residual_ = 0, heat_rate_ = 0;
};

}  // namespace lidwright
