#include "physics/flow_law.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <string>
#include <utility>
#include <vector>

/// Expected values are closed forms, or the equation that a response has to satisfy.
namespace lidwright {
namespace {

constexpr double none = LocalFlowLaw::none;

/// From 1e-10 to 1e10.
std::vector<double> rates_over_20_decades(int in_a_decade) {
  std::vector<double> rates;
  for (int k = -10 * in_a_decade; k <= 10 * in_a_decade; ++k)
    rates.push_back(std::pow(10, static_cast<double>(k) / in_a_decade));
  return rates;
}

double stress(const LocalFlowLaw& law, double rate) { return 2 * law(rate).viscosity * rate; }

DislocationCreep dislocation_creep(double viscosity, double exponent, double reference_stress) {
  DislocationCreep creep;
  creep.viscosity.constant = viscosity;
  creep.exponent = exponent;
  creep.reference_stress = reference_stress;
  return creep;
}

using Named = std::pair<std::string, LocalFlowLaw>;

/// All ways to put a law together.
std::vector<Named> all_laws() {
  const LocalFlowLaw composite{.diffusion = 40, .dislocation = 3e4, .exponent = 3.5};
  std::vector<Named> laws = {
      {"diffusion", {.diffusion = 7}},
      {"power law", {.diffusion = none, .dislocation = 20, .exponent = 3}},
      {"composite", composite},
      {"steep composite", {.diffusion = 0.3, .dislocation = 2, .exponent = 20}},
      {"linear composite", {.diffusion = 2, .dislocation = 6, .exponent = 1}},
  };
  for (const YieldingLaw yielding : {YieldingLaw::Minimum, YieldingLaw::HarmonicMean}) {
    const std::string name = yielding == YieldingLaw::Minimum ? "minimum, " : "harmonic, ";
    const std::size_t creeps = 5;
    for (std::size_t k = 0; k < creeps; ++k)
      for (const double floor : {0., 1e-3}) {
        Named law = laws[k];
        law.first = name + law.first + (floor > 0 ? " with a floor" : "");
        law.second.yielding = yielding;
        law.second.yield_stress = 5;
        law.second.floor = floor;
        laws.push_back(law);
      }
  }
  for (std::size_t k = laws.size(); k-- > 0;) {
    Named law = laws[k];
    law.first += ", cut off";
    law.second.lowest = 0.02;
    law.second.highest = 5;
    laws.push_back(law);
  }
  return laws;
}

// tau = (2 A tau_ref^(n - 1) e)^(1/n).
TEST(FlowLaw, PowerLawAlone) {
  DislocationCreep creep = dislocation_creep(4, 3.5, 9);
  creep.alone = true;
  const LocalFlowLaw law = local_flow_law({}, &creep, nullptr, {0.5, 0.5}, 0);
  for (const double rate : rates_over_20_decades(2)) {
    const double tau = std::pow(2 * 4 * std::pow(9., 2.5) * rate, 1 / 3.5);
    EXPECT_NEAR(stress(law, rate) / tau, 1, 1e-13) << rate;
    EXPECT_NEAR(law.creep_stress(rate) / tau, 1, 1e-13) << rate;
    EXPECT_DOUBLE_EQ(law(rate).slope, 1 / 3.5 - 1);
  }
  // At the reference stress, e = tau_ref/(2 A), the viscosity is A.
  EXPECT_NEAR(law(9. / 8).viscosity, 4, 1e-13);
}

// tau^3 = 2 * 4 * e: at e = 1, tau = 2 and eta = tau/(2 e) = 1.
TEST(FlowLaw, CubicPowerLawByHand) {
  const LocalFlowLaw law{.diffusion = none, .dislocation = 4, .exponent = 3};
  EXPECT_DOUBLE_EQ(law(1).viscosity, 1);
  EXPECT_DOUBLE_EQ(law(8).viscosity, 0.25);  // tau = 4
}

TEST(FlowLaw, RatesOfTheMechanismsAdd) {
  for (const double exponent : {1., 1.01, 2., 3., 3.5, 12., 50.})
    for (const double eta_d : {1e-6, 1., 1e9})
      for (const double b : {1e-8, 1., 1e12}) {
        const LocalFlowLaw law{.diffusion = eta_d, .dislocation = b, .exponent = exponent};
        for (const double rate : rates_over_20_decades(3)) {
          const double tau = stress(law, rate);
          const double sum = tau / (2 * eta_d) + std::pow(tau, exponent) / (2 * b);
          ASSERT_NEAR(sum / rate, 1, 1e-12) << exponent << ' ' << eta_d << ' ' << b << ' ' << rate;
        }
      }
}

// Where both mechanisms creep at half the rate, A is the viscosity of either, at tau_ref:
// tau = tau_ref, e = tau_ref/A, eta = A/2; slope 1/(1/2 + n/2) - 1 = 2/(1 + n) - 1.
TEST(FlowLaw, MechanismsContributeEquallyAtTheTransitionStress) {
  ViscosityLaw diffusion;
  diffusion.constant = 6;
  const DislocationCreep creep = dislocation_creep(6, 3, 5);
  const LocalFlowLaw law = local_flow_law(diffusion, &creep, nullptr, {0.5, 0.5}, 0);
  EXPECT_NEAR(law.creep_stress(5. / 6), 5, 1e-13);
  EXPECT_NEAR(law(5. / 6).viscosity, 3, 1e-13);
  EXPECT_NEAR(law(5. / 6).slope, -0.5, 1e-13);
}

// From rates where diffusion creeps alone to those where dislocations do.
TEST(FlowLaw, EachMechanismAloneIsALimit) {
  const LocalFlowLaw law{.diffusion = 2, .dislocation = 3, .exponent = 3};
  EXPECT_NEAR(law(1e-12).viscosity, 2, 1e-14);
  EXPECT_NEAR(law(1e-12).slope, 0, 1e-14);
  const double fast = 1e30, tau = std::cbrt(2 * 3 * fast);
  EXPECT_NEAR(stress(law, fast) / tau, 1, 1e-12);
  EXPECT_NEAR(law(fast).slope, -2. / 3, 1e-12);
  const LocalFlowLaw stiff{.diffusion = 1e200, .dislocation = 1e250, .exponent = 3.5};
  EXPECT_NEAR(stiff(1e-290).viscosity / 1e200, 1, 1e-12);  // rates and stresses near underflow
}

TEST(FlowLaw, LinearDislocationCreepIsASecondDiffusion) {
  const LocalFlowLaw law{.diffusion = 2, .dislocation = 6, .exponent = 1};
  for (const double rate : {0., 1e-9, 1., 1e9}) {
    EXPECT_DOUBLE_EQ(law(rate).viscosity, 1.5);  // 1/(1/2 + 1/6)
    EXPECT_EQ(law(rate).slope, 0);
  }
  const LocalFlowLaw alone{.diffusion = none, .dislocation = 6, .exponent = 1};
  EXPECT_DOUBLE_EQ(alone(0).viscosity, 6);
}

/// |slope - centred difference| over a step that crosses no kink: there the slope is the same at
/// both ends, nearly.
TEST(FlowLaw, SlopeIsTheDerivativeOfTheLogarithm) {
  constexpr double step = 1e-4;
  int compared = 0;
  for (const auto& [name, law] : all_laws())
    for (const double rate : rates_over_20_decades(7)) {
      const auto below = law(rate * std::exp(-step)), above = law(rate * std::exp(step));
      if (std::abs(above.slope - below.slope) > 0.01) continue;
      const double difference = std::log(above.viscosity / below.viscosity) / (2 * step);
      EXPECT_NEAR(law(rate).slope, difference, 1e-6) << name << " at " << rate;
      ++compared;
    }
  EXPECT_GT(compared, 0.98 * 50 * 141);  // few kinks
}

TEST(FlowLaw, StressNeverFallsAsTheRateRises) {
  for (const auto& [name, law] : all_laws()) {
    double before = 0;
    for (const double rate : rates_over_20_decades(40)) {
      const double tau = stress(law, rate);
      EXPECT_GE(tau, before * (1 - 1e-14)) << name << " at " << rate;
      before = tau;
      EXPECT_LE(law(rate).slope, 0) << name << " at " << rate;
      EXPECT_GE(law(rate).slope, -1) << name << " at " << rate;
    }
  }
}

TEST(FlowLaw, CutOffsComeLast) {
  const LocalFlowLaw law{.diffusion = 10,
                         .dislocation = 3,
                         .exponent = 3,
                         .yield_stress = 1,
                         .lowest = 0.5,
                         .highest = 2};
  EXPECT_EQ(law(1e-6).viscosity, 2);
  EXPECT_EQ(law(1e6).viscosity, 0.5);
  EXPECT_EQ(law(1e-6).slope, 0);
  EXPECT_EQ(law(1e6).slope, 0);
  EXPECT_DOUBLE_EQ(law(0.4).viscosity, 1.25);  // tau_y/(2 e)
}

TEST(FlowLaw, AtRest) {
  const LocalFlowLaw composite{.diffusion = 10, .dislocation = 3, .exponent = 3};
  EXPECT_EQ(composite(0).viscosity, 10);
  EXPECT_EQ(composite(0).slope, 0);
  LocalFlowLaw law = composite;
  law.yield_stress = 1;
  EXPECT_EQ(law(0).viscosity, 10);
  EXPECT_FALSE(law(0).yields);
  law.yielding = YieldingLaw::HarmonicMean;
  EXPECT_EQ(law(0).viscosity, 20);  // the plastic viscosity has no bound
  EXPECT_EQ(law(0).slope, 0);
  for (const YieldingLaw yielding : {YieldingLaw::Minimum, YieldingLaw::HarmonicMean}) {
    const LocalFlowLaw alone{.diffusion = none,
                             .dislocation = 3,
                             .exponent = 3,
                             .yield_stress = 1,
                             .yielding = yielding,
                             .highest = 1e6};
    EXPECT_EQ(alone(0).viscosity, 1e6);
    EXPECT_EQ(alone(0).slope, 0);
    EXPECT_FALSE(alone(0).yields);
  }
}

TEST(FlowLaw, MinimumIsCreepUntilTheYieldStress) {
  const LocalFlowLaw law{.diffusion = 10, .yield_stress = 4, .floor = 0.1};
  EXPECT_EQ(law(0.1).viscosity, 10);  // tau = 2
  EXPECT_FALSE(law(0.1).yields);
  EXPECT_DOUBLE_EQ(law(2).viscosity, 1.1);  // 0.1 + 4/(2 * 2)
  EXPECT_TRUE(law(2).yields);
  EXPECT_DOUBLE_EQ(law(2).slope, 0.1 / 1.1 - 1);
}

// Tosi et al. 2015, Geochem. Geophys. Geosyst. 16, 2175, eqs. 6 to 8 (formulas as given to us, not
// looked up again): eta = 2/(1/eta_lin + 1/eta_plast), eta_plast = eta* + sigma_Y/sqrt(e : e), and
// e : e = 2 e_II^2, so that tau_y = sqrt(2) sigma_Y.
TEST(FlowLaw, HarmonicMeanIsThatOfTosi2015) {
  const double eta_lin = 0.3, eta_star = 1e-3, sigma = 1;
  const LocalFlowLaw law{.diffusion = eta_lin,
                         .yield_stress = std::sqrt(2.) * sigma,
                         .yielding = YieldingLaw::HarmonicMean,
                         .floor = eta_star};
  for (const double xx : {1e-6, 0.2, 40., 1e6}) {  // pure shear and simple shear at once
    const double xy = 0.7 * xx, squares = 2 * xx * xx + 2 * xy * xy;  // e : e
    const double plastic = eta_star + sigma / std::sqrt(squares);
    const double expected = 2 / (1 / eta_lin + 1 / plastic);
    EXPECT_NEAR(law(std::sqrt(squares / 2)).viscosity / expected, 1, 1e-14) << xx;
  }
}

// Why their largest viscosities are near 2: creep's is 1 at the cold surface, where little strains.
TEST(FlowLaw, HarmonicMeanDoublesCreepAtRest) {
  const LocalFlowLaw law{
      .diffusion = 1, .yield_stress = 1, .yielding = YieldingLaw::HarmonicMean, .floor = 1e-5};
  EXPECT_EQ(law(0).viscosity, 2);
  // 2/(1 + 2 e/tau_y), nearly
  EXPECT_NEAR(law(0.01).viscosity, 2 / 1.02, 1e-5);
}

TEST(FlowLaw, NoStrengthLeavesTheFloor) {
  LocalFlowLaw law{.diffusion = 10, .yield_stress = 0, .floor = 2.5};
  for (const double rate : {0., 1e-8, 1., 1e8}) {
    law.yielding = YieldingLaw::Minimum;
    EXPECT_EQ(law(rate).viscosity, 2.5);
    EXPECT_EQ(law(rate).slope, 0);
    EXPECT_TRUE(law(rate).yields);
    law.yielding = YieldingLaw::HarmonicMean;
    EXPECT_DOUBLE_EQ(law(rate).viscosity, 4);  // 2/(1/10 + 1/2.5)
    EXPECT_EQ(law(rate).slope, 0);
  }
}

TEST(FlowLaw, WithoutStrengthNorFloorTheLowestViscosityHolds) {
  for (const YieldingLaw yielding : {YieldingLaw::Minimum, YieldingLaw::HarmonicMean}) {
    const LocalFlowLaw law{
        .diffusion = 10, .yield_stress = 0, .yielding = yielding, .lowest = 1e-3};
    for (const double rate : {0., 1e-8, 1e8}) {
      EXPECT_EQ(law(rate).viscosity, 1e-3);
      EXPECT_EQ(law(rate).slope, 0);
    }
  }
}

TEST(FlowLaw, ColdRockTakesItsBounds) {
  ViscosityLaw cold;
  cold.lowest = 1e-2;
  cold.highest = 1e6;
  cold.arrhenius = ArrheniusViscosity{.energy = 30, .offset = 0.01};  // exp(3000 - 29.7)
  DislocationCreep creep = dislocation_creep(1, 3.5, 10);
  creep.viscosity.arrhenius = cold.arrhenius;
  for (const bool alone : {true, false}) {
    creep.alone = alone;
    const LocalFlowLaw law = local_flow_law(cold, &creep, nullptr, {0, 0}, 0);
    for (const double rate : {0., 1e-9, 1e9}) EXPECT_EQ(law(rate).viscosity, 1e6);
  }
  Yielding yielding{.cohesion = 8};
  const LocalFlowLaw law = local_flow_law(cold, &creep, &yielding, {0, 0}, yielding.stress(0));
  EXPECT_DOUBLE_EQ(law(2).viscosity, 2);  // 8/(2 * 2)
  EXPECT_EQ(law(1e9).viscosity, 1e-2);
}

TEST(FlowLaw, EachCreepHasItsOwnTemperatureDependence) {
  ViscosityLaw diffusion;
  diffusion.exponential = ExponentialViscosity{.thermal_contrast = 100};
  DislocationCreep creep = dislocation_creep(1, 3, 2);
  creep.viscosity.exponential = ExponentialViscosity{.thermal_contrast = 16};
  const LocalFlowLaw law = local_flow_law(diffusion, &creep, nullptr, {0.5, 0}, 0);
  EXPECT_NEAR(law.diffusion, 0.1, 1e-15);  // 100^-0.5
  EXPECT_NEAR(law.dislocation, 1, 1e-14);  // 16^-0.5 * 2^2
  EXPECT_EQ(law.exponent, 3);
}

TEST(Yielding, StrengthGrowsWithPressureUpToItsCeiling) {
  Yielding yielding{.cohesion = 2, .friction = 0.5};
  EXPECT_EQ(yielding.stress(0), 2);
  EXPECT_EQ(yielding.stress(10), 7);
  yielding.ceiling = 4;
  EXPECT_EQ(yielding.stress(10), 4);
  EXPECT_EQ(yielding.stress(1), 2.5);
}

}  // namespace
}  // namespace lidwright
