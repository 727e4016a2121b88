#include "solver/power.hpp"

#include <algorithm>
#include <cmath>

namespace lidwright {
namespace {

Range intersection(Range a, Range b) {
  return {std::max(a.begin, b.begin), std::min(a.end, b.end)};
}

/// Cells that touch the owned corners.
Range cells_touching(const CornerField& f, Range held_cells) {
  return intersection({f.owned().begin - 1, f.owned().end}, held_cells);
}

}  // namespace

Power::Power(std::shared_ptr<const Decomposition> d, const Walls& walls)
    : decomposition_(std::move(d)),
      inner_slip_(walls.inner.slip),
      outer_slip_(walls.outer.slip),
      through_flow_(geometry().periodic() &&
                    (inner_slip_ == Slip::None || outer_slip_ == Slip::None)),
      cell_weight_(decomposition_),
      corner_weight_(decomposition_),
      table_(geometry()) {
  set_viscosity(CellField(decomposition_, 1.0));
}

bool Power::has_shear(Corner k) const {
  const Geometry& g = geometry();
  if (g.on_side(k.j)) return false;
  if (k.i == 0) return inner_slip_ == Slip::None;
  if (k.i == g.radial_cells()) return outer_slip_ == Slip::None;
  return true;
}

ShearRow Power::shear_row(Corner k) const {
  return geometry().on_wall(k.i) ? shear_row_gripping(geometry(), k)
                                 : shear_row_inside(geometry(), k);
}

Range Power::shear_columns() const {
  const Range held = decomposition_->held(At::Corner), cells = decomposition_->held(At::Cell);
  const int from = std::max(held.begin + 1, cells.begin + 1);
  return {from, std::min(held.end - 1, cells.end)};
}

bool Power::fixed(Corner k) const {
  const Geometry& g = geometry();
  return g.on_side(k.j) || k.i == 0 || (k.i == g.radial_cells() && !through_flow_);
}

void Power::set_viscosity(ViscosityField viscosity) {
  eta_ = std::move(viscosity);
  const CellField& eta = eta_.cells;
  const Geometry& g = geometry();
  for (int j = eta.held().begin; j < eta.held().end; ++j)
    for (int i = 0; i < eta.rows(); ++i) cell_weight_[{i, j}] = 2 * g.volume({i, j}) * eta[{i, j}];
  set_corner_weights();
}

Power::Quarters Power::quarters(Corner k) const {
  const Geometry& g = geometry();
  Quarters q;
  double volume = 0, compliance = 0;
  const auto add = [&](Cell c, bool upper, bool right) {
    const std::size_t place = ViscosityField::quarter(upper, right);
    const double v = g.quarter_volume(c, upper, right), eta = eta_.of(c, place);
    q.all[q.count++] = {c, eta, v, eta_.uniform_in_cells() ? 0 : eta_.shares[place][c]};
    volume += v;
    compliance += v / eta;
  };
  if (k.i > 0) {
    add({k.i - 1, k.j - 1}, true, true);
    add({k.i - 1, k.j}, true, false);
  }
  if (k.i < g.radial_cells()) {
    add({k.i, k.j - 1}, false, true);
    add({k.i, k.j}, false, false);
  }
  // One stress at the corner's mean rate: V / eta_k = sum of V_q / eta_q.
  if (eta_.uniform_in_cells())
    for (std::size_t n = 0; n < q.count; ++n)
      q.all[n].share = volume / (q.all[n].viscosity * compliance);
  return q;
}

std::array<Power::Share, 4> Power::shares(Corner k) const {
  std::array<Share, 4> all;
  all.fill({{std::min(k.i, geometry().radial_cells() - 1), k.j}, 0});
  double sum = 0;
  std::size_t n = 0;
  for (const Quarter& q : quarters(k)) {
    all[n] = {q.cell, q.volume * q.viscosity * q.share * q.share};
    sum += all[n++].share;
  }
  for (Share& s : all) s.share /= sum;
  return all;
}

void Power::set_corner_weights() {
  const Range columns = shear_columns();
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 0; i < corner_weight_.rows(); ++i) {
      if (!has_shear({i, j})) continue;
      double& weight = corner_weight_[{i, j}];
      weight = 0;
      for (const Quarter& q : quarters({i, j}))
        weight += 4 * q.volume * q.viscosity * q.share * q.share;
    }
}

