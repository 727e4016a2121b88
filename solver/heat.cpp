#include "solver/heat.hpp"

#include <algorithm>
#include <cmath>

#include "mesh/operators.hpp"
#include "solver/advection.hpp"

namespace lidwright {
namespace {

const ThermalWall& thermal(const Walls& walls, bool at_inner) {
  return at_inner ? walls.inner.thermal : walls.outer.thermal;
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

}  // namespace lidwright
