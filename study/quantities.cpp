#include "study/quantities.hpp"

#include <algorithm>
#include <cmath>
#include <map>

#include "study/interpolation.hpp"

namespace lidwright {
namespace {

using Line = std::vector<double>;

const Geometry& geometry(const SteadyView& s) {
  return s.snapshot.temperature.decomposition().geometry();
}

double at_left(const SteadyView& s, const Line& lateral, const Line& value) {
  Line distance;
  for (const double x : lateral) distance.push_back(x - geometry(s).shell().lateral_begin);
  return at_side(distance, value);
}

double at_right(const SteadyView& s, const Line& lateral, Line value) {
  Line distance;
  for (const double x : lateral) distance.push_back(geometry(s).shell().lateral_end - x);
  std::reverse(distance.begin(), distance.end());
  std::reverse(value.begin(), value.end());
  return at_side(distance, value);
}

/// Temperature down the middle of the region, at the heights of the cells.
Line midline(const SteadyView& s) {
  const Geometry& g = geometry(s);
  const CellField& t = s.snapshot.temperature;
  const double middle = (g.shell().lateral_begin + g.shell().lateral_end) / 2;
  Line lateral, row, line;
  for (int j = 0; j < g.lateral_cells(); ++j) lateral.push_back(g.cell_lateral(j));
  for (int i = 0; i < g.radial_cells(); ++i) {
    row.clear();
    for (int j = 0; j < g.lateral_cells(); ++j) row.push_back(t[{i, j}]);
    line.push_back(interpolated(lateral, row, middle));
  }
  return line;
}

/// Turning point of the midline furthest in `sign` between two heights.
TurningPoint midline_extremum(const SteadyView& s, int sign, double from, double to) {
  const Geometry& g = geometry(s);
  const Line line = midline(s);
  Line height, value;
  for (int i = 0; i < g.radial_cells(); ++i) {
    const double z = g.cell_radius(i) - g.inner_radius();
    if (z < from || z > to) continue;
    height.push_back(z);
    value.push_back(line[static_cast<std::size_t>(i)]);
  }
  return extremum(height, value, sign);
}

TurningPoint inner_minimum(const SteadyView& s) { return midline_extremum(s, -1, 0, 0.5); }
TurningPoint outer_maximum(const SteadyView& s) { return midline_extremum(s, 1, 0.5, 1); }

/// sign * ln(viscosity), line by line from the inner wall to the outer one; each line with its
/// ends.
std::vector<Line> log_viscosity(const SteadyView& s, int sign) {
  const Geometry& g = geometry(s);
  const CellField& eta = s.snapshot.viscosity;
  Line height, lateral;
  for (int i = 0; i < g.radial_cells(); ++i) height.push_back(g.cell_radius(i));
  for (int j = 0; j < g.lateral_cells(); ++j) lateral.push_back(g.cell_lateral(j));
  std::vector<Line> rows;
  for (int i = 0; i < g.radial_cells(); ++i) {
    Line row;
    for (int j = 0; j < g.lateral_cells(); ++j) row.push_back(sign * std::log(eta[{i, j}]));
    if (g.shell().sides == Sides::Reflecting) {
      const double left = at_left(s, lateral, row), right = at_right(s, lateral, row);
      row.insert(row.begin(), left);
      row.push_back(right);
    }
    rows.push_back(row);
  }
  Line inner, outer, column;
  for (std::size_t j = 0; j < rows.front().size(); ++j) {
    column.clear();
    for (const Line& row : rows) column.push_back(row[j]);
    inner.push_back(interpolated(height, column, g.inner_radius()));
    outer.push_back(interpolated(height, column, g.outer_radius()));
  }
  rows.insert(rows.begin(), inner);
  rows.push_back(outer);
  return rows;
}

double highest(const std::vector<Line>& lines) {
  double most = lines.front().front();
  for (const Line& line : lines) most = std::max(most, *std::max_element(line.begin(), line.end()));
  return most;
}

using Quantity = double (*)(const SteadyView&);

template <double HistoryRow::*member>
double from_row(const SteadyView& s) {
  return s.row.*member;
}

const std::map<std::string, Quantity>& table() {
  static const std::map<std::string, Quantity> quantities{
      {"heat_flow_inner", from_row<&HistoryRow::heat_flow_inner>},
      {"heat_flow_outer", from_row<&HistoryRow::heat_flow_outer>},
      {"nusselt_inner", from_row<&HistoryRow::nusselt_inner>},
      {"nusselt_outer", from_row<&HistoryRow::nusselt_outer>},
      {"temperature_mean", from_row<&HistoryRow::temperature_mean>},
      {"temperature_inner", from_row<&HistoryRow::temperature_inner>},
      {"temperature_outer", from_row<&HistoryRow::temperature_outer>},
      {"velocity_rms", from_row<&HistoryRow::velocity_rms>},
      {"velocity_rms_inner", from_row<&HistoryRow::velocity_rms_inner>},
      {"velocity_rms_outer", from_row<&HistoryRow::velocity_rms_outer>},
      {"dissipation", from_row<&HistoryRow::dissipation>},
      {"buoyancy_work", from_row<&HistoryRow::buoyancy_work>},
      {"flux_top_left", flux_top_left},
      {"flux_top_right", flux_top_right},
      {"flux_bottom_left", flux_bottom_left},
      {"flux_bottom_right", flux_bottom_right},
      {"stress_top_left", stress_top_left},
      {"stress_top_right", stress_top_right},
      {"midline_minimum", midline_minimum},
      {"midline_minimum_height", midline_minimum_height},
      {"midline_maximum", midline_maximum},
      {"midline_maximum_height", midline_maximum_height},
      {"surface_speed_max", surface_speed_max},
      {"surface_flux_mean", surface_flux_mean},
      {"dissipation_mean", dissipation_mean},
      {"work_over_rayleigh", work_over_rayleigh},
      {"dissipation_over_rayleigh", dissipation_over_rayleigh},
      {"viscosity_min", viscosity_min},
      {"viscosity_max", viscosity_max},
      {"dissipation_heating", dissipation_heating},
      {"adiabatic_cooling", adiabatic_cooling},
  };
  return quantities;
}

}  // namespace

double flux_top_left(const SteadyView& s) {
  return at_left(s, s.snapshot.outer.lateral, s.snapshot.outer.heat_flux);
}
double flux_top_right(const SteadyView& s) {
  return at_right(s, s.snapshot.outer.lateral, s.snapshot.outer.heat_flux);
}
double flux_bottom_left(const SteadyView& s) {
  return at_left(s, s.snapshot.inner.lateral, s.snapshot.inner.heat_flux);
}
double flux_bottom_right(const SteadyView& s) {
  return at_right(s, s.snapshot.inner.lateral, s.snapshot.inner.heat_flux);
}
double stress_top_left(const SteadyView& s) {
  return at_left(s, s.snapshot.outer.lateral, s.snapshot.outer.normal_stress);
}
double stress_top_right(const SteadyView& s) {
  return at_right(s, s.snapshot.outer.lateral, s.snapshot.outer.normal_stress);
}

double midline_minimum(const SteadyView& s) { return inner_minimum(s).value; }
double midline_minimum_height(const SteadyView& s) { return inner_minimum(s).place; }
double midline_maximum(const SteadyView& s) { return outer_maximum(s).value; }
double midline_maximum_height(const SteadyView& s) { return outer_maximum(s).place; }

double surface_speed_max(const SteadyView& s) {
  Line speed;
  for (const double v : s.snapshot.outer.velocity) speed.push_back(std::abs(v));
  return extremum(s.snapshot.outer.lateral, speed, 1).value;
}
double surface_flux_mean(const SteadyView& s) {
  const Geometry& g = geometry(s);
  return s.row.heat_flow_outer / g.wall_area(g.radial_cells());
}
double dissipation_mean(const SteadyView& s) {
  return s.row.dissipation / geometry(s).total_volume();
}
double work_over_rayleigh(const SteadyView& s) {
  return s.row.buoyancy_work / (s.model.rayleigh * geometry(s).total_volume());
}
double dissipation_over_rayleigh(const SteadyView& s) {
  return s.row.dissipation / (s.model.rayleigh * geometry(s).total_volume());
}

double viscosity_min(const SteadyView& s) { return std::exp(-highest(log_viscosity(s, -1))); }
double viscosity_max(const SteadyView& s) { return std::exp(highest(log_viscosity(s, 1))); }

double dissipation_heating(const SteadyView& s) {
  return s.row.viscous_heating / geometry(s).total_volume();
}
double adiabatic_cooling(const SteadyView& s) {
  return s.row.adiabatic_cooling / geometry(s).total_volume();
}

std::optional<double> steady_quantity(const std::string& name, const SteadyView& s) {
  const auto found = table().find(name);
  return found == table().end() ? std::nullopt : std::optional(found->second(s));
}

const std::vector<std::string>& steady_quantity_names() {
  static const std::vector<std::string> names = [] {
    std::vector<std::string> all;
    for (const auto& [name, quantity] : table()) all.push_back(name);
    return all;
  }();
  return names;
}

}  // namespace lidwright
