#include <algorithm>
#include <cmath>
#include <numbers>

#include "solver/implicit_conduction.hpp"
#include "solver/measure.hpp"
#include "solver/onset.hpp"

namespace lidwright {
namespace {

/// Lateral shapes on the case's own mesh: y at cells and z at the corners' columns.
struct Along {
  std::vector<double> cells, corners;
};

Along wave_along(const Geometry& g, double wavenumber) {
  Along along;
  const auto phase = [&](double x) { return wavenumber * (x - g.face_lateral(0)); };
  for (int j = 0; j < g.lateral_cells(); ++j)
    along.cells.push_back(std::cos(phase(g.cell_lateral(j))));
  for (int j = 0; j < g.corner_columns(); ++j)
    along.corners.push_back(g.on_side(j) ? 0 : std::sin(phase(g.face_lateral(j))) / wavenumber);
  return along;
}

Along along_shell(const Geometry& g, int number) {
  if (g.shell().shape != Shape::AxisymmetricShell)
    return wave_along(g, wave_of(g.shell(), number).order);
  LateralMode mode = lateral_mode(g, number);
  return {std::move(mode.cells), std::move(mode.corners)};
}

/// The product of a radial and a lateral shape.
template <At at>
Field<at> spread(const std::shared_ptr<const Decomposition>& d, const std::vector<double>& radial,
                 const std::vector<double>& lateral, double scale) {
  Field<at> f(d);
  for (int j = f.owned().begin; j < f.owned().end; ++j)
    for (int i = 0; i < f.rows(); ++i)
      f[{i, j}] =
          scale * radial[static_cast<std::size_t>(i)] * lateral[static_cast<std::size_t>(j)];
  f.exchange();
  return f;
}

double largest(const std::vector<double>& values) {
  double most = 0;
  for (const double x : values) most = std::max(most, std::abs(x));
  return most;
}

}  // namespace

/// Read off the disturbance as off any state.
Snapshot onset_snapshot(const Model& m, const NeutralShape& shape, MPI_Comm comm) {
  const auto d = decompose(m, comm);
  const Along along = along_shell(d->geometry(), shape.number);
  const double scale = 1 / (largest(shape.temperature) * largest(along.cells));
  const CellField t = spread<At::Cell>(d, shape.temperature, along.cells, scale);
  const CornerField psi = spread<At::Corner>(d, shape.psi, along.corners, scale);
  Power power(d, m.walls);
  const HeatOperator at_rest(d, m.walls, m.heat, HeatFlux::Central, m.reference);
  power.set_viscosity(viscosity_of(m.viscosity, temperature_at_rest(at_rest)));
  const HeatOperator heat(d, homogeneous(m.walls), HeatSources{}, HeatFlux::Central, m.reference);
  Snapshot s = snapshot({power, heat, t, psi, shape.rayleigh, m.viscosity}, false);
  s.step = shape.number;
  return s;
}

}  // namespace lidwright
