#include "tests/support/flow_error.hpp"

#include <cmath>
#include <stdexcept>

#include "solver/pressure.hpp"
#include "tests/support/shells.hpp"

namespace lidwright {
namespace {

/// Sums of weight * (found - known)^2 and weight * known^2.
class RelativeError {
 public:
  void add(double weight, double found, double known) {
    difference_ += weight * (found - known) * (found - known);
    size_ += weight * known * known;
  }
  double value() const { return std::sqrt(difference_ / size_); }

 private:
  double difference_ = 0, size_ = 0;
};

double velocity_error(const KnownFlow& known, const Decomposition& d, const CornerField& psi) {
  const Geometry& g = d.geometry();
  RelativeError error;
  for_each_owned<At::RadialFace>(d, [&](RadialFace f) {
    if (g.on_wall(f.i) || f.j >= g.lateral_cells()) return;
    error.add(g.dual_volume(f), velocity(g, psi, f),
              known.radial_velocity(g.face_radius(f.i), g.cell_lateral(f.j)));
  });
  for_each_owned<At::LateralFace>(d, [&](LateralFace f) {
    error.add(g.dual_volume(f), velocity(g, psi, f),
              known.lateral_velocity(g.cell_radius(f.i), g.face_lateral(f.j)));
  });
  return error.value();
}

double stress_error(const Geometry& g, int face, const std::vector<double>& found,
                    const std::function<double(double)>& known) {
  double mean = 0;
  for (int j = 0; j < g.lateral_cells(); ++j)
    mean += g.area(RadialFace{face, j}) * known(g.cell_lateral(j)) / g.wall_area(face);
  RelativeError error;
  for (int j = 0; j < g.lateral_cells(); ++j)
    error.add(g.area(RadialFace{face, j}), found[static_cast<std::size_t>(j)],
              known(g.cell_lateral(j)) - mean);
  return error.value();
}

/// At a wall the mean of wall and cell middle, which stands for the half cell next to it.
double face_buoyancy(const KnownFlow& known, const Geometry& g, RadialFace f) {
  const double lateral = g.cell_lateral(f.j), here = known.buoyancy(g.face_radius(f.i), lateral);
  if (!g.on_wall(f.i)) return here;
  const Cell c = f.i == 0 ? outside(f) : inside(f);
  return (here + known.buoyancy(g.cell_radius(c.i), lateral)) / 2;
}

}  // namespace

FlowErrors flow_errors(const KnownFlow& known, const Grid& grid) {
  const auto d = decompose(known.shell, grid);
  const Geometry& g = d->geometry();
  CellField eta(d);
  CornerField psi(d);
  fill(eta, [&](Cell c) { return known.viscosity(g.cell_radius(c.i), g.cell_lateral(c.j)); });
  const RadialFaceField b =
      on_radial_faces(d, [&](RadialFace f) { return face_buoyancy(known, g, f); });
  FlowSettings settings;
  settings.tolerance = 1e-11;
  FlowSolver solver(d, known.walls, settings);
  if (!solver.solve(eta, b, psi).converged) throw std::runtime_error("the flow did not converge");
  const Stresses s = stresses(solver.power(), psi, b);
  return {velocity_error(known, *d, psi),
          stress_error(g, 0, s.inner_normal, known.inner_normal_stress),
          stress_error(g, g.radial_cells(), s.outer_normal, known.outer_normal_stress)};
}

}  // namespace lidwright
