#include <gtest/gtest.h>

#include <cmath>
#include <functional>
#include <numbers>

#include "solver/nonlinear_flow.hpp"
#include "tests/support/observed_order.hpp"
#include "tests/support/shells.hpp"

/// Flows along the walls, whose stress follows from the force alone, so that the rate and the
/// velocity are integrals of the law: g(tau) = 2 e_II at the stress tau. Bird, Stewart & Lightfoot,
/// Transport Phenomena, 2nd ed. 2002, chapter 8 does the same for the fluids named there; the
/// integrals of these laws are worked out beside them.
namespace lidwright {
namespace {

using std::numbers::pi;

struct Fluid {
  std::string name;
  LocalFlowLaw law;
  std::function<double(double)> plane;   ///< integral of g from 0 to tau
  std::function<double(double)> circle;  ///< indefinite integral of g / tau
  double bend = 0;                       ///< stress at which g has a kink; 0: none
};

/// g = tau / eta.
Fluid newtonian() {
  LocalFlowLaw law;
  law.diffusion = 0.7;
  return {"Newtonian", law, [](double t) { return t * t / (2 * 0.7); },
          [](double t) { return t / 0.7; }};
}

/// g = tau^3 / B; a cut-off keeps the viscosity at rest finite and is of no account.
Fluid power_law() {
  LocalFlowLaw law;
  law.diffusion = LocalFlowLaw::none;
  law.dislocation = 0.3;
  law.exponent = 3;
  law.highest = 1e7;
  return {"PowerLaw", law, [](double t) { return std::pow(t, 4) / (4 * 0.3); },
          [](double t) { return std::pow(t, 3) / (3 * 0.3); }};
}

/// g = tau / eta + tau^3 / B.
Fluid composite() {
  Fluid f = power_law();
  f.name = "Composite";
  f.law.highest = LocalFlowLaw::none;
  f.law.diffusion = 0.7;
  const Fluid a = newtonian(), b = power_law();
  f.plane = [=](double t) { return a.plane(t) + b.plane(t); };
  f.circle = [=](double t) { return a.circle(t) + b.circle(t); };
  return f;
}

/// g = tau / eta below tau_c = tau_y eta / (eta - floor), where creep and plastic flow have one
/// viscosity; (tau - tau_y) / floor above.
Fluid minimum(double bend) {
  const double eta = 1, floor = 0.05, yield = bend * (eta - floor) / eta;
  LocalFlowLaw law;
  law.diffusion = eta;
  law.yield_stress = yield;
  law.floor = floor;
  const auto plane = [=](double t) {
    if (t <= bend) return t * t / (2 * eta);
    return bend * bend / (2 * eta) +
           (std::pow(t - yield, 2) - std::pow(bend - yield, 2)) / (2 * floor);
  };
  const auto circle = [=](double t) {
    if (t <= bend) return t / eta;
    return bend / eta + (t - bend - yield * std::log(t / bend)) / floor;
  };
  return {"Minimum", law, plane, circle, bend};
}

/// tau = 2 g / (1/eta + g/tau_y) at floor 0, so g = tau tau_y / (eta (2 tau_y - tau)), tau < 2
/// tau_y.
/// The stresses below reach 4.03.
Fluid harmonic() {
  const double eta = 1, yield = 2.4;
  LocalFlowLaw law;
  law.diffusion = eta;
  law.yield_stress = yield;
  law.yielding = YieldingLaw::HarmonicMean;
  const auto rest = [=](double t) { return -std::log(1 - t / (2 * yield)); };
  return {"HarmonicMean", law, [=](double t) { return yield / eta * (2 * yield * rest(t) - t); },
          [=](double t) { return yield / eta * rest(t); }};
}

/// The flow of one fluid by a force on lateral faces, in the direction of the lateral coordinate.
struct Solved {
  std::shared_ptr<const Decomposition> d;
  CornerField psi;
  FlowReport report;
};

template <class ForceOn>
Solved solve(const Fluid& fluid, const Shell& shell, const Grid& grid, Slip outer,
             ForceOn&& force_on) {
  const auto d = decompose(shell, grid);
  const Geometry& g = d->geometry();
  Walls walls;
  walls.inner.slip = Slip::None;
  walls.outer.slip = outer;
  CornerField force(d), psi(d);
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i)
      add_to_corners(g, force, LateralFace{i, j}, force_on(g, LateralFace{i, j}));
  FlowSettings settings;
  settings.tolerance = 1e-10;
  NonlinearFlow flow(d, walls, settings);
  const CellField cells(d);
  const std::vector<LocalFlowLaw> laws(cells.values().size(), fluid.law);
  const FlowReport report = flow.solve(laws, force, psi);
  EXPECT_TRUE(report.converged) << fluid.name << " " << grid.radial;
  return {d, psi, report};
}

/// Relative rms over the rows of cells below `rows`.
template <class Exact>
double velocity_error(const Solved& s, int rows, Exact&& exact) {
  const Geometry& g = s.d->geometry();
  double wrong = 0, size = 0;
  for (int i = 0; i < rows; ++i) {
    const double v = exact(g.cell_radius(i));
    for (int j = 0; j < g.lateral_cells(); ++j) {
      wrong += g.volume({i, j}) * std::pow(velocity(g, s.psi, LateralFace{i, j}) - v, 2);
      size += g.volume({i, j}) * v * v;
    }
  }
  return std::sqrt(wrong / size);
}

struct Errors {
  double velocity, flow_rate;
};

/// Between two gripping plates under the force `push` along them: tau = push |1/2 - z|,
/// v = [plane(push / 2) - plane(tau)] / push.
constexpr double push = 8;
const Grading both_walls{2, 2};

Solved poiseuille(const Fluid& fluid, int n, Grading grading) {
  const Shell box{Shape::Box, 0, 0, 1.5, Sides::Periodic};
  return solve(fluid, box, {n, 4, grading, {}}, Slip::None,
               [](const Geometry& g, LateralFace f) { return push * g.dual_volume(f); });
}

/// The flow rate is twice the integral over half the gap, by Simpson's rule on 2 x 2000 parts that
/// meet in the bend.
double flow_rate(const Fluid& fluid) {
  const auto v = [&](double t) { return (fluid.plane(push / 2) - fluid.plane(t)) / push; };
  double sum = 0;
  const int parts = 2000;
  for (const auto& [from, to] : {std::pair{0.0, fluid.bend}, std::pair{fluid.bend, push / 2}})
    for (int k = 0; k < parts; ++k) {
      const double h = (to - from) / parts, t = from + k * h;
      sum += h * (v(t) + 4 * v(t + h / 2) + v(t + h)) / 6;
    }
  return 2 * sum / push;
}

Errors plane_errors(const Fluid& fluid, int n, Grading grading) {
  const Solved s = poiseuille(fluid, n, grading);
  const auto exact = [&](double z) {
    return (fluid.plane(push / 2) - fluid.plane(push * std::abs(0.5 - z))) / push;
  };
  const double found = s.psi[{0, 0}] - s.psi[{n, 0}];
  return {velocity_error(s, n, exact), std::abs(found / flow_rate(fluid) - 1)};
}

/// In a circle, the inner wall grips and the outermost row of cells is pushed: tau r^2 = torque
/// below it, v / r = [circle(tau at the inner wall) - circle(tau)] / 2. Errors are those of the
/// lower three quarters of the rows.
constexpr double torque = 6, inner_wall = 1.22;

double circle_error(const Fluid& fluid, int n, Grading grading) {
  const Shell circle{Shape::Annulus, inner_wall, 0, 2 * pi, Sides::Periodic};
  const Solved s =
      solve(fluid, circle, {n, 8, grading, {}}, Slip::Free, [n](const Geometry& g, LateralFace f) {
        return f.i == n - 1 ? torque * g.lateral_distance(f.j) / g.stretch(f.i) : 0;
      });
  const auto stress = [](double r) { return torque / (r * r); };
  return velocity_error(s, 3 * n / 4, [&](double r) {
    return r / 2 * (fluid.circle(stress(inner_wall)) - fluid.circle(stress(r)));
  });
}

/// A third of the way up, counted in cells: a yield surface there lies a third or two thirds up a
/// cell on the grids of 16, 32, 64 ... cells, where a kink has the same effect.
double third_of_the_cells(double inner, Grading grading) {
  return graded_faces(inner, inner + 1, 300, grading)[100];
}

void expect_second_order(double coarse, double fine, const std::string& what) {
  EXPECT_NEAR(observed_order(coarse, fine), 2, 0.1) << what << " " << coarse << " " << fine;
}

class ExactNonlinear : public testing::TestWithParam<std::tuple<std::string, Grading>> {
 protected:
  const Grading grading = std::get<1>(GetParam());
  /// With the yield surface at the stress given.
  Fluid fluid(double bend) const {
    for (const Fluid& f : {newtonian(), power_law(), composite(), minimum(bend), harmonic()})
      if (f.name == std::get<0>(GetParam())) return f;
    throw std::out_of_range("no such fluid");
  }
};

TEST_P(ExactNonlinear, PoiseuilleFlowIsSecondOrder) {
  const Fluid f = fluid(push * (0.5 - third_of_the_cells(0, grading)));
  const Errors coarse = plane_errors(f, 32, grading), fine = plane_errors(f, 64, grading);
  expect_second_order(coarse.velocity, fine.velocity, f.name + " velocity");
  expect_second_order(coarse.flow_rate, fine.flow_rate, f.name + " flow rate");
}

TEST_P(ExactNonlinear, CouetteFlowIsSecondOrder) {
  const Fluid f = fluid(torque / std::pow(third_of_the_cells(inner_wall, grading), 2));
  const double coarse = circle_error(f, 64, grading), fine = circle_error(f, 128, grading);
  expect_second_order(coarse, fine, f.name + " Couette");
}

std::string case_name(const testing::TestParamInfo<std::tuple<std::string, Grading>>& c) {
  return std::get<0>(c.param) + (std::get<1>(c.param).first > 1 ? "Graded" : "Uniform");
}

INSTANTIATE_TEST_SUITE_P(All, ExactNonlinear,
                         testing::Combine(testing::Values("Newtonian", "PowerLaw", "Composite",
                                                          "Minimum", "HarmonicMean"),
                                          testing::Values(Grading{}, both_walls)),
                         case_name);

/// On equal cells the rate is integrated by the midpoint rule, which is exact for a rate piecewise
/// linear in z but for the half cell at the wall (h^2 push / (8 floor)) and the cell with the kink
/// (up to h^2 push / 8 times the jump 1 / floor - 1 / eta of slope). So wherever the yield surface
/// lies the velocity is within h^2 push / (4 floor).
TEST(YieldingPoiseuille, IsWithinTheBoundWhereverTheYieldSurfaceLies) {
  for (const int n : {9, 14, 21, 27, 33})
    for (const double at : {0.11, 0.23, 0.37}) {
      const Fluid f = minimum(push * (0.5 - at));
      const Solved s = poiseuille(f, n, {});
      const Geometry& g = s.d->geometry();
      double most = 0;
      for (int i = 0; i < n; ++i) {
        const double exact =
            (f.plane(push / 2) - f.plane(push * std::abs(0.5 - g.cell_radius(i)))) / push;
        most = std::max(most, std::abs(velocity(g, s.psi, LateralFace{i, 0}) - exact));
      }
      const double bound = push / (4 * f.law.floor * n * n);
      EXPECT_LT(most, bound) << n << " " << at;
      // What the wall's half cell gives is there in any case.
      EXPECT_GT(most, 0.4 * bound) << n << " " << at;
    }
}

/// The share of the gap where stress is above the yield point; the stress of a quarter is known at
/// corners, so to within a cell.
TEST(YieldingPoiseuille, YieldsBesideTheWalls) {
  const int n = 40;
  for (const double at : {0.11, 0.23, 0.37})
    EXPECT_NEAR(poiseuille(minimum(push * (0.5 - at)), n, {}).report.yielding_share, 2 * at,
                1.0 / n);
}

TEST(YieldingPoiseuille, NothingYieldsBelowTheYieldLoad) {
  Fluid f = minimum(1.001 * push / 2);
  const Solved s = poiseuille(f, 20, both_walls);
  EXPECT_EQ(s.report.yielding_share, 0);
  f.law.yield_stress = LocalFlowLaw::none;
  const Solved creeping = poiseuille(f, 20, both_walls);
  for (int i = 0; i <= 20; ++i) {
    const Corner k{i, 0}, top{20, 0};
    EXPECT_NEAR(s.psi[k], creeping.psi[k], 1e-9 * std::abs(creeping.psi[top])) << i;
  }
  EXPECT_GT(poiseuille(minimum(0.97 * push / 2), 20, both_walls).report.yielding_share, 0);
}

}  // namespace
}  // namespace lidwright
