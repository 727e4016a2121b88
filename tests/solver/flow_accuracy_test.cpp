#include <gtest/gtest.h>

#include <cmath>
#include <memory>
#include <numbers>

#include "tests/support/exact_flow.hpp"
#include "tests/support/flow_error.hpp"
#include "tests/support/observed_order.hpp"

/// Observed order of velocity and of the normal stress at the walls against analytic Stokes flow:
/// tests/reference/stokes_*.csv, continued between the tabulated points by tests/support/exact_flow
/// (which exact_flow_test.cpp checks against the tables to 1e-12).
namespace lidwright {
namespace {

using std::numbers::pi;

KnownFlow known_shell_flow(const ShellForcing& f) {
  const auto exact = std::make_shared<ExactShellFlow>(f);
  const double a = ExactShellFlow::inner_radius, b = ExactShellFlow::outer_radius;
  const double inner = (*exact)(a).normal_stress, outer = (*exact)(b).normal_stress;
  KnownFlow k;
  k.shell = {f.shape, a, 0, pi, Sides::Reflecting};
  k.walls.inner.slip = f.inner;
  k.walls.outer.slip = f.outer;
  k.viscosity = [f](double r, double) { return r > f.jump_at ? f.outer_viscosity : 1; };
  k.buoyancy = [exact](double r, double x) { return exact->buoyancy(r, x); };
  k.radial_velocity = [exact](double r, double x) {
    return (*exact)(r).normal_velocity * exact->radial_harmonic(x);
  };
  k.lateral_velocity = [exact](double r, double x) {
    return (*exact)(r).tangential_velocity * exact->lateral_harmonic(x);
  };
  k.inner_normal_stress = [=](double x) { return inner * exact->radial_harmonic(x); };
  k.outer_normal_stress = [=](double x) { return outer * exact->radial_harmonic(x); };
  return k;
}

/// Below this, relative to the largest stress, an error is near a change of sign and has no order.
constexpr double negligible = 1e-6;

bool has_order_two(double coarse, double fine) {
  return fine < negligible || std::abs(observed_order(coarse, fine) - 2) <= 0.1;
}

void expect_order_two(double coarse, double fine, const char* what) {
  if (fine < negligible) return;
  EXPECT_NEAR(observed_order(coarse, fine), 2, 0.1) << what << " " << coarse << " " << fine;
}

/// On the pair of grids (first, 2 first); once finer where that is not yet in the asymptotic range.
void expect_second_order(const KnownFlow& known, Grid first) {
  FlowErrors coarse = flow_errors(known, first), fine{};
  for (int refinement = 1; refinement <= 2; ++refinement) {
    first.radial *= 2;
    first.lateral *= 2;
    fine = flow_errors(known, first);
    const bool reached = has_order_two(coarse.velocity, fine.velocity) &&
                         has_order_two(coarse.inner_stress, fine.inner_stress) &&
                         has_order_two(coarse.outer_stress, fine.outer_stress);
    if (reached || refinement == 2) break;
    coarse = fine;
  }
  expect_order_two(coarse.velocity, fine.velocity, "velocity");
  expect_order_two(coarse.inner_stress, fine.inner_stress, "normal stress at the inner wall");
  expect_order_two(coarse.outer_stress, fine.outer_stress, "normal stress at the outer wall");
}

class ShellFlow : public testing::TestWithParam<std::tuple<Shape, Slip>> {
 protected:
  ShellForcing forcing(int n, double jump_at, double outer_viscosity) const {
    ShellForcing f;
    f.shape = std::get<0>(GetParam());
    f.n = n;
    f.inner = f.outer = std::get<1>(GetParam());
    f.jump_at = jump_at;
    f.outer_viscosity = outer_viscosity;
    return f;
  }
};

TEST_P(ShellFlow, IsSecondOrderAtConstantViscosity) {
  for (const int n : {1, 2, 4})
    expect_second_order(known_shell_flow(forcing(n, 0, 1)), {32, 96, {}, {}});
}
TEST_P(ShellFlow, IsSecondOrderOnAGradedMesh) {
  expect_second_order(known_shell_flow(forcing(2, 0, 1)), {32, 96, {2, 3}, {}});
}
/// The jumps lie on faces: a quarter and three quarters up the shell.
TEST_P(ShellFlow, IsSecondOrderUnderAStiffUpperPart) {
  for (const int n : {1, 2, 4})
    expect_second_order(known_shell_flow(forcing(n, 1.47, 1000)), {32, 96, {}, {}});
}
TEST_P(ShellFlow, IsSecondOrderUnderALid) {
  for (const int n : {1, 2, 4})
    expect_second_order(known_shell_flow(forcing(n, 1.97, 100)), {32, 96, {}, {}});
}

INSTANTIATE_TEST_SUITE_P(Annulus, ShellFlow,
                         testing::Combine(testing::Values(Shape::Annulus),
                                          testing::Values(Slip::Free, Slip::None)));
INSTANTIATE_TEST_SUITE_P(SphericalAnnulus, ShellFlow,
                         testing::Combine(testing::Values(Shape::SphericalAnnulus),
                                          testing::Values(Slip::Free, Slip::None)));
INSTANTIATE_TEST_SUITE_P(AxisymmetricShell, ShellFlow,
                         testing::Combine(testing::Values(Shape::AxisymmetricShell),
                                          testing::Values(Slip::Free, Slip::None)));

const Shell unit_box{Shape::Box, 0, 0, 1, Sides::Reflecting};

KnownFlow known_step_flow(int n, double x_step, double right_viscosity) {
  const auto exact = std::make_shared<ExactStepFlow>(n, x_step, right_viscosity);
  const double wave = n * pi;
  const auto eta = [=](double x) { return x < x_step ? 1 : right_viscosity; };
  KnownFlow k;
  k.shell = unit_box;
  k.viscosity = [=](double, double x) { return eta(x); };
  k.buoyancy = [=](double z, double x) { return std::sin(wave * z) * std::cos(pi * x); };
  k.radial_velocity = [=](double z, double x) {
    return (*exact)(x).tangential_velocity * std::sin(wave * z);
  };
  k.lateral_velocity = [=](double z, double x) {
    return (*exact)(x).normal_velocity * std::cos(wave * z);
  };
  k.inner_normal_stress = [=](double x) { return exact->along_stress(x, eta(x)); };
  k.outer_normal_stress = [=](double x) { return exact->along_stress(x, eta(x)) * std::cos(wave); };
  return k;
}

KnownFlow known_exponential_flow(double vertical, double horizontal, double contrast) {
  const auto exact = std::make_shared<ExactExponentialFlow>(vertical, horizontal, contrast);
  const auto cosine = [=](double x) { return std::cos(horizontal * x); };
  KnownFlow k;
  k.shell = unit_box;
  k.viscosity = [=](double z, double) { return std::pow(contrast, z); };
  k.buoyancy = [=](double z, double x) { return std::sin(vertical * z) * cosine(x); };
  k.radial_velocity = [=](double z, double x) { return (*exact)(z).normal_velocity * cosine(x); };
  k.lateral_velocity = [=](double z, double x) {
    return (*exact)(z).tangential_velocity * std::sin(horizontal * x);
  };
  k.inner_normal_stress = [=](double x) { return (*exact)(0).normal_stress * cosine(x); };
  k.outer_normal_stress = [=](double x) { return (*exact)(1).normal_stress * cosine(x); };
  return k;
}

// The cases of tests/reference/stokes_box.csv.
TEST(BoxFlow, IsSecondOrderAtConstantViscosity) {
  expect_second_order(known_step_flow(1, 0.5, 1), {32, 32, {}, {}});
}
TEST(BoxFlow, IsSecondOrderAtAVerticalJumpOfViscosity) {
  expect_second_order(known_step_flow(1, 0.5, 1e3), {32, 32, {}, {}});
  expect_second_order(known_step_flow(1, 0.5, 1e6), {32, 32, {}, {}});
  expect_second_order(known_step_flow(2, 0.25, 1e4), {32, 32, {}, {}});
}
TEST(BoxFlow, IsSecondOrderInExponentialViscosity) {
  expect_second_order(known_exponential_flow(pi, pi, 1), {32, 32, {}, {}});
  expect_second_order(known_exponential_flow(pi, pi, 1e4), {32, 32, {}, {}});
  expect_second_order(known_exponential_flow(2, 3 * pi, 1e6), {64, 64, {}, {}});
  expect_second_order(known_exponential_flow(2 * pi, 3 * pi, 1e6), {64, 64, {}, {}});
}
TEST(BoxFlow, IsSecondOrderOnAMeshGradedBothWays) {
  expect_second_order(known_exponential_flow(pi, pi, 1e4), {32, 32, {2, 3}, {2.5, 2}});
}

}  // namespace
}  // namespace lidwright
