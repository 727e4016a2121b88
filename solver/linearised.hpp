#pragma once

#include <Eigen/SparseCore>

#include "solver/heat.hpp"
#include "solver/power.hpp"
#include "solver/settings.hpp"
#include "solver/unknowns.hpp"

/// The steady equations of a whole mesh, on one rank, and their exact Jacobian.
///
///     flow residual  K(T) psi - f(T)                  at the flow's unknowns
///     heat residual  -(heat gained by each cell)      so that  V rho cp dT/dt = -(heat residual)
namespace lidwright {

using SparseMatrix = Eigen::SparseMatrix<double, Eigen::ColMajor, long>;

/// Derivatives of both residuals by both fields (solver/unknowns.hpp has their numbering).
struct Linearised {
  SparseMatrix flow_by_psi;          ///< K, symmetric positive definite
  SparseMatrix flow_by_temperature;  ///< buoyancy, and viscosity's dependence on temperature
  SparseMatrix heat_by_psi;          ///< advection, adiabatic work, viscous heating
  SparseMatrix heat_by_temperature;  ///< conduction, advection, adiabatic work, viscous heating
  Eigen::VectorXd capacity;          ///< V rho cp of each cell
};

/// `power` holds the viscosity of the temperature; psi need not be its flow. Where the limited flux
/// has a kink, one of its two slopes is taken.
Linearised linearise(const Model&, const Power& power, const HeatOperator&, HeatFlux,
                     const Unknowns&, const CellField& temperature, const CornerField& psi);

/// Heat gained by each cell; psi the flow of the temperature.
CellField heat_gain(const Model&, const Power&, const HeatOperator&, const CellField& temperature,
                    const CornerField& psi);

}  // namespace lidwright
