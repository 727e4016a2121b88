#include "physics/rheology.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "physics/heat_sources.hpp"
#include "physics/scales.hpp"

namespace lidwright {
namespace {

TEST(ExponentialViscosity, ContrastsAreThoseNamed) {
  const ExponentialViscosity eta{.thermal_contrast = 1e6, .depth_contrast = 8};
  EXPECT_DOUBLE_EQ(eta({0, 0}), 1);
  EXPECT_NEAR(eta({1, 0}), 1e-6, 1e-18);
  EXPECT_NEAR(eta({0.5, 0}), 1e-3, 1e-15);  // sqrt of the contrast
  EXPECT_NEAR(eta({0, 1}), 8, 1e-14);
  EXPECT_NEAR(eta({0, 1.0 / 3}), 2, 1e-14);  // cube root of 8
}

TEST(ExponentialViscosity, IsOneWhereTold) {
  const ExponentialViscosity eta{.thermal_contrast = 1e6, .unity_at = 1};
  EXPECT_DOUBLE_EQ(eta({1, 0}), 1);
  EXPECT_NEAR(eta({0, 0}) / 1e6, 1, 1e-14);
}

TEST(ArrheniusViscosity, ByHand) {
  const ArrheniusViscosity eta{
      .energy = 10, .volume = 4, .offset = 0.25, .unity_at = 1, .unity_at_depth = 0.5};
  EXPECT_DOUBLE_EQ(eta({1, 0.5}), 1);
  // (10 + 4 * 0.25)/(0.75 + 0.25) - (10 + 4 * 0.5)/(1 + 0.25) = 11 - 9.6 = 1.4
  EXPECT_NEAR(eta({0.75, 0.25}), 4.0551999668446745, 1e-14);  // exp(1.4)
}

// eta = eta_ref exp[(E + p V)/(R T) - (E + p_1 V)/(R T_1)] in SI against the dimensionless law.
TEST(ArrheniusViscosity, SameInSiUnits) {
  const Body body{.radius = 2.5e6,
                  .core_radius = 1.3e6,
                  .gravity = 4.2,
                  .density = 3400,
                  .expansivity = 3e-5,
                  .conductivity = 3.5,
                  .heat_capacity = 1200,
                  .surface_temperature = 240,
                  .temperature_drop = 1350,
                  .reference_viscosity = 1e20};
  const Scales scales = scales_of(body);
  const double energy = 3e5, volume = 2.5e-6, warm = 1500, depth = 4e5, warm_1 = 1590,
               depth_1 = 6e5;
  const auto exponent = [&](double kelvins, double metres) {
    return (energy + body.density * body.gravity * metres * volume) / (gas_constant * kelvins);
  };
  const ArrheniusViscosity law{.energy = energy / scales.activation_energy,
                               .volume = volume / scales.activation_volume,
                               .offset = absolute_surface_temperature(body),
                               .unity_at = dimensionless_temperature(warm_1, body),
                               .unity_at_depth = depth_1 / scales.length};
  const double expected = std::exp(exponent(warm, depth) - exponent(warm_1, depth_1));
  const double eta = law({dimensionless_temperature(warm, body), depth / scales.length});
  EXPECT_NEAR(eta / expected, 1, 1e-12);
}

TEST(LayeredViscosity, HoldsFromItsTopToTheNext) {
  const LayeredViscosity factor{{{.below = 0.25, .factor = 0.1}, {.below = 0.5, .factor = 30}}};
  EXPECT_EQ(factor({0, 0}), 1);
  EXPECT_EQ(factor({0, std::nextafter(0.25, 0.0)}), 1);
  EXPECT_EQ(factor({0, 0.25}), 0.1);  // the edge belongs to the layer below it
  EXPECT_EQ(factor({0, std::nextafter(0.5, 0.0)}), 0.1);
  EXPECT_EQ(factor({0, 0.5}), 30);
  EXPECT_EQ(factor({0, 1}), 30);
}

TEST(ViscosityLaw, IsAProductWithCutOffsLast) {
  ViscosityLaw eta;
  EXPECT_EQ(eta({0.3, 0.7}), 1);
  eta.constant = 2;
  eta.layered.layers = {{.below = 0.5, .factor = 10}};
  eta.exponential = ExponentialViscosity{.thermal_contrast = 100};
  EXPECT_NEAR(eta({0.5, 0.7}), 2, 1e-14);  // 2 * 10 * 100^-0.5
  EXPECT_NEAR(eta({0.5, 0.3}), 0.2, 1e-15);
  eta.lowest = 0.5;
  eta.highest = 1.5;
  EXPECT_EQ(eta({0.5, 0.7}), 1.5);
  EXPECT_EQ(eta({0.5, 0.3}), 0.5);
}

TEST(ViscosityLaw, UpperCutOffHoldsWhereArrheniusOverflows) {
  ViscosityLaw eta;
  eta.arrhenius = ArrheniusViscosity{.energy = 30, .offset = 0.01};
  eta.highest = 1e6;
  EXPECT_EQ(eta({0, 0}), 1e6);  // exp(3000 - 29.7) is infinite
}

TEST(HeatSources, LayersReplaceTheUniformSource) {
  const HeatSources heat{.uniform = 3,
                         .layers = {{.below = 0.1, .source = 20}, {.below = 0.2, .source = 0}}};
  EXPECT_EQ(heat(0.05), 3);
  EXPECT_EQ(heat(0.1), 20);
  EXPECT_EQ(heat(0.3), 0);
}

}  // namespace
}  // namespace lidwright
