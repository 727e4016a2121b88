#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "solver/solve_error.hpp"
#include "study/onset_curve.hpp"

/// How the critical mode is looked for. Free walls in the plane layer: Ra = (pi^2 + k^2)^3/k^2
/// (Rayleigh 1916).
namespace lidwright {
namespace {

using std::numbers::pi;

Model layer(double width, int radial = 32) {
  Model m;
  m.shell = {Shape::Box, 0, 0, width, Sides::Reflecting};
  m.grid.radial = radial;
  return m;
}

double rayleigh(double k) { return std::pow(pi * pi + k * k, 3) / (k * k); }

bool go_on(int) { return true; }

TEST(OnsetCurve, GoesOnUntilTheLeastIsPassed) {
  const OnsetCurve curve = onset_curve(layer(5), {}, go_on);
  EXPECT_EQ(curve.grids, (std::vector<int>{8, 16, 32}));
  EXPECT_TRUE(curve.bracketed);
  EXPECT_EQ(curve.least, 3) << "k = 4 pi/5, next to pi/sqrt 2";
  EXPECT_EQ(curve.shape.number, 4);
  const double last = curve.points.back().rayleigh.value;
  EXPECT_GT(last, 3 * curve.points[3].rayleigh.value);
  EXPECT_LT(curve.points[curve.points.size() - 2].rayleigh.value,
            3 * curve.points[3].rayleigh.value);
}

TEST(OnsetCurve, ErrorBarsHoldTheExactValues) {
  const OnsetCurve curve = onset_curve(layer(5), {}, go_on);
  for (const OnsetPoint& p : curve.points) {
    const double exact = rayleigh(p.wave.wavenumber);
    EXPECT_LT(std::abs(p.rayleigh.value - exact), p.rayleigh.half_width) << p.wave.number;
    EXPECT_NEAR(p.rayleigh.order, 2, 0.1) << p.wave.number;
  }
}

TEST(OnsetCurve, TakesTheModesAskedFor) {
  OnsetSettings settings;
  settings.first = 2;
  settings.last = 3;
  settings.error_bars = false;
  const OnsetCurve curve = onset_curve(layer(5), settings, go_on);
  ASSERT_EQ(curve.points.size(), 2U);
  EXPECT_EQ(curve.points[0].wave.number, 2);
  EXPECT_EQ(curve.points[0].rayleigh.half_width, 0);
  EXPECT_EQ(curve.points[0].rayleigh.value, curve.points[0].on_grids.back());
  EXPECT_EQ(curve.least, 1);
  EXPECT_FALSE(curve.bracketed) << "the least is the last one";
}

TEST(OnsetCurve, IsBracketedWhereTheLongestWaveIsCritical) {
  const OnsetCurve curve = onset_curve(layer(1), {}, go_on);
  EXPECT_EQ(curve.least, 0);
  EXPECT_TRUE(curve.bracketed);
}

TEST(OnsetCurve, StopsWhenTold) {
  const OnsetCurve curve = onset_curve(layer(5), {}, [](int number) { return number < 2; });
  EXPECT_TRUE(curve.interrupted);
  EXPECT_FALSE(curve.bracketed);
  EXPECT_EQ(curve.points.size(), 2U);
  EXPECT_EQ(curve.shape.number, 2);
}

TEST(OnsetCurve, EndsWhereNothingGrows) {
  Model m = layer(2);
  m.walls.inner.thermal = FixedTemperature{-1};
  int asked = 0;
  EXPECT_THROW(onset_curve(m, {},
                           [&](int) {
                             ++asked;
                             return true;
                           }),
               SolveError);
  EXPECT_LE(asked, 20);
}

}  // namespace
}  // namespace lidwright
