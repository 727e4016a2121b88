#pragma once

#include <functional>

#include "solver/flow.hpp"

/// A flow with a known solution, and how far the solver is from it.
namespace lidwright {

/// An exact solution in terms of (radius, lateral coordinate); stresses in terms of the latter.
struct KnownFlow {
  Shell shell;
  Walls walls;
  std::function<double(double, double)> viscosity, buoyancy, radial_velocity, lateral_velocity;
  std::function<double(double)> inner_normal_stress, outer_normal_stress;
};

/// Relative rms errors: of both velocity components over the volume, of the normal stress (less its
/// mean) over each wall.
struct FlowErrors {
  double velocity, inner_stress, outer_stress;
};

/// Throws std::runtime_error when the solver does not converge.
FlowErrors flow_errors(const KnownFlow&, const Grid&);

}  // namespace lidwright
