#include "solver/lid.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <functional>
#include <numbers>

#include "tests/support/observed_order.hpp"

/// What is read off profiles, on profiles whose answers are known.
namespace lidwright {
namespace {

using std::numbers::pi;

TEST(DepthProfile, IsReadBetweenItsPoints) {
  const std::vector<double> x{0, 1, 3}, y{2, 4, 0};
  EXPECT_EQ(value_at(x, y, 0.5), 3);
  EXPECT_EQ(value_at(x, y, 2.5), 1);
  EXPECT_EQ(value_at(x, y, 7), 0);
  EXPECT_EQ(first_rise(x, y, 3), 0.5);
  EXPECT_EQ(first_rise(x, y, 1), 0);
  EXPECT_TRUE(std::isnan(first_rise(x, y, 5)));
}

TEST(DepthProfile, MeansAreExactForStraightLines) {
  const std::vector<double> x{0, 1, 3}, y{2, 4, 0}, ones{1, 1, 1}, rising{0, 1, 3};
  // Trapezia: (3 + 4)/4 from 0.5 to 1 and (4 + 2)/2 from 1 to 2, over 1.5.
  EXPECT_NEAR(mean_between(x, y, ones, 0.5, 2), (3.5 / 2 + 3) / 1.5, 1e-15);
  // Integrals of x (2 + 2x) over (0, 1) and of x (6 - 2x) over (1, 3), over that of x.
  EXPECT_NEAR(mean_between(x, y, rising, 0, 3), (5.0 / 3 + 20.0 / 3) / 4.5, 1e-15);
  EXPECT_TRUE(std::isnan(mean_between(x, y, ones, 1, 1)));
}

using Curve = std::function<double(double)>;

/// Points in the middles of cells that narrow towards the outer wall, and both walls.
DepthProfile profile(int cells, const Curve& temperature, const Curve& speed = {}) {
  const auto graded = [](double s) { return s * (0.5 + 0.5 * s); };
  DepthProfile p;
  for (int k = -1; k <= cells; ++k) {
    const double z = k < 0 ? 0 : k == cells ? 1 : graded((k + 0.5) / cells);
    p.depth.push_back(z);
    p.area.push_back(std::pow(2.2 - z, 2));
    p.temperature.push_back(temperature(z));
    p.speed.push_back(speed ? speed(z) : 0);
    p.radial_speed.push_back(speed ? std::sin(pi * z) : 0);
    p.log_viscosity.push_back(-3 * temperature(z));
    p.heat_advected.push_back(0);
    p.heat_conducted.push_back(1);
  }
  return p;
}

double plateau(double z) { return z < 0.2 ? 4 * z : z < 0.9 ? 0.8 : 0.8 + 2 * (z - 0.9); }

TEST(LidInterior, IsThePlateauBetweenStraightLayers) {
  DepthProfile p;
  for (const double z : {0.0, 0.2, 0.6, 0.9, 1.0}) {
    p.depth.push_back(z);
    p.area.push_back(2.2 - z);
    p.temperature.push_back(plateau(z));
    p.log_viscosity.push_back(std::log(7.0));
  }
  const Interior i = interior(p, {4, 2});
  EXPECT_NEAR(i.temperature, 0.8, 1e-13);
  EXPECT_NEAR(i.begin, 0.2, 1e-13);
  EXPECT_NEAR(i.end, 0.9, 1e-13);
  EXPECT_NEAR(interior_viscosity(p, i), 7, 1e-12);
}

TEST(LidInterior, IsNotThereInPureConduction) {
  // Between T = 0 and 1 in the plane and in an annulus of radii 1.2 and 2.2.
  EXPECT_TRUE(std::isnan(interior(profile(20, [](double z) { return z; }), {1, 1}).temperature));
  const double fall = 1 / std::log(2.2 / 1.2);
  const DepthProfile p = profile(20, [&](double z) { return fall * std::log(2.2 / (2.2 - z)); });
  const Interior i = interior(p, {fall / 2.2, fall / 1.2});
  EXPECT_TRUE(std::isnan(i.temperature) && std::isnan(i.begin) && std::isnan(i.end));
  EXPECT_TRUE(std::isnan(interior_viscosity(p, i)));
  EXPECT_TRUE(std::isnan(interior_log_slope(ViscosityLaw{}, i)));
  EXPECT_TRUE(std::isnan(lid_thickness_isotherm(p, i, -5)));
}

/// An insulating wall has no layer; a hot interior has one at a wall that cools it.
TEST(LidInterior, LayersFollowTheSignOfTheFlow) {
  const DepthProfile p = profile(40, [](double z) { return std::min(1.0, 10 * z); });
  EXPECT_EQ(interior(p, {10, 0}).end, 1);
  const DepthProfile cooled = profile(400, [](double z) {
    return std::min({1.0, 10 * z, 1 - 2 * (z - 0.9)});
  });
  EXPECT_NEAR(interior(cooled, {10, -2}).end, 0.9, 1e-3);
}

/// Where a boundary layer of exponential shape stands on an isothermal interior of T = 1, the mean
/// between its tangent's end and the bottom is known.
TEST(LidInterior, IsFoundAtSecondOrder) {
  const double scale = 0.05;
  const auto t = [&](double z) { return 1 - std::exp(-z / scale); };
  const auto plane = [&](int cells) {
    DepthProfile p = profile(cells, t);
    std::fill(p.area.begin(), p.area.end(), 1.0);
    return interior(p, {1 / scale, 0}).temperature;
  };
  // T = 1 - scale (exp(-T) - exp(-1/scale)) / (1 - scale T) by fixed point.
  double exact = 1;
  for (int n = 0; n < 100; ++n)
    exact = 1 - scale * (std::exp(-exact) - std::exp(-1 / scale)) / (1 - scale * exact);
  EXPECT_NEAR(observed_order(plane(80) - exact, plane(160) - exact), 2, 0.15);
}

/// v = 1 + tanh((z - middle)/width): inflection in the middle, where v = 1 rises by 1/width.
double foot(int cells, double middle, double width) {
  const auto speed = [&](double z) { return 1 + std::tanh((z - middle) / width); };
  return lid_thickness_velocity(profile(
      cells, [](double z) { return z; }, speed));
}

TEST(LidThickness, ByVelocityIsTheFootOfTheTangent) {
  EXPECT_NEAR(foot(320, 0.31, 0.07), 0.24, 2e-5);
  // Errors at positions within a cell differ: the mean over many.
  const auto error = [](int cells) {
    double sum = 0;
    for (int n = 0; n < 50; ++n)
      sum += std::abs(foot(cells, 0.3 + 0.001 * n, 0.07) - (0.23 + 0.001 * n));
    return sum;
  };
  EXPECT_GT(observed_order(error(80), error(160)), 1.8);
}

TEST(LidThickness, ByVelocityMovesSmoothlyWithTheLid) {
  for (int n = 0; n < 200; ++n) {
    const double step = foot(100, 0.3 + 0.0005 * (n + 1), 0.07) - foot(100, 0.3 + 0.0005 * n, 0.07);
    EXPECT_NEAR(step, 0.0005, 2e-4) << n;
  }
}

TEST(LidThickness, ByVelocityIsZeroWhereTheSurfaceMovesAndNanAtRest) {
  const auto t = [](double z) { return z; };
  EXPECT_EQ(lid_thickness_velocity(profile(40, t, [](double z) { return std::cos(pi * z); })), 0);
  EXPECT_EQ(lid_thickness_velocity(profile(40, t, [](double z) { return 3 + std::sin(4 * z); })),
            0);
  EXPECT_TRUE(std::isnan(lid_thickness_velocity(profile(40, t))));
}

TEST(LidThickness, ByIsothermIsTheDepthOfOneTemperature) {
  // The drop of 2.2/11 below 0.9 leaves 0.7 = 1 - exp(-z/0.1).
  const auto depth = [](int cells) {
    const DepthProfile p = profile(cells, [](double z) { return 1 - std::exp(-z / 0.1); });
    return lid_thickness_isotherm(p, {0.9, 0.2, 1}, -11);
  };
  const double exact = -0.1 * std::log(0.3);
  EXPECT_NEAR(depth(200), exact, 2e-5);
  EXPECT_LT(std::abs(depth(200) - exact), 0.4 * std::abs(depth(100) - exact));
}

/// With Arrhenius' law the scale is (T + T0)^2/E = 1.21/12.1.
TEST(LidThickness, ByIsothermTakesTheSlopeOfTheLaw) {
  ViscosityLaw law;
  law.arrhenius = ArrheniusViscosity{12.1, 0, 0.2, 1, 0};
  const Interior i{0.9, 0.1, 1};
  EXPECT_NEAR(interior_log_slope(law, i), -10, 1e-13);
  const DepthProfile p = profile(50, [](double z) { return z; });
  EXPECT_NEAR(lid_thickness_isotherm(p, i, interior_log_slope(law, i)), 0.9 - 0.22, 1e-13);
}

TEST(LidThickness, ByIsothermIsZeroWhereNothingIsStiff) {
  const DepthProfile p = profile(50, [](double z) { return z; });
  EXPECT_EQ(lid_thickness_isotherm(p, {0.9, 0.1, 1}, 0), 0);
  EXPECT_EQ(lid_thickness_isotherm(p, {0.9, 0.1, 1}, -2), 0);
}

TEST(LidThickness, ByAdvectionIsWhereItCarriesATenth) {
  const auto depth = [](int cells) {
    DepthProfile p = profile(cells, [](double z) { return z; });
    for (std::size_t k = 0; k < p.depth.size(); ++k) {
      const double share = std::exp(-std::pow(p.depth[k] / 0.3, 2));
      p.heat_conducted[k] = 5 * share;
      p.heat_advected[k] = 5 * (1 - share);
    }
    return lid_thickness_advection(p);
  };
  const double exact = 0.3 * std::sqrt(-std::log(0.9));
  EXPECT_NEAR(depth(200), exact, 1e-4);
  EXPECT_LT(std::abs(depth(400) - exact), 0.4 * std::abs(depth(100) - exact));
  EXPECT_TRUE(std::isnan(lid_thickness_advection(profile(20, [](double z) { return z; }))));
}

}  // namespace
}  // namespace lidwright
