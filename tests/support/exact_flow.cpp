#include "tests/support/exact_flow.hpp"

#include <cmath>
#include <numbers>

namespace lidwright {
namespace {

using std::numbers::pi;
using Matrix4 = TwoPointProfile::Matrix4;
using Matrix = TwoPointProfile::Matrix;
using Vector = TwoPointProfile::Vector;
using Real = TwoPointProfile::Real;

/// r dy/dr of y = (U, V, r S, r T) from REFERENCE 4.1 (there y3 = S, y4 = T).
Matrix4 shell_system(Shape shape, Real n, Real eta) {
  const Real big = n * (n + 1);
  Matrix4 a;
  if (shape == Shape::AxisymmetricShell)
    a << -2, big, 0, 0,                             //
        -1, 1, 0, 1 / eta,                          //
        12 * eta, -6 * big * eta, 1, big,           //
        -6 * eta, 2 * (2 * big - 1) * eta, -1, -2;  //
  else if (shape == Shape::Annulus)
    a << -1, -n, 0, 0,                        //
        n, 1, 0, 1 / eta,                     //
        4 * eta, 4 * n * eta, 1, -n,          //
        4 * n * eta, 4 * n * n * eta, n, -1;  //
  else
    a << -2, -n, 0, 0,                        //
        n, 1, 0, 1 / eta,                     //
        12 * eta, 6 * n * eta, 1, -n,         //
        6 * n * eta, 4 * n * n * eta, n, -2;  //
  return a;
}

std::array<int, 2> zero_at_wall(Slip slip) { return {0, slip == Slip::Free ? 3 : 1}; }

TwoPointProfile shell_profile(const ShellForcing& f) {
  const Real begin = std::log(static_cast<Real>(ExactShellFlow::inner_radius));
  const Real end = std::log(static_cast<Real>(ExactShellFlow::outer_radius));
  std::vector<TwoPointProfile::Layer> layers;
  if (f.jump_at > 0)
    layers.push_back({std::log(static_cast<Real>(f.jump_at)), shell_system(f.shape, f.n, 1)});
  layers.push_back({end, shell_system(f.shape, f.n, f.outer_viscosity)});
  TwoPointProfile::Forcing forcing;  // r (r S)' = ... + r^2 rho'
  forcing.c = Matrix::Zero(4, 1);
  forcing.c(2, 0) = 1;
  forcing.f = Matrix::Constant(1, 1, f.k + 2);
  forcing.start = Vector::Constant(1, std::exp((f.k + 2) * begin - f.k * end));
  return {begin, layers, forcing, zero_at_wall(f.inner), zero_at_wall(f.outer)};
}

/// d/dx of (U, W, sigma_xx, sigma_xz).
Matrix4 step_system(Real k, Real eta) {
  Matrix4 a;
  a << 0, -k, 0, 0,              //
      k, 0, 0, 1 / eta,          //
      0, 0, 0, -k,               //
      0, 4 * eta * k * k, k, 0;  //
  return a;
}

/// s = amplitude e^(decay x) (cos(wave x), sin(wave x)).
Matrix wave_system(Real wave, Real decay) {
  Matrix f(2, 2);
  f << decay, -wave, wave, decay;
  return f;
}

TwoPointProfile step_profile(Real wave, Real x_step, Real right_viscosity) {
  TwoPointProfile::Forcing forcing{Matrix::Zero(4, 2), wave_system(std::numbers::pi_v<Real>, 0),
                                   Vector::Zero(2)};
  forcing.c(3, 0) = -1;
  forcing.start(0) = 1;
  return {0,
          {{x_step, step_system(wave, 1)}, {1, step_system(wave, right_viscosity)}},
          forcing,
          {0, 3},
          {0, 3}};
}

/// d/dz of (W, U, sigma_zz / eta, sigma_xz / eta), eta = e^(2 b z).
TwoPointProfile exponential_profile(Real vertical, Real k, Real contrast) {
  const Real b = std::log(contrast) / 2;
  Matrix4 a;
  a << 0, -k, 0, 0,             //
      k, 0, 0, 1,               //
      0, 0, -2 * b, -k,         //
      0, 4 * k * k, k, -2 * b;  //
  TwoPointProfile::Forcing forcing{Matrix::Zero(4, 2), wave_system(vertical, -2 * b),
                                   Vector::Zero(2)};
  forcing.c(2, 1) = -1;
  forcing.start(0) = 1;
  return {0, {{1, a}}, forcing, {0, 3}, {0, 3}};
}

FlowProfile flow(const std::array<double, 4>& y, double stress_scale) {
  return {y[0], y[1], y[2] * stress_scale, y[3] * stress_scale};
}

}  // namespace

ExactShellFlow::ExactShellFlow(const ShellForcing& f) : forcing_(f), profile_(shell_profile(f)) {}

FlowProfile ExactShellFlow::operator()(double radius) const {
  return flow(profile_(std::log(radius)), 1 / radius);
}

double ExactShellFlow::radial_harmonic(double lateral) const {
  if (forcing_.shape != Shape::AxisymmetricShell) return std::cos(forcing_.n * lateral);
  return std::legendre(static_cast<unsigned>(forcing_.n), std::cos(lateral));
}

/// sin(n phi), or dP_n/dtheta = n (cos P_n - P_(n-1)) / sin.
double ExactShellFlow::lateral_harmonic(double lateral) const {
  const int n = forcing_.n;
  if (forcing_.shape != Shape::AxisymmetricShell) return std::sin(n * lateral);
  const double s = std::sin(lateral), c = std::cos(lateral);
  if (s < 1e-12) return 0;
  return n *
         (c * std::legendre(static_cast<unsigned>(n), c) -
          std::legendre(static_cast<unsigned>(n - 1), c)) /
         s;
}

double ExactShellFlow::buoyancy(double radius, double lateral) const {
  return -std::pow(radius / outer_radius, forcing_.k) * radial_harmonic(lateral);
}

ExactStepFlow::ExactStepFlow(int n, double x_step, double right_viscosity)
    : wave_(n * pi),
      profile_(step_profile(n * std::numbers::pi_v<Real>, x_step, right_viscosity)) {}

FlowProfile ExactStepFlow::operator()(double x) const { return flow(profile_(x), 1); }

double ExactStepFlow::along_stress(double x, double eta) const {
  const FlowProfile f = (*this)(x);
  return f.normal_stress + 4 * eta * wave_ * f.tangential_velocity;
}

ExactExponentialFlow::ExactExponentialFlow(double vertical, double horizontal, double contrast)
    : contrast_(contrast), profile_(exponential_profile(vertical, horizontal, contrast)) {}

FlowProfile ExactExponentialFlow::operator()(double z) const {
  return flow(profile_(z), std::pow(contrast_, z));
}

}  // namespace lidwright
