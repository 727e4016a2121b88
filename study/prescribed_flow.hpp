#pragma once

#include <map>
#include <string>
#include <vector>

#include "solver/settings.hpp"

/// Flow of a prescribed buoyancy and viscosity, without heat: what analytic Stokes flows are
/// compared with.
namespace lidwright {

/// The prescribed buoyancy, > 0 outwards, unit eta_ref kappa/d^3.
/// Shells: -(r/r_outer)^power cos(wavenumber lateral), in the axisymmetric shell with the Legendre
/// polynomial P_wavenumber(cos theta) instead.
/// Box: sin(vertical z) cos(horizontal x), lengths in d.
struct Forcing {
  int wavenumber = 1;  ///< >= 1
  double power = 0;
  double vertical = 0, horizontal = 0;  ///< rad / d
  /// Box: the viscosity law's value is multiplied by this beyond x = step_at, > 0.
  double step_viscosity = 1;
  double step_at = 0.5;  ///< d
};

/// Everything of prescribed_flow_names() that applies, on one grid:
///   velocity_rms           root of the volume mean of u . u
/// and in shells the amplitudes, by projection on cos(n lateral) or P_n for radial things and
/// sin(n lateral) or dP_n/dtheta for lateral ones, of
///   velocity_inner_amplitude, velocity_outer_amplitude   velocity along a wall
///   stress_inner_amplitude, stress_outer_amplitude       sigma_rr at a wall, > 0 tension
/// or in the box
///   velocity_top_middle    u_x at the top, half-way between the sides
///   velocity_left_middle, velocity_right_middle          u_z at the sides, half-way up
///   stress_top_left, stress_top_right                    sigma_zz, less its mean over the top
///   stress_top_difference                                right less left
/// On one rank. Throws SolveError when the flow does not converge.
std::map<std::string, double> prescribed_flow(const Model&, const Forcing&, double tolerance,
                                              const Grid&);
const std::vector<std::string>& prescribed_flow_names();

}  // namespace lidwright
