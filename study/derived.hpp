#pragma once

#include <vector>

#include "solver/mantle.hpp"

/// Numbers that follow from a model without solving for any flow. Dimensionless, units of
/// solver/settings.hpp. Pure; nan where something is not defined.
namespace lidwright {

/// Heat conducted with the sources on, as the model's mesh has it.
struct AtRest {
  std::vector<double> temperature;          ///< of rows of cells, from the inner wall
  double heat_flow_outer, heat_flow_inner;  ///< k DeltaT d^(n-2), > 0 along +r
  double t_outer, t_inner;                  ///< of the walls
  double source;                            ///< integral of H over the shell
  double hottest, mean;                     ///< of the rows; over the volume
};
/// Collective.
AtRest at_rest(const Model&, MPI_Comm);

struct DerivedNumbers {
  double t_outer, t_inner;  ///< of the walls; of one with given flux as at rest
  double conductive_flow;   ///< of a unit drop without sources: what Nu is made with
  double source;            ///< integral of H over the shell
  double mean_source;       ///< over its volume

  // Rayleigh numbers, all of the unit drop DeltaT and the reference properties.
  double reference;                ///< the case's own, viscosity 1
  double outer, inner;             ///< with the viscosity at the wall, temperature and depth
  double half;                     ///< at the walls' mean temperature, mid-depth
  double at_rest;                  ///< with the geometric mean viscosity over the shell at rest
  double internal, internal_half;  ///< Ra_Q = Ra H, H the mean source; viscosity 1 and `half`

  double thermal_contrast;   ///< viscosity at the outer wall's temperature over that at the inner
                             ///< wall's, both at mid-depth
  double wall_contrast;      ///< of the walls themselves, depth included
  double depth_contrast;     ///< largest over least along depth at the walls' mean temperature
  double theta;              ///< ln(thermal_contrast)
  double frank_kamenetskii;  ///< drop times |d ln(eta)/dT| at the inner wall, mid-depth
  double adiabatic_rise;     ///< of T + T_surf from surface to core along an adiabat, a ratio
  double adiabatic_drop;     ///< that in DeltaT, from the middle of the walls' temperatures
};
DerivedNumbers derived_numbers(const Model&, const AtRest&);

/// Of T + T_surf along an adiabat, from the surface to the inner wall itself: the rows' ends at the
/// middle of the lowest cell.
double adiabatic_rise(const Model&, const Geometry&, const MantleRows&);

/// Cells between a wall and a distance from it, in parts of cells.
double cells_within(const Geometry&, double distance, bool from_outer);

}  // namespace lidwright
