#pragma once

/// Published laws for heat flow and regime of a plane layer at infinite Prandtl number, as pure
/// functions. Dimensionless: length d, temperature DeltaT, heat flux k DeltaT/d; Rayleigh numbers
/// rho alpha g DeltaT d^3/(kappa eta) with the viscosity that the argument's name says; theta the
/// logarithm of the viscosity's contrast over DeltaT. All arguments > 0. Coefficients are from
/// memory unless something else is said; ranges are the sources', where none is given ours.
namespace lidwright::laws {

/// Critical Rayleigh numbers of a layer heated from below, walls of fixed temperature that slip
/// freely, or both no-slip (Chandrasekhar 1961, Hydrodynamic and Hydromagnetic Stability, ch. II).
inline constexpr double critical_free = 657.511364;  // 27 pi^4/4
inline constexpr double critical_rigid = 1707.761777;

/// A law of the form q = a (drop)^(4/3) Ra^(1/3) for the flux through one boundary layer: what a
/// law Nu = c Ra^(1/3) of a layer with two equal ones, of half the drop each, says. a = c 2^(4/3).
double wall_coefficient(double layer_coefficient);

/// Local stability of the boundary layers, Nu = 1.04 (Ra/Ra_c)^(1/3): 0.120 Ra^(1/3) between
/// free-slip walls (Turcotte & Schubert, Geodynamics, ch. 6). Ra >> Ra_c.
double nusselt_local_stability(double rayleigh, double critical = critical_free);
/// Steady square cells between free-slip walls, Nu = 0.294 Ra^(1/3) (Turcotte & Oxburgh 1967, J.
/// Fluid Mech. 28, 29). From above: computed cells have 0.227 (Ra = 1e4, 1e5), 0.220 (1e6).
double nusselt_steady_cells(double rayleigh);
/// Two-dimensional, free-slip, heated from below: Nu = 0.206 (Ra - 657.5)^0.318 (Moore 2008, J.
/// Geophys. Res. 113, B11407; heating within adds H/2). Ra 1e5 to 1e9. 0 below Ra_c.
double nusselt_moore(double rayleigh);

/// Coefficient of the wall's flux q = 0.3446 Ra^(1/3) (drop)^(4/3), three-dimensional, free-slip,
/// heated from below and within (Sotin & Labrosse 1999, Phys. Earth Planet. Inter. 112, 171). Ra
/// 1e5 to 1e7.
inline constexpr double sotin_labrosse = 0.3446;
/// The same from the hot interior of a layer heated within and insulated below, 1.70 Ra_Q^(-1/4) in
/// units of Q d^2/k (Turcotte & Schubert, ch. 6): a = 1.70^(-4/3). High Ra_Q.
double internal_heating_coefficient();

/// Flux out of the interior into the base of a stagnant lid, q = C Ra_i^(1/3) DT_rh^(4/3), DT_rh =
/// |eta/(d eta/dT)| at the interior's temperature.
double drip_flux(double coefficient, double interior_rayleigh, double rheological_scale);
/// C by Solomatov & Moresi 2000 (J. Geophys. Res. 105, 21795): Nu = 0.53 theta^(-4/3) Ra_i^(1/3),
/// two-dimensional, time-dependent, theta >= 8.
inline constexpr double solomatov_moresi = 0.53;
/// C by Davaille & Jaupart 1993 (J. Fluid Mech. 253, 141), laboratory: 0.47, +- 0.03 (the bounds
/// doubtful).
inline constexpr double davaille_jaupart = 0.47, davaille_jaupart_spread = 0.03;
/// Drop from the interior to the base of the lid over DT_rh (Grasset & Parmentier 1998, J. Geophys.
/// Res. 103, 18171).
inline constexpr double lid_base_drop = 2.23;

/// Steady cell in a unit box heated from below, free-slip, stagnant lid: Nu = 1.89 theta^-1.02
/// Ra_1^0.2, Ra_1 with the viscosity of the hot wall (Moresi & Solomatov 1995, Phys. Fluids 7,
/// 2154). theta 8 to 30, Ra_1 to 1e9. 15 % above Tosi et al. 2015, case 1, as computed here.
double nusselt_moresi_solomatov(double hot_rayleigh, double theta);
/// Three-dimensional, heated from below, stagnant lid: Nu = 1.46 Ra_m^0.27 theta^-1.21 (Deschamps &
/// Lin 2014, Phys. Earth Planet. Inter. 229, 40). Contrast 1e5 to 1e8.
double nusselt_deschamps_lin(double interior_rayleigh, double theta);
/// Temperature of the interior there, 1 - 1.23/theta.
double interior_deschamps_lin(double theta);

/// How a lid moves by the contrast of viscosity across it, heated from below, free-slip walls
/// (Solomatov 1995: mobile up to 1e2, stagnant above 1e4).
enum class Lid { Mobile, Sluggish, Stagnant };
inline constexpr double mobile_below = 1e2, stagnant_above = 1e4;
Lid lid_by_contrast(double contrast);

}  // namespace lidwright::laws
