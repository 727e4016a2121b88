#include "solver/heat.hpp"

#include <algorithm>
#include <cmath>
#include <numeric>

#include "mesh/operators.hpp"
#include "solver/advection.hpp"
#include "solver/solve_error.hpp"

namespace lidwright {
namespace {

const ThermalWall& thermal(const Walls& walls, bool at_inner) {
  return at_inner ? walls.inner.thermal : walls.outer.thermal;
}

/// Walls with the same kind of condition and all values zero: the linear part of conduction.
Walls homogeneous(Walls walls) {
  for (Wall* wall : {&walls.inner, &walls.outer}) {
    if (std::holds_alternative<FixedTemperature>(wall->thermal))
      wall->thermal = FixedTemperature{0};
    else
      wall->thermal = FixedHeatFlux{0};
  }
  return walls;
}

/// Runs `with` on the carrying function of a scheme: dispatched once per field, never per face.
template <class With>
auto with_scheme(HeatFlux scheme, With&& with) {
  return scheme == HeatFlux::Central ? with(carried_central) : with(carried_limited);
}

}  // namespace

HeatOperator::HeatOperator(std::shared_ptr<const Decomposition> d, const Walls& walls,
                           const HeatSources& sources, HeatFlux flux,
                           const ReferenceProfiles& reference)
    : decomposition_(std::move(d)),
      walls_(walls),
      flux_(flux),
      reference_(reference),
      mantle_(geometry(), reference) {
  const Geometry& g = geometry();
  for (int i = 0; i < g.radial_cells(); ++i) {
    const auto row = static_cast<std::size_t>(i);
    source_.push_back(sources(g.depth(i)));
    capacity_per_volume_.push_back(g.cell_density(i) * mantle_.heat_capacity[row]);
    for (int j = 0; j < g.lateral_cells(); ++j) {
      total_source_ += g.volume({i, j}) * source_.back();
      total_capacity_ += capacity({i, j});
    }
    radial_conductance_.push_back(
        i > 0 ? g.face_measure(i) * mantle_.face_conductivity[row] / g.radial_distance(i) : 0);
    lateral_conductance_.push_back(g.side_measure(i) * mantle_.cell_conductivity[row] /
                                   g.stretch(i));
  }
  set_adiabatic_work();
}

void HeatOperator::set_adiabatic_work() {
  const Geometry& g = geometry();
  for (int i = 0; i <= g.radial_cells(); ++i) {
    const bool wall = g.on_wall(i);
    const double per_distance =
        wall ? 0 : mantle_.dissipation_number * mantle_.buoyancy[static_cast<std::size_t>(i)];
    adiabatic_inside_.push_back(wall ? 0 : per_distance * g.width(i - 1) / 2);
    adiabatic_outside_.push_back(wall ? 0 : per_distance * g.width(i) / 2);
  }
}

double HeatOperator::conductance(RadialFace f) const {
  return geometry().area(f) * mantle_.face_conductivity[static_cast<std::size_t>(f.i)] /
         geometry().radial_distance(f.i);
}

double HeatOperator::conductance(LateralFace f) const {
  if (geometry().on_side(f.j)) return 0;
  return lateral_conductance_[static_cast<std::size_t>(f.i)] * geometry().side_lateral(f.j) /
         geometry().lateral_distance(f.j);
}

double HeatOperator::wall_flux(const CellField& temperature, RadialFace wall) const {
  const bool at_inner = wall.i == 0;
  const ThermalWall& condition = thermal(walls_, at_inner);
  if (const auto* flux = std::get_if<FixedHeatFlux>(&condition))
    return geometry().area(wall) * flux->outward;
  const double at_wall = std::get<FixedTemperature>(condition).value;
  const double inside_t = temperature[at_inner ? outside(wall) : inside(wall)];
  const double drop = at_inner ? at_wall - inside_t : inside_t - at_wall;
  return conductance(wall) * drop;
}

double HeatOperator::wall_temperature(const CellField& temperature, RadialFace wall) const {
  const bool at_inner = wall.i == 0;
  const ThermalWall& condition = thermal(walls_, at_inner);
  if (const auto* fixed = std::get_if<FixedTemperature>(&condition)) return fixed->value;
  const double fall = std::get<FixedHeatFlux>(condition).outward *
                      geometry().radial_distance(wall.i) /
                      mantle_.face_conductivity[static_cast<std::size_t>(wall.i)];
  return at_inner ? temperature[outside(wall)] + fall : temperature[inside(wall)] - fall;
}

double HeatOperator::conducted(const CellField& t, RadialFace f) const {
  if (geometry().on_wall(f.i)) return wall_flux(t, f);
  return conductance(f) * (t[inside(f)] - t[outside(f)]);
}

double HeatOperator::face_temperature(const CellField& t, RadialFace f) const {
  const double below = f.i == 0 ? wall_temperature(t, f) : t[inside(f)];
  const double above = f.i == geometry().radial_cells() ? wall_temperature(t, f) : t[outside(f)];
  return (below + above) / 2;
}

/// Temperature of a row of cells that may lie one beyond a wall: continued on a straight line
/// through the wall.
double HeatOperator::radial_neighbour(const CellField& t, int i, int j) const {
  if (i < 0) return 2 * wall_temperature(t, {0, j}) - t[{0, j}];
  const int last = geometry().radial_cells() - 1;
  if (i > last) return 2 * wall_temperature(t, {last + 1, j}) - t[{last, j}];
  return t[{i, j}];
}

double HeatOperator::advected(const CellField& t, const CornerField& psi, RadialFace f) const {
  if (geometry().on_wall(f.i)) return 0;
  const auto row = static_cast<std::size_t>(f.i);
  const double capacity = (mantle_.heat_capacity[row - 1] + mantle_.heat_capacity[row]) / 2;
  return capacity * with_scheme(flux_, [&](auto carried) {
           return carried(flow_through(psi, f), radial_neighbour(t, f.i - 2, f.j), t[inside(f)],
                          t[outside(f)], radial_neighbour(t, f.i + 1, f.j));
         });
}

/// Heat carried outwards through the radial faces of a column (walls: 0), for cells 0 to n - 1 held
/// with one more beyond each wall.
template <class Carried>
void HeatOperator::carry_radially(const CellField& t, const CornerField& psi, int j,
                                  Carried carried, std::vector<double>& heat) const {
  const int n = geometry().radial_cells();
  std::vector<double> with_walls(static_cast<std::size_t>(n) + 2);
  double* __restrict cell = with_walls.data() + 1;
  std::copy_n(t.column(j), n, cell);
  cell[-1] = radial_neighbour(t, -1, j);
  cell[n] = radial_neighbour(t, n, j);
  const double* __restrict left = psi.column(j);
  const double* __restrict right = psi.column(j + 1);
  double* __restrict out = heat.data();
  for (int i = 1; i < n; ++i)
    out[i] = carried(right[i] - left[i], cell[i - 2], cell[i - 1], cell[i], cell[i + 1]);
}

/// Heat carried through the lateral faces on the left of column j.
template <class Carried>
void HeatOperator::carry_laterally(const CellField& t, const CornerField& psi, int j,
                                   Carried carried, std::vector<double>& heat) const {
  const Geometry& g = geometry();
  if (g.on_side(j)) return std::fill(heat.begin(), heat.end(), 0.0);
  const auto mirrored = [&](int k) {
    if (g.periodic()) return k;
    return k < 0 ? -1 - k : (k >= g.lateral_cells() ? 2 * g.lateral_cells() - 1 - k : k);
  };
  const double* __restrict far_left = t.column(mirrored(j - 2));
  const double* __restrict left = t.column(j - 1);
  const double* __restrict right = t.column(j);
  const double* __restrict far_right = t.column(mirrored(j + 1));
  const double* __restrict corner = psi.column(j);
  double* __restrict out = heat.data();
  for (int i = 0; i < g.radial_cells(); ++i)
    out[i] = carried(corner[i] - corner[i + 1], far_left[i], left[i], right[i], far_right[i]);
}

void HeatOperator::add_advection(const CellField& t, const CornerField& psi,
                                 CellField& rate) const {
  const auto n = static_cast<std::size_t>(geometry().radial_cells());
  std::vector<double> up(n + 1, 0.0), from_left(n), to_right(n);
  with_scheme(flux_, [&](auto carried) {
    carry_laterally(t, psi, rate.owned().begin, carried, from_left);
    for (int j = rate.owned().begin; j < rate.owned().end; ++j) {
      carry_radially(t, psi, j, carried, up);
      carry_laterally(t, psi, j + 1, carried, to_right);
      double* gain = rate.column(j);
      for (std::size_t i = 0; i < n; ++i)
        gain[i] += mantle_.heat_capacity[i] * (up[i] - up[i + 1] + from_left[i] - to_right[i]);
      std::swap(from_left, to_right);
    }
  });
}

void HeatOperator::add_adiabatic_work(const CellField& t, const CornerField& psi,
                                      CellField& rate) const {
  if (mantle_.dissipation_number == 0) return;
  for (int j = rate.owned().begin; j < rate.owned().end; ++j)
    for (int i = 1; i < rate.rows(); ++i) {
      const RadialFace f{i, j};
      const double absolute = face_temperature(t, f) + mantle_.surface_temperature;
      const double work = flow_through(psi, f) * absolute;
      rate[inside(f)] -= adiabatic_inside(i) * work;
      rate[outside(f)] -= adiabatic_outside(i) * work;
    }
}

/// Heat conducted through the lateral faces on the left of column j.
void HeatOperator::conduct_laterally(const CellField& t, int j, std::vector<double>& heat) const {
  const Geometry& g = geometry();
  if (g.on_side(j)) return std::fill(heat.begin(), heat.end(), 0.0);
  const double scale = g.side_lateral(j) / g.lateral_distance(j);
  const double* left = t.column(j - 1);
  const double* right = t.column(j);
  for (std::size_t i = 0; i < heat.size(); ++i)
    heat[i] = lateral_conductance_[i] * scale * (left[i] - right[i]);
}

WallHeat HeatOperator::add_conduction(const CellField& t, CellField& rate) const {
  const auto n = static_cast<std::size_t>(geometry().radial_cells());
  std::vector<double> up(n + 1), from_left(n), to_right(n);
  WallHeat through;
  conduct_laterally(t, rate.owned().begin, from_left);
  for (int j = rate.owned().begin; j < rate.owned().end; ++j) {
    const double* cell = t.column(j);
    double* gain = rate.column(j);
    const double scale = geometry().lateral_measure(j);
    up[0] = wall_flux(t, {0, j});
    for (std::size_t i = 1; i < n; ++i)
      up[i] = radial_conductance_[i] * scale * (cell[i - 1] - cell[i]);
    up[n] = wall_flux(t, {static_cast<int>(n), j});
    conduct_laterally(t, j + 1, to_right);
    for (std::size_t i = 0; i < n; ++i) gain[i] += up[i] - up[i + 1] + from_left[i] - to_right[i];
    std::swap(from_left, to_right);
    through.inner += up[0];
    through.outer += up[n];
  }
  return through;
}

void HeatOperator::add_sources(CellField& rate) const {
  for (int j = rate.owned().begin; j < rate.owned().end; ++j)
    for (int i = 0; i < rate.rows(); ++i) rate[{i, j}] += geometry().volume({i, j}) * source(i);
}

double HeatOperator::outflow_rate(const CornerField& psi) const {
  const Range columns = decomposition_->owned(At::Cell);
  double most = 0;
  const auto positive = [](double x) { return x > 0 ? x : 0; };
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 0; i < geometry().radial_cells(); ++i) {
      const Cell c{i, j};
      const double out =
          positive(flow_through(psi, outer(c))) + positive(-flow_through(psi, inner(c))) +
          positive(flow_through(psi, right(c))) + positive(-flow_through(psi, left(c)));
      most = std::max(most, out * geometry().inverse_volume(c) / geometry().cell_density(i));
    }
  return decomposition_->max(most);
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

HeatStepper::HeatStepper(std::shared_ptr<const Decomposition> d, const Walls& walls,
                         const HeatSources& sources, HeatFlux flux,
                         const ReferenceProfiles& reference)
    : heat_(std::move(d), walls, sources, flux, reference), implicit_(heat_) {}

namespace {

double owned_sum(const CellField& f) {
  return std::accumulate(f.owned_data(), f.owned_data() + f.owned_size(), 0.0);
}

}  // namespace

/// Gains of cells in one stage: A by all that is explicit, D by conduction.
struct HeatStepper::Stage {
  CellField advection, conduction;
  StepHeat heat;  ///< on this rank
};

HeatStepper::Stage HeatStepper::stage(const CellField& temperature, const Forcing& forcing) const {
  Stage s{CellField(temperature.decomposition_pointer()),
          CellField(temperature.decomposition_pointer()),
          {}};
  heat_.add_advection(temperature, forcing.psi, s.advection);
  if (!heat_.mantle().uniform_heat_capacity) s.heat.carried = owned_sum(s.advection);
  if (!forcing.viscous.empty()) {
    CellField work(temperature.decomposition_pointer());
    heat_.add_adiabatic_work(temperature, forcing.psi, work);
    s.heat.adiabatic = -owned_sum(work);
    s.heat.viscous = owned_sum(forcing.viscous);
    for (std::size_t k = 0; k < work.owned_size(); ++k)
      s.advection.owned_data()[k] += work.owned_data()[k] + forcing.viscous.owned_data()[k];
  }
  heat_.add_sources(s.advection);
  s.heat.through = heat_.add_conduction(temperature, s.conduction);
  return s;
}

/// With g = 1 - 1/sqrt(2) and b = 1/(2 sqrt(2)):
///     T2 = T + dt [2g A1 + g D1 + g D2]                         at t + 2g dt
///     T3 = T + dt [A1/2 + A2/2 + b D1 + b D2 + g D3]            at t + dt
///     T(t + dt) = T + dt [b (A1 + D1) + b (A2 + D2) + g (A3 + D3)]
/// The last line is in flux form, so heat is conserved whatever the implicit solves leave.
StepHeat HeatStepper::step(const CellField& temperature, const Forcing& now, const Forcing& then,
                           double dt, CellField& next) {
  const double g = 1 - 1 / std::sqrt(2.0), b = 1 / (2 * std::sqrt(2.0));
  const auto each = [&](auto&& body) {
    for (int j = temperature.owned().begin; j < temperature.owned().end; ++j)
      for (int i = 0; i < temperature.rows(); ++i) body(Cell{i, j});
  };
  Forcing between = now;
  for (std::size_t k = 0; k < now.psi.values().size(); ++k)
    between.psi.values()[k] += 2 * g * (then.psi.values()[k] - now.psi.values()[k]);
  for (std::size_t k = 0; k < now.viscous.values().size(); ++k)
    between.viscous.values()[k] += 2 * g * (then.viscous.values()[k] - now.viscous.values()[k]);
  CellField right(temperature.decomposition_pointer()), middle(temperature.decomposition_pointer());

  const Stage one = stage(temperature, now);
  each([&](Cell c) {
    right[c] = heat_.capacity(c) * temperature[c] +
               dt * (2 * g * one.advection[c] + g * one.conduction[c]);
    middle[c] =
        temperature[c] + 2 * g * dt * (one.advection[c] + one.conduction[c]) / heat_.capacity(c);
  });
  implicit_.solve(g * dt, right, middle);
  const Stage two = stage(middle, between);
  CellField last(temperature.decomposition_pointer());
  each([&](Cell c) {
    right[c] =
        heat_.capacity(c) * temperature[c] + dt * ((one.advection[c] + two.advection[c]) / 2 +
                                                   b * (one.conduction[c] + two.conduction[c]));
    last[c] = temperature[c] + (middle[c] - temperature[c]) / (2 * g);
  });
  implicit_.solve(g * dt, right, last);
  const Stage three = stage(last, then);
  next = temperature;
  each([&](Cell c) {
    const double gain =
        b * (one.advection[c] + one.conduction[c] + two.advection[c] + two.conduction[c]) +
        g * (three.advection[c] + three.conduction[c]);
    next[c] += dt * gain / heat_.capacity(c);
  });
  next.exchange();
  std::vector<double> mean;
  for (double StepHeat::*part : {&StepHeat::viscous, &StepHeat::adiabatic, &StepHeat::carried})
    mean.push_back(b * (one.heat.*part + two.heat.*part) + g * three.heat.*part);
  for (double WallHeat::*wall : {&WallHeat::inner, &WallHeat::outer})
    mean.push_back(b * (one.heat.through.*wall + two.heat.through.*wall) +
                   g * three.heat.through.*wall);
  heat_.decomposition().sum_in_place(mean);
  return {{mean[3], mean[4]}, mean[0], mean[1], mean[2]};
}

}  // namespace lidwright
