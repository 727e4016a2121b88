#include "solver/implicit_conduction.hpp"

#include <algorithm>
#include <cmath>

#include "solver/solve_error.hpp"

namespace lidwright {
Walls homogeneous(Walls walls) {
  for (Wall* wall : {&walls.inner, &walls.outer}) {
    if (std::holds_alternative<FixedTemperature>(wall->thermal))
      wall->thermal = FixedTemperature{0};
    else
      wall->thermal = FixedHeatFlux{0};
  }
  return walls;
}

ImplicitConduction::ImplicitConduction(const HeatOperator& heat)
    : heat_(heat),
      homogeneous_(heat.decomposition_pointer(), homogeneous(heat.walls()), HeatSources{},
                   HeatFlux::Central, heat.reference()),
      direction_(heat.decomposition_pointer()) {}

/// y = (V rho cp - tau * linear conduction) x at owned cells.
void ImplicitConduction::apply(double tau, CellField& x, std::vector<double>& y) const {
  x.exchange();
  CellField rate(x.decomposition_pointer());
  (void)homogeneous_.add_conduction(x, rate);
  std::size_t n = 0;
  for (int j = x.owned().begin; j < x.owned().end; ++j)
    for (int i = 0; i < x.rows(); ++i, ++n)
      y[n] = heat_.capacity({i, j}) * x[{i, j}] - tau * rate[{i, j}];
}

/// Cholesky factors of the tridiagonal radial lines of V rho cp - tau * conduction.
void ImplicitConduction::set_lines(double tau) {
  if (lines_for_ == tau) return;
  lines_for_ = tau;
  const Geometry& g = heat_.geometry();
  const Range columns = heat_.decomposition().owned(At::Cell);
  const int rows = g.radial_cells();
  const auto radial = [&](RadialFace f, ThermalWall condition) {
    if (g.on_wall(f.i) && std::holds_alternative<FixedHeatFlux>(condition)) return 0.0;
    return tau * heat_.conductance(f);
  };
  inverse_pivot_.clear();
  above_.clear();
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 0; i < rows; ++i) {
      const double below = radial({i, j}, heat_.walls().inner.thermal);
      const double above = radial({i + 1, j}, heat_.walls().outer.thermal);
      const double sideways =
          heat_.conductance(LateralFace{i, j}) + heat_.conductance(LateralFace{i, j + 1});
      double pivot = heat_.capacity({i, j}) + below + above + tau * sideways;
      if (i > 0) pivot -= below * below * inverse_pivot_.back();
      inverse_pivot_.push_back(1 / pivot);
      above_.push_back(i + 1 < rows ? above : 0);
    }
}

/// Solves `lines` neighbouring lines side by side, which hides the latency of their recurrences.
template <std::size_t lines>
void ImplicitConduction::solve_together(std::size_t first, const double* r, double* z) const {
  const auto rows = static_cast<std::size_t>(heat_.geometry().radial_cells());
  for (std::size_t k = first; k < first + lines * rows; k += rows) z[k] = r[k] * inverse_pivot_[k];
  for (std::size_t n = first + 1; n < first + rows; ++n)
    for (std::size_t k = n; k < n + lines * rows; k += rows)
      z[k] = (r[k] + above_[k - 1] * z[k - 1]) * inverse_pivot_[k];
  for (std::size_t n = first + rows - 1; n-- > first;)
    for (std::size_t k = n; k < n + lines * rows; k += rows)
      z[k] += above_[k] * inverse_pivot_[k] * z[k + 1];
}

void ImplicitConduction::solve_lines(const std::vector<double>& r, std::vector<double>& z) const {
  constexpr std::size_t together = 8;
  const auto rows = static_cast<std::size_t>(heat_.geometry().radial_cells());
  std::size_t line = 0;
  for (; line + together * rows <= r.size(); line += together * rows)
    solve_together<together>(line, r.data(), z.data());
  for (; line < r.size(); line += rows) solve_together<1>(line, r.data(), z.data());
}

void ImplicitConduction::solve(double tau, const CellField& right, CellField& temperature) {
  constexpr double tolerance = 1e-14;
  constexpr int most_iterations = 2000;
  set_lines(tau);
  const Decomposition& d = heat_.decomposition();
  const std::size_t n = right.owned_size();
  std::vector<double> r(n), z(n), ap(n);
  // r = right + tau * (conduction of the start, walls included) - V * start.
  temperature.exchange();
  CellField rate(temperature.decomposition_pointer());
  (void)heat_.add_conduction(temperature, rate);
  std::size_t k = 0;
  for (int j = right.owned().begin; j < right.owned().end; ++j)
    for (int i = 0; i < right.rows(); ++i, ++k)
      r[k] = right[{i, j}] + tau * rate[{i, j}] - heat_.capacity({i, j}) * temperature[{i, j}];
  const auto dot = [&](const double* a, const double* b) {
    double s = 0;
    for (std::size_t m = 0; m < n; ++m) s += a[m] * b[m];
    return d.sum(s);
  };
  solve_lines(r, z);
  // Natural norm against the size of the temperature itself, V rho cp T . T.
  std::vector<double> volume_t(n);
  k = 0;
  for (int j = right.owned().begin; j < right.owned().end; ++j)
    for (int i = 0; i < right.rows(); ++i, ++k)
      volume_t[k] = heat_.capacity({i, j}) * temperature[{i, j}];
  const double floor = heat_.total_capacity() * 1e-12;
  const double stop =
      tolerance * tolerance * std::max(floor, dot(volume_t.data(), temperature.owned_data()));
  std::copy(z.begin(), z.end(), direction_.owned_data());
  double rz = dot(r.data(), z.data());
  if (!std::isfinite(rz))
    throw SolveError("the temperature is no longer a number; shorten transport.largest_step");
  for (int iteration = 0; rz > stop; ++iteration) {
    if (iteration == most_iterations || !std::isfinite(rz))
      throw SolveError(
          "implicit conduction did not converge: the time step is too long for this mesh; lower "
          "transport.largest_step");
    apply(tau, direction_, ap);
    const double alpha = rz / dot(direction_.owned_data(), ap.data());
    double* t = temperature.owned_data();
    for (std::size_t m = 0; m < n; ++m) {
      t[m] += alpha * direction_.owned_data()[m];
      r[m] -= alpha * ap[m];
    }
    solve_lines(r, z);
    const double next = dot(r.data(), z.data());
    for (std::size_t m = 0; m < n; ++m)
      direction_.owned_data()[m] = z[m] + next / rz * direction_.owned_data()[m];
    rz = next;
  }
  temperature.exchange();
}

}  // namespace lidwright
