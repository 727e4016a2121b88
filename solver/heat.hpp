#pragma once

#include <memory>

#include "mesh/field.hpp"
#include "physics/heat_sources.hpp"
#include "physics/walls.hpp"
#include "solver/settings.hpp"

/// Heat in a given flow, finite volumes:
///     V dT/dt = - sum of outward (flow * T_face) - sum of outward (-area dT/dn) + V H,
/// with the very flows through faces that conserve mass. Unit density, heat capacity and
/// conductivity.
namespace lidwright {

/// Heat flow through each wall, > 0 along +r.
struct WallHeat {
  double inner = 0, outer = 0;
};

class HeatOperator {
 public:
  HeatOperator(std::shared_ptr<const Decomposition>, const Walls&, const HeatSources&, HeatFlux);

  /// Gain by advection at owned cells; T and psi with ghosts. Adds to `rate`.
  void add_advection(const CellField& temperature, const CornerField& psi, CellField& rate) const;
  /// Gain by conduction, walls included; returns the heat through the walls on this rank. Adds to
  /// `rate`.
  WallHeat add_conduction(const CellField& temperature, CellField& rate) const;
  /// Gain by sources. Adds to `rate`.
  void add_sources(CellField& rate) const;

  /// Conducted heat through a wall's face of column j.
  double wall_flux(const CellField&, RadialFace wall) const;
  /// Temperature of the wall at column j (follows from the flux where the flux is given).
  double wall_temperature(const CellField&, RadialFace wall) const;
  /// Conducted and advected heat through any radial face, > 0 along +r.
  double conducted(const CellField&, RadialFace) const;
  double advected(const CellField&, const CornerField& psi, RadialFace) const;

  /// Integral of H over the shell.
  double total_source() const { return total_source_; }
  double source(int row) const { return source_[static_cast<std::size_t>(row)]; }
  /// Largest share of a cell's content that flows out of it in unit time. Collective.
  double outflow_rate(const CornerField& psi) const;

  const Geometry& geometry() const { return decomposition_->geometry(); }
  const Decomposition& decomposition() const { return *decomposition_; }
  std::shared_ptr<const Decomposition> decomposition_pointer() const { return decomposition_; }
  const Walls& walls() const { return walls_; }

 private:
  double radial_neighbour(const CellField&, int i, int j) const;
  template <class Carried>
  void carry_radially(const CellField&, const CornerField& psi, int j, Carried,
                      std::vector<double>& heat) const;
  template <class Carried>
  void carry_laterally(const CellField&, const CornerField& psi, int j, Carried,
                       std::vector<double>& heat) const;
  void conduct_laterally(const CellField&, int j, std::vector<double>& heat) const;

  std::shared_ptr<const Decomposition> decomposition_;
  Walls walls_;
  HeatFlux flux_;
  std::vector<double> source_;               ///< of each row of cells
  std::vector<double> radial_conductance_;   ///< of the face below each row, without its lateral
                                             ///< factor; 0 at the wall
  std::vector<double> lateral_conductance_;  ///< of each row, without its lateral factor
  double total_source_ = 0;
};

/// (V - tau * conduction) T = right, by conjugate gradients with exact radial lines as
/// preconditioner.
class ImplicitConduction {
 public:
  ImplicitConduction(const HeatOperator&);
  /// `right` at owned cells holds V * (what T would be without implicit conduction); walls included
  /// here. T: start in, solution out, with ghosts. Throws SolveError when it does not
  /// converge. Collective.
  void solve(double tau, const CellField& right, CellField& temperature);

 private:
  void set_lines(double tau);
  void solve_lines(const std::vector<double>& r, std::vector<double>& z) const;
  template <std::size_t lines>
  void solve_together(std::size_t first, const double* r, double* z) const;
  void apply(double tau, CellField& x, std::vector<double>& y) const;

  const HeatOperator& heat_;
  HeatOperator homogeneous_;
  double lines_for_ = -1;
  std::vector<double> inverse_pivot_, above_;  ///< of the lines' factors, owned cells
  CellField direction_;
};

/// One step of the three-stage IMEX scheme ARK2 of Giraldo, Kelly & Constantinescu 2013 (SIAM J.
/// Sci. Comput. 35, B1162; coefficients from memory, order tested): TR-BDF2 for conduction
/// (L-stable), an explicit scheme with non-negative weights for advection. Second order,
/// conservative to round-off, and a steady state of the space-discrete equations is one of the
/// scheme, whatever the step.
class HeatStepper {
 public:
  HeatStepper(std::shared_ptr<const Decomposition>, const Walls&, const HeatSources&, HeatFlux);

  /// T(t + dt) from T(t), the flow at t and the flow foreseen at t + dt (straight line between);
  /// all with ghosts. Returns the mean heat flow through the walls over the step. Collective.
  WallHeat step(const CellField& temperature, const CornerField& psi_now,
                const CornerField& psi_then, double dt, CellField& next);

  HeatStepper(const HeatStepper&) = delete;
  HeatStepper& operator=(const HeatStepper&) = delete;

  const HeatOperator& heat() const { return heat_; }

 private:
  struct Stage;
  Stage stage(const CellField& temperature, const CornerField& psi) const;

  HeatOperator heat_;
  ImplicitConduction implicit_;
};

}  // namespace lidwright
