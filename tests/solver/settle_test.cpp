#include "solver/settle.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "solver/branch.hpp"
#include "solver/stability.hpp"

/// Steady states by Newton's method.
namespace lidwright {
namespace {

using std::numbers::pi;

/// A region with its pattern: waves (half waves between sides) of the start.
struct Region {
  const char* name;
  Shell shell;
  Grid grid;
  double waves;
};

Region box(int n) { return {"box", {Shape::Box, 0, 0, 1, Sides::Reflecting}, {n, n, {}, {}}, 1}; }

std::vector<Region> regions() {
  const double inner = 0.55 / 0.45;
  return {box(24),
          {"annulus", {Shape::Annulus, inner, 0, 2 * pi, Sides::Periodic}, {16, 96, {}, {}}, 4},
          {"spherical_annulus",
           {Shape::SphericalAnnulus, inner, 0, pi / 4, Sides::Reflecting},
           {24, 24, {}, {}},
           1},
          {"axisymmetric",
           {Shape::AxisymmetricShell, inner, 0, pi, Sides::Reflecting},
           {16, 64, {2, 2}, {}},
           4}};
}

Model convecting(const Region& region, double contrast) {
  Model m;
  m.shell = region.shell;
  m.grid = region.grid;
  m.rayleigh = contrast > 1e4 ? 6000 : 4000;  // at T = 1/2
  m.viscosity.exponential = ExponentialViscosity{contrast, 1, 0.5};
  return m;
}

InitialSettings rolls(double waves, double amplitude = 0.12) {
  InitialSettings s;
  s.modes = {{waves, 1, amplitude}};
  return s;
}

class Quadratic : public testing::TestWithParam<std::tuple<Region, double>> {};

/// The order of the last steps, log(r3/r2)/log(r2/r1), is 2. Residuals below 1e-11 are those of
/// round-off and of the linear solver; the last three above count.
TEST_P(Quadratic, LastStepsConvergeQuadratically) {
  const auto& [region, contrast] = GetParam();
  SettleSettings settings;
  settings.coarsest = region.grid.radial;  // one grid only
  const SteadyState state =
      settle(convecting(region, contrast), rolls(region.waves), {}, settings, 1, PETSC_COMM_SELF)
          .back();
  ASSERT_TRUE(state.converged) << state.remark;
  EXPECT_LE(state.residual, 1e-10);
  EXPECT_GT(state.row.nusselt_outer, 1.1) << "it does not convect";
  std::vector<double> r;
  for (const NewtonStep& s : state.steps)
    if (s.step >= 0 && s.residual > 1e-11) r.push_back(s.residual);
  ASSERT_GE(r.size(), 3u);
  const std::size_t n = r.size();
  const double order = std::log(r[n - 1] / r[n - 2]) / std::log(r[n - 2] / r[n - 3]);
  EXPECT_GT(order, 1.5) << r[n - 3] << " " << r[n - 2] << " " << r[n - 1];
}

INSTANTIATE_TEST_SUITE_P(Regions, Quadratic,
                         testing::Combine(testing::ValuesIn(regions()),
                                          testing::Values(1.0, 1e3, 1e5)),
                         [](const auto& tested) {
                           return std::string(std::get<0>(tested.param).name) + "_contrast_" +
                                  std::to_string(std::lround(std::get<1>(tested.param)));
                         });

/// Case 1a of Blankenbach et al. 1989, 64 x 64: the bar is 12 steps.
TEST(Settle, ReachesTheUnitBoxInAFewStepsFromAFewGrids) {
  Model m = convecting(box(64), 1);
  m.rayleigh = 1e4;
  const SteadyState s = settle(m, rolls(1), {}, {}, 1, PETSC_COMM_SELF).back();
  ASSERT_TRUE(s.converged);
  EXPECT_LE(s.residual, 1e-10);
  int newton_steps = 0;
  for (const NewtonStep& step : s.steps) newton_steps += step.step > 0 ? 1 : 0;
  EXPECT_LE(newton_steps, 12);
  // A prototype of the same scheme, by another solver, at 64 x 64.
  EXPECT_NEAR(s.row.nusselt_outer, 4.8763872490, 1e-9);
  EXPECT_NEAR(s.row.dissipation / m.rayleigh, s.row.nusselt_outer - 1, 1e-10);
}

/// Dissipation is adiabatic work in any state, so in a steady one as much heat leaves as enters
/// (King et al. 2010, GJI 180, 73: both approximations conserve energy).
TEST(Settle, CompressibleShellsPassAsMuchHeatAsTheyGet) {
  for (const Region& region : regions()) {
    Model m = convecting(region, 10);
    m.rayleigh = 2e4;
    m.reference.dissipation_number = 0.5;
    m.reference.surface_temperature = 0.1;
    m.reference.density.rise = std::exp(0.5);
    m.reference.expansivity.rise = 0.8;
    m.reference.conductivity.rise = 1.5;
    const SteadyState s = settle(m, rolls(region.waves), {}, {}, 1, PETSC_COMM_SELF).back();
    ASSERT_TRUE(s.converged) << region.name << ": " << s.remark;
    EXPECT_GT(s.row.nusselt_outer, 1.1) << region.name;
    EXPECT_GT(s.row.viscous_heating, 0.01 * s.row.heat_flow_outer) << region.name;
    EXPECT_NEAR(s.row.viscous_heating / s.row.adiabatic_cooling, 1, 1e-10) << region.name;
    EXPECT_NEAR(s.row.heat_flow_inner / s.row.heat_flow_outer, 1, 1e-9) << region.name;
  }
}

TEST(Settle, TheIterativeSolverFindsTheSameState) {
  Model m = convecting(box(24), 100);
  SettleSettings iterative;
  iterative.linear = LinearSolver::Iterative;
  const SteadyState a = settle(m, rolls(1), {}, {}, 1, PETSC_COMM_SELF).back();
  const SteadyState b = settle(m, rolls(1), {}, iterative, 1, PETSC_COMM_SELF).back();
  ASSERT_TRUE(a.converged && b.converged) << b.remark;
  EXPECT_NEAR(b.row.nusselt_outer / a.row.nusselt_outer, 1, 1e-9);
}

TEST(Settle, TheLimitedFluxHasASteadyStateToo) {
  Model m = convecting(box(24), 100);
  SettleSettings limited;
  limited.flux = HeatFlux::Limited;
  const SteadyState s = settle(m, rolls(1), {}, limited, 1, PETSC_COMM_SELF).back();
  EXPECT_TRUE(s.converged) << s.remark;
  EXPECT_NEAR(s.row.heat_flow_inner / s.row.heat_flow_outer, 1, 1e-9);
}

TEST(Settle, AStartAtRestStaysAtRest) {
  const SteadyState s = settle(convecting(box(16), 1), {}, {}, {}, 1, PETSC_COMM_SELF).back();
  EXPECT_TRUE(s.converged);
  EXPECT_NEAR(s.row.nusselt_outer, 1, 1e-12);
}

TEST(Settle, SaysThatAGridCannotBeHalved) {
  try {
    (void)settle(convecting(box(18), 1), rolls(1), {}, {}, 3, PETSC_COMM_SELF);
    FAIL() << "it was halved";
  } catch (const std::invalid_argument& e) {
    EXPECT_NE(std::string(e.what()).find("multiple of 4"), std::string::npos) << e.what();
  }
}

TEST(Settle, StopsWhenToldTo) {
  const SteadyState s =
      settle(convecting(box(16), 1), rolls(1), {}, {}, 1, PETSC_COMM_SELF, [](const NewtonStep&) {
        return false;
      }).back();
  EXPECT_FALSE(s.converged);
}

/// The leading growth rate inside a sector of half a wave, Ra = 1e4, f = 0.55, free slip: -13.832
/// in the annulus and -14.325 in the spherical annulus. Computed for this project by a spectral
/// code of another kind (Chebyshev and Fourier, Newton to 1e-13).
TEST(Stability, LeadingGrowthRateOfSteadyShells) {
  const auto leading = [](Shape shape, int n) {
    Model m;
    m.shell = {shape, 0.55 / 0.45, 0, pi / 4, Sides::Reflecting};
    m.grid = {n, n, {}, {}};
    m.rayleigh = 1e4;
    const SteadyState s = settle(m, rolls(1), {}, {}, 1, PETSC_COMM_SELF).back();
    return growth_rates(m, HeatFlux::Central, s.snapshot.temperature, 2).front().growth;
  };
  for (const auto& [shape, expected] :
       {std::pair{Shape::Annulus, -13.832}, std::pair{Shape::SphericalAnnulus, -14.325}}) {
    const double coarse = leading(shape, 16), fine = leading(shape, 32);
    EXPECT_NEAR((4 * fine - coarse) / 3, expected, 2e-3 * std::abs(expected));
  }
}

/// Conduction at Ra = 1e4 in a unit box grows as Ra k^2/(pi^2 + k^2)^2 - (pi^2 + k^2) for k = pi
/// (linear theory of the free layer, exact).
TEST(Stability, ConductionIsUnstableAsLinearTheorySays) {
  const auto leading = [](int n) {
    Model m = convecting(box(n), 1);
    m.rayleigh = 1e4;
    const SteadyState s = settle(m, {}, {}, {}, 1, PETSC_COMM_SELF).back();
    return growth_rates(m, HeatFlux::Central, s.snapshot.temperature, 2).front().growth;
  };
  const double exact = 1e4 / (4 * pi * pi) - 2 * pi * pi;
  EXPECT_NEAR((4 * leading(32) - leading(16)) / 3, exact, 1e-3 * exact);
}

TEST(Stability, APatternMayTurnRoundAFullCircle) {
  const Region circle = regions()[1];
  const Model m = convecting(circle, 1);
  const SteadyState s = settle(m, rolls(circle.waves), {}, {}, 1, PETSC_COMM_SELF).back();
  ASSERT_TRUE(s.converged);
  const auto rates = growth_rates(m, HeatFlux::Central, s.snapshot.temperature, 4);
  const auto neutral = [](const GrowthRate& r) {
    return std::abs(r.growth) < 1e-4 && r.frequency == 0;
  };
  EXPECT_TRUE(std::any_of(rates.begin(), rates.end(), neutral));
}

/// With contrast 1e4 convection sets in below its critical Rayleigh number: the branch folds and
/// goes back, now unstable, to the conductive state, which it meets where that loses its stability:
/// for cells of width 1 in a free layer near 150089, the least of all wavenumbers (at 3.473) of
/// this project's table of linear theory (tests/reference/onset_expvisc.csv).
TEST(Branch, FoldsAndEndsAtTheOnset) {
  BranchRequest request;
  request.logarithmic = true;
  request.values = {2e5, 1.5e5, 1.2e5, 1e5};
  request.model_at = [](double rayleigh) {
    Model m;
    m.shell = {Shape::Box, 0, 0, pi / 3.4733, Sides::Reflecting};
    m.grid = {24, 24, {}, {}};
    m.rayleigh = rayleigh;
    m.viscosity.exponential = ExponentialViscosity{1e4, 1, 1};
    return m;
  };
  InitialSettings hot;
  hot.base = InitialBase::BoundaryLayers;
  hot.interior = 0.8;
  hot.modes = {{1, 1, 0.2}};
  const SteadyState start = settle(request.model_at(2e5), hot, {}, {}, 1, PETSC_COMM_SELF).back();
  ASSERT_TRUE(start.converged);
  const Branch branch = follow_branch(request, start.snapshot.temperature, {}, PETSC_COMM_SELF);
  EXPECT_TRUE(branch.points.front().asked_for);
  EXPECT_NE(branch.remark.find("at rest"), std::string::npos) << branch.remark;
  EXPECT_TRUE(branch.points.back().backwards);
  const double onset = branch.points.back().parameter;
  EXPECT_NEAR(onset, 150089, 0.02 * 150089) << "24 x 24 cells";
  double least = 1e9;
  for (const BranchPoint& p : branch.points) {
    least = std::min(least, p.parameter);
    EXPECT_LE(p.residual, 1e-10);
  }
  EXPECT_LT(least, 0.85 * onset);
}

}  // namespace
}  // namespace lidwright
