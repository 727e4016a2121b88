#include "study/quantities.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "tests/support/observed_order.hpp"
#include "tests/support/shells.hpp"

/// Quantities of a made-up smooth state, whose values are known.
namespace lidwright {
namespace {

using std::numbers::pi;

const Shell box{Shape::Box, 0, 0, 2, Sides::Reflecting};

double temperature(double x, double z) {
  return 1 - z + 0.3 * std::cos(pi * x) * std::sin(2 * pi * z);
}

/// On a graded mesh, with the temperature above; traces are functions even about the sides.
struct MadeUp {
  explicit MadeUp(int cells) {
    model.shell = box;
    model.grid = {cells, 2 * cells, {2, 3}, {2, 1}};
    const auto d = decompose(box, model.grid);
    const Geometry& g = d->geometry();
    snapshot.temperature = CellField(d);
    snapshot.velocity_radial = CellField(d);
    snapshot.viscosity = CellField(d);
    fill(snapshot.viscosity, [&](Cell c) {
      return std::exp(2 * g.cell_radius(c.i) + std::cos(pi * g.cell_lateral(c.j) / 2));
    });
    fill(snapshot.temperature,
         [&](Cell c) { return temperature(g.cell_lateral(c.j), g.cell_radius(c.i)); });
    fill(snapshot.velocity_radial, [&](Cell c) { return std::cos(pi * g.cell_lateral(c.j)); });
    for (int j = 0; j < g.lateral_cells(); ++j) {
      const double x = g.cell_lateral(j);
      for (WallTrace* wall : {&snapshot.inner, &snapshot.outer}) {
        wall->lateral.push_back(x);
        wall->heat_flux.push_back(3 + std::cos(pi * x / 2));
        wall->velocity.push_back(-2 * std::sin(pi * x / 2));
        wall->normal_stress.push_back(5 * std::cos(pi * x / 2));
      }
    }
    row.heat_flow_outer = 6;
    row.dissipation = 8;
    row.buoyancy_work = 6;
    model.rayleigh = 100;
  }
  double operator()(const std::string& name) const {
    return steady_quantity(name, {model, row, snapshot}).value();
  }
  Model model;
  HistoryRow row;
  Snapshot snapshot;
};

TEST(Quantities, ReadTheCornersOfTraces) {
  const MadeUp s(32);
  EXPECT_NEAR(s("flux_top_left"), 4, 1e-8);
  EXPECT_NEAR(s("flux_bottom_right"), 2, 1e-7);
  EXPECT_NEAR(s("stress_top_left"), 5, 1e-8);
  EXPECT_NEAR(s("stress_top_right"), -5, 1e-7);
}

TEST(Quantities, FindTheLargestSurfaceSpeed) {
  EXPECT_NEAR(MadeUp(32)("surface_speed_max"), 2, 1e-7);
}

/// At x = 1 the temperature is 1 - z - 0.3 sin(2 pi z), which turns where cos(2 pi z) = -1/(0.6
/// pi).
TEST(Quantities, FindTheTurningPointsOfTheMidline) {
  const double low = std::acos(-1 / (0.6 * pi)) / (2 * pi);
  const MadeUp s(64);
  EXPECT_NEAR(s("midline_minimum_height"), low, 1e-5);
  EXPECT_NEAR(s("midline_minimum"), temperature(1, low), 1e-6);
  EXPECT_NEAR(s("midline_maximum_height"), 1 - low, 1e-5);
  EXPECT_NEAR(s("midline_maximum"), temperature(1, 1 - low), 1e-6);
}

TEST(Quantities, AreMeansOverTheShell) {
  MadeUp s(16);
  EXPECT_NEAR(s("surface_flux_mean"), 3, 1e-14);
  EXPECT_NEAR(s("dissipation_mean"), 4, 1e-14);
  EXPECT_NEAR(s("work_over_rayleigh"), 0.03, 1e-16);
  EXPECT_NEAR(s("dissipation_over_rayleigh"), 0.04, 1e-16);
  s.row.viscous_heating = 3;
  s.row.adiabatic_cooling = 5;
  EXPECT_NEAR(s("dissipation_heating"), 1.5, 1e-14);
  EXPECT_NEAR(s("adiabatic_cooling"), 2.5, 1e-14);
}

/// exp(2 z + cos(pi x/2)) has its extremes in corners, which no cell reaches.
TEST(Quantities, FindTheExtremesOfViscosityInTheCorners) {
  const MadeUp s(32);
  EXPECT_NEAR(s("viscosity_min"), std::exp(-1), 1e-7);
  EXPECT_NEAR(s("viscosity_max"), std::exp(3), 1e-5);
}

TEST(Quantities, KnowTheirNames) {
  const MadeUp s(16);
  for (const std::string& name : steady_quantity_names())
    EXPECT_TRUE(steady_quantity(name, {s.model, s.row, s.snapshot}).has_value()) << name;
  EXPECT_FALSE(steady_quantity("nusselt", {s.model, s.row, s.snapshot}).has_value());
}

}  // namespace
}  // namespace lidwright
