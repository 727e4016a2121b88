#include "solver/onset.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

#include "solver/initial.hpp"
#include "solver/linearised.hpp"
#include "solver/measure.hpp"

namespace lidwright {
namespace {

using std::numbers::pi;

bool axisymmetric(const Shell& s) { return s.shape == Shape::AxisymmetricShell; }

double opening(const Shell& s) { return s.lateral_end - s.lateral_begin; }

/// Half waves of a mode along the whole shell.
int half_waves(const Shell& s, int number) {
  return s.sides == Sides::Periodic ? 2 * number : number;
}

/// Radius at mid-depth: length there per unit of the lateral coordinate.
double mid_stretch(const Shell& s) { return s.shape == Shape::Box ? 1 : s.inner_radius + 0.5; }

/// Degree of a Legendre function that is flat at both sides; whole numbers where a side is a pole
/// or the equator.
double degree(const Shell& s, int number) {
  const auto is = [](double a, double b) { return std::abs(a - b) < 1e-12; };
  const bool from_pole = is(s.lateral_begin, 0), to_pole = is(s.lateral_end, pi);
  if (from_pole && to_pole) return number;
  if ((from_pole || to_pole) && is(opening(s), pi / 2)) return 2.0 * number;
  const Geometry fine(s, {4, std::max(400, 40 * number), {}, {}});
  return std::sqrt(0.25 + lateral_mode(fine, number).eigenvalue) - 0.5;
}

/// Cells along an axisymmetric shell: square at mid-depth, or half as many to each half wave as
/// across the shell, whichever is finer.
int lateral_cells(const Shell& s, int radial_cells, int number) {
  const double squares = std::ceil(mid_stretch(s) * opening(s) - 1e-9);
  return radial_cells * std::max({1, static_cast<int>(squares), (number + 1) / 2});
}

}  // namespace

Wave wave_of(const Shell& s, int number) {
  Wave w;
  w.number = number;
  if (axisymmetric(s)) {
    w.order = degree(s, number);
    w.wavenumber = std::sqrt(w.order * (w.order + 1)) / mid_stretch(s);
  } else {
    w.order = half_waves(s, number) * pi / opening(s);
    w.wavenumber = w.order / mid_stretch(s);
  }
  return w;
}

CellField temperature_at_rest(const HeatOperator& heat) {
  const std::vector<double> profile = conductive_profile(heat);
  CellField t(heat.decomposition_pointer());
  for (int j = t.held().begin; j < t.held().end; ++j)
    std::copy(profile.begin(), profile.end(), t.column(j));
  return t;
}

NeutralModes::NeutralModes(const Model& model, int radial_cells) : model_(model) {
  model_.rayleigh = 1;
  model_.grid.radial = radial_cells;
  model_.grid.lateral_grading = {};
}

Model NeutralModes::model_for(int number) const {
  Model m = model_;
  if (axisymmetric(m.shell)) {
    m.grid.lateral = lateral_cells(m.shell, m.grid.radial, number);
    return m;
  }
  m.grid.lateral = m.grid.radial;
  m.shell.lateral_end = opening(m.shell) / half_waves(m.shell, number);
  m.shell.lateral_begin = 0;
  m.shell.sides = Sides::Reflecting;
  return m;
}

void NeutralModes::assemble(const Model& m) {
  const bool same_mesh = geometry_ && geometry_->lateral_cells() == m.grid.lateral &&
                         geometry_->shell().lateral_end == m.shell.lateral_end;
  if (same_mesh) return;
  const auto d = decompose(m, MPI_COMM_SELF);
  const HeatOperator heat(d, m.walls, m.heat, HeatFlux::Central, m.reference);
  const CellField t = temperature_at_rest(heat);
  Power power(d, m.walls);
  power.set_viscosity(viscosity_of(m.viscosity, t));
  Linearised l = linearise(m, power, heat, HeatFlux::Central, Unknowns(power), t, CornerField(d));
  geometry_ = d->geometry_pointer();
  blocks_ = {std::move(l.flow_by_psi), std::move(l.flow_by_temperature), std::move(l.heat_by_psi),
             std::move(l.heat_by_temperature)};
}

std::optional<NeutralShape> NeutralModes::operator()(int number) {
  assemble(model_for(number));
  const LateralMode lateral = lateral_mode(*geometry_, axisymmetric(model_.shell) ? number : 1);
  std::vector<NeutralMode> found =
      neutral_modes(projected(blocks_, lateral, model_.grid.radial), 1);
  if (found.empty()) return std::nullopt;
  NeutralShape shape;
  shape.number = number;
  shape.rayleigh = found.front().rayleigh;
  shape.temperature = std::move(found.front().temperature);
  shape.psi = std::move(found.front().psi);
  shape.psi.insert(shape.psi.begin(), 0);
  shape.psi.push_back(0);
  return shape;
}

}  // namespace lidwright
