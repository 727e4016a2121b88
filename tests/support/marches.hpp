#pragma once

#include <cmath>
#include <limits>
#include <vector>

#include "io/history.hpp"
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

/// Numbers of a row that do not depend on the way to the result: all but residuals of it and what
/// the solver spent. What is not defined (nan) is the largest number, so that it equals itself.
inline std::vector<double> physics_of(HistoryRow r) {
  r.step = r.applications = r.factorisations = r.flow_iterations = r.fixed_point_steps = 0;
  r.work_mismatch = r.flow_error = r.heat_budget_residual = r.wall_time = 0;
  std::vector<double> numbers = history_numbers(r);
  for (double& x : numbers)
    if (std::isnan(x)) x = std::numeric_limits<double>::max();
  return numbers;
}

}  // namespace lidwright
