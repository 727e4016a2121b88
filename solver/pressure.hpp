#pragma once

#include <vector>

#include "solver/power.hpp"

/// Pressure and wall normal stress from a flow that already is the minimum of the power functional.
/// They need no solve: what the functional's derivative by the face velocities leaves is a discrete
/// gradient,
///     dJ/du of a radial face = rho area (q inside - q outside),  likewise on lateral faces,
/// with q = p/rho, the multiplier of div(rho u) = 0.
namespace lidwright {

struct Stresses {
  CellField pressure;  ///< volume mean 0
  std::vector<double> inner_normal,
      outer_normal;  ///< sigma_rr on this rank's columns, > 0 tension; mean over the wall 0
};

/// b: buoyancy of a unit mass at radial faces, at walls the one to be used in the half cell next to
/// them. Columns are integrated outwards and tied together by the mean over all rows of the lateral
/// faces' residual. The normal stress is the wall's reaction, which is second-order accurate.
/// Collective.
Stresses stresses(const Power&, const CornerField& psi, const RadialFaceField& b);

}  // namespace lidwright
