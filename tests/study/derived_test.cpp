#include "study/derived.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "tests/support/mantles.hpp"

namespace lidwright {
namespace {

DerivedNumbers numbers(const Model& m) { return derived_numbers(m, at_rest(m, MPI_COMM_SELF)); }

TEST(Derived, RayleighNumbersByHand) {
  // eta = 1000^-(T - 1/2): sqrt(1000) at the outer wall, 1/sqrt(1000) at the inner.
  Model m = box_heated_below();
  m.rayleigh = 1e5;
  m.viscosity.exponential = ExponentialViscosity{1000, 1, 0.5};
  const DerivedNumbers n = numbers(m);
  EXPECT_DOUBLE_EQ(n.reference, 1e5);
  EXPECT_NEAR(n.outer, 3162.2776601683795, 1e-8);
  EXPECT_NEAR(n.inner / 3162277.6601683795, 1, 1e-12);
  EXPECT_NEAR(n.half, 1e5, 1e-6);
  EXPECT_NEAR(n.at_rest, 1e5, 1e-6);  // ln(eta) is odd about mid-depth
  EXPECT_NEAR(n.thermal_contrast, 1000, 1e-9);
  EXPECT_NEAR(n.wall_contrast, 1000, 1e-9);
  EXPECT_DOUBLE_EQ(n.depth_contrast, 1);
  EXPECT_NEAR(n.theta, 6.907755278982137, 1e-12);
  EXPECT_NEAR(n.frank_kamenetskii, 6.907755278982137, 1e-12);
  EXPECT_TRUE(std::isnan(n.internal));
}

TEST(Derived, DepthCountsInTheWallsContrast) {
  // 1000 by temperature; by depth 10 times stiffer below: 100 from wall to wall.
  Model m = box_heated_below();
  m.viscosity.exponential = ExponentialViscosity{1000, 10, 0.5};
  const DerivedNumbers n = numbers(m);
  EXPECT_NEAR(n.thermal_contrast, 1000, 1e-9);
  EXPECT_NEAR(n.wall_contrast, 100, 1e-10);
  EXPECT_NEAR(n.depth_contrast, 10, 1e-12);
}

TEST(Derived, InternalRayleighNumberIsRaTimesTheMeanSource) {
  Model m = box_heated_below();
  m.rayleigh = 1e5;
  m.heat.uniform = 4;
  m.heat.layers = {{0.5, 8}};
  EXPECT_NEAR(numbers(m).internal, 6e5, 1e-6);
}

TEST(Derived, HeatAtRestWithSources) {
  // T = z (1 - z) H/2 + (1 - z): with H = 4, dT/dz is 1 at the bottom, so 1 flows in downwards.
  Model m = box_heated_below();
  m.heat.uniform = 4;
  m.grid.radial = 64;
  const AtRest rest = at_rest(m, MPI_COMM_SELF);
  EXPECT_NEAR(rest.heat_flow_outer, 3, 1e-3);
  EXPECT_NEAR(rest.heat_flow_inner, -1, 1e-3);
  EXPECT_NEAR(rest.source, 4, 1e-12);
  EXPECT_NEAR(rest.mean, 0.5 + 4.0 / 12, 1e-3);
  EXPECT_NEAR(rest.hottest, 1.125, 1e-3);  // at z = 1/4 above the bottom
}

TEST(Derived, ConductiveFlowOfAnAnnulus) {
  // 2 pi/ln(r_o/r_i), r_o/r_i = 2.
  Model m = box_heated_below();
  m.shell = {Shape::Annulus, 1, 0, 2 * std::numbers::pi, Sides::Periodic};
  EXPECT_NEAR(numbers(m).conductive_flow, 2 * std::numbers::pi / std::log(2.0), 1e-12);
}

TEST(Derived, AdiabaticRiseByHand) {
  Model m = box_heated_below();
  m.reference.dissipation_number = 0.5;
  m.reference.surface_temperature = 0.2;
  m.grid.radial = 8;  // to the wall, not to the middle of the lowest cell
  const DerivedNumbers n = numbers(m);
  EXPECT_NEAR(n.adiabatic_rise, std::exp(0.5), 1e-12);
  EXPECT_NEAR(n.adiabatic_drop, 0.7 * (std::exp(0.5) - 1), 1e-12);
}

TEST(Derived, CellsWithinADistance) {
  const Geometry g(Shell{Shape::Box, 0, 0, 1, Sides::Reflecting}, Grid{10, 4, {}, {}});
  EXPECT_NEAR(cells_within(g, 0.25, true), 2.5, 1e-12);
  EXPECT_NEAR(cells_within(g, 0.25, false), 2.5, 1e-12);
  EXPECT_DOUBLE_EQ(cells_within(g, 2, true), 10);
  const Geometry graded(Shell{Shape::Box, 0, 0, 1, Sides::Reflecting}, Grid{10, 4, {4, 1}, {}});
  EXPECT_GT(cells_within(graded, 0.25, false), 4);
}

}  // namespace
}  // namespace lidwright
