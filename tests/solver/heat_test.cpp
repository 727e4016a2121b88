#include "solver/heat_stepper.hpp"

#include <gtest/gtest.h>

#include <Eigen/Dense>
#include <cmath>
#include <numbers>

#include "solver/initial.hpp"
#include "tests/support/observed_order.hpp"
#include "tests/support/random.hpp"
#include "tests/support/shells.hpp"

namespace lidwright {
namespace {

using std::numbers::pi;

/// T = a + b G(r) - source r^2 / (2 (p + 1)) with dG/dr = r^-p: conduction between two walls
/// (Carslaw & Jaeger 1959, by integrating the heat equation twice).
class Conduction {
 public:
  Conduction(const Shell& s, const Walls& walls, double source)
      : p_(s.shape == Shape::Box ? 0 : (s.shape == Shape::Annulus ? 1 : 2)),
        inner_(s.inner_radius),
        outer_(s.inner_radius + 1),
        source_(source) {
    Eigen::Matrix2d m;
    Eigen::Vector2d right;
    const auto set = [&](int row, double r, const ThermalWall& wall) {
      if (const auto* fixed = std::get_if<FixedTemperature>(&wall)) {
        m.row(row) << 1, primitive(r);
        right(row) = fixed->value + source_ * r * r / (2 * (p_ + 1));
      } else {
        m.row(row) << 0, -std::pow(r, -p_);
        right(row) = std::get<FixedHeatFlux>(wall).outward - source_ * r / (p_ + 1);
      }
    };
    set(0, inner_, walls.inner.thermal);
    set(1, outer_, walls.outer.thermal);
    const Eigen::Vector2d ab = m.fullPivLu().solve(right);
    a_ = ab(0);
    b_ = ab(1);
  }
  double temperature(double r) const {
    return a_ + b_ * primitive(r) - source_ * r * r / (2 * (p_ + 1));
  }
  double flux(double r) const { return -b_ * std::pow(r, -p_) + source_ * r / (p_ + 1); }

