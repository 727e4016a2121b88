#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "solver/onset.hpp"
#include "tests/support/marches.hpp"
#include "tests/support/shells.hpp"

/// What `March` does with a neutral disturbance: it stays as it is, grows above the neutral
/// Rayleigh number and decays below. No published value is needed, so everything that a model may
/// hold takes part: density, expansivity, gravity, conductivity and heat capacity that vary,
/// dissipation, viscosity that varies with temperature and depth, sources, unlike walls.
namespace lidwright {
namespace {

using std::numbers::pi;

constexpr int cells = 24;

RadialProfile rising(double ratio) {
  RadialProfile p;
  p.rise = ratio;
  return p;
}

Model compressible(Shape shape) {
  Model m;
  const double inner = shape == Shape::Box ? 0 : 1.2;
  m.shell = {shape, inner, 0, shape == Shape::Box ? 1.1 : pi / 4, Sides::Reflecting};
  // The mesh on which the neutral mode is found.
  m.grid = {cells, shape == Shape::AxisymmetricShell ? 2 * cells : cells, {2, 3}, {}};
  m.walls.outer.slip = Slip::None;
  m.heat.uniform = 0.7;
  m.viscosity.exponential = ExponentialViscosity{50, 3, 0.5};
  m.reference.dissipation_number = 0.4;
  m.reference.surface_temperature = 0.2;
  m.reference.density = rising(1.6);
  m.reference.expansivity = rising(0.5);
  m.reference.gravity = rising(1.1);
  m.reference.conductivity = rising(2);
  m.reference.heat_capacity = rising(1.2);
  return m;
}

/// The conductive profile and 1e-6 of the disturbance.
StoredTemperature disturbed(const Model& m, const Snapshot& disturbance) {
  const Geometry& g = disturbance.temperature.decomposition().geometry();
  const HeatOperator heat(disturbance.temperature.decomposition_pointer(), m.walls, m.heat,
                          HeatFlux::Central, m.reference);
  const CellField rest = temperature_at_rest(heat);
  StoredTemperature s;
  s.shell = m.shell;
  for (int i = 0; i <= g.radial_cells(); ++i) s.face_radius.push_back(g.face_radius(i));
  for (int j = 0; j <= g.lateral_cells(); ++j) s.face_lateral.push_back(g.face_lateral(j));
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i)
      s.values.push_back(rest[{i, j}] + 1e-6 * disturbance.temperature[{i, j}]);
  return s;
}

double projection(const CellField& t, const Snapshot& disturbance) {
  const Geometry& g = t.decomposition().geometry();
  double sum = 0;
  for_each_owned<At::Cell>(t.decomposition(),
                           [&](Cell c) { sum += g.volume(c) * t[c] * disturbance.temperature[c]; });
  return sum;
}

/// Growth rate of the disturbance in a march that starts from it.
double growth(Model m, const Snapshot& disturbance, double rayleigh) {
  m.rayleigh = rayleigh;
  FlowSettings flow;
  flow.tolerance = 1e-10;
  March march(m, {}, disturbed(m, disturbance), flow, equal_steps(1e-3), PETSC_COMM_SELF);
  const HeatOperator& heat = march.heat();
  const double at_rest = projection(temperature_at_rest(heat), disturbance);
  const double before = projection(march.temperature(), disturbance) - at_rest;
  while (march.steps() < 20) march.step(1);
  return std::log((projection(march.temperature(), disturbance) - at_rest) / before) / march.time();
}

class OnsetGrowth : public testing::TestWithParam<Shape> {};

TEST_P(OnsetGrowth, ChangesSignAtTheNeutralRayleighNumber) {
  const Model m = compressible(GetParam());
  const NeutralShape shape = NeutralModes(m, cells)(1).value();
  const Snapshot disturbance = onset_snapshot(m, shape, PETSC_COMM_SELF);
  const double below = growth(m, disturbance, 0.95 * shape.rayleigh);
  const double at = growth(m, disturbance, shape.rayleigh);
  const double above = growth(m, disturbance, 1.05 * shape.rayleigh);
  EXPECT_LT(below, 0);
  EXPECT_GT(above, 0);
  EXPECT_LT(std::abs(at), 1e-3 * (above - below)) << below << " " << at << " " << above;
}

std::string shape_name(const testing::TestParamInfo<Shape>& info) {
  switch (info.param) {
    case Shape::Box:
      return "Box";
    case Shape::Annulus:
      return "Annulus";
    case Shape::SphericalAnnulus:
      return "SphericalAnnulus";
    case Shape::AxisymmetricShell:
      break;
  }
  return "AxisymmetricShell";
}

/// In the axisymmetric shell the neutral mode is neutral to fourth order only
/// (solver/lateral_mode.hpp).
INSTANTIATE_TEST_SUITE_P(Shape, OnsetGrowth,
                         testing::Values(Shape::Box, Shape::Annulus, Shape::SphericalAnnulus,
                                         Shape::AxisymmetricShell),
                         shape_name);

/// The flow that belongs to the disturbance: the march's own, to second order in the lateral cell,
/// as box and annuli get the exact cosine on the case's mesh.
TEST(OnsetSnapshot, HoldsTheFlowOfItsTemperature) {
  Model m = compressible(Shape::Annulus);
  const NeutralShape shape = NeutralModes(m, cells)(1).value();
  const Snapshot s = onset_snapshot(m, shape, PETSC_COMM_SELF);
  m.rayleigh = shape.rayleigh;
  FlowSettings flow;
  flow.tolerance = 1e-10;
  const March march(m, {}, disturbed(m, s), flow, equal_steps(1e-3), PETSC_COMM_SELF);
  double largest = 0, difference = 0, hottest = 0;
  for_each_owned<At::Corner>(*march.decomposition(), [&](Corner k) {
    largest = std::max(largest, std::abs(s.stream_function[k]));
    difference =
        std::max(difference, std::abs(march.stream_function()[k] * 1e6 - s.stream_function[k]));
  });
  for_each_owned<At::Cell>(*march.decomposition(), [&](Cell c) {
    hottest = std::max(hottest, std::abs(s.temperature[c]));
  });
  EXPECT_GT(largest, 0.1);
  EXPECT_LT(difference, 1e-3 * largest);
  EXPECT_NEAR(hottest, 1, 1e-12);
}

}  // namespace
}  // namespace lidwright
