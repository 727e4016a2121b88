#include <gtest/gtest.h>

#include <cmath>

#include "tests/support/marches.hpp"
#include "tests/support/shells.hpp"

/// The budgets as a march reports them: graded meshes, viscosity contrast
/// 1e8, one wall gripping, internal heat.
namespace lidwright {
namespace {

class MarchBudgets : public testing::TestWithParam<NamedShell> {};

TEST_P(MarchBudgets, CloseEveryStep) {
  Model m;
  m.shell = GetParam().shell;
  m.grid = GetParam().grid;
  m.walls.inner.slip = Slip::None;
  m.rayleigh = 1e6;
  m.viscosity.exponential = ExponentialViscosity{1e8, 1, 1};
  m.heat.uniform = 1;
  InitialSettings initial;
  initial.noise = 0.1;
  FlowSettings flow;
  flow.tolerance = 1e-6;
  March march(m, initial, {}, flow, equal_steps(1e-3, HeatFlux::Limited), PETSC_COMM_SELF);
  for (int n = 0; n < 20; ++n) {
    march.step(1);
    const HistoryRow row = march.row();
    // Content over what a step feeds is below 1 / (1e-3 * heat flow) = 1000: 1e-16 of the content
    // is 1e-13 of the largest term.
    EXPECT_NEAR(row.heat_budget_residual, 0, 1e-12) << "step " << n;
    // To the tolerance squared, and round-off of sums whose terms cancel.
    EXPECT_NEAR(row.work_mismatch, 0, 1e-12) << "step " << n;
    EXPECT_GT(row.buoyancy_work, 0);
  }
}

/// All profiles vary, heat capacity too. Viscous heating is adiabatic cooling whatever they are.
TEST_P(MarchBudgets, CloseEveryStepOfACompressibleMantle) {
  Model m;
  m.shell = GetParam().shell;
  m.grid = GetParam().grid;
  m.walls.inner.slip = Slip::None;
  m.rayleigh = 1e5;
  m.viscosity.exponential = ExponentialViscosity{1e3, 10, 0.5};
  m.heat.uniform = 1;
  m.reference.dissipation_number = 0.8;
  m.reference.surface_temperature = 0.2;
  m.reference.density.rise = 2;
  m.reference.expansivity.rise = 0.4;
  m.reference.gravity.rise = 1.1;
  m.reference.conductivity.rise = 3;
  m.reference.heat_capacity.rise = 1.3;
  InitialSettings initial;
  initial.noise = 0.1;
  FlowSettings flow;
  flow.tolerance = 1e-6;
  March march(m, initial, {}, flow, equal_steps(1e-4, HeatFlux::Limited), PETSC_COMM_SELF);
  for (int n = 0; n < 20; ++n) {
    march.step(1);
    const HistoryRow row = march.row();
    EXPECT_NEAR(row.heat_budget_residual, 0, 1e-11) << "step " << n;
    EXPECT_NEAR(row.work_mismatch, 0, 1e-12) << "step " << n;
    EXPECT_NEAR(row.viscous_heating / row.adiabatic_cooling, 1, 1e-11) << "step " << n;
    EXPECT_GT(row.viscous_heating, 0);
  }
}

INSTANTIATE_TEST_SUITE_P(All, MarchBudgets, testing::ValuesIn(all_shells(12, 16)), shell_name);

}  // namespace
}  // namespace lidwright
