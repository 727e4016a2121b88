#pragma once

#include <vector>

#include "mesh/field.hpp"
#include "solver/settings.hpp"

/// Does a steady state last? The eigenvalues of the equations linearised about it.
namespace lidwright {

/// A disturbance goes with exp(growth t) cos(frequency t); time in d^2/kappa.
struct GrowthRate {
  double growth = 0;
  double frequency = 0;  ///< >= 0; one entry stands for a conjugate pair
  /// Is the disturbance the turning of the pattern along a periodic shell? Its rate is 0 but for
  /// the hold that the mesh has on the pattern.
  bool turning = false;
};

/// The leading `count` growth rates about a steady state, fastest growing first, by shift-invert
/// Krylov-Schur iterations (SLEPc; Stewart 2001, SIAM J. Matrix Anal. Appl. 23, 601) about 0, about
/// the rate of overturning and about half the fastest growth that the Rayleigh number allows: those
/// are found that are near one of them. Computed on the first rank. Collective; throws
/// SolveError.
std::vector<GrowthRate> growth_rates(const Model&, HeatFlux, const CellField& temperature,
                                     int count);

}  // namespace lidwright
