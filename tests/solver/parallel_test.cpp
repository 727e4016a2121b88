#include <gtest/gtest.h>

#include <cmath>
#include <limits>
#include <numbers>

#include "mesh/gather.hpp"
#include "solver/initial.hpp"
#include "tests/support/marches.hpp"
#include "tests/support/shells.hpp"

/// The same march on the whole mesh by one rank and shared out among all ranks.
namespace lidwright {
namespace {

using std::numbers::pi;

constexpr double agreement = 1e-10;

/// Stagnant-lid like: viscosity contrast 1e6, Ra 1e7 where it is hot.
Model lid(const Shell& shell, Slip inner, Slip outer) {
  Model m;
  m.shell = shell;
  m.grid = {16, 36, {2, 2}, {}};
  m.walls.inner.slip = inner;
  m.walls.outer.slip = outer;
  m.rayleigh = 1e7;
  m.viscosity.exponential = ExponentialViscosity{1e6, 1, 1};
  return m;
}

struct NamedModel {
  std::string name;
  Model model;
};
void PrintTo(const NamedModel& m, std::ostream* out) { *out << m.name; }

/// The lid yields, and hot rock creeps by dislocations too.
Model yielding_lid(const Shell& shell, YieldingLaw law) {
  Model m = lid(shell, Slip::Free, Slip::Free);
  m.viscosity.exponential = ExponentialViscosity{1e5, 1, 1};
  m.dislocation = DislocationCreep{m.viscosity, 3, 1e4, false};
  m.yielding = Yielding{law, 1e4, 0.1, 1e5, std::numeric_limits<double>::infinity(), 1e-2};
  return m;
}

std::vector<NamedModel> models() {
  const Shell circle{Shape::SphericalAnnulus, 0.55 / 0.45, 0, 2 * pi, Sides::Periodic};
  const Shell meridian{Shape::AxisymmetricShell, 0.55 / 0.45, 0, pi, Sides::Reflecting};
  return {{"CircleSlipping", lid(circle, Slip::Free, Slip::Free)},
          {"CircleGripping", lid(circle, Slip::None, Slip::Free)},
          {"Meridian", lid(meridian, Slip::Free, Slip::None)},
          {"Yielding", yielding_lid(circle, YieldingLaw::Minimum)},
          {"YieldingByHarmonicMean", yielding_lid(meridian, YieldingLaw::HarmonicMean)}};
}

InitialSettings lively() {
  InitialSettings s;
  s.base = InitialBase::BoundaryLayers;
  s.interior = 0.8;
  s.modes = {{3, 1, 0.05}};
  s.noise = 0.01;
  return s;
}

class ParallelMarch : public testing::TestWithParam<NamedModel> {
 protected:
  March march(MPI_Comm comm) const {
    FlowSettings flow;
    flow.tolerance = 1e-12;
    HeatSettings heat;
    return {GetParam().model, lively(), {}, flow, heat, comm};
  }
};

/// Largest difference over the largest number; `whole` and `own` on rank 0 only.
double difference(const std::vector<double>& whole, const std::vector<double>& own) {
  if (own.size() != whole.size()) return 1;
  double most = 0, size = 0;
  for (std::size_t n = 0; n < own.size(); ++n) {
    most = std::max(most, std::abs(whole[n] - own[n]));
    size = std::max(size, std::abs(own[n]));
  }
  return most / size;
}

TEST_P(ParallelMarch, GivesTheSameOnAnyNumberOfRanks) {
  March alone = march(PETSC_COMM_SELF), shared = march(PETSC_COMM_WORLD);
  for (int n = 0; n < 20; ++n) {
    alone.step(1);
    shared.step(1);
  }
  const std::vector<double> own = physics_of(alone.row()), all = physics_of(shared.row());
  for (std::size_t n = 0; n < own.size(); ++n)
    EXPECT_NEAR(all[n], own[n], agreement * std::abs(own[n])) << "number " << n;
  // Of round-off: the content's, over what a short step moves.
  const HistoryRow row = shared.row();
  const double moved = row.time_step * std::max(row.heat_flow_outer, row.heat_flow_inner),
               content = row.temperature_mean * shared.decomposition()->geometry().total_volume();
  EXPECT_LT(std::abs(row.heat_budget_residual) * moved, 1e-14 * content);
  const std::vector<double> t = gather_to_first(shared.temperature()),
                            psi = gather_to_first(shared.stream_function());
  const Snapshot a = alone.snapshot(true), s = shared.snapshot(true);
  const std::vector<double> p = gather_to_first(s.pressure), e = gather_to_first(s.strain_rate);
  if (shared.decomposition()->rank() != 0) return;
  EXPECT_LT(difference(t, gather_to_first(alone.temperature())), agreement);
  EXPECT_LT(difference(psi, gather_to_first(alone.stream_function())), agreement);
  EXPECT_LT(difference(e, gather_to_first(a.strain_rate)), 100 * agreement);
  EXPECT_LT(difference(p, gather_to_first(a.pressure)), 100 * agreement);
  EXPECT_LT(difference(s.outer.heat_flux, a.outer.heat_flux), agreement);
  EXPECT_LT(difference(s.profiles.temperature, a.profiles.temperature), agreement);
  EXPECT_LT(difference(s.profiles.heat_advected, a.profiles.heat_advected), agreement);
  EXPECT_LT(difference(s.profiles.viscosity, a.profiles.viscosity), agreement);
}

/// The net flow round the circle is there when a wall grips, and it is found.
TEST_P(ParallelMarch, HasANetFlowOnlyWhereAWallGrips) {
  const March m = march(PETSC_COMM_WORLD);
  const Geometry& g = m.decomposition()->geometry();
  const int column = m.decomposition()->owned(At::Corner).begin;
  const double net = m.stream_function()[{g.radial_cells(), column}];
  if (g.periodic() && m.power().inner_slip() == Slip::None) {
    EXPECT_GT(std::abs(net), 1e-6);
  } else {
    EXPECT_EQ(net, 0);
  }
}

TEST_P(ParallelMarch, GoesOnFromAnArchiveBitForBit) {
  const Model& model = GetParam().model;
  FlowSettings flow;
  flow.memory = 3;
  const HeatSettings heat;
  March first(model, lively(), {}, flow, heat, PETSC_COMM_WORLD);
  for (int n = 0; n < 12; ++n) first.step(1);
  March second(model, flow, heat, first.archive(), PETSC_COMM_WORLD);
  for (int n = 0; n < 10; ++n) {
    first.step(1);
    second.step(1);
    const HistoryRow a = first.row(), b = second.row();
    ASSERT_EQ(physics_of(a), physics_of(b)) << "step " << n;
    ASSERT_EQ(a.heat_budget_residual, b.heat_budget_residual);
    ASSERT_EQ(a.work_mismatch, b.work_mismatch);
    ASSERT_EQ(a.flow_error, b.flow_error);
    ASSERT_EQ(a.step, b.step);
    ASSERT_EQ(a.applications, b.applications);
    ASSERT_EQ(a.factorisations, b.factorisations);
  }
  EXPECT_EQ(first.temperature().values(), second.temperature().values());
  EXPECT_EQ(first.stream_function().values(), second.stream_function().values());
}

std::string model_name(const testing::TestParamInfo<NamedModel>& info) { return info.param.name; }

INSTANTIATE_TEST_SUITE_P(All, ParallelMarch, testing::ValuesIn(models()), model_name);

/// Noise and modes do not depend on who computes them: equal to the last bit.
TEST(ParallelStart, IsTheSameFieldOnAnyNumberOfRanks) {
  for (const NamedShell& s : all_shells(6, 14)) {
    const auto field = [&](MPI_Comm comm) {
      const HeatOperator heat(decompose(s.shell, s.grid, comm), {}, {}, HeatFlux::Limited);
      return initial_temperature(heat, lively(), {});
    };
    const CellField own = field(PETSC_COMM_SELF);
    const std::vector<double> all = gather_to_first(field(PETSC_COMM_WORLD));
    int rank = 0;
    MPI_Comm_rank(PETSC_COMM_WORLD, &rank);
    if (rank != 0) continue;
    EXPECT_EQ(all, gather_to_first(own)) << s.name;
  }
}

}  // namespace
}  // namespace lidwright
