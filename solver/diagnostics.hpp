#pragma once

#include <vector>

/// What a run reports. Dimensionless units of solver/settings.hpp; heat flows are integrals over
/// the wall (per unit depth in box and annulus) in units of k DeltaT d^(n-2), > 0 along +r.
namespace lidwright {

/// One row of the history.
struct HistoryRow {
  long step = 0;
  double time = 0;
  double time_step = 0;
  double heat_flow_inner = 0;  ///< through the inner wall, > 0 enters the shell
  double heat_flow_outer = 0;  ///< through the outer wall, > 0 leaves it
  double nusselt_inner = 0;    ///< heat flow over the conductive one at the same wall temperatures
  double nusselt_outer = 0;
  double temperature_mean = 0;  ///< over the volume
  double temperature_min = 0;
  double temperature_max = 0;
  double temperature_inner = 0;  ///< mean over the wall
  double temperature_outer = 0;
  double velocity_rms = 0;        ///< over the volume
  double velocity_rms_inner = 0;  ///< along the wall, over its area
  double velocity_rms_outer = 0;
  double dissipation = 0;    ///< integral of tau : e, units eta kappa^2 d^(n-4)
  double buoyancy_work = 0;  ///< integral of Ra alpha rho g T u_r, same units
  double work_mismatch = 0;  ///< (dissipation - work) / work
  double flow_error =
      0;  ///< relative velocity error in the dissipation norm, as the solver estimates it
  double heat_source = 0;        ///< integral of H
  double viscous_heating = 0;    ///< Di/Ra times dissipation, a heat flow
  double adiabatic_cooling = 0;  ///< integral of Di alpha rho g u_r (T + T_surf), > 0 cools
  double heat_budget_residual =
      0;  ///< of the last step: (change of content - flows - all that heats) / largest of them
  double temperature_change_rate = 0;  ///< volume rms of dT/dt over the last step
  // Of the lid and what is below it, docs/diagnostics.md; nan where not defined.
  double mobility = 0;                  ///< velocity_rms_outer / velocity_rms
  double plateness = 0;                 ///< 1 for rigid plates, about 0 for isoviscous flow
  double velocity_rms_lid_base = 0;     ///< at the depth lid_thickness_isotherm
  double lid_thickness_velocity = 0;    ///< by the tangent to the velocity profile, d
  double lid_thickness_isotherm = 0;    ///< by the rheological temperature scale, d
  double lid_thickness_advection = 0;   ///< where advection carries a tenth of the heat, d
  double lid_thickness_conduction = 0;  ///< the outer thermal boundary layer's, d
  double boundary_layer_inner = 0;      ///< the inner thermal boundary layer's, d
  double temperature_internal = 0;      ///< between the thermal boundary layers
  double rayleigh_internal = 0;         ///< with the mean viscosity there
  double rheological_temperature = 0;   ///< |eta/(d eta/dT)| there
  double frank_kamenetskii = 0;         ///< drop from wall to wall over rheological_temperature
  double stress_rms_outer = 0;          ///< second invariant at the outer wall, eta kappa/d^2
  double topography_rms_outer = 0;      ///< of -sigma_rr at the outer wall, eta kappa/d^2
  long plumes = 0;                      ///< hot currents upwards
  long downwellings = 0;                ///< cold currents downwards
  double yielding_share = 0;            ///< of the volume, 0 to 1
  long flow_iterations = 0;             ///< Newton iterations of the last flow; 0: linear rheology
  long fixed_point_steps = 0;           ///< that stood in for Newton's, since the start
  long applications = 0;                ///< of the factor, since the start
  long factorisations = 0;              ///< since the start
  double wall_time = 0;                 ///< s, since the start, over all sessions
};

/// Means over spherical (cylindrical, horizontal) surfaces; cells, from the inner wall outwards.
struct RadialProfiles {
  std::vector<double> radius;  ///< height in the box
  std::vector<double> temperature;
  std::vector<double> temperature_adiabatic;  ///< of the adiabat through the mean at mid-depth
  std::vector<double> velocity_radial_rms;
  std::vector<double> velocity_lateral_rms;
  std::vector<double> viscosity;       ///< geometric mean (of the volume's logarithm)
  std::vector<double> heat_conducted;  ///< heat flow at cell middles, mean of the two faces
  std::vector<double> heat_advected;
};

}  // namespace lidwright
