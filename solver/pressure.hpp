#pragma once

#include <functional>
#include <vector>

#include "solver/power.hpp"

/// Pressure and wall normal stress from a flow that already is the minimum of the power functional.
/// They need no solve: what the functional's derivative by the face velocities leaves is a discrete
/// gradient,
///     dJ/du of a radial face = area (p inside - p outside),  likewise on lateral faces.
namespace lidwright {

struct Stresses {
  CellField pressure;  ///< volume mean 0
  std::vector<double> inner_normal,
      outer_normal;  ///< sigma_rr on this rank's columns, > 0 tension; mean over the wall 0
};

/// b: buoyancy at radial faces, at walls the one to be used in the half cell next to them. Columns
/// are integrated outwards and tied together by the mean over all rows of the lateral faces'
/// residual. The normal stress is the wall's reaction, which is second-order accurate. Collective.
Stresses stresses(const Power&, const CornerField& psi, const std::function<double(RadialFace)>& b);

}  // namespace lidwright
