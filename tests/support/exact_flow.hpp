#pragma once

#include <string>
#include <vector>

#include "mesh/geometry.hpp"
#include "physics/walls.hpp"
#include "tests/support/two_point_profile.hpp"

/// Analytic Stokes flows, separated as profile times harmonic. Derivations: REFERENCE 4.1 and 4.3
/// (Euler systems in ln r; 6 x 6 systems in the box); checked against the tables in
/// tests/reference.
namespace lidwright {

struct FlowProfile {
  double normal_velocity, tangential_velocity, normal_stress, shear_stress;
};

/// 0 = -grad p + div(2 eta e) - rho' e_r with rho' = (r/r_o)^k H(lateral), in 1.22 <= r <= 2.22.
/// u_r and sigma_rr go with the harmonic H = cos(n phi) or P_n(cos theta); u_lat and sigma_rlat
/// with sin(n phi) or dP_n/dtheta.
struct ShellForcing {
  Shape shape = Shape::Annulus;
  int n = 2;
  int k = 2;
  Slip inner = Slip::Free, outer = Slip::Free;
  double jump_at = 0;          ///< radius of the viscosity jump; 0: none
  double outer_viscosity = 1;  ///< above it; 1 below
};

class ExactShellFlow {
 public:
  explicit ExactShellFlow(const ShellForcing&);
  FlowProfile operator()(double radius) const;
  double radial_harmonic(double lateral) const;
  double lateral_harmonic(double lateral) const;
  double buoyancy(double radius, double lateral) const;  ///< -rho'

  static constexpr double inner_radius = 1.22, outer_radius = 2.22;

 private:
  ShellForcing forcing_;
  TwoPointProfile profile_;
};

/// Unit box, free slip on all sides, vertical force f_z.
/// Step: f_z = sin(n pi z) cos(pi x); eta = 1 for x < x_step, `right_viscosity` beyond. Normal is
/// x: u_x and sigma_xx go with cos(n pi z), u_z and sigma_xz with sin(n pi z).
class ExactStepFlow {
 public:
  ExactStepFlow(int n, double x_step, double right_viscosity);
  FlowProfile operator()(double x) const;
  /// sigma_zz over cos(n pi z), `eta` on the side of the step that is meant.
  double along_stress(double x, double eta) const;

 private:
  double wave_;
  TwoPointProfile profile_;
};

/// f_z = sin(vertical z) cos(horizontal x); eta = contrast^z. Normal is z: u_z and sigma_zz go with
/// cos(horizontal x), u_x and sigma_xz with sin(horizontal x).
class ExactExponentialFlow {
 public:
  ExactExponentialFlow(double vertical, double horizontal, double contrast);
  FlowProfile operator()(double z) const;

 private:
  double contrast_;
  TwoPointProfile profile_;
};

}  // namespace lidwright
