#include "study/prescribed_flow.hpp"

#include <gtest/gtest.h>

#include <cmath>
#include <numbers>

#include "tests/support/exact_flow.hpp"
#include "tests/support/observed_order.hpp"

/// Against exact solutions (tests/support/exact_flow), on graded meshes.
namespace lidwright {
namespace {

using std::numbers::pi;
constexpr double tolerance = 1e-11;

Model model_in(const Shell& shell, Slip slip) {
  Model m;
  m.shell = shell;
  m.walls.inner.slip = m.walls.outer.slip = slip;
  return m;
}

/// Relative errors of what `name` says are of second order, or below 1e-5.
void expect_second_order(const Model& m, const Forcing& f, const std::string& name, double known) {
  const Grading graded{2, 3};
  const auto error = [&](int cells) {
    return prescribed_flow(m, f, tolerance, {cells, 2 * cells, graded, {}}).at(name) / known - 1;
  };
  const double coarse = error(32), fine = error(64);
  if (std::abs(fine) < 1e-5) return;
  EXPECT_NEAR(observed_order(coarse, fine), 2, 0.2) << name << " " << coarse << " " << fine;
}

class PrescribedShellFlow : public testing::TestWithParam<Shape> {};

TEST_P(PrescribedShellFlow, HasTheAmplitudesOfTheExactOne) {
  const ExactShellFlow exact({GetParam(), 2, 2, Slip::Free, Slip::Free, 0, 1});
  const double inner = ExactShellFlow::inner_radius, outer = ExactShellFlow::outer_radius;
  const Model m = model_in({GetParam(), inner, 0, pi, Sides::Reflecting}, Slip::Free);
  Forcing f;
  f.wavenumber = 2;
  f.power = 2;
  expect_second_order(m, f, "velocity_inner_amplitude", exact(inner).tangential_velocity);
  expect_second_order(m, f, "velocity_outer_amplitude", exact(outer).tangential_velocity);
  expect_second_order(m, f, "stress_inner_amplitude", exact(inner).normal_stress);
  expect_second_order(m, f, "stress_outer_amplitude", exact(outer).normal_stress);
}

INSTANTIATE_TEST_SUITE_P(Shapes, PrescribedShellFlow,
                         testing::Values(Shape::Annulus, Shape::SphericalAnnulus,
                                         Shape::AxisymmetricShell));

TEST(PrescribedBoxFlow, HasTheVelocitiesOfTheExactOne) {
  const Model m = model_in({Shape::Box, 0, 0, 1, Sides::Reflecting}, Slip::Free);
  const ExactStepFlow exact(1, 0.5, 1000);
  Forcing f;
  f.vertical = f.horizontal = pi;
  f.step_viscosity = 1000;
  expect_second_order(m, f, "velocity_top_middle", -exact(0.5).normal_velocity);
  expect_second_order(m, f, "velocity_left_middle", exact(0).tangential_velocity);
  expect_second_order(m, f, "velocity_right_middle", exact(1).tangential_velocity);
  expect_second_order(m, f, "stress_top_difference",
                      exact.along_stress(0, 1) - exact.along_stress(1, 1000));
}

/// One viscosity, psi = a sin(pi x) sin(pi z): u_z = -dpsi/dx here; a = 1/(4 pi^3), so that
/// <u . u> = a^2 pi^2 / 2.
TEST(PrescribedBoxFlow, HasTheRootMeanSquareOfTheExactOne) {
  const Model m = model_in({Shape::Box, 0, 0, 1, Sides::Reflecting}, Slip::Free);
  Forcing f;
  f.vertical = f.horizontal = pi;
  expect_second_order(m, f, "velocity_rms", 1 / (4 * pi * pi) / std::sqrt(2));
}

TEST(PrescribedFlow, KnowsItsNames) {
  const Model m = model_in({Shape::Box, 0, 0, 1, Sides::Reflecting}, Slip::Free);
  const auto& names = prescribed_flow_names();
  for (const auto& [name, value] : prescribed_flow(m, {}, tolerance, {8, 8, {}, {}}))
    EXPECT_NE(std::find(names.begin(), names.end(), name), names.end()) << name;
}

}  // namespace
}  // namespace lidwright
