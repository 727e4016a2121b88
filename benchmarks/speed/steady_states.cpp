/// What it takes to reach a steady state: `settle` against `march` from the same start to the same
/// rate of change, and one on a large grid. One JSON line a measurement on standard output; every
/// ratio compares numbers of this one run on this one machine. docs/performance.md says what was
/// found.
///
///     build/release/speed_steady_states [radial cells of the large grid, 256; 0: leave it out]
#include <fmt/format.h>

#include <cmath>
#include <cstdio>
#include <cstdlib>
#include <numbers>

#include "benchmarks/speed/measuring.hpp"
#include "mesh/session.hpp"
#include "solver/march.hpp"
#include "solver/settle.hpp"

namespace lidwright {
namespace {

struct Problem {
  const char* name;
  Model model;
  InitialSettings initial;
};

/// Case 1b of Blankenbach et al. (1989, GJI 98, 23).
Problem box() {
  Problem p{"box 1b", {}, {}};
  p.model.shell = {Shape::Box, 0, 0, 1, Sides::Reflecting};
  p.model.grid = {64, 64, {}, {}};
  p.model.rayleigh = 1e5;
  p.initial.modes = {{1, 1, 0.1}};
  return p;
}

/// Eight upwellings under a stagnant lid: contrast 1e5, Ra at the bottom viscosity.
Problem lid(int radial) {
  Problem p{"stagnant-lid shell", {}, {}};
  p.model.shell = {Shape::SphericalAnnulus, 0.55 / 0.45, 0, 2 * std::numbers::pi, Sides::Periodic};
  p.model.grid = {radial, 6 * radial, {}, {}};
  p.model.rayleigh = 3e6;
  p.model.viscosity.exponential = ExponentialViscosity{1e5, 1, 1};
  p.initial.base = InitialBase::BoundaryLayers;
  p.initial.interior = 0.8;
  p.initial.layer_thickness = 0.2;
  p.initial.modes = {{8, 1, 0.1}};
  return p;
}

SteadyState settled(const Problem& p) {
  const SettleSettings settings;
  return settle(p.model, p.initial, {}, settings, 1, PETSC_COMM_WORLD).back();
}

/// Marches until dT/dt is as small, relative to the heat that passes, as `residual`; gives up after
/// `most_seconds`, and says what rate that left.
void compare(const Problem& p, double residual, double most_seconds) {
  double start = now();
  const SteadyState state = settled(p);
  const double by_settle = now() - start;
  HeatSettings heat;
  heat.flux = HeatFlux::Central;  // as settle's, so that both end in one state
  FlowSettings flow;
  flow.tolerance = 1e-9;  // or the flow's error would keep the temperature moving
  start = now();
  March march(p.model, p.initial, {}, flow, heat, PETSC_COMM_WORLD);
  const double volume = march.power().geometry().total_volume();
  double reached = 1;
  while (reached > residual && now() - start < most_seconds) {
    for (int n = 0; n < 20; ++n) march.step(1e9);
    reached = march.temperature_change_rate() * volume / std::abs(march.row().heat_flow_outer);
  }
  const double by_march = now() - start;
  line(fmt::format(
      "\"measurement\": \"settle against march\", \"case\": \"{}\", \"radial\": {}, \"lateral\": "
      "{}, \"settle_seconds\": {:.3g}, \"settle_residual\": {:.1e}, \"march_seconds\": {:.4g}, "
      "\"march_steps\": {}, \"march_residual\": {:.1e}, \"ratio\": {:.3g}, \"nusselt_settle\": "
      "{:.8g}, \"nusselt_march\": {:.8g}",
      p.name, p.model.grid.radial, p.model.grid.lateral, by_settle, state.residual, by_march,
      march.steps(), reached, by_march / by_settle, state.row.nusselt_outer,
      march.row().nusselt_outer));
}

void large(int radial) {
  const double start = now();
  const SteadyState state = settled(lid(radial));
  line(fmt::format(
      "\"measurement\": \"large steady state\", \"radial\": {}, \"lateral\": {}, \"seconds\": "
      "{:.4g}, \"residual\": {:.1e}, \"peak_gigabytes\": {:.3g}, \"nusselt\": {:.8g}",
      radial, 6 * radial, now() - start, state.residual, peak_memory() / 1e9,
      state.row.nusselt_outer));
}

}  // namespace
}  // namespace lidwright

int main(int argc, char** argv) {
  const lidwright::Session session(argc, argv);
  lidwright::compare(lidwright::box(), 1e-10, 600);
  lidwright::compare(lidwright::lid(64), 1e-10, 900);
  const int radial = argc > 1 ? std::atoi(argv[1]) : 256;
  if (radial > 0) lidwright::large(radial);
}
