#include "study/heat_balance.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "physics/laws.hpp"
#include "tests/support/mantles.hpp"

namespace lidwright {
namespace {

HeatBalance balance(const Model& m, const BalanceLaws& laws) {
  return heat_balance(m, *make_geometry(m), laws);
}

BalanceLaws plain(double layer_coefficient) {
  const double a = laws::wall_coefficient(layer_coefficient);
  return {false, 0, a, a, LayerViscosity::Interior};
}

TEST(HeatBalance, IsTheVeryLawInABox) {
  Model m = box_heated_below();
  m.rayleigh = 1e6;
  const HeatBalance b = balance(m, plain(0.2));
  EXPECT_NEAR(b.interior, 0.5, 1e-9);
  EXPECT_NEAR(b.nusselt_outer, 20, 1e-6);
  EXPECT_NEAR(b.outer_layer, 0.5 / 20, 1e-9);
  EXPECT_NEAR(b.inner_layer, 0.5 / 20, 1e-9);
  EXPECT_DOUBLE_EQ(b.lid, 0);
}

TEST(HeatBalance, InteriorOfAnAnnulusByHand) {
  // r_o T^(4/3) = r_i (1 - T)^(4/3), r_i/r_o = 1/2: T/(1 - T) = 2^(-3/4).
  Model m = box_heated_below();
  m.shell = {Shape::Annulus, 1, 0, 2 * std::numbers::pi, Sides::Periodic};
  m.rayleigh = 1e6;
  const double ratio = std::pow(2.0, -0.75);
  EXPECT_NEAR(balance(m, plain(0.2)).interior, ratio / (1 + ratio), 1e-9);
}

TEST(HeatBalance, InteriorOfAnInsulatedLayerIsThePublishedOne) {
  // T = 1.70 Ra_Q^(-1/4) Q d^2/k (Turcotte & Schubert ch. 6; from memory).
  Model m = box_heated_below();
  m.walls.inner.thermal = FixedHeatFlux{0};
  m.rayleigh = 1e6;
  m.heat.uniform = 10;
  const double a = laws::internal_heating_coefficient();
  const HeatBalance b = balance(m, {false, 0, a, a, LayerViscosity::Interior});
  EXPECT_NEAR(b.interior, 1.70 * std::pow(1e7, -0.25) * 10, 1e-6);
  EXPECT_NEAR(b.nusselt_outer, 10 / b.interior, 1e-4);  // all that is produced leaves
  EXPECT_DOUBLE_EQ(b.inner_layer, 0);
}

TEST(HeatBalance, SettlingByHand) {
  // Heated within, insulated below: a Ra^(1/3) T^(4/3) leaves, which grows by 4/3 H/T with T; the
  // capacity is the integral of cp over depth, of 3^z 2/ln(3).
  Model m = box_heated_below();
  m.walls.inner.thermal = FixedHeatFlux{0};
  m.rayleigh = 1e7;
  m.heat.uniform = 1e3;
  const HeatBalance b = balance(m, plain(0.2));
  EXPECT_NEAR(b.settling / (0.75 * b.interior / 1e3), 1, 1e-5);
  m.reference.heat_capacity.rise = 3;
  EXPECT_NEAR(balance(m, plain(0.2)).settling / b.settling, 2 / std::log(3.0), 1e-3);
}

TEST(HeatBalance, AnAdiabatOfMoreHeat) {
  // Extended Boussinesq: what warms by 1 at the surface warms by exp(Di) below; (e^Di - 1)/Di.
  Model m = box_heated_below();
  m.walls.inner.thermal = FixedHeatFlux{0};
  m.rayleigh = 1e7;
  m.heat.uniform = 1e3;
  const double without = balance(m, plain(0.2)).settling;
  m.reference.dissipation_number = 0.5;
  EXPECT_NEAR(balance(m, plain(0.2)).settling / without, (std::exp(0.5) - 1) / 0.5, 1e-3);
}

TEST(HeatBalance, LidConductsWhatDripsBring) {
  // Heated within, insulated below: T = H z (1 - z/2) in the lid, H (1 - L) passes its base.
  Model m = box_heated_below();
  m.walls.inner.thermal = FixedHeatFlux{0};
  m.viscosity.exponential = ExponentialViscosity{1e6, 1, 1};
  m.rayleigh = 1e7;
  m.heat.uniform = 2.5;
  const HeatBalance b =
      balance(m, {true, laws::solomatov_moresi, 0, 0.5, LayerViscosity::Interior});
  const double scale = 1 / std::log(1e6);
  EXPECT_NEAR(b.interior - 2.5 * b.lid * (1 - b.lid / 2), 2.23 * scale, 1e-3);
  const double drips = 0.53 * std::cbrt(b.interior_rayleigh) * std::pow(scale, 4.0 / 3);
  EXPECT_NEAR(2.5 * (1 - b.lid), drips, 2e-3);
  EXPECT_NEAR(std::log(b.interior_rayleigh / 1e7), (b.interior - 1) / scale, 1e-9);
  // docs/decisions/stagnant-lid-laws.md, from the same law with a drop of 2.2 scales.
  EXPECT_NEAR(b.nusselt_outer, 2.961, 0.01);
}

TEST(HeatBalance, AFilmStifferThanTheInteriorCarriesLess) {
  Model m = box_heated_below();
  m.rayleigh = 1e6;
  m.viscosity.exponential = ExponentialViscosity{100, 1, 0.5};
  BalanceLaws film = plain(0.2);
  film.viscosity = LayerViscosity::Film;
  EXPECT_LT(balance(m, film).nusselt_outer, balance(m, plain(0.2)).nusselt_outer);
}

TEST(HeatBalance, AnAdiabatLeavesLessToTheInnerLayer) {
  Model m = box_heated_below();
  m.rayleigh = 1e6;
  const double without = balance(m, plain(0.2)).nusselt_outer;
  m.reference.dissipation_number = 0.5;
  const HeatBalance b = balance(m, plain(0.2));
  EXPECT_LT(b.nusselt_outer, without);
  EXPECT_LT(b.interior, 0.5);
}

TEST(HeatBalance, SaysNothingOfAnOuterWallWithGivenFlux) {
  Model m = box_heated_below();
  m.walls.outer.thermal = FixedHeatFlux{1};
  const HeatBalance none = balance(m, plain(0.2));
  EXPECT_DOUBLE_EQ(none.nusselt_outer, 1);
  EXPECT_DOUBLE_EQ(none.settling, 0);
}

}  // namespace
}  // namespace lidwright
