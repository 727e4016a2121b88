#pragma once

#include <vector>

#include "solver/heat.hpp"

namespace lidwright {

/// Walls with the same kind of condition and all values zero: those of a disturbance, and of the
/// linear part of conduction.
Walls homogeneous(Walls);

/// (V rho cp - tau * conduction) T = right, by conjugate gradients with exact radial lines as
/// preconditioner.
class ImplicitConduction {
 public:
  ImplicitConduction(const HeatOperator&);
  /// `right` at owned cells holds V rho cp * (what T would be without implicit conduction); walls
  /// included here. T: start in, solution out, with ghosts. Throws SolveError when it does not
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

}  // namespace lidwright
