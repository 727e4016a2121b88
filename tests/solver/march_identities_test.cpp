#include <gtest/gtest.h>

#include <cmath>

#include "tests/support/marches.hpp"
#include "tests/support/shells.hpp"

/// The budgets of design.md, section 3, as a march reports them: graded meshes, viscosity contrast
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

INSTANTIATE_TEST_SUITE_P(All, MarchBudgets, testing::ValuesIn(all_shells(12, 16)), shell_name);

}  // namespace
}  // namespace lidwright
