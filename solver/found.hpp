#pragma once

#include <string>
#include <vector>

#include "solver/settle.hpp"
#include "solver/steady_equations.hpp"

/// A state found on the first rank, on its way to all.
namespace lidwright {

/// The whole field on the first rank, where it can start another one.
StoredTemperature stored(const CellField&);

struct Found {
  Grid grid;
  bool converged = false;
  double residual = 0;
  std::string remark;
  std::vector<NewtonStep> steps;
  StoredTemperature temperature;
  std::vector<double> psi;

  /// The state that the equations hold, and its residual.
  void keep(const SteadyEquations&);
};

/// The states on all ranks, with what is measured on them; the same model but for the grid (its
/// gradings are the model's). Remarks and residuals reach all ranks, steps stay on the first.
/// Collective.
std::vector<SteadyState> share_all(const Model&, HeatFlux, std::vector<Found>, MPI_Comm);
/// One of them, on a grid that all ranks know.
SteadyState share(const Model&, HeatFlux, const Found&, MPI_Comm);

}  // namespace lidwright
