#include "solver/power.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "solver/flow.hpp"
#include "solver/pressure.hpp"
#include "solver/stencil_matrix.hpp"
#include "tests/support/random.hpp"
#include "tests/support/shells.hpp"

/// The identities of design.md, section 3, for the flow: graded meshes, viscosity that jumps by up
/// to 1e8 from cell to cell, walls that slip and grip.
namespace lidwright {
namespace {

double random_viscosity(Cell c) { return std::pow(10.0, 4 * random_at(c.i, c.j, 9)); }

struct Slips {
  std::string name;
  Slip inner, outer;
};

void PrintTo(const Slips& s, std::ostream* out) { *out << s.name; }

class FlowIdentities : public testing::TestWithParam<std::tuple<NamedShell, Slips>> {
 protected:
  FlowIdentities() : power(d, walls) {
    for_each_owned<At::Cell>(*d, [&](Cell c) { eta[c] = random_viscosity(c); });
    eta.exchange();
    power.set_viscosity(eta);
  }

  static Walls walls_of(const Slips& s) {
    Walls w;
    w.inner.slip = s.inner;
    w.outer.slip = s.outer;
    return w;
  }
  Handle<Vec, VecDestroy> unknowns() const {
    Handle<Vec, VecDestroy> v;
    check(DMCreateGlobalVector(d->dm(At::Corner), v.put()));
    return v;
  }
  /// Random where psi is free, with the walls' values.
  CornerField random_flow(std::uint64_t stream) const {
    CornerField f(d), psi(d);
    for_each_owned<At::Corner>(*d, [&](Corner k) { f[k] = random_at(k.i, k.j, stream); });
    const auto v = unknowns();
    power.to_unknowns(f, v);
    power.from_unknowns(v, psi);
    return psi;
  }
  /// <a, K b> over the unknowns.
  double product(const CornerField& a, const CornerField& b) const {
    CornerField force(d);
    power.apply(b, force);
    double sum = 0;
    for_each_owned<At::Corner>(*d, [&](Corner k) { sum += a[k] * force[k]; });
    return sum;
  }
  double buoyancy(RadialFace f) const {
    const int n = g.lateral_cells();
    return random_at(f.i, (f.j + n) % n, 5);
  }
  RadialFaceField buoyancies() const {
    return on_radial_faces(d, [this](RadialFace f) { return buoyancy(f); });
  }
  /// A solved flow; random viscosity, so that nothing is smooth.
  CornerField solved(double tolerance) {
    FlowSettings settings;
    settings.tolerance = tolerance;
    FlowSolver solver(d, walls, settings);
    CornerField psi(d);
    const auto report = solver.solve(eta, buoyancies(), psi);
    EXPECT_TRUE(report.converged);
    return psi;
  }

