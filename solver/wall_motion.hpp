#pragma once

#include <vector>

#include "solver/power.hpp"

/// How a wall moves and deforms. `face` is the wall's row of radial faces: 0 or radial_cells().
namespace lidwright {

/// Velocity along a wall at a lateral face: v/h continued to the wall as an even parabola where it
/// slips freely (its radial derivative is 0 there), 0 where it grips.
double wall_velocity(const Power&, const CornerField& psi, int face, int j);

/// Root mean square over a wall: lateral faces weighted by half their neighbours' areas.
/// Collective.
double wall_velocity_rms(const Power&, const CornerField& psi, int face);

/// Second invariant sqrt(e : e / 2) of a wall's own rate of deformation, stretching along it and
/// out of the plane, of all columns in their order; the same on all ranks. kappa/d^2. Collective.
std::vector<double> wall_strain_rates(const Power&, const CornerField& psi, int face);

/// Least share of the area that holds 80 % of the deformation, from rates and areas of equal
/// length; within the last cell in proportion. Nan where nothing deforms.
double deforming_share(const std::vector<double>& rates, const std::vector<double>& areas);

/// Share of the surface that holds 80 % of its deformation in isoviscous, internally heated 3-D
/// convection (Tackley 2000, Geochem. Geophys. Geosyst. 1, 2000GC000036).
inline constexpr double isoviscous_deforming_share = 0.6;

/// Plateness of the outer wall, 1 - share/0.6: 1 for rigid plates, about 0 for isoviscous flow; nan
/// where the wall does not deform. Collective.
double plateness(const Power&, const CornerField& psi);

/// Root mean square over the outer wall of the second invariant sqrt(tau : tau / 2) of stress, from
/// the two outermost rows of cells, between and beyond which its logarithm is straight in depth (as
/// that of the viscosity nearly is); eta kappa/d^2. Collective.
double surface_stress_rms(const Power&, const CornerField& psi);

}  // namespace lidwright
