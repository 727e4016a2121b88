#pragma once

/// A body in SI units and the scales that make its mantle dimensionless.
namespace lidwright {

/// Molar gas constant, J/mol/K: exact product of the Avogadro and Boltzmann constants (SI 2019,
/// CODATA 2018, there abbreviated to 8.314462618...).
inline constexpr double gas_constant = 8.31446261815324;
/// A Julian year of 365.25 days, s.
inline constexpr double year = 365.25 * 86400;
inline constexpr double million_years = 1e6 * year;

/// Uniform properties of a mantle. All > 0, core_radius < radius. In the box only the difference of
/// the radii counts.
struct Body {
  double radius = 0;               ///< of the outer wall, m
  double core_radius = 0;          ///< of the inner wall, m
  double gravity = 0;              ///< m/s^2
  double density = 0;              ///< kg/m^3
  double expansivity = 0;          ///< thermal, volumetric, 1/K
  double conductivity = 0;         ///< W/m/K
  double heat_capacity = 0;        ///< at constant pressure, J/kg/K
  double surface_temperature = 0;  ///< K; the zero of dimensionless temperature
  double temperature_drop = 0;     ///< K; the unit of dimensionless temperature
  double reference_viscosity = 0;  ///< Pa s; where the viscosity law gives 1
};

/// SI value of each dimensionless unit.
struct Scales {
  double length;             ///< shell thickness d, m
  double time;               ///< d^2/kappa, s
  double velocity;           ///< kappa/d, m/s
  double temperature;        ///< DeltaT, K
  double heat_flux;          ///< k DeltaT/d, W/m^2
  double heat_source;        ///< k DeltaT/d^2, W/m^3
  double viscosity;          ///< reference viscosity, Pa s
  double stress;             ///< eta kappa/d^2, Pa
  double activation_energy;  ///< R DeltaT, J/mol
  double activation_volume;  ///< R DeltaT/(rho g d), m^3/mol: lithostatic pressure is rho g depth
};

double thickness(const Body&);     ///< m
double diffusivity(const Body&);   ///< k/(rho cp), m^2/s
double radius_ratio(const Body&);  ///< inner over outer radius
/// rho alpha g DeltaT d^3/(kappa eta).
double rayleigh_number(const Body&);
/// rho g d^3/(kappa eta): pressure at the inner wall, were density and gravity uniform in a layer
/// of thickness d, in units of the stress.
double lithostatic_number(const Body&);
/// Di = alpha g d/cp, the adiabatic rise of temperature over the shell in units of the temperature.
double dissipation_number(const Body&);
/// Absolute surface temperature in units of the temperature drop.
double absolute_surface_temperature(const Body&);
Scales scales_of(const Body&);

/// (T - surface temperature)/DeltaT of an absolute temperature in K, and back.
double dimensionless_temperature(double kelvin, const Body&);
double kelvin(double dimensionless_temperature, const Body&);

}  // namespace lidwright
