#pragma once

#include <vector>

#include "solver/march.hpp"

namespace lidwright {

/// Settings for a march with equal steps of `dt`, whatever the error.
inline HeatSettings equal_steps(double dt, HeatFlux flux = HeatFlux::Central) {
  HeatSettings s;
  s.flux = flux;
  s.courant = 1;
  s.accuracy = 1;
  s.first_step = s.largest_step = dt;
  return s;
}

/// Marches until the temperature changes more slowly than `rate`. Throws std::runtime_error when
/// that takes more than `most_steps`.
inline void march_to_steady(March& march, double rate, long most_steps) {
  while (march.temperature_change_rate() > rate) {
    if (march.steps() == most_steps) throw std::runtime_error("not steady");
    march.step(1e9);
  }
}

/// Numbers of a row that do not depend on the way to the result.
inline std::vector<double> physics_of(const HistoryRow& r) {
  return {r.time,
          r.time_step,
          r.heat_flow_inner,
          r.heat_flow_outer,
          r.nusselt_inner,
          r.nusselt_outer,
          r.temperature_mean,
          r.temperature_min,
          r.temperature_max,
          r.temperature_inner,
          r.temperature_outer,
          r.velocity_rms,
          r.velocity_rms_inner,
          r.velocity_rms_outer,
          r.dissipation,
          r.buoyancy_work,
          r.heat_source,
          r.viscous_heating,
          r.adiabatic_cooling,
          r.temperature_change_rate};
}

}  // namespace lidwright
