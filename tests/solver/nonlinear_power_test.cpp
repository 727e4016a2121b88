#include "solver/nonlinear_power.hpp"

#include <gtest/gtest.h>

#include <cmath>

#include "tests/support/random.hpp"
#include "tests/support/shells.hpp"

/// The functional of a rock whose viscosity depends on the rate of strain, at random flows and with
/// laws that differ from cell to cell: graded meshes, walls that slip and grip.
namespace lidwright {
namespace {

struct Slips {
  std::string name;
  Slip inner, outer;
};
void PrintTo(const Slips& s, std::ostream* out) { *out << s.name; }

double vary(Cell c, double factor, std::uint64_t stream) {
  return std::pow(factor, random_at(c.i, c.j, stream));
}

// The laws bend at rates of strain around 100, where stresses are around 200.
LocalFlowLaw linear(Cell c) {
  LocalFlowLaw law;
  law.diffusion = vary(c, 1e3, 11);
  return law;
}
LocalFlowLaw power_law(Cell c) {
  LocalFlowLaw law;
  law.diffusion = vary(c, 10, 11);
  law.dislocation = 4e4 * vary(c, 10, 12);
  law.exponent = 3;
  return law;
}
LocalFlowLaw yielding(Cell c, YieldingLaw kind, double floor) {
  LocalFlowLaw law;
  law.diffusion = vary(c, 10, 11);
  law.yield_stress = 200 * vary(c, 3, 13);
  law.yielding = kind;
  law.floor = floor;
  return law;
}
LocalFlowLaw harmonic(Cell c) { return yielding(c, YieldingLaw::HarmonicMean, 0.01); }
LocalFlowLaw minimum(Cell c) { return yielding(c, YieldingLaw::Minimum, 0.01); }
LocalFlowLaw ideal(Cell c) { return yielding(c, YieldingLaw::Minimum, 0); }
LocalFlowLaw everything(Cell c) {
  LocalFlowLaw law = power_law(c);
  law.yield_stress = 100 * vary(c, 3, 13);
  law.highest = 2;
  law.lowest = 0.3;
  return law;
}

class NonlinearIdentities : public testing::TestWithParam<std::tuple<NamedShell, Slips>> {
 protected:
  using Law = LocalFlowLaw (*)(Cell);

  static Walls walls_of(const Slips& s) {
    Walls w;
    w.inner.slip = s.inner;
    w.outer.slip = s.outer;
    return w;
  }
  /// Random where psi is free, with the walls' values; of root mean square rate of strain 100.
  CornerField random_flow(std::uint64_t stream) const {
    CornerField f(d), psi(d);
    for_each_owned<At::Corner>(*d, [&](Corner k) { f[k] = random_at(k.i, k.j, stream); });
    Handle<Vec, VecDestroy> v;
    check(DMCreateGlobalVector(d->dm(At::Corner), v.put()));
    power.to_unknowns(f, v);
    power.from_unknowns(v, psi);
    const double rate = std::sqrt(dissipation(unit, psi) / (4 * d->geometry().total_volume()));
    for (double& x : psi.values()) x *= 100 / rate;
    return psi;
  }
  void set(Law law) {
    const CellField cells(d);
    std::vector<LocalFlowLaw> laws;
    const int n = d->geometry().lateral_cells();
    for (int j = cells.held().begin; j < cells.held().end; ++j)
      for (int i = 0; i < cells.rows(); ++i) laws.push_back(law({i, (j + n) % n}));
    functional.set_laws(std::move(laws));
  }
  CornerField gradient() const {
    CornerField force(d);
    functional.gradient(force);
    return force;
  }
  CornerField gradient_at(const CornerField& psi) {
    functional.begin(psi, {});
    return gradient();
  }
  CornerField tangent(const CornerField& change) const {
    CornerField force(d);
    functional.tangent(change, force);
    return force;
  }
  double product(const CornerField& a, const CornerField& force) const {
    double sum = 0;
    for_each_owned<At::Corner>(*d, [&](Corner k) { sum += a[k] * force[k]; });
    return sum;
  }
  /// Largest difference over the largest number.
  double difference(const CornerField& a, const CornerField& b) const {
    double most = 0, size = 0;
    for_each_owned<At::Corner>(*d, [&](Corner k) {
      most = std::max(most, std::abs(a[k] - b[k]));
      size = std::max(size, std::abs(b[k]));
    });
    return most / size;
  }
  static CornerField sum(CornerField a, double factor, const CornerField& b) {
    for (std::size_t n = 0; n < a.values().size(); ++n) a.values()[n] += factor * b.values()[n];
    return a;
  }
  /// Half a step away from where the dual variable was the direction of the stress.
  void move_on(std::uint64_t stream) {
    functional.set_direction(random_flow(stream));
    functional.go(0.7);
    functional.accept();
  }

