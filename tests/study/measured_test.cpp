#include "study/measured.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "solver/solve_error.hpp"

/// The engines on coarse grids; tests/benchmarks runs them all.
namespace lidwright {
namespace {

/// Case 1a of Blankenbach et al. (1989), GJI 98, 23-38.
Problem cell(int cells) {
  Problem p;
  p.model.shell = {Shape::Box, 0, 0, 1, Sides::Reflecting};
  p.model.grid = {cells, cells, {}, {}};
  p.model.rayleigh = 1e4;
  p.initial.modes = {{1, 1, 0.1}};
  return p;
}

TEST(Measured, SteadyStatesHaveErrorBarsOfThreeGrids) {
  const Measured m = measured(How::Settle, cell(32), 3, {"nusselt_outer", "velocity_rms"}, {});
  const ErrorBar& nusselt = m.bars.at("nusselt_outer");
  EXPECT_NEAR(nusselt.value, 4.884409, nusselt.half_width);  // published, tables 9-11, from memory
  EXPECT_NE(nusselt.convergence, Convergence::TwoGrids);
  EXPECT_EQ(m.end.radial_cells(), 32u);
  EXPECT_EQ(m.end.values.size(), 32u * 32u);
}

TEST(Measured, SteadyStatesMayStartFromAnother) {
  Problem p = cell(16);
  const Measured first = measured(How::Settle, p, 2, {"nusselt_outer"}, {});
  p.model.rayleigh = 1.1e4;
  p.initial.modes.clear();  // from conduction alone nothing would stir
  p.start = first.end;
  const Measured second = measured(How::Settle, p, 2, {"nusselt_outer"}, {});
  EXPECT_GT(second.bars.at("nusselt_outer").value, first.bars.at("nusselt_outer").value);
}

/// Marching and Newton's method have the same discrete steady states.
TEST(Measured, MarchesEndInTheSteadyStatesThatNewtonFinds) {
  Problem p = cell(16);
  p.flow.tolerance = 1e-9;
  p.heat.flux = HeatFlux::Central;
  p.march.end_time = 2;
  p.march.steady = 1e-4;
  const std::vector<std::string> wanted{"nusselt_outer", "velocity_rms", "surface_speed_max"};
  const Measured newton = measured(How::Settle, p, 2, wanted, {});
  const Measured marched = measured(How::Relax, p, 2, wanted, {});
  for (const std::string& name : wanted)
    EXPECT_NEAR(marched.bars.at(name).value / newton.bars.at(name).value, 1, 1e-5) << name;
  EXPECT_EQ(marched.end.radial_cells(), 16u);
}

/// Where a march ends early, its error bar says so: <T> is 1/2 on every grid, so that nothing else
/// is in the bar.
TEST(Measured, MarchesAllowForWhatTheyLackOfTheSteadyState) {
  Problem p = cell(16);
  p.initial.modes.push_back({0, 1, 0.1});  // too warm
  p.heat.flux = HeatFlux::Central;
  p.march.end_time = 2;
  p.march.steady = 0.1;
  const ErrorBar early = measured(How::Relax, p, 2, {"temperature_mean"}, {}).bars.begin()->second;
  EXPECT_NEAR(early.value, 0.5, early.half_width);
  p.march.steady = 1e-3;
  const ErrorBar late = measured(How::Relax, p, 2, {"temperature_mean"}, {}).bars.begin()->second;
  EXPECT_NEAR(late.value, 0.5, late.half_width);
  EXPECT_LT(late.half_width, 0.1 * early.half_width);
  EXPECT_GT(std::abs(early.value - 0.5), 1e-6);
}

TEST(Measured, MarchesMustBecomeSteadyInTime) {
  Problem p = cell(16);
  p.march.end_time = 0.01;
  p.march.steady = 1e-4;
  EXPECT_THROW(measured(How::Relax, p, 2, {"nusselt_outer"}, {}), SolveError);
}

TEST(Measured, OnsetIsThatOfLinearTheory) {
  Problem p = cell(32);
  p.model.shell.lateral_end = std::numbers::sqrt2;  // half a wave of the critical one
  const Measured m = measured(How::Onset, p, 3, {"rayleigh_critical", "rayleigh_mode_2"}, {});
  const double exact = 27 * std::pow(std::numbers::pi, 4) / 4;  // Chandrasekhar 1961, ch. II
  EXPECT_NEAR(m.bars.at("rayleigh_critical").value, exact, 1e-3 * exact);
  EXPECT_GT(m.bars.at("rayleigh_mode_2").value, exact);
}

TEST(Measured, StopsWhenAsked) {
  Watch watch;
  watch.stop = [] { return true; };
  EXPECT_THROW(measured(How::Settle, cell(32), 3, {"nusselt_outer"}, watch), Stopped);
  EXPECT_THROW(measured(How::Onset, cell(32), 3, {"rayleigh_mode_1"}, watch), Stopped);
  EXPECT_THROW(measured(How::Flow, cell(32), 2, {"velocity_rms"}, watch), Stopped);
  EXPECT_THROW(measured(How::March, cell(32), 2, {"period"}, watch), Stopped);
  EXPECT_THROW(measured(How::Relax, cell(32), 2, {"nusselt_outer"}, watch), Stopped);
}

TEST(Measured, KnowsWhatItMayBeAskedFor) {
  EXPECT_TRUE(measurable(How::Settle, "nusselt_outer"));
  EXPECT_FALSE(measurable(How::Settle, "period"));
  EXPECT_TRUE(measurable(How::March, "period"));
  EXPECT_TRUE(measurable(How::March, "beat"));
  EXPECT_TRUE(measurable(How::Relax, "viscosity_min"));
  EXPECT_FALSE(measurable(How::Relax, "period"));
  EXPECT_TRUE(measurable(How::Onset, "rayleigh_mode_12"));
  for (const char* wrong :
       {"rayleigh_mode_", "rayleigh_mode_0", "rayleigh_mode_x", "rayleigh_mode_1x"})
    EXPECT_FALSE(measurable(How::Onset, wrong)) << wrong;
}

}  // namespace
}  // namespace lidwright
