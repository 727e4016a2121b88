#include "solver/lid_row.hpp"

#include <cmath>
#include <limits>

#include "solver/currents.hpp"
#include "solver/lid.hpp"
#include "solver/pressure.hpp"
#include "solver/topography.hpp"
#include "solver/wall_motion.hpp"

namespace lidwright {
namespace {

constexpr double undefined = std::numeric_limits<double>::quiet_NaN();

/// Where advection carries less than this share of the heat, currents are not counted.
constexpr double least_advected = 0.01;

WallGradients wall_gradients(const HeatOperator& heat, const HistoryRow& row) {
  const Geometry& g = heat.geometry();
  const std::vector<double>& k = heat.mantle().face_conductivity;
  return {row.heat_flow_outer / (g.wall_area(g.radial_cells()) * k.back()),
          row.heat_flow_inner / (g.wall_area(0) * k.front())};
}

void set_thicknesses(const StateView& s, const DepthProfile& p, const Interior& inside,
                     HistoryRow& row) {
  const double slope = interior_log_slope(s.law, inside);
  row.temperature_internal = inside.temperature;
  row.rayleigh_internal = s.rayleigh / interior_viscosity(p, inside);
  row.rheological_temperature = slope != 0 ? 1 / std::abs(slope) : undefined;
  row.frank_kamenetskii = (row.temperature_inner - row.temperature_outer) * std::abs(slope);
  row.lid_thickness_velocity = lid_thickness_velocity(p);
  row.lid_thickness_isotherm = lid_thickness_isotherm(p, inside, slope);
  row.lid_thickness_advection = lid_thickness_advection(p);
  row.lid_thickness_conduction = inside.begin;
  row.boundary_layer_inner = p.depth.back() - inside.end;
  const double base = row.lid_thickness_isotherm;
  row.velocity_rms_lid_base = std::isnan(base) ? undefined : value_at(p.depth, p.speed, base);
}

int row_at_depth(const Geometry& g, double depth) {
  int best = 0;
  for (int i = 1; i < g.radial_cells(); ++i)
    if (std::abs(g.depth(i) - depth) < std::abs(g.depth(best) - depth)) best = i;
  return best;
}

/// Counted in the middle of the interior, without one in the middle of the shell.
Currents currents(const StateView& s, const RadialProfiles& p, const Interior& inside) {
  const Geometry& g = s.power.geometry();
  const double middle = (inside.begin + inside.end) / 2;
  const int row = row_at_depth(g, std::isnan(middle) ? 0.5 : middle);
  const auto n = static_cast<std::size_t>(row);
  const double advected = p.heat_advected[n];
  if (!(advected > least_advected * (std::abs(advected) + std::abs(p.heat_conducted[n]))))
    return {};
  return count_currents(s.temperature, s.psi, row);
}

}  // namespace

void set_lid(const StateView& s, HistoryRow& row) {
  const RadialProfiles rows = profiles(s);
  const DepthProfile p = depth_profile(s.power.geometry(), rows, row);
  const Interior inside = interior(p, wall_gradients(s.heat, row));
  set_thicknesses(s, p, inside, row);
  row.mobility = row.velocity_rms > 0 ? row.velocity_rms_outer / row.velocity_rms : undefined;
  row.plateness = plateness(s.power, s.psi);
  row.stress_rms_outer = surface_stress_rms(s.power, s.psi);
  const Stresses stress = stresses(s.power, s.psi, buoyancy(s.heat, s.temperature, s.rayleigh));
  row.topography_rms_outer = topography_rms(s.power.decomposition(), stress.outer_normal);
  const Currents counted = currents(s, rows, inside);
  row.plumes = counted.plumes;
  row.downwellings = counted.downwellings;
}

}  // namespace lidwright
