#include "physics/scales.hpp"

#include <gtest/gtest.h>

namespace lidwright {
namespace {

/// Round numbers: d = 1e6 m, kappa = 3/(3000 * 1000) = 1e-6 m^2/s.
Body round_body() {
  return {.radius = 2e6,
          .core_radius = 1e6,
          .gravity = 4,
          .density = 3000,
          .expansivity = 3e-5,
          .conductivity = 3,
          .heat_capacity = 1000,
          .surface_temperature = 200,
          .temperature_drop = 1000,
          .reference_viscosity = 1e20};
}

TEST(Scales, OfARoundBody) {
  const Scales s = scales_of(round_body());
  EXPECT_DOUBLE_EQ(s.length, 1e6);
  EXPECT_DOUBLE_EQ(s.time, 1e18);       // d^2/kappa = 1e12/1e-6
  EXPECT_DOUBLE_EQ(s.velocity, 1e-12);  // kappa/d
  EXPECT_DOUBLE_EQ(s.temperature, 1000);
  EXPECT_DOUBLE_EQ(s.heat_flux, 3e-3);    // 3 * 1000/1e6
  EXPECT_DOUBLE_EQ(s.heat_source, 3e-9);  // 3 * 1000/1e12
  EXPECT_DOUBLE_EQ(s.viscosity, 1e20);
  EXPECT_DOUBLE_EQ(s.stress, 100);  // 1e20 * 1e-6/1e12
  EXPECT_DOUBLE_EQ(s.activation_energy, 8314.46261815324);
  EXPECT_DOUBLE_EQ(s.activation_volume, 8314.46261815324 / 1.2e10);  // rho g d = 3000 * 4 * 1e6 Pa
}

TEST(Scales, RayleighNumberByHand) {
  // 3000 * 3e-5 * 4 * 1000 = 360; 360 * 1e18/(1e-6 * 1e20) = 3.6e6
  EXPECT_NEAR(rayleigh_number(round_body()) / 3.6e6, 1, 1e-15);
}

TEST(Scales, LithostaticNumberByHand) {
  // 3000 * 4 * 1e18/(1e-6 * 1e20) = 1.2e8; in Pa, rho g d = 1.2e10 over a stress of 100
  EXPECT_NEAR(lithostatic_number(round_body()) / 1.2e8, 1, 1e-15);
}

TEST(Scales, DissipationNumberByHand) {
  EXPECT_DOUBLE_EQ(dissipation_number(round_body()), 0.12);  // 3e-5 * 4 * 1e6/1000
}

TEST(Scales, RatiosAndTemperatures) {
  EXPECT_DOUBLE_EQ(radius_ratio(round_body()), 0.5);
  EXPECT_DOUBLE_EQ(absolute_surface_temperature(round_body()), 0.2);
  EXPECT_DOUBLE_EQ(dimensionless_temperature(700, round_body()), 0.5);
  EXPECT_DOUBLE_EQ(kelvin(0.5, round_body()), 700);
}

TEST(Scales, GasConstantIsAvogadroTimesBoltzmann) {
  EXPECT_DOUBLE_EQ(gas_constant, 6.02214076e23 * 1.380649e-23);  // both exact, SI 2019
}

}  // namespace
}  // namespace lidwright