  std::shared_ptr<const Decomposition> d = decompose(std::get<0>(GetParam()));
  Power power{d, walls_of(std::get<1>(GetParam()))};
  const Power unit = power;  ///< of viscosity 1
  NonlinearPower functional{power};
};

/// The central difference over a step of 1e-4 leaves about its square.
TEST_P(NonlinearIdentities, GradientIsTheSlopeOfThePotential) {
  for (const Law law : {power_law, harmonic, minimum, ideal, everything}) {
    set(law);
    const CornerField change = random_flow(2), force = gradient_at(random_flow(1));
    functional.set_direction(change);
    const double step = 1e-4, along = product(change, force);
    EXPECT_NEAR(functional.go(0) / along, 1, 1e-12);
    functional.go(step);
    const double ahead = functional.potential();
    functional.go(-step);
    const double behind = functional.potential();
    const double size = std::sqrt(product(change, tangent(change)) * functional.potential());
    EXPECT_NEAR((ahead - behind) / (2 * step), along, 1e-6 * size);
  }
}

TEST_P(NonlinearIdentities, TangentIsTheSlopeOfTheGradient) {
  for (const Law law : {power_law, harmonic}) {
    set(law);
    const CornerField psi = random_flow(1), change = random_flow(2);
    const double step = 1e-5;
    const CornerField ahead = gradient_at(sum(psi, step, change)),
                      behind = gradient_at(sum(psi, -step, change));
    functional.begin(psi, {});
    const CornerField expected = tangent(change);
    CornerField slope = sum(ahead, -1, behind);
    for (double& x : slope.values()) x /= 2 * step;
    EXPECT_LT(difference(slope, expected), 1e-6);
  }
}

/// By Euler's theorem, as the stress of a power law is homogeneous of degree 1/n.
TEST_P(NonlinearIdentities, TangentOfAPurePowerLawAlongTheFlowIsAnNthOfTheStress) {
  set([](Cell c) {
    LocalFlowLaw law = power_law(c);
    law.diffusion = LocalFlowLaw::none;
    law.highest = 1e30;
    return law;
  });
  // At rest the law has no finite viscosity to share shear by.
  CellField eta(d);
  fill(eta, [](Cell c) { return vary(c, 10, 14); });
  eta.exchange();
  const CornerField psi = random_flow(1);
  functional.begin(psi, {eta, {}, {}});
  CornerField third = gradient();
  for (double& x : third.values()) x /= 3;
  EXPECT_LT(difference(tangent(psi), third), 1e-12);
}

/// Whatever the dual variable; the least that the tangent of ideal plastic flow is bounded by is
/// 1e-4 of the secant operator (`softest` in solver/nonlinear_power.cpp).
TEST_P(NonlinearIdentities, TangentIsSymmetricAndPositive) {
  for (const Law law : {power_law, harmonic, minimum, ideal, everything}) {
    set(law);
    functional.begin(random_flow(1), {});
    for (const std::uint64_t move : {20, 21, 22}) {
      const CornerField a = random_flow(3), b = random_flow(4);
      const CornerField to_a = tangent(a), to_b = tangent(b);
      const double aa = product(a, to_a), bb = product(b, to_b), size = std::sqrt(aa * bb);
      EXPECT_NEAR(product(b, to_a) / size, product(a, to_b) / size, 1e-13);
      functional.use_secant(true);
      EXPECT_GE(aa, 0.99e-4 * product(a, tangent(a)));
      EXPECT_GE(bb, 0.99e-4 * product(b, tangent(b)));
      functional.use_secant(false);
      move_on(move);
    }
  }
}

/// The dual variable lags behind the stress after a large step, so the tangent is not the plain one
/// (else the test above would see one kind only).
TEST_P(NonlinearIdentities, DualVariableIsItsOwn) {
  set(minimum);
  functional.begin(random_flow(1), {});
  move_on(20);
  const CornerField change = random_flow(2), with_dual = tangent(change);
  const CornerField psi = sum(random_flow(1), 0.7, random_flow(20));
  functional.begin(psi, {});
  EXPECT_GT(difference(with_dual, tangent(change)), 1e-3);
}

TEST_P(NonlinearIdentities, StepsLeadToTheSum) {
  set(everything);
  functional.begin(random_flow(1), {});
  move_on(20);
  const CornerField moved = gradient();
  EXPECT_LT(difference(moved, gradient_at(sum(random_flow(1), 0.7, random_flow(20)))), 1e-12);
}

/// The potential to the error of its quadrature.
TEST_P(NonlinearIdentities, LinearLawIsThePowerOfALinearRock) {
  set(linear);
  CellField eta(d);
  fill(eta, [this](Cell c) {
    const int n = d->geometry().lateral_cells();
    return linear({c.i, (c.j + n) % n}).diffusion;
  });
  power.set_viscosity(eta);
  const CornerField psi = random_flow(1);
  CornerField expected(d);
  power.apply(psi, expected);
  EXPECT_LT(difference(gradient_at(psi), expected), 1e-12);
  EXPECT_LT(difference(tangent(psi), expected), 1e-12);
  EXPECT_NEAR(functional.potential() / (dissipation(power, psi) / 2), 1, 1e-11);
}

/// Secant viscosity and shares of shear give the stress of the flow they were found at.
TEST_P(NonlinearIdentities, SecantOperatorGivesTheGradient) {
  for (const Law law : {power_law, harmonic, minimum, everything}) {
    set(law);
    const CornerField psi = random_flow(1), force = gradient_at(psi);
    power.set_viscosity(functional.viscosity());
    CornerField applied(d);
    power.apply(psi, applied);
    EXPECT_LT(difference(applied, force), 1e-12);
    functional.use_secant(true);
    EXPECT_LT(difference(tangent(psi), force), 1e-12);
    functional.use_secant(false);
    EXPECT_NEAR(dissipation(power, psi) / product(psi, force), 1, 1e-12);
  }
}

/// Equal shares of the mean over the quarters: sum of V_q c_q = sum of V_q at every corner, and
/// one stress where the viscosities are those that the shares were made with.
TEST_P(NonlinearIdentities, SharesOfShearAddUpToTheShearOfTheCorner) {
  const Geometry& g = d->geometry();
  set(linear);
  functional.begin(random_flow(1), {});
  const ViscosityField eta = functional.viscosity();
  for_each_owned<At::Corner>(*d, [&](Corner k) {
    if (g.on_wall(k.i) || g.on_side(k.j)) return;
    double volume = 0, shared = 0;
    const double stress = eta.of({k.i, k.j}, 0) * eta.shares[0][{k.i, k.j}];
    for (const bool below : {true, false})
      for (const bool left : {true, false}) {
        const Cell c{below ? k.i - 1 : k.i, left ? k.j - 1 : k.j};
        const std::size_t place = ViscosityField::quarter(below, left);
        const double v = g.quarter_volume(c, below, left);
        volume += v;
        shared += v * eta.shares[place][c];
        EXPECT_NEAR(eta.of(c, place) * eta.shares[place][c] / stress, 1, 1e-12);
      }
    EXPECT_NEAR(shared / volume, 1, 1e-13);
  });
}

/// Random rates straddle the yield point, and a stress that cannot be reached leaves none yielding.
TEST_P(NonlinearIdentities, YieldingShareIsAShare) {
  set(minimum);
  functional.begin(random_flow(1), {});
  EXPECT_GT(functional.yielding_share(), 0.05);
  EXPECT_LT(functional.yielding_share(), 0.999);
  set([](Cell c) { return yielding(c, YieldingLaw::Minimum, 100); });
  functional.begin(random_flow(1), {});
  EXPECT_EQ(functional.yielding_share(), 0);
}

std::string case_name(const testing::TestParamInfo<std::tuple<NamedShell, Slips>>& info) {
  return std::get<0>(info.param).name + std::get<1>(info.param).name;
}

INSTANTIATE_TEST_SUITE_P(All, NonlinearIdentities,
                         testing::Combine(testing::ValuesIn(all_shells(6, 8)),
                                          testing::Values(Slips{"SlipSlip", Slip::Free, Slip::Free},
                                                          Slips{"GripGrip", Slip::None,
                                                                Slip::None})),
                         case_name);
INSTANTIATE_TEST_SUITE_P(Compressed, NonlinearIdentities,
                         testing::Combine(testing::ValuesIn(compressed(all_shells(6, 8))),
                                          testing::Values(Slips{"SlipGrip", Slip::Free,
                                                                Slip::None})),
                         case_name);

}  // namespace
}  // namespace lidwright
