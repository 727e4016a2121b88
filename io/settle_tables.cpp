#include "io/settle_tables.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <array>
#include <cmath>
#include <iterator>

#include "io/csv.hpp"
#include "io/history.hpp"

namespace lidwright {
namespace {

/// Columns of the history that get an error bar.
constexpr std::array<std::string_view, 22> with_bars{"nusselt_outer",
                                                     "nusselt_inner",
                                                     "heat_flow_outer",
                                                     "heat_flow_inner",
                                                     "temperature_mean",
                                                     "temperature_inner",
                                                     "temperature_outer",
                                                     "velocity_rms",
                                                     "velocity_rms_outer",
                                                     "velocity_rms_inner",
                                                     "dissipation",
                                                     "viscous_heating",
                                                     "adiabatic_cooling",
                                                     "mobility",
                                                     "lid_thickness_velocity",
                                                     "lid_thickness_isotherm",
                                                     "lid_thickness_advection",
                                                     "lid_thickness_conduction",
                                                     "boundary_layer_inner",
                                                     "temperature_internal",
                                                     "rayleigh_internal",
                                                     "topography_rms_outer"};

/// By more than round-off.
bool differ(const std::vector<double>& values) {
  const auto [low, high] = std::minmax_element(values.begin(), values.end());
  return *high - *low > 1e-13 * std::max(std::abs(*low), std::abs(*high));
}

bool finite(const std::vector<double>& values) {
  return std::all_of(values.begin(), values.end(), [](double v) { return std::isfinite(v); });
}

std::vector<double> on_all_grids(const std::vector<SteadyState>& states, std::size_t column) {
  std::vector<double> values;
  for (const SteadyState& s : states) values.push_back(history_numbers(s.row)[column]);
  return values;
}

std::size_t history_column(std::string_view name) {
  const auto columns = history_columns();
  return static_cast<std::size_t>(std::find_if(columns.begin(), columns.end(),
                                               [&](const Column& c) { return c.name == name; }) -
                                  columns.begin());
}

}  // namespace

std::string newton_table(const std::vector<NewtonStep>& steps) {
  static constexpr std::array<Column, 6> columns{{
      {"radial", "1", "cells of the grid from wall to wall"},
      {"lateral", "1", "cells of the grid along the shell"},
      {"step", "1", "of Newton's method, 0 is its start; -1: a stretch of the march before it"},
      {"residual", "1",
       "root mean square of dT/dt, over heat flow through heat capacity of the shell"},
      {"pseudo_time", "d^2/kappa",
       "length of the step; inf: a full Newton step. Of a march, the time it has reached"},
      {"linear_iterations", "1", "of the linear solver"},
  }};
  std::string text = table_head("lidwright way to the steady state", columns);
  for (const NewtonStep& s : steps) {
    const std::array<double, 6> row{static_cast<double>(s.grid.radial),
                                    static_cast<double>(s.grid.lateral),
                                    static_cast<double>(s.step),
                                    s.residual,
                                    s.pseudo_time,
                                    static_cast<double>(s.linear_iterations)};
    text += table_row(row);
  }
  return text;
}

std::vector<QuantityBar> quantity_bars(const std::vector<SteadyState>& states, double floor) {
  std::vector<QuantityBar> bars;
  for (const std::string_view name : with_bars) {
    const std::size_t column = history_column(name);
    const std::vector<double> values = on_all_grids(states, column);
    if (!finite(values) || !differ(values)) continue;
    const Column& c = history_columns()[column];
    bars.push_back({std::string(c.name), std::string(c.unit), std::string(c.meaning), values,
                    error_bar(values, floor * std::abs(values.back()))});
  }
  return bars;
}

std::string error_bars_table(const std::vector<QuantityBar>& bars, const std::vector<Grid>& grids) {
  std::string text = fmt::format("# lidwright error bars of a steady state\n# {}\n", units_note);
  auto out = std::back_inserter(text);
  for (const QuantityBar& b : bars)
    fmt::format_to(out, "# {} [{}]: {}\n", b.name, b.unit, b.meaning);
  text +=
      "# value: extrapolated to cells of no size; half_width: of the error bar about it; order: "
      "observed order of convergence, nan: none\n"
      "# convergence: what the steps from grid to grid look like, see docs/settle.md\n"
      "quantity,unit";
  for (const Grid& g : grids) fmt::format_to(out, ",on_{}x{}", g.radial, g.lateral);
  text += ",value,half_width,order,convergence\n";
  for (const QuantityBar& b : bars) {
    fmt::format_to(out, "{},{}", b.name, b.unit);
    for (const double v : b.values) fmt::format_to(out, ",{}", v);
    fmt::format_to(out, ",{},{},{},{}\n", b.bar.value, b.bar.half_width, b.bar.order,
                   word(b.bar.convergence));
  }
  return text;
}

std::string growth_table(const StabilityVerdict& verdict) {
  static constexpr std::array<Column, 3> columns{{
      {"growth", "kappa/d^2", "a disturbance goes with exp(growth t) cos(frequency t)"},
      {"frequency", "kappa/d^2", "per radian; 0: it does not oscillate"},
      {"turning", "1", "1 for turning the whole pattern round the circle, which is neutral"},
  }};
  std::string text = table_head("lidwright growth of disturbances of a steady state", columns);
  for (std::size_t k = 0; k < verdict.rates.size(); ++k) {
    const GrowthRate& r = verdict.rates[k];
    text += table_row(std::array<double, 3>{r.growth, r.frequency,
                                            static_cast<int>(k) == verdict.turning ? 1.0 : 0.0});
  }
  return text;
}

}  // namespace lidwright
