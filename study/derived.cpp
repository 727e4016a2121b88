#include "study/derived.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "solver/initial.hpp"

namespace lidwright {
namespace {

constexpr double nan = std::numeric_limits<double>::quiet_NaN();

/// Largest over least viscosity along depth, at one temperature.
double contrast_along_depth(const ViscosityLaw& law, double temperature) {
  constexpr int points = 200;
  double least = std::numeric_limits<double>::infinity(), most = 0;
  for (int k = 0; k <= points; ++k) {
    const double eta = law({temperature, static_cast<double>(k) / points});
    least = std::min(least, eta);
    most = std::max(most, eta);
  }
  return most / least;
}

double mean_viscosity(const Geometry& g, const ViscosityLaw& law, const AtRest& rest) {
  double sum = 0, volume = 0;
  for (int i = 0; i < g.radial_cells(); ++i) {
    const double v = g.volume({i, 0});
    sum += v * std::log(law({rest.temperature[static_cast<std::size_t>(i)], g.depth(i)}));
    volume += v;
  }
  return std::exp(sum / volume);
}

void set_rayleigh_numbers(DerivedNumbers& n, const Model& m, const Geometry& g,
                          const AtRest& rest) {
  const ViscosityLaw& law = m.creep();
  const auto with = [&](double t, double depth) { return m.rayleigh / law({t, depth}); };
  const double middle = (n.t_inner + n.t_outer) / 2;
  n.reference = m.rayleigh;
  n.outer = with(n.t_outer, 0);
  n.inner = with(n.t_inner, 1);
  n.half = with(middle, 0.5);
  n.at_rest = m.rayleigh / mean_viscosity(g, law, rest);
  n.internal = n.mean_source != 0 ? m.rayleigh * n.mean_source : nan;
  n.internal_half = n.mean_source != 0 ? n.half * n.mean_source : nan;
}

void set_contrasts(DerivedNumbers& n, const ViscosityLaw& law) {
  const auto eta = [&](double t, double depth) { return law({t, depth}); };
  n.thermal_contrast = eta(n.t_outer, 0.5) / eta(n.t_inner, 0.5);
  n.wall_contrast = eta(n.t_outer, 0) / eta(n.t_inner, 1);
  n.depth_contrast = contrast_along_depth(law, (n.t_inner + n.t_outer) / 2);
  n.theta = std::log(n.thermal_contrast);
  n.frank_kamenetskii = std::abs((n.t_inner - n.t_outer) * law.log_slope({n.t_inner, 0.5}));
}

}  // namespace

AtRest at_rest(const Model& m, MPI_Comm comm) {
  const HeatOperator heat(decompose(m, comm), m.walls, m.heat, HeatFlux::Central, m.reference);
  const Geometry& g = heat.geometry();
  AtRest rest{};
  rest.temperature = conductive_profile(heat);
  CellField t(heat.decomposition_pointer());
  for (int j = t.held().begin; j < t.held().end; ++j)
    for (int i = 0; i < t.rows(); ++i) t[{i, j}] = rest.temperature[static_cast<std::size_t>(i)];
  const RadialFace inner{0, t.owned().begin}, outer{g.radial_cells(), t.owned().begin};
  rest.t_inner = heat.wall_temperature(t, inner);
  rest.t_outer = heat.wall_temperature(t, outer);
  rest.heat_flow_inner = heat.wall_flux(t, inner) / g.area(inner) * g.wall_area(0);
  rest.heat_flow_outer = heat.wall_flux(t, outer) / g.area(outer) * g.wall_area(g.radial_cells());
  rest.source = heat.total_source();
  double sum = 0, volume = 0;
  for (int i = 0; i < g.radial_cells(); ++i) {
    sum += g.volume({i, 0}) * rest.temperature[static_cast<std::size_t>(i)];
    volume += g.volume({i, 0});
  }
  rest.mean = sum / volume;
  rest.hottest = *std::max_element(rest.temperature.begin(), rest.temperature.end());
  return rest;
}

DerivedNumbers derived_numbers(const Model& m, const AtRest& rest) {
  const auto geometry = make_geometry(m);
  const MantleRows rows(*geometry, m.reference);
  DerivedNumbers n{};
  n.t_outer = rest.t_outer;
  n.t_inner = rest.t_inner;
  n.conductive_flow = rows.conductive_heat_flow;
  n.source = rest.source;
  n.mean_source = n.source / geometry->total_volume();
  set_rayleigh_numbers(n, m, *geometry, rest);
  set_contrasts(n, m.creep());
  n.adiabatic_rise = adiabatic_rise(m, *geometry, rows);
  n.adiabatic_drop =
      (n.adiabatic_rise - 1) * ((n.t_inner + n.t_outer) / 2 + m.reference.surface_temperature);
  return n;
}

double adiabatic_rise(const Model& m, const Geometry& g, const MantleRows& rows) {
  const ReferenceProfiles& r = m.reference;
  const double rest = g.cell_radius(0) - g.face_radius(0), outer = g.outer_radius();
  const double depth = outer - g.face_radius(0) - rest / 2;
  const double gradient = r.dissipation_number * r.expansivity(depth, outer) *
                          r.gravity(depth, outer) / r.heat_capacity(depth, outer);
  return rows.adiabatic_rise.front() * std::exp(gradient * rest);
}

double cells_within(const Geometry& g, double distance, bool from_outer) {
  const int cells = g.radial_cells();
  double left = distance, count = 0;
  for (int k = 0; k < cells; ++k) {
    const double width = g.width(from_outer ? cells - 1 - k : k);
    if (left < width) return count + left / width;
    left -= width;
    ++count;
  }
  return count;
}

}  // namespace lidwright
