#include "solver/initial.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>
#include <stdexcept>

#include "tests/support/marches.hpp"
#include "tests/support/observed_order.hpp"
#include "tests/support/shells.hpp"

namespace lidwright {
namespace {

using std::numbers::pi;

const Shell circle{Shape::Annulus, 1.2, 0, 2 * pi, Sides::Periodic};
const Shell sector{Shape::Annulus, 1.2, 0.5, 1.5, Sides::Reflecting};

CellField start(const Shell& shell, const Grid& grid, const InitialSettings& settings,
                const StoredTemperature& stored = {}) {
  return initial_temperature(HeatOperator(decompose(shell, grid), {}, {}, HeatFlux::Limited),
                             settings, stored);
}

TEST(InitialModes, AreHalfWavesBetweenSides) {
  InitialSettings with, without;
  with.modes = {{2, 1, 0.3}, {1, 2, 0.1}};
  const Grid grid{6, 8, {}, {}};
  const CellField a = start(sector, grid, with), b = start(sector, grid, without);
  // Middle of cell (1, 2): height 1.5/6, lateral 2.5/8 of the sector.
  const double expected = 0.3 * std::sin(pi * 0.25) * std::cos(2 * pi * 2.5 / 8) +
                          0.1 * std::sin(2 * pi * 0.25) * std::cos(pi * 2.5 / 8);
  EXPECT_NEAR((a[{1, 2}] - b[{1, 2}]), expected, 1e-15);
}

TEST(InitialModes, AreWholeWavesRoundACircle) {
  InitialSettings with, without;
  with.modes = {{3, 1, 0.3}};
  const Grid grid{6, 8, {}, {}};
  const CellField a = start(circle, grid, with), b = start(circle, grid, without);
  EXPECT_NEAR((a[{1, 2}] - b[{1, 2}]), 0.3 * std::sin(pi * 0.25) * std::cos(3 * 2 * pi * 2.5 / 8),
              1e-15);
}

TEST(InitialNoise, IsUniformAndFollowsTheSeed) {
  InitialSettings none, noisy, other;
  noisy.noise = other.noise = 0.1;
  other.seed = 2;
  const Grid grid{40, 60, {}, {}};
  const CellField a = start(circle, grid, noisy), b = start(circle, grid, none),
                  c = start(circle, grid, other), again = start(circle, grid, noisy);
  double mean = 0, square = 0, most = 0;
  long same = 0;
  for_each_owned<At::Cell>(a.decomposition(), [&](Cell at) {
    const double x = a[at] - b[at];
    mean += x / 2400;
    square += x * x / 2400;
    most = std::max(most, std::abs(x));
    same += a[at] == c[at];
  });
  EXPECT_LE(most, 0.1);
  EXPECT_GT(most, 0.099);
  EXPECT_NEAR(mean, 0, 4 * 0.1 / std::sqrt(3.0 * 2400));  // four standard deviations
  EXPECT_NEAR(square, 0.01 / 3, 0.01 / 3 * 0.1);          // variance of a uniform number
  EXPECT_EQ(same, 0);
  EXPECT_EQ(a.values(), again.values());
}

TEST(InitialBoundaryLayers, JoinTheWallsToTheInterior) {
  InitialSettings s;
  s.base = InitialBase::BoundaryLayers;
  s.interior = 0.7;
  s.layer_thickness = 0.05;
  const CellField t = start(circle, {200, 8, {}, {}}, s);
  EXPECT_NEAR((t[{100, 0}]), 0.7, 1e-12);
  // erfc(0.0025 / 0.05) half a cell from the walls at 1 and 0.
  EXPECT_NEAR((t[{0, 3}]), 0.7 + 0.3 * std::erfc(0.05), 1e-12);
  EXPECT_NEAR((t[{199, 3}]), 0.7 - 0.7 * std::erfc(0.05), 1e-12);
}

double known(const Shell& s, double radius, double lateral) {
  const double turn = 2 * pi / (s.lateral_end - s.lateral_begin);
  return std::sin(2 * (radius - s.inner_radius)) *
         (2 + std::cos(turn * (lateral - s.lateral_begin)));
}

StoredTemperature stored_on(const Shell& shell, const Grid& grid) {
  const Geometry g(shell, grid);
  StoredTemperature s;
  s.shell = shell;
  for (int i = 0; i <= grid.radial; ++i) s.face_radius.push_back(g.face_radius(i));
  for (int j = 0; j <= grid.lateral; ++j) s.face_lateral.push_back(g.face_lateral(j));
  for (int j = 0; j < grid.lateral; ++j)
    for (int i = 0; i < grid.radial; ++i)
      s.values.push_back(known(shell, g.cell_radius(i), g.cell_lateral(j)));
  return s;
}

double interpolation_error(const Shell& shell, int n) {
  const CellField t =
      start(shell, {3 * n / 4, 5 * n / 2, {}, {}}, {}, stored_on(shell, {n, 2 * n, {1.5, 1}, {}}));
  const Geometry& g = t.decomposition().geometry();
  double sum = 0;
  for_each_owned<At::Cell>(t.decomposition(), [&](Cell c) {
    sum += g.volume(c) * std::pow(t[c] - known(shell, g.cell_radius(c.i), g.cell_lateral(c.j)), 2);
  });
  return std::sqrt(sum / g.total_volume());
}

TEST(StoredStart, OfAnotherMeshIsInterpolatedToSecondOrder) {
  for (const Shell& shell : {circle, sector})
    EXPECT_NEAR(observed_order(interpolation_error(shell, 32), interpolation_error(shell, 64)), 2,
                0.1);
}

TEST(StoredStart, OfTheSameMeshIsCopied) {
  const Grid grid{8, 12, {2, 1}, {}};
  const StoredTemperature s = stored_on(circle, grid);
  const CellField t = start(circle, grid, {}, s);
  for_each_owned<At::Cell>(t.decomposition(), [&](Cell c) {
    EXPECT_EQ(t[c], s.values.at(static_cast<std::size_t>(c.j * 8 + c.i)));
  });
}

TEST(StoredStart, OfAnotherRegionIsRefused) {
  const Grid grid{8, 12, {}, {}};
  EXPECT_THROW(start(sector, grid, {}, stored_on(circle, grid)), std::invalid_argument);
}

class ConductiveStart : public testing::TestWithParam<NamedShell> {};

/// The discrete conductive profile is a steady state of the discrete equations.
TEST_P(ConductiveStart, StaysPut) {
  Model m;
  m.shell = GetParam().shell;
  m.grid = GetParam().grid;
  m.rayleigh = 100;  // below onset, so that round-off does not grow
  m.heat.uniform = 2;
  March march(m, {}, {}, {}, equal_steps(0.01, HeatFlux::Limited), PETSC_COMM_SELF);
  const CellField before = march.temperature();
  for (int n = 0; n < 10; ++n) march.step(1);
  for_each_owned<At::Cell>(*march.decomposition(),
                           [&](Cell c) { EXPECT_NEAR(march.temperature()[c], before[c], 1e-12); });
  EXPECT_NEAR(march.row().velocity_rms, 0, 1e-10);
}

INSTANTIATE_TEST_SUITE_P(All, ConductiveStart, testing::ValuesIn(all_shells(8, 12)), shell_name);

}  // namespace
}  // namespace lidwright
