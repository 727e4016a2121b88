#include "io/settle_tables.hpp"

#include <gmock/gmock.h>
#include <gtest/gtest.h>

#include <cmath>
#include <limits>

#include "io/branch_table.hpp"

namespace lidwright {
namespace {

using testing::HasSubstr;
using testing::Not;

SteadyState state(int cells, double nusselt) {
  SteadyState s;
  s.grid.radial = s.grid.lateral = cells;
  s.row.nusselt_outer = nusselt;
  s.row.temperature_inner = 1;
  s.row.nusselt_inner = std::numeric_limits<double>::quiet_NaN();
  return s;
}

TEST(SettleTables, BarsOfWhatDiffersBetweenGrids) {
  // Second order: 5 - 64/n^2.
  const std::vector<SteadyState> states{state(8, 4), state(16, 4.75), state(32, 4.9375)};
  const std::vector<QuantityBar> bars = quantity_bars(states, 1e-8);
  ASSERT_EQ(bars.size(), 1u);
  EXPECT_EQ(bars[0].name, "nusselt_outer");
  EXPECT_NEAR(bars[0].bar.value, 5, 1e-12);
  EXPECT_NEAR(bars[0].bar.order, 2, 1e-12);
  const std::string text = error_bars_table(bars, {states[0].grid, states[1].grid, states[2].grid});
  EXPECT_THAT(text, HasSubstr("quantity,unit,on_8x8,on_16x16,on_32x32,value,"));
  EXPECT_THAT(text, HasSubstr("\nnusselt_outer,1,4,4.75,4.9375,"));
}

TEST(SettleTables, NewtonSteps) {
  NewtonStep s;
  s.grid.radial = 8;
  s.grid.lateral = 16;
  s.step = 2;
  s.residual = 0.25;
  s.pseudo_time = std::numeric_limits<double>::infinity();
  s.linear_iterations = 3;
  EXPECT_THAT(newton_table({s}), HasSubstr("\n8,16,2,0.25,inf,3\n"));
}

TEST(SettleTables, BranchHasTheStatesColumnsOfTheHistory) {
  BranchRow row;
  row.parameter = 1e22;
  row.asked_for = true;
  row.snapshot = 4;
  const std::string text = branch_table({"body.reference_viscosity", "Pa s", true}, {row});
  EXPECT_THAT(text, HasSubstr("# parameter [Pa s]: body.reference_viscosity"));
  EXPECT_THAT(text, HasSubstr(",nusselt_outer,"));
  EXPECT_THAT(text, Not(HasSubstr("wall_time")));
  EXPECT_THAT(text, HasSubstr("\n1e+22,1,0,4,"));
  EXPECT_THAT(text, HasSubstr(",nan,nan\n"));
}

}  // namespace
}  // namespace lidwright
