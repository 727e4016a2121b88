#include "study/prediction.hpp"

#include <gmock/gmock.h>

#include <cmath>

#include "physics/laws.hpp"
#include "study/cautions.hpp"
#include "study/resolution.hpp"
#include "study/short_number.hpp"
#include "tests/support/mantles.hpp"

namespace lidwright {
namespace {

using testing::Contains;
using testing::HasSubstr;

Prediction predicted(const Model& m, double times_critical) {
  const AtRest rest = at_rest(m, MPI_COMM_SELF);
  return predict(m, *make_geometry(m), rest, derived_numbers(m, rest), times_critical);
}

TEST(Prediction, SpreadHoldsTheIsoviscousBenchmark) {
  // Blankenbach et al. 1989 (GJI 98, 23), cases 1a to 1c.
  for (const auto& [rayleigh, nusselt] :
       {std::pair(1e4, 4.884409), {1e5, 10.534095}, {1e6, 21.972465}}) {
    Model m = box_heated_below();
    m.rayleigh = rayleigh;
    const Prediction p = predicted(m, rayleigh / laws::critical_free);
    EXPECT_EQ(p.regime, Regime::Mobile);
    EXPECT_LT(p.low, nusselt);
    EXPECT_GT(p.high, nusselt);
    EXPECT_LT(p.high / p.low, 4);
  }
}

TEST(Prediction, SpreadHoldsTheStagnantBenchmark) {
  // Tosi et al. 2015 (Geochem. Geophys. Geosyst. 16, 2175), case 1: Nu 3.39 to 3.43.
  Model m = box_heated_below();
  m.viscosity.exponential = ExponentialViscosity{1e5, 1, 1};
  m.rayleigh = 1e7;
  const Prediction p = predicted(m, 27);
  EXPECT_EQ(p.regime, Regime::Stagnant);
  EXPECT_LT(p.low, 3.39);
  EXPECT_GT(p.high, 3.43);
  EXPECT_GT(p.balance.lid, 0);
}

TEST(Prediction, BelowOnsetHeatIsConducted) {
  const Prediction p = predicted(box_heated_below(), 0.9);
  EXPECT_EQ(p.regime, Regime::NotConvecting);
  EXPECT_NEAR(p.low, 1, 1e-9);
  EXPECT_NEAR(p.high, 1, 1e-9);
}

TEST(Prediction, NothingDrivesAShellThatIsColdBelow) {
  Model m = box_heated_below();
  m.walls.inner.thermal = FixedTemperature{-1};
  const Prediction p = predicted(m, std::nan(""));
  EXPECT_EQ(p.regime, Regime::NotConvecting);
  EXPECT_NEAR(p.high, 1, 1e-9);
  m.walls.inner.thermal = FixedHeatFlux{0};  // cools down: there is no Nusselt number in the end
  EXPECT_FALSE(predicted(m, std::nan("")).foretold());
}

TEST(Prediction, ContrastTellsTheRegime) {
  Model m = box_heated_below();
  m.rayleigh = 1e6;
  for (const auto& [contrast, regime] :
       {std::pair(100.0, Regime::Mobile), {1e3, Regime::Sluggish}, {1e6, Regime::Stagnant}}) {
    m.viscosity.exponential = ExponentialViscosity{contrast, 1, 0.5};
    EXPECT_EQ(predicted(m, 100).regime, regime) << contrast;
  }
}

/// The same rock told with twice the numbers of temperature, from another zero.
Model retold(Model m) {
  const auto anew = [](double t) { return 2 * t - 0.7; };
  ExponentialViscosity& law = *m.viscosity.exponential;
  m.walls.outer.thermal = FixedTemperature{anew(0)};
  m.walls.inner.thermal = FixedTemperature{anew(1)};
  law.thermal_contrast = std::sqrt(law.thermal_contrast);
  law.unity_at = anew(law.unity_at);
  m.rayleigh /= 2;  // of a unit drop, which is half the walls'
  m.heat.uniform *= 2;
  return m;
}

TEST(Prediction, DoesNotDependOnTheScaleOfTemperature) {
  Model m = box_heated_below();
  m.rayleigh = 8e5;
  for (const double sources : {0.0, 1.0})
    for (const double contrast : {50.0, 1e3, 1e6}) {
      m.heat.uniform = sources;
      m.viscosity.exponential = ExponentialViscosity{contrast, 1, 0.5};
      const Prediction one = predicted(m, 100), two = predicted(retold(m), 100);
      EXPECT_EQ(one.regime, two.regime);
      ASSERT_EQ(one.laws.size(), two.laws.size());
      for (std::size_t k = 0; k < one.laws.size(); ++k) {
        EXPECT_NEAR(two.laws[k].low / one.laws[k].low, 1, 1e-9) << one.laws[k].name;
        EXPECT_NEAR(two.laws[k].high / one.laws[k].high, 1, 1e-9) << one.laws[k].name;
        EXPECT_EQ(two.laws[k].outside, one.laws[k].outside) << one.laws[k].name;
      }
      EXPECT_NEAR(two.balance.settling / one.balance.settling, 1, 1e-6);
    }
}

TEST(Prediction, NoRegimeForALidThatMayYield) {
  Model m = box_heated_below();
  m.rayleigh = 1e6;
  m.viscosity.exponential = ExponentialViscosity{1e5, 1, 1};
  const double held = predicted(m, 100).high;
  m.yielding = Yielding{};
  const Prediction p = predicted(m, 100);
  EXPECT_EQ(p.regime, Regime::Undecided);
  EXPECT_GT(p.high, held);
}

std::string outside(const Prediction& p, const std::string& name) {
  for (const LawResult& law : p.laws)
    if (law.name.find(name) != std::string::npos) return law.outside;
  return "no such law";
}

TEST(Prediction, EachLidsLawKnowsItsRange) {
  Model m = box_heated_below();
  m.rayleigh = 1e6;
  const auto with = [&](double contrast) {
    m.viscosity.exponential = ExponentialViscosity{contrast, 1, 1};
    return predicted(m, 100);
  };
  const Prediction low = with(5e4), middle = with(1e6), high = with(1e9), huge = with(1e14);
  EXPECT_EQ(outside(low, "Deschamps"), "contrast below 1e5");
  EXPECT_EQ(outside(low, "Moresi & Solomatov"), "");
  EXPECT_EQ(outside(middle, "Deschamps"), "");
  EXPECT_EQ(outside(middle, "Davaille"), "");
  EXPECT_EQ(outside(high, "Deschamps"), "contrast above 1e8");
  EXPECT_EQ(outside(high, "Davaille"), "contrast above 1e6");
  EXPECT_EQ(outside(high, "Solomatov & Moresi"), "");
  EXPECT_EQ(outside(huge, "Moresi & Solomatov"), "theta above 30");
  m.rayleigh = 2e9;
  EXPECT_EQ(outside(with(1e6), "Moresi & Solomatov"), "Ra_1 above 1e9");
  m.rayleigh = 1e6;
  m.shell = {Shape::Annulus, 1, 0, 6, Sides::Reflecting};
  EXPECT_EQ(outside(with(1e6), "Moresi & Solomatov"), "curved");
  EXPECT_EQ(outside(with(1e6), "Solomatov & Moresi"), "");
}

TEST(Prediction, AWallsLawKnowsItsSourcesAndRange) {
  Model m = box_heated_below();
  m.rayleigh = 1e6;
  m.heat.uniform = 1;
  EXPECT_THAT(outside(predicted(m, 1e3), "Moore"), HasSubstr("its H/2 for them left out"));
  EXPECT_EQ(outside(predicted(m, 1e3), "Sotin"), "");
  m.walls.inner.thermal = FixedHeatFlux{0};
  EXPECT_EQ(outside(predicted(m, 1e3), "heated within"), "");
  m.heat.uniform = 1e-3;  // Ra_Q = 1e3
  EXPECT_EQ(outside(predicted(m, 1e3), "heated within"), "Ra_Q low");
}

TEST(Prediction, ANoSlipWallHoldsTheSurface) {
  Model m = box_heated_below();
  m.rayleigh = 1e6;
  m.walls.outer.slip = Slip::None;
  m.viscosity.exponential = ExponentialViscosity{50, 1, 0.5};
  const Prediction p = predicted(m, 100);
  EXPECT_EQ(p.regime, Regime::Undecided);
  EXPECT_THAT(p.why, HasSubstr("held by its no-slip wall"));
  EXPECT_THAT(p.doubts, Contains(HasSubstr("from a lid that holds to one that moves")));
  m.viscosity.exponential.reset();
  EXPECT_THAT(predicted(m, 100).doubts, Contains(HasSubstr("laws of a free one")));
  m.viscosity.exponential = ExponentialViscosity{1e6, 1, 0.5};
  EXPECT_EQ(predicted(m, 100).regime, Regime::Stagnant);
}

TEST(Prediction, AWallThatGripsKeepsTheInteriorHot) {
  // Insulated below, eta = 20^-T: g a (Ra 20^T)^(1/3) T^(4/3) = H, g by the critical numbers.
  Model m = box_heated_below();
  m.rayleigh = 1e6;
  m.heat.uniform = 5;
  m.walls.inner.thermal = FixedHeatFlux{0};
  m.walls.outer.slip = Slip::None;
  m.viscosity.exponential = ExponentialViscosity{20, 1, 0};
  const double a = laws::wall_coefficient(laws::nusselt_local_stability(1)) *
                   std::cbrt(laws::critical_free / laws::critical_rigid);
  double low = 0, high = 5;
  while (high - low > 1e-12) {
    const double t = (low + high) / 2;
    const double flow = a * std::cbrt(1e6 * std::pow(20, t)) * std::pow(t, 4.0 / 3);
    (flow > 5 ? high : low) = t;
  }
  EXPECT_THAT(predicted(m, 100).why,
              HasSubstr("viscosity contrast " + short_number(std::pow(20, low)) + " acts"));
}

TEST(Resolution, LayersAndAGridThatHoldsThem) {
  Model m = box_heated_below();
  m.grid.radial = 20;
  HeatBalance b;
  b.outer_layer = b.inner_layer = 0.1;
  const auto layers = layers_on_grid(b, *make_geometry(m));
  ASSERT_EQ(layers.size(), 2U);
  EXPECT_NEAR(layers[0].cells, 2, 1e-9);
  EXPECT_EQ(layers[0].place, LayerPlace::Surface);
  const auto finer = finer_grid(b, m);
  ASSERT_TRUE(finer);
  const Geometry g(m.shell, *finer);
  for (const LayerOnGrid& l : layers_on_grid(b, g)) EXPECT_GE(l.cells, enough_cells);
  m.grid.radial = 100;
  EXPECT_FALSE(finer_grid(b, m));
}

TEST(Resolution, NoGridForALayerThatIsTooThin) {
  Model m = box_heated_below();
  HeatBalance b;
  b.outer_layer = 1e-4;
  EXPECT_FALSE(finer_grid(b, m));
  EXPECT_FALSE(enough(layers_on_grid(b, *make_geometry(m))));
  b.outer_layer = 0.5;
  EXPECT_FALSE(finer_grid(b, m));
  EXPECT_TRUE(enough(layers_on_grid(b, *make_geometry(m))));
}

TEST(Resolution, RefinesOneWallIfOneIsCoarse) {
  Model m = box_heated_below();
  m.grid.radial = 42;  // no multiple of 4: refinement alone changes no number of cells
  HeatBalance b;
  b.outer_layer = 0.07;
  b.inner_layer = 0.5;
  const auto finer = finer_grid(b, m);
  ASSERT_TRUE(finer);
  EXPECT_EQ(finer->radial, 42);
  EXPECT_EQ(finer->radial_grading.first, 1);
  EXPECT_GT(finer->radial_grading.last, 1);
}

TEST(Resolution, ALayerUnderALidIsCountedThere) {
  HeatBalance b;
  b.lid = 0.4;
  b.outer_layer = 0.1;
  const Geometry g(Shell{Shape::Box, 0, 0, 1, Sides::Reflecting}, Grid{20, 4, {}, {}});
  const auto layers = layers_on_grid(b, g);
  ASSERT_EQ(layers.size(), 1U);
  EXPECT_EQ(layers[0].place, LayerPlace::BelowLid);
  EXPECT_NEAR(layers[0].cells, 2, 1e-9);
}

std::vector<std::string> warned(const Model& m, double critical, double expansion,
                                double dissipation) {
  const AtRest rest = at_rest(m, MPI_COMM_SELF);
  const DerivedNumbers n = derived_numbers(m, rest);
  const Prediction p = predict(m, *make_geometry(m), rest, n, critical);
  MarchInputs march{m, {}, {}, {}, {}};
  march.initial.noise = 0.1;
  march.march.end_time = 10;
  const auto layers = layers_on_grid(p.balance, *make_geometry(m));
  return cautions({m, march, n, p, layers, 100, critical, expansion, dissipation, 0.25});
}

TEST(Cautions, NoneForAPlainCase) {
  Model m = box_heated_below();
  m.shell.lateral_end = 3;
  m.grid.radial = 64;
  EXPECT_THAT(warned(m, 15, 0.04, 0.01), testing::IsEmpty());
}

TEST(Cautions, ViscosityFromCellToCellIsThatOfTheLayer) {
  // Between equal layers the interior is half way: the outer one spans 100^(1/2) of a contrast of
  // 100, in n cells 10^(1/n) from each to the next.
  Model m = box_heated_below();
  m.viscosity.exponential = ExponentialViscosity{100, 1, 0.5};
  DerivedNumbers n{};
  n.t_inner = 1;
  Prediction p;
  p.balance.interior = 0.5;
  p.balance.hot_wall = 1;
  p.balance.theta = std::log(100.0);
  const MarchInputs march{m, {}, {}, {}, {}};
  const auto said = [&](LayerPlace place, double cells) {
    return cautions({m, march, n, p, {{place, 0.1, cells}}, 1, 15, 0, 0, 0});
  };
  EXPECT_THAT(said(LayerPlace::Surface, 2), Contains(HasSubstr("changes 3.16-fold")));
  EXPECT_THAT(said(LayerPlace::Surface, 2.2), testing::Not(Contains(HasSubstr("changes"))));
  // 2.23 scales of ln(eta) below a lid (Grasset & Parmentier 1998): exp(2.23/2).
  EXPECT_THAT(said(LayerPlace::BelowLid, 2), Contains(HasSubstr("changes 3.05-fold")));
}

TEST(Cautions, AMarchTooShortToSettle) {
  const Model m = box_heated_below();
  DerivedNumbers n{};
  n.t_inner = 1;
  Prediction p;
  p.balance.settling = 0.01;
  MarchInputs march{m, {}, {}, {}, {}};
  const auto said = [&](double end) {
    march.march.end_time = end;
    return cautions({m, march, n, p, {}, 1, 15, 0, 0, 0});
  };
  EXPECT_THAT(said(0.02), Contains(HasSubstr("less than 3 times the 0.01 in which heat settles")));
  EXPECT_THAT(said(0.031), testing::Not(Contains(HasSubstr("settles"))));
}

TEST(Cautions, EachSaysItsOwn) {
  Model m = box_heated_below();
  EXPECT_THAT(warned(m, 15, 0, 0), Contains(HasSubstr("1 d wide")));
  EXPECT_THAT(warned(m, 0.98, 0, 0), Contains(HasSubstr("too near")));
  EXPECT_THAT(warned(m, 0.5, 0, 0), Contains(HasSubstr("0.5 times critical")));
  EXPECT_THAT(warned(m, 15, 0, 0.3), Contains(HasSubstr("dissipation number of 0.3")));
  // (e^0.3 - 1) (0.5 + 0.25), along an adiabat from the interior's temperature.
  EXPECT_THAT(warned(m, 15, 0, 0.3), Contains(HasSubstr("compression heats by 0.26 DeltaT")));
  EXPECT_THAT(warned(m, 15, 0.2, 0), Contains(HasSubstr("temperature drop is 0.2")));
  m.grid.radial = 8;
  EXPECT_THAT(warned(m, 15, 0, 0), Contains(HasSubstr("cells across")));
  m.yielding = Yielding{};
  m.viscosity.exponential = ExponentialViscosity{1, 200, 0};
  const auto said = warned(m, 15, 0, 0);
  const auto times = [&](const char* words) {
    return std::count_if(said.begin(), said.end(),
                         [&](const std::string& s) { return s.find(words) != std::string::npos; });
  };
  EXPECT_EQ(times("yield"), 1);
  EXPECT_EQ(times("by depth"), 1);
  EXPECT_THAT(said, Contains(HasSubstr("viscosity varies 200-fold by depth")));
}

}  // namespace
}  // namespace lidwright