 private:
  double primitive(double r) const { return p_ == 0 ? r : (p_ == 1 ? std::log(r) : -1 / r); }
  int p_;
  double inner_, outer_, source_, a_ = 0, b_ = 0;
};

class ConductionInShells : public testing::TestWithParam<NamedShell> {
 protected:
  struct Errors {
    double temperature, heat_flow;
  };
  Errors errors(const Walls& walls, double source, int radial) const {
    const NamedShell s = with_cells(GetParam(), radial, 4);
    const auto d = decompose(s.shell, s.grid);
    const Geometry& g = d->geometry();
    const HeatOperator heat(d, walls, {source, {}}, HeatFlux::Central);
    const std::vector<double> t = conductive_profile(heat);
    const Conduction exact(s.shell, walls, source);
    double sum = 0, volume = 0;
    for (int i = 0; i < radial; ++i) {
      sum += g.volume({i, 0}) *
             std::pow(t[static_cast<std::size_t>(i)] - exact.temperature(g.cell_radius(i)), 2);
      volume += g.volume({i, 0});
    }
    CellField field(d);
    fill(field, [&](Cell c) { return t[static_cast<std::size_t>(c.i)]; });
    double flow = 0;
    for (const int wall : {0, radial})
      flow += std::abs(heat.wall_flux(field, {wall, 1}) * g.inverse_area(RadialFace{wall, 1}) -
                       exact.flux(g.face_radius(wall)));
    return {std::sqrt(sum / volume), flow};
  }
  void expect_second_order(const Walls& walls, double source) const {
    const Errors coarse = errors(walls, source, 32), fine = errors(walls, source, 64);
    const auto judge = [](double a, double b, const char* what) {
      if (b < 1e-11) return;  // exact on any mesh, up to round-off
      EXPECT_NEAR(observed_order(a, b), 2, 0.1) << what << " " << a << " " << b;
    };
    judge(coarse.temperature, fine.temperature, "temperature");
    judge(coarse.heat_flow, fine.heat_flow, "heat flow");
  }
};

TEST_P(ConductionInShells, IsSecondOrderBetweenFixedTemperatures) {
  expect_second_order({{FixedTemperature{1}, Slip::Free}, {FixedTemperature{0}, Slip::Free}}, 0);
}
TEST_P(ConductionInShells, IsSecondOrderWithInternalHeating) {
  expect_second_order({{FixedTemperature{0.4}, Slip::Free}, {FixedTemperature{0.1}, Slip::Free}},
                      3);
}
TEST_P(ConductionInShells, IsSecondOrderWithAnInsulatingInnerWall) {
  expect_second_order({{FixedHeatFlux{0}, Slip::Free}, {FixedTemperature{0}, Slip::Free}}, 1);
}
TEST_P(ConductionInShells, IsSecondOrderWithGivenHeatFlux) {
  expect_second_order({{FixedHeatFlux{2}, Slip::Free}, {FixedTemperature{0}, Slip::Free}}, 0);
  expect_second_order({{FixedTemperature{1}, Slip::Free}, {FixedHeatFlux{-0.7}, Slip::Free}}, 0.5);
}

INSTANTIATE_TEST_SUITE_P(All, ConductionInShells, testing::ValuesIn(all_shells(8, 4)), shell_name);

// Transport by a given flow.

const Walls cold_and_hot{};

/// Once round the lateral coordinate, or from side to side: fits full circles and reflecting sides.
double phase(const Geometry& g, double lateral) {
  const double begin = g.face_lateral(0);
  return 2 * pi * (lateral - begin) / (g.face_lateral(g.lateral_cells()) - begin);
}

/// Two cells of circulation, psi = strength sin(pi height) sin(phase).
CornerField circulation(std::shared_ptr<const Decomposition> d, double strength) {
  const Geometry& g = d->geometry();
  CornerField psi(d);
  for (int j = psi.held().begin; j < psi.held().end; ++j)
    for (int i = 1; i < g.radial_cells(); ++i)
      if (!g.on_side(j))
        psi[{i, j}] = strength * std::sin(pi * (g.face_radius(i) - g.inner_radius())) *
                      std::sin(phase(g, g.face_lateral(j)));
  return psi;
}

CellField smooth_start(std::shared_ptr<const Decomposition> d) {
  const Geometry& g = d->geometry();
  CellField t(d);
  fill(t, [&](Cell c) {
    const double s = g.cell_radius(c.i) - g.inner_radius();
    return 1 - s + 0.3 * std::sin(pi * s) * std::cos(phase(g, g.cell_lateral(c.j)));
  });
  return t;
}

/// Temperature after `steps` equal steps to `end`, with a circulation that swells and ebbs.
CellField carried(std::shared_ptr<const Decomposition> d, HeatFlux flux, double end, int steps) {
  HeatStepper stepper(d, cold_and_hot, {0.5, {}}, flux);
  const auto psi_at = [&](double time) {
    return circulation(d, 15 * (1 + 0.5 * std::sin(time * 2 * pi / end)));
  };
  CellField t = smooth_start(d), next(d);
  const double dt = end / steps;
  for (int n = 0; n < steps; ++n) {
    (void)stepper.step(t, {psi_at(n * dt), {}}, {psi_at((n + 1) * dt), {}}, dt, next);
    std::swap(t, next);
  }
  return t;
}

double rms_difference(const CellField& a, const CellField& b) {
  const Geometry& g = a.decomposition().geometry();
  double sum = 0;
  for_each_owned<At::Cell>(a.decomposition(),
                           [&](Cell c) { sum += g.volume(c) * std::pow(a[c] - b[c], 2); });
  return std::sqrt(sum / g.total_volume());
}

class Transport : public testing::TestWithParam<NamedShell> {};

TEST_P(Transport, IsSecondOrderInTime) {
  const auto d = decompose(GetParam().shell, GetParam().grid);
  const auto at = [&](int steps) { return carried(d, HeatFlux::Central, 0.04, steps); };
  const CellField coarse = at(40), middle = at(80), fine = at(160);
  EXPECT_NEAR(observed_order(rms_difference(coarse, middle), rms_difference(middle, fine)), 2, 0.1);
}

INSTANTIATE_TEST_SUITE_P(All, Transport, testing::ValuesIn(all_shells(12, 16)), shell_name);

/// Mean of the four cells that make one of the mesh with half the cells (uniform box).
CellField halved(const CellField& fine, std::shared_ptr<const Decomposition> coarse) {
  CellField t(coarse);
  for_each_owned<At::Cell>(*coarse, [&](Cell c) {
    double sum = 0;
    for (const int a : {0, 1})
      for (const int b : {0, 1}) sum += fine[{2 * c.i + a, 2 * c.j + b}];
    t[c] = sum / 4;
  });
  return t;
}

double order_in_space(HeatFlux flux) {
  const auto box = [](int n) {
    return decompose({Shape::Box, 0, 0, 1, Sides::Reflecting}, {n, n, {}, {}});
  };
  const auto coarse = box(24), middle = box(48), fine = box(96);
  const int steps = 160;
  const double end = 0.02;
  const CellField a = carried(coarse, flux, end, steps), b = carried(middle, flux, end, steps),
                  c = carried(fine, flux, end, steps);
  return observed_order(rms_difference(a, halved(b, coarse)), rms_difference(b, halved(c, middle)));
}

TEST(TransportInSpace, IsSecondOrderWithCentralFluxes) {
  EXPECT_NEAR(order_in_space(HeatFlux::Central), 2, 0.1);
}

/// Conduction, the shape of the cells and the limiter at extrema leave second order to the
/// third-order flux.
TEST(TransportInSpace, IsSecondOrderWithLimitedFluxes) {
  EXPECT_NEAR(order_in_space(HeatFlux::Limited), 2, 0.1);
}

/// A blob of 1 in 0 and flow so strong that conduction smooths little in the time of the test.
TEST(LimitedTransport, KeepsToTheRangeOfTheStart) {
  const auto d = decompose({Shape::Annulus, 1.2, 0, 2, Sides::Reflecting}, {24, 48, {}, {}});
  HeatStepper stepper(d, cold_and_hot, {}, HeatFlux::Limited);
  const CornerField psi = circulation(d, 1e5);
  CellField t(d), next(d);
  fill(t, [](Cell c) { return c.i > 6 && c.i < 14 && c.j > 10 && c.j < 30 ? 1.0 : 0.0; });
  const double dt = 0.5 / stepper.heat().outflow_rate(psi);
  double least = 0, most = 0;
  for (int n = 0; n < 200; ++n) {
    (void)stepper.step(t, {psi, {}}, {psi, {}}, dt, next);
    std::swap(t, next);
    for_each_owned<At::Cell>(*d, [&](Cell c) {
      least = std::min(least, t[c]);
      most = std::max(most, t[c]);
    });
  }
  EXPECT_GE(least, -1e-10);
  EXPECT_LE(most, 1 + 1e-10);
  EXPECT_GT(most, 0.9);  // and it is not smeared out at once
}

class HeatContent : public testing::TestWithParam<NamedShell> {};

/// Change of content = fluxes + sources. Round-off: the content itself, times 1e-16 and a few.
TEST_P(HeatContent, ChangesByWallFlowsAndSourcesOnly) {
  const auto d = decompose(GetParam().shell, GetParam().grid);
  const Geometry& g = d->geometry();
  const Walls walls{{FixedHeatFlux{0.8}, Slip::Free}, {FixedTemperature{0.2}, Slip::Free}};
  HeatStepper stepper(d, walls, {1.5, {{0.5, 4}}}, HeatFlux::Limited);
  CornerField psi(d);
  for (int j = psi.held().begin; j < psi.held().end; ++j)
    for (int i = 1; i < g.radial_cells(); ++i) {
      const int n = g.corner_columns();
      if (!g.on_side(j)) psi[{i, j}] = 3 * random_at(i, (j + n) % n, 3);
    }
  CellField t = smooth_start(d), next(d);
  const auto content = [&](const CellField& f) {
    double sum = 0;
    for_each_owned<At::Cell>(*d, [&](Cell c) { sum += g.volume(c) * f[c]; });
    return sum;
  };
  const double dt = 0.5 / stepper.heat().outflow_rate(psi);
  for (int n = 0; n < 5; ++n) {
    const StepHeat heat = stepper.step(t, {psi, {}}, {psi, {}}, dt, next);
    const double gain = content(next) - content(t);
    const double fed = dt * (heat.gain() + stepper.heat().total_source());
    EXPECT_NEAR(gain, fed, 4e-15 * (std::abs(content(t)) + std::abs(fed)));
    std::swap(t, next);
  }
}

INSTANTIATE_TEST_SUITE_P(All, HeatContent, testing::ValuesIn(all_shells(8, 12)), shell_name);

}  // namespace
}  // namespace lidwright
