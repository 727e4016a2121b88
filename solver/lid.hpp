#pragma once

#include "physics/rheology.hpp"
#include "solver/depth_profile.hpp"

/// The lid and the convecting interior, read off mean profiles; definitions and sources in
/// docs/diagnostics.md. Depths and thicknesses in d, temperatures in DeltaT; what is not defined is
/// nan.
namespace lidwright {

/// The profile's tangent at a wall: dT/d(depth).
struct WallGradients {
  double outer = 0, inner = 0;
};

/// What lies between the thermal boundary layers. A layer ends where the temperature profile's
/// tangent at its wall reaches the interior's own temperature, which is the mean over the volume
/// between the two ends.
struct Interior {
  double temperature;
  double begin, end;  ///< depths
};

/// Nan throughout where the layers leave no interior, as in pure conduction from wall to wall.
Interior interior(const DepthProfile&, const WallGradients&);

/// exp of the mean of ln(eta) over the interior's volume.
double interior_viscosity(const DepthProfile&, const Interior&);

/// d(ln eta)/dT at the interior's temperature and the middle of its depths, per DeltaT; nan without
/// interior.
double interior_log_slope(const ViscosityLaw&, const Interior&);

/// Where the tangent to the speed's profile at its inflection point under the lid meets speed 0
/// (Davaille & Jaupart 1993, J. Fluid Mech. 253, 141; Solomatov & Moresi 2000, J. Geophys. Res.
/// 105, 21795): that of steepest rise with depth above the depth of fastest rising and sinking. 0
/// where the surface moves along and the tangent meets it outside; nan at rest.
double lid_thickness_velocity(const DepthProfile&);

/// Temperature drop from the interior to the base of the lid over the rheological scale
/// |eta/(d eta/dT)| (2.23 Grasset & Parmentier 1998, J. Geophys. Res. 103, 18171; 2.21 Breuer &
/// Spohn 2006, Planet. Space Sci. 54, 153).
inline constexpr double lid_base_drop = 2.2;

/// Depth at which the mean temperature first reaches the interior's less lid_base_drop rheological
/// scales. 0 where that lies below the surface's temperature; nan without interior.
double lid_thickness_isotherm(const DepthProfile&, const Interior&, double log_slope);

/// Depth at which advection first carries a tenth of the heat; nan where it never does or heat
/// enters from above.
double lid_thickness_advection(const DepthProfile&);

}  // namespace lidwright
