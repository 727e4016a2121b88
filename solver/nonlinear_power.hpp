#pragma once

#include <Eigen/Dense>
#include <vector>

#include "physics/flow_law.hpp"
#include "solver/power.hpp"

/// The power functional of a rock whose viscosity depends on its rate of strain,
///
///     J(psi, x) = sum over quarter cells V_q Pi_q(|s_q| / sqrt 2) - f . psi,
///     s_q = (e_rr, e_tt, e_pp of the cell, x_q),
///     sum over the quarters at a corner V_q x_q = V sqrt 2 e_rt,
///
/// with dPi/d e_II = 2 tau: convex, as stress never falls with the rate. Each quarter has its share
/// x_q / sqrt 2 of the shear rate of its corner, and J is the least over all shares. At the minimum
/// the quarters of a corner bear one shear stress; where viscosity does not depend on the rate, J
/// is the functional of solver/power.hpp with its harmonic corners.
///
/// Newton's method works on psi and x together; x is eliminated corner by corner. The tangent of a
/// quarter's stress t = 2 eta s is
///
///     D = 2 eta [1 + slope sym(s/|s| dual^T)],   slope = d ln eta / d ln e_II in [-1, 0],
///
/// with the normalised stress `dual` as a variable of its own (primal-dual Newton: Rudi, Shih &
/// Stadler 2020, Geochem. Geophys. Geosyst. 21, e2020GC009059); dual = s/|s| gives the plain
/// tangent.
namespace lidwright {

class NonlinearPower {
 public:
  /// Mesh and walls of `shape`, which must outlive this.
  explicit NonlinearPower(const Power& shape);

  /// One law for each held cell, column by column, radial index fastest.
  void set_laws(std::vector<LocalFlowLaw> laws) { laws_ = std::move(laws); }
  /// Makes psi (with ghosts) the state; shear is split as viscosities `split` have it (empty: of
  /// the laws at rest).
  void begin(const CornerField& psi, const ViscosityField& split);

  /// Gradient of J on psi without f, x eliminated, at owned corners.
  void gradient(CornerField& force) const;
  /// Tangent of `gradient` times a change of psi (with ghosts).
  void tangent(const CornerField& change, CornerField& force) const;
  /// For the next steps the tangent is the secant operator: fixed-point iteration.
  void use_secant(bool on) { secant_ = on; }

  /// Newton's direction whose psi is given (with ghosts).
  void set_direction(const CornerField& change);
  /// Goes to state + step * direction, and returns what J without f changes there per unit step.
  /// Collective.
  double go(double step);
  /// Makes the place last gone to the state.
  void accept();

  /// Of the state (secant).
  ViscosityField viscosity() const;
  /// Share of the volume. Collective.
  double yielding_share() const;
  /// Quarters at a corner whose shear stresses differ, as a norm: sqrt(sum V (sigma - tau)^2 / 2
  /// eta). Collective.
  double unbalanced_shear() const;

 private:
  using Four = Eigen::Array4d;  ///< the quarters at a corner: below left and right, above left and right
  struct Strains {
    CellField rr, tt;
    CornerField shear;
  };
  struct Vector {
    Four rr = Four::Zero(), tt = Four::Zero(), x = Four::Zero();
  };
  struct Corner4 {
    Four volume = Four::Zero();  ///< 0: beyond walls and sides
    std::array<Cell, 4> cell;    ///< one inside the mesh for those
    bool shears = false;
    Four viscosity = Four::Ones(), slope = Four::Zero(), yields = Four::Zero();  ///< where last gone
    Four size = Four::Zero();  ///< |s| there
    Vector unit, dual, dual_change;
    Four x = Four::Zero(), x_change = Four::Zero();
  };

  static Four dot(const Vector& a, const Vector& b);
  void set_corner(Corner);
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
    for (int j = self.columns_.begin; j < self.columns_.end; ++j)
      for (int i = 0; i <= self.shape_.geometry().radial_cells(); ++i)
        visit(Corner{i, j}, self.at({i, j}));
  }
  void strains_of(const CornerField& psi, Strains&) const;
  Vector normals(const Strains&, const Corner4&) const;
  void respond(Corner4&, const Vector& s) const;
  Four slope(const Corner4&) const;
  Four shear_stiffness(const Corner4&) const;
  Vector tangent_stress(const Corner4&, const Vector& s) const;
  double share(const Corner4&, const Four& rest, double shear_change, Four& x_change) const;
  template <class StressAt>
  void push(StressAt&&, CornerField& force) const;
  template <class Of>
  double owned_sum(Of&&) const;

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