RadialTable::RadialTable(const Geometry& g) {
  const int n = g.radial_cells();
  for (int i = 0; i < n; ++i) {
    per_width.push_back(g.inv_width(i));
    per_stretch.push_back(1 / g.stretch(i));
    half_curvature.push_back(g.curvature(i) / 2);
    per_side.push_back(g.side_velocity_per_flow(i));
    inner_dilatation.push_back(g.inner_dilatation(i));
    outer_dilatation.push_back(g.outer_dilatation(i));
  }
  for (int i = 0; i <= n; ++i) {
    const bool inside = i > 0 && i < n;
    per_area.push_back(g.face_velocity_per_flow(i));
    lateral_shear.push_back(inside ? 0.5 / g.face_stretch(i) : 0);
    outer_shear.push_back(inside ? 0.5 * g.face_stretch(i) / (g.radial_distance(i) * g.stretch(i))
                                 : 0);
    inner_shear.push_back(
        inside ? 0.5 * g.face_stretch(i) / (g.radial_distance(i) * g.stretch(i - 1)) : 0);
  }
}

/// The rows of G and their transposes are those of mesh/operators.hpp (a test holds the two
/// together); here they run down columns of cells and corners, so that the compiler can vectorise
/// them.
void Power::apply(const CornerField& psi, CornerField& force) const {
  std::fill(force.values().begin(), force.values().end(), 0.0);
  apply_normal(psi, force);
  apply_shear_inside(psi, force);
  apply_shear_at_walls(psi, force);
}

void Power::apply_normal(const CornerField& psi, CornerField& force) const {
  const Geometry& g = geometry();
  const Range cells = cells_touching(force, cell_weight_.held());
  const int n = g.radial_cells();
  // Of one column: u on its radial faces; forces of each cell on its inner and outer face and on
  // its sides, at places 1 to n, with zeros around, so that every loop gathers.
  const auto places = static_cast<std::size_t>(n) + 2;
  std::vector<double> u_column(places), inner_force(places, 0.0), outer_force(places, 0.0),
      side_force(places, 0.0);
  double* __restrict u = u_column.data();
  double* __restrict inner = inner_force.data();
  double* __restrict outer = outer_force.data();
  double* __restrict side = side_force.data();
  for (int j = cells.begin; j < cells.end; ++j) {
    const double* __restrict left = psi.column(j);
    const double* __restrict right = psi.column(j + 1);
    const double* __restrict weight = cell_weight_.column(j);
    double* __restrict force_left = force.column(j);
    double* __restrict force_right = force.column(j + 1);
    const double per_lateral = g.inverse_lateral_measure(j), per_angle = g.inv_lateral_width(j);
    const double per_left = g.inverse_side_lateral(j), per_right = g.inverse_side_lateral(j + 1);
    for (int i = 0; i <= n; ++i) u[i] = (right[i] - left[i]) * table_.per_area[i] * per_lateral;
#pragma GCC ivdep
    for (int i = 0; i < n; ++i) {
      const double to_angle = per_angle * table_.per_stretch[i];
      const double lateral =
          ((right[i] - right[i + 1]) * per_right - (left[i] - left[i + 1]) * per_left) *
          table_.per_side[i];
      const double rr = (u[i + 1] - u[i]) * table_.per_width[i];
      const double tt = lateral * to_angle + table_.half_curvature[i] * (u[i] + u[i + 1]);
      const double dilatation =
          table_.outer_dilatation[i] * u[i + 1] - table_.inner_dilatation[i] * u[i];
      // Stress differences tau_rr - tau_pp and tau_tt - tau_pp, and tau_pp itself, times volume,
      // with the deviatoric e_pp = (2/3) div u - e_rr - e_tt.
      const double along_r = weight[i] * (2 * rr + tt - dilatation) * table_.per_width[i];
      const double along_t = weight[i] * (2 * tt + rr - dilatation);
      const double spread = weight[i] * (2 * dilatation / 3 - rr - tt);
      const double hoop = along_t * table_.half_curvature[i];
      inner[i + 1] = hoop - along_r - spread * table_.inner_dilatation[i];
      outer[i + 1] = hoop + along_r + spread * table_.outer_dilatation[i];
      side[i + 1] = along_t * to_angle * table_.per_side[i];
    }
    for (int i = 0; i <= n; ++i) {
      const double push = (outer[i] + inner[i + 1]) * table_.per_area[i] * per_lateral;
      const double turn = side[i] - side[i + 1];
      force_left[i] += turn * per_left - push;
      force_right[i] += push - turn * per_right;
    }
  }
}

