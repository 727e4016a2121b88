#pragma once

#include <algorithm>
#include <cmath>
#include <vector>

/// Radial reference profiles of a compressible mantle and what couples them to heat, dimensionless.
///
///     div(rho u) = 0
///     0 = -grad p + div tau + Ra alpha rho g T e_r + (the buoyancy of pressure)
///     rho cp DT/Dt = div(k grad T) + H - Di alpha rho g u_r (T + T_surf) + (Di/Ra) tau : e
///
/// Di = alpha g d / cp. With Di = 0 and all profiles 1 this is the Boussinesq approximation, with
/// Di > 0 and rho = 1 the extended Boussinesq, with rho(r) the anelastic liquid approximation
/// (Jarvis & McKenzie 1980, J. Fluid Mech. 96, 515; King et al. 2010, GJI 180, 73).
namespace lidwright {

/// One property over the value that the dimensionless numbers are made with, as the product of
///     rise^depth * (r / r_outer)^radius_power * table(depth),
/// depth in shell thicknesses below the outer wall. 1 everywhere by default.
struct RadialProfile {
  double rise = 1;             ///< at depth 1 over depth 0, exponential between; > 0
  double radius_power = 0;     ///< 1: proportional to the radius; 0 in the box
  std::vector<double> depths;  ///< of a table, ascending, at least two; empty: none
  std::vector<double> values;  ///< of the table, > 0, joined by straight lines, constant beyond

  bool constant() const { return rise == 1 && radius_power == 0 && depths.empty(); }
  double operator()(double depth, double outer_radius) const {
    double value = std::pow(rise, depth) * tabulated(depth);
    if (radius_power != 0) value *= std::pow(1 - depth / outer_radius, radius_power);
    return value;
  }

 private:
  double tabulated(double depth) const {
    if (depths.empty()) return 1;
    const auto above = std::upper_bound(depths.begin(), depths.end(), depth);
    if (above == depths.begin()) return values.front();
    if (above == depths.end()) return values.back();
    const auto k = static_cast<std::size_t>(above - depths.begin());
    const double share = (depth - depths[k - 1]) / (depths[k] - depths[k - 1]);
    return values[k - 1] + share * (values[k] - values[k - 1]);
  }
};

struct ReferenceProfiles {
  double dissipation_number = 0;   ///< Di = alpha g d / cp, >= 0
  double surface_temperature = 0;  ///< absolute, of T = 0, in units of the temperature drop; >= 0
  RadialProfile density, expansivity, gravity, conductivity, heat_capacity;
};

}  // namespace lidwright
