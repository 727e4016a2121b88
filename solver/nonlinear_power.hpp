#pragma once

#include <Eigen/Dense>
#include <vector>

#include "physics/flow_law.hpp"
#include "solver/power.hpp"

/// The power functional of a rock whose viscosity depends on its rate of strain,
///
///     J(psi) = sum over quarter cells V_q Pi_q(|s_q| / sqrt 2) - f . psi,
///     s_q = (e_rr, e_tt, e_pp of the cell, sqrt 2 c_q e_rt of the corner),
///
/// with dPi/d e_II = 2 tau: convex, as stress never falls with the rate. The quarters at a corner
/// share its shear, sum V_q c_q = sum V_q; with c_q in inverse proportion to viscosity they bear
/// one stress, and where viscosity does not depend on the rate, J is the functional of
/// solver/power.hpp (docs/decisions/nonlinear-flow.md).
///
/// The tangent of a quarter's stress t = 2 eta s is
///
///     D = 2 eta [1 + slope sym(s/|s| dual^T)],   slope = d ln eta / d ln e_II in [-1, 0],
///
/// with the normalised stress `dual` as a variable of its own (primal-dual Newton: Rudi, Shih &
/// Stadler 2020, Geochem. Geophys. Geosyst. 21, e2020GC009059); dual = s/|s| gives the plain
/// tangent. With |dual| <= 1 it is positive semi-definite.
namespace lidwright {

class NonlinearPower {
 public:
  /// Mesh and walls of `shape`, which must outlive this.
  explicit NonlinearPower(const Power& shape);

  /// One law for each held cell, column by column, radial index fastest.
  void set_laws(std::vector<LocalFlowLaw> laws) { laws_ = std::move(laws); }
  /// Shares shear as quarters of the viscosities given have it (empty: of the laws at rest), and
  /// makes psi (with ghosts) the state. Collective.
  void begin(const CornerField& psi, const ViscosityField&);

  /// Gradient of J on psi without f, at owned corners.
  void gradient(CornerField& force) const;
  /// Tangent of `gradient` times a change of psi (with ghosts).
  void tangent(const CornerField& change, CornerField& force) const;
  /// Is the tangent to be the secant operator, as in fixed-point iteration?
  void use_secant(bool on);

  /// The direction of the next steps (with ghosts).
  void set_direction(const CornerField& change);
  /// Goes to state + step * direction, and returns what J without f changes there per unit step.
  /// Collective.
  double go(double step);
  /// Makes the place last gone to the state.
  void accept();

  /// Of the place last gone to (secant), with the shares of shear. Collective.
  ViscosityField viscosity() const;
  /// J without f of the place last gone to, by quadrature of the law: slow, for checks. Collective.
  double potential() const;
  /// Share of the volume. Collective.
  double yielding_share() const;

 private:
  using Four = Eigen::Array4d;  ///< the quarters at a corner
  /// Normal strains or stresses (the third is -rr - tt) and sqrt 2 times the shear.
  struct Vector {
    Four rr = Four::Zero(), tt = Four::Zero(), x = Four::Zero();
  };
  struct Strains {
    CellField rr, tt;
    CornerField shear;
  };
  struct Corner4 {
    Four volume = Four::Zero();  ///< 0: beyond walls and sides
    std::array<Cell, 4> cell;    ///< one inside the mesh for those
    Four share = Four::Zero();   ///< sqrt 2 c_q; 0 where there is no shear
    Four viscosity = Four::Ones(), slope = Four::Zero(), yields = Four::Zero();
    Four size = Four::Zero();  ///< |s|
    Vector unit, dual, dual_change;
    Four weight, half_slope;  ///< 2 V eta and slope / 2 of the tangent
  };

  static Four dot(const Vector& a, const Vector& b) {
    return a.rr * b.rr + a.tt * b.tt + (a.rr + a.tt) * (b.rr + b.tt) + a.x * b.x;
  }
  const LocalFlowLaw& law(Cell c) const {
    const Range held = state_.rr.held();
    return laws_[static_cast<std::size_t>(c.j - held.begin) *
                     static_cast<std::size_t>(state_.rr.rows()) +
                 static_cast<std::size_t>(c.i)];
  }
  Corner4& at(Corner k) { return corners_[place(k)]; }
  const Corner4& at(Corner k) const { return corners_[place(k)]; }
  std::size_t place(Corner k) const;
  template <class Self, class Visit>
  static void for_corners(Self& self, Visit&& visit) {
    std::size_t n = 0;
    for (int j = self.columns_.begin; j < self.columns_.end; ++j)
      for (int i = 0; i <= self.shape_.geometry().radial_cells(); ++i)
        visit(Corner{i, j}, self.corners_[n++]);
  }
  void set_corner(Corner);
  void set_share(Corner4&, const ViscosityField&);
  void set_tangent();
  void strains_of(const CornerField& psi, Strains&) const;
  Vector strains_at(const Strains&, Corner, const Corner4&) const;
  void respond(Corner4&, const Vector& s) const;
  template <class Of>
  double owned_sum(Of&&) const;
  template <class StressAt>
  void push(StressAt&&, CornerField& force) const;

  const Power& shape_;
  Range columns_;  ///< of corners whose quarters are followed: owned and one on either side
  std::vector<LocalFlowLaw> laws_;
  std::vector<Corner4> corners_;
  Strains state_, change_;
  mutable Strains work_;
  mutable CellField stress_rr_, stress_tt_;
  double step_ = 0;
  bool secant_ = false;
};

}  // namespace lidwright