void Power::apply_shear_inside(const CornerField& psi, CornerField& force) const {
  const Geometry& g = geometry();
  const Range columns =
      intersection(shear_columns(), {force.owned().begin - 1, force.owned().end + 1});
  const int n = g.radial_cells();
  // Of one column: forces of each corner on its neighbours above and below, at places 1 to n - 1.
  const auto places = static_cast<std::size_t>(n) + 2;
  std::vector<double> up_force(places, 0.0), down_force(places, 0.0);
  double* __restrict up = up_force.data();
  double* __restrict down = down_force.data();
  for (int j = columns.begin; j < columns.end; ++j) {
    if (g.on_side(j)) continue;
    const double* __restrict before = psi.column(j - 1);
    const double* __restrict here = psi.column(j);
    const double* __restrict behind = psi.column(j + 1);
    const double* __restrict weight = corner_weight_.column(j);
    double* __restrict force_before = force.column(j - 1);
    double* __restrict force_here = force.column(j);
    double* __restrict force_behind = force.column(j + 1);
    const double to_before = g.inverse_lateral_measure(j - 1) / g.lateral_distance(j);
    const double to_behind = g.inverse_lateral_measure(j) / g.lateral_distance(j);
    const double per_lateral = g.inverse_side_lateral(j);
#pragma GCC ivdep
    for (int i = 1; i < n; ++i) {
      const double lateral = table_.lateral_shear[i] * table_.per_area[i];
      const double outer = table_.outer_shear[i] * table_.per_side[i] * per_lateral;
      const double inner = table_.inner_shear[i] * table_.per_side[i - 1] * per_lateral;
      const double shear_rate =
          lateral * (to_behind * (behind[i] - here[i]) - to_before * (here[i] - before[i])) +
          outer * (here[i] - here[i + 1]) - inner * (here[i - 1] - here[i]);
      const double stress = weight[i] * shear_rate;
      const double across = stress * lateral;
      force_behind[i] += across * to_behind;
      force_before[i] += across * to_before;
      force_here[i] -= across * (to_behind + to_before);
      up[i] = stress * outer;
      down[i] = stress * inner;
    }
    // A corner pushes itself outwards by what it pushes its neighbours back.
    for (int i = 1; i < n; ++i) force_here[i] += up[i] + down[i] - up[i - 1] - down[i + 1];
    force_here[0] -= down[1];
    force_here[n] -= up[n - 1];
  }
}

void Power::apply_shear_at_walls(const CornerField& psi, CornerField& force) const {
  const Geometry& g = geometry();
  for (int j = force.owned().begin; j < force.owned().end; ++j)
    for (const int i : {0, g.radial_cells()}) {
      if (!has_shear({i, j})) continue;
      const ShearRow row = shear_row({i, j});
      const double stress = corner_weight_[{i, j}] * shear(g, psi, row);
      add_to_corners(g, force, row.near, row.near_weight * stress);
      add_to_corners(g, force, row.far, row.far_weight * stress);
    }
}

void Power::add_buoyancy(const RadialFaceField& b, CornerField& force) const {
  const Geometry& g = geometry();
  Range columns = force.owned();
  if (g.on_side(columns.begin)) ++columns.begin;
  if (g.on_side(columns.end - 1)) --columns.end;
  for (int j = columns.begin; j < columns.end; ++j) {
    const double* left = b.column(j - 1);
    const double* right = b.column(j);
    double* out = force.column(j);
    for (int i = 1; i < g.radial_cells(); ++i)
      out[i] += g.radial_distance(i) * (left[i] - right[i]);
  }
}

