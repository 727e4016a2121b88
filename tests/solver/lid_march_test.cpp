#include <gtest/gtest.h>

#include <algorithm>
#include <cmath>
#include <numbers>

#include "tests/support/marches.hpp"

/// What rows say of the lid in three states of convection: none, isoviscous, under a stagnant lid.
namespace lidwright {
namespace {

using std::numbers::pi;

HeatSettings central() {
  HeatSettings s;
  s.flux = HeatFlux::Central;
  s.courant = 1;
  s.accuracy = 1e-3;
  return s;
}

Model sector(Shape shape, double rayleigh) {
  Model m;
  m.shell = {shape, 0.55 / 0.45, 0, pi / 4, Sides::Reflecting};
  m.grid = {24, 24, {}, {}};
  m.rayleigh = rayleigh;
  return m;
}

TEST(LidOfAMarch, IsNotThereAtRest) {
  const March march(sector(Shape::Annulus, 0), {}, {}, {}, {}, PETSC_COMM_SELF);
  const HistoryRow r = march.row();
  for (const double x : {r.mobility, r.plateness, r.velocity_rms_lid_base, r.lid_thickness_velocity,
                         r.lid_thickness_isotherm, r.lid_thickness_advection,
                         r.lid_thickness_conduction, r.boundary_layer_inner, r.temperature_internal,
                         r.rayleigh_internal, r.rheological_temperature, r.frank_kamenetskii})
    EXPECT_TRUE(std::isnan(x)) << x;
  EXPECT_EQ(r.plumes + r.downwellings + r.flow_iterations, 0);
  EXPECT_EQ(r.yielding_share, 0);
  EXPECT_EQ(r.stress_rms_outer, 0);
}

struct Steady {
  HistoryRow row;
  RadialProfiles profiles;
};

Steady steady(const Model& m) {
  InitialSettings initial;
  initial.modes = {{1, 1, 0.1}};
  March march(m, initial, {}, {}, central(), PETSC_COMM_SELF);
  march_to_steady(march, 1e-6, 20000);
  return {march.row(), march.profiles()};
}

struct Published {
  std::string name;
  Shape shape;
  double surface, volume;  ///< rms velocities
};
void PrintTo(const Published& p, std::ostream* out) { *out << p.name; }

/// Independent spectral code: tests/reference/spectral_values.csv, radius ratio 0.55, one cell in
/// an eighth of the circle, Ra = 1e4, both walls slipping.
class IsoviscousMarch : public testing::TestWithParam<Published> {};

TEST_P(IsoviscousMarch, HasTheMobilityOfTheSpectralSolution) {
  const Published& p = GetParam();
  const Steady s = steady(sector(p.shape, 1e4));
  EXPECT_NEAR(s.row.mobility / (p.surface / p.volume), 1, 3e-3);
  EXPECT_EQ(s.row.plumes, 1);
  EXPECT_EQ(s.row.downwellings, 1);
  EXPECT_EQ(s.row.lid_thickness_velocity, 0);
  EXPECT_EQ(s.row.lid_thickness_isotherm, 0);
  EXPECT_EQ(s.row.velocity_rms_lid_base, s.row.velocity_rms_outer);
  EXPECT_TRUE(std::isnan(s.row.rheological_temperature));
  EXPECT_EQ(s.row.frank_kamenetskii, 0);
  EXPECT_NEAR(s.row.rayleigh_internal, 1e4, 1e-8);
}

/// In a steady state without sources, conduction and advection carry the same heat through every
/// surface.
TEST_P(IsoviscousMarch, CarriesItsHeatThroughEverySurface) {
  const Steady s = steady(sector(GetParam().shape, 1e4));
  for (std::size_t i = 0; i < s.profiles.radius.size(); ++i)
    EXPECT_NEAR(
        (s.profiles.heat_conducted[i] + s.profiles.heat_advected[i]) / s.row.heat_flow_outer, 1,
        1e-4)
        << i;
}

INSTANTIATE_TEST_SUITE_P(
    All, IsoviscousMarch,
    testing::Values(Published{"Annulus", Shape::Annulus, 56.9506378, 46.2578838},
                    Published{"SphericalAnnulus", Shape::SphericalAnnulus, 44.8574883, 40.6928574}),
    [](const auto& p) { return p.param.name; });

/// Contrast 1e6, Ra = 1e7 at the bottom. Internal temperature 1 - 1.23/theta: Deschamps & Lin 2014,
/// Phys. Earth Planet. Inter. 229, 40 (3-D box; from memory). That mobility is below 0.01 and
/// that the definitions agree within some tens of percent is common experience, without a source.
TEST(LidOfAMarch, IsStagnantAtALargeContrast) {
  Model m;
  m.shell = {Shape::Box, 0, 0, 1, Sides::Reflecting};
  m.grid = {32, 32, {}, {2, 2}};
  m.rayleigh = 1e7;
  m.viscosity.exponential = ExponentialViscosity{1e6, 1, 1};
  InitialSettings initial;
  initial.base = InitialBase::BoundaryLayers;
  initial.interior = 0.9;
  initial.layer_thickness = 0.15;
  initial.modes = {{1, 1, 0.05}};
  March march(m, initial, {}, {}, {}, PETSC_COMM_SELF);
  while (march.time() < 0.03) march.step(0.03);
  const HistoryRow r = march.row();
  EXPECT_LT(r.mobility, 0.01);
  EXPECT_GT(r.velocity_rms_lid_base, r.velocity_rms_outer);
  EXPECT_LT(r.velocity_rms_lid_base, 0.5 * r.velocity_rms);
  const auto [least, most] = std::minmax({r.lid_thickness_velocity, r.lid_thickness_isotherm,
                                          r.lid_thickness_advection, r.lid_thickness_conduction});
  EXPECT_GT(least, 0.1);
  EXPECT_LT(most / least, 1.5);
  EXPECT_NEAR(r.temperature_internal, 1 - 1.23 / std::log(1e6), 0.05);
  EXPECT_NEAR(r.frank_kamenetskii, std::log(1e6), 1e-10);
  EXPECT_NEAR(r.rheological_temperature, 1 / std::log(1e6), 1e-14);
  // Viscosity at the internal temperature, by the law; its mean is that within the spread there.
  EXPECT_NEAR(std::log(r.rayleigh_internal / 1e7), std::log(1e6) * (r.temperature_internal - 1),
              1e-6);
}

}  // namespace
}  // namespace lidwright