  std::shared_ptr<const Decomposition> d = decompose(std::get<0>(GetParam()));
  const Geometry& g = d->geometry();
  Walls walls = walls_of(std::get<1>(GetParam()));
  CellField eta{d};
  Power power;
};

TEST_P(FlowIdentities, OperatorIsSymmetricAndPositive) {
  const CornerField a = random_flow(1), b = random_flow(2);
  const double aa = product(a, a), bb = product(b, b);
  EXPECT_GT(aa, 0);
  EXPECT_GT(bb, 0);
  EXPECT_NEAR(product(a, b) / std::sqrt(aa * bb), product(b, a) / std::sqrt(aa * bb), 1e-14);
}

TEST_P(FlowIdentities, DissipationIsTheFunctionalTwice) {
  const CornerField a = random_flow(1);
  EXPECT_NEAR(dissipation(power, a) / product(a, a), 1, 1e-13);
}

/// y = K x from the lower triangle, with sums of absolute values to measure round-off by.
struct Applied {
  std::vector<double> y, size;
};
Applied lower_times(const SparseLower& m, const std::vector<double>& x) {
  Applied r{std::vector<double>(x.size(), 0.0), std::vector<double>(x.size(), 0.0)};
  const auto add = [&](std::size_t row, double value) {
    r.y[row] += value;
    r.size[row] += std::abs(value);
  };
  for (std::size_t c = 0; c < x.size(); ++c)
    for (auto k = static_cast<std::size_t>(m.column_start[c]);
         k < static_cast<std::size_t>(m.column_start[c + 1]); ++k) {
      const auto row = static_cast<std::size_t>(m.row[k]);
      add(row, m.value[k] * x[c]);
      if (row != c) add(c, m.value[k] * x[row]);
    }
  return r;
}

TEST_P(FlowIdentities, StencilMatrixIsTheFactoredForm) {
  StencilMatrix matrix(power);
  matrix.assemble(power);
  const CornerField psi = random_flow(1);
  CornerField force(d), reduced(d);
  power.apply(psi, force);
  const auto v = unknowns();
  power.to_unknowns(force, v);
  reduced.from_global(v);
  const auto rows = static_cast<std::size_t>(d->rows(At::Corner));
  const auto number = [&](Corner k) {
    return matrix
        .unknown_of_place()[static_cast<std::size_t>(k.j) * rows + static_cast<std::size_t>(k.i)];
  };
  std::vector<double> x(static_cast<std::size_t>(matrix.unknowns()));
  for_each_owned<At::Corner>(*d, [&](Corner k) {
    if (number(k) >= 0) x[static_cast<std::size_t>(number(k))] = psi[k];
  });
  const Applied found = lower_times(matrix.matrix(), x);
  long compared = 0;
  for_each_owned<At::Corner>(*d, [&](Corner k) {
    if (number(k) < 0) return;
    const auto n = static_cast<std::size_t>(number(k));
    EXPECT_NEAR(found.y[n], reduced[k], 1e-12 * found.size[n]) << k.i << " " << k.j;
    ++compared;
  });
  EXPECT_EQ(compared, matrix.unknowns());
  EXPECT_EQ(power.through_flow(), matrix.unknown_of_place()[rows - 1] >= 0);
}

/// To the tolerance squared: the flow is stationary, so the power's error is second order.
TEST_P(FlowIdentities, DissipationEqualsBuoyancyWork) {
  for (const double tolerance : {1e-3, 1e-6}) {
    const CornerField psi = solved(tolerance);
    double work = 0;
    for_each_owned<At::RadialFace>(*d, [&](RadialFace f) {
      if (g.on_wall(f.i) || f.j >= g.lateral_cells()) return;
      work += g.radial_distance(f.i) * buoyancy(f) * flow_through(psi, f);
    });
    EXPECT_NEAR(dissipation(power, psi) / work, 1, tolerance * tolerance) << tolerance;
  }
}

/// What the power's derivative by face velocities leaves on lateral faces, found here anew.
double lateral_residual(const Power& power, const CornerField& psi, LateralFace f) {
  const Geometry& g = power.geometry();
  const auto normal = [&](Cell c) {
    const Normal e = deviatoric_strain(g, face_velocities(g, psi, c), c);
    const double w = power.cell_weight(c);
    return forces(g, {w * e.rr, w * e.tt, w * e.pp}, c);
  };
  double sum = normal(left(f)).right + normal(right(f)).left;
  for (const Corner k : {inner(f), outer(f)}) {
    if (!power.has_shear(k)) continue;
    const ShearRow row = power.shear_row(k);
    const double stress = power.corner_weight(k) * shear(g, psi, row);
    if (row.near.i == f.i) sum += row.near_weight * stress;
    if (row.far.i == f.i) sum += row.far_weight * stress;
  }
  return sum;
}

TEST_P(FlowIdentities, FaceResidualIsAGradient) {
  const CornerField psi = solved(1e-12);
  const Stresses s = stresses(power, psi, buoyancies());
  double most = 0;
  for_each_owned<At::Cell>(*d, [&](Cell c) { most = std::max(most, std::abs(s.pressure[c])); });
  for (int j = 1; j < g.lateral_cells(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i) {
      const LateralFace f{i, j};
      const double drop = s.pressure[left(f)] - s.pressure[right(f)];
      EXPECT_NEAR(lateral_residual(power, psi, f) * g.inverse_area(f), drop, 1e-7 * most)
          << i << " " << j;
    }
}

std::string case_name(const testing::TestParamInfo<std::tuple<NamedShell, Slips>>& info) {
  return std::get<0>(info.param).name + std::get<1>(info.param).name;
}

INSTANTIATE_TEST_SUITE_P(All, FlowIdentities,
                         testing::Combine(testing::ValuesIn(all_shells(8, 12)),
                                          testing::Values(Slips{"SlipSlip", Slip::Free, Slip::Free},
                                                          Slips{"GripGrip", Slip::None, Slip::None},
                                                          Slips{"SlipGrip", Slip::Free,
                                                                Slip::None})),
                         case_name);
INSTANTIATE_TEST_SUITE_P(Compressed, FlowIdentities,
                         testing::Combine(testing::ValuesIn(compressed(all_shells(8, 12))),
                                          testing::Values(Slips{"SlipGrip", Slip::Free,
                                                                Slip::None})),
                         case_name);

}  // namespace
}  // namespace lidwright