void Power::to_unknowns(CornerField& force, Vec out) const {
  double on_wall = 0;
  for (int j = force.owned().begin; j < force.owned().end; ++j)
    for (int i = 0; i < force.rows(); ++i) {
      if (common({i, j})) on_wall += force[{i, j}];
      if (fixed({i, j}) || common({i, j})) force[{i, j}] = 0;
    }
  if (through_flow_) {
    on_wall = decomposition_->sum(on_wall);
    if (force.owned().begin == 0) force[{geometry().radial_cells(), 0}] = on_wall;
  }
  force.to_global(out);
}

void Power::flow_to_unknowns(CornerField psi, Vec out) const {
  // `to_unknowns` sums the outer wall: leave the common value in one place only.
  for (int j = psi.owned().begin; j < psi.owned().end; ++j)
    if (through_flow_ && j != 0) psi[{psi.rows() - 1, j}] = 0;
  to_unknowns(psi, out);
}

void Power::from_unknowns(Vec in, CornerField& psi) const {
  psi.from_global(in);
  if (!through_flow_) return;
  const int wall = geometry().radial_cells();
  double value = psi.owned().begin == 0 ? psi[{wall, 0}] : 0;
  MPI_Bcast(&value, 1, MPI_DOUBLE, 0, decomposition_->comm());
  for (int j = psi.held().begin; j < psi.held().end; ++j) psi[{wall, j}] = value;
}

double dissipation(const Power& power, const CornerField& psi) {
  const Geometry& g = power.geometry();
  const Range cells = power.decomposition().owned(At::Cell);
  double total = 0;
  for (int j = cells.begin; j < cells.end; ++j) {
    for (int i = 0; i < g.radial_cells(); ++i) {
      const Normal e = deviatoric_strain(g, face_velocities(g, psi, Cell{i, j}), {i, j});
      total += power.cell_weight({i, j}) * (e.rr * e.rr + e.tt * e.tt + e.pp * e.pp);
    }
    for (int i = 0; i < psi.rows(); ++i)
      if (power.has_shear({i, j})) {
        const double e = shear(g, psi, power.shear_row({i, j}));
        total += power.corner_weight({i, j}) * e * e;
      }
  }
  return power.decomposition().sum(total);
}

CellField dissipation_of_cells(const Power& power, const CornerField& psi) {
  const Geometry& g = power.geometry();
  CellField work(power.decomposition_pointer());
  const Range mine = work.owned(), corners = power.shear_columns();
  for (int j = mine.begin; j < mine.end; ++j)
    for (int i = 0; i < work.rows(); ++i) {
      const Normal e = deviatoric_strain(g, face_velocities(g, psi, Cell{i, j}), {i, j});
      work[{i, j}] = power.cell_weight({i, j}) * (e.rr * e.rr + e.tt * e.tt + e.pp * e.pp);
    }
  for (int j = std::max(corners.begin, mine.begin); j < std::min(corners.end, mine.end + 1); ++j)
    for (int i = 0; i < psi.rows(); ++i) {
      if (!power.has_shear({i, j})) continue;
      const double e = shear(g, psi, power.shear_row({i, j}));
      for (const Power::Share& s : power.shares({i, j}))
        if (s.cell.j >= mine.begin && s.cell.j < mine.end)
          work[s.cell] += s.share * power.corner_weight({i, j}) * e * e;
    }
  return work;
}

double strain_rate(const Power& power, const CornerField& psi, Cell c) {
  const Geometry& g = power.geometry();
  const auto squared_shear = [&](int i, int j) {
    return power.has_shear({i, j}) ? std::pow(shear(g, psi, power.shear_row({i, j})), 2) : 0.0;
  };
  const Normal e = deviatoric_strain(g, face_velocities(g, psi, c), c);
  const double shear2 = (squared_shear(c.i, c.j) + squared_shear(c.i + 1, c.j) +
                         squared_shear(c.i, c.j + 1) + squared_shear(c.i + 1, c.j + 1)) /
                        4;
  return std::sqrt((e.rr * e.rr + e.tt * e.tt + e.pp * e.pp + 2 * shear2) / 2);
}

CellField strain_rate(const Power& power, const CornerField& psi) {
  CellField rate(power.decomposition_pointer());
  for (int j = rate.owned().begin; j < rate.owned().end; ++j)
    for (int i = 0; i < rate.rows(); ++i) rate[{i, j}] = strain_rate(power, psi, {i, j});
  return rate;
}

}  // namespace lidwright
