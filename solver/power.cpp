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
      eta_(decomposition_, 1.0),
      cell_weight_(decomposition_),
      corner_weight_(decomposition_) {
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

void Power::set_viscosity(const CellField& eta) {
  eta_ = eta;
  const Geometry& g = geometry();
  for (int j = eta.held().begin; j < eta.held().end; ++j)
    for (int i = 0; i < eta.rows(); ++i) cell_weight_[{i, j}] = 2 * g.volume({i, j}) * eta[{i, j}];
  set_corner_weights();
}

/// V eta_k with V / eta_k = sum over the quarters q of V_q / eta_q, summed volumes V.
double Power::corner_viscosity_volume(Corner k) const {
  const Geometry& g = geometry();
  double volume = 0, compliance = 0;
  const auto add = [&](Cell c, bool upper, bool right) {
    const double v = g.quarter_volume(c, upper, right);
    volume += v;
    compliance += v / eta_[c];
  };
  if (k.i > 0) {
    add({k.i - 1, k.j - 1}, true, true);
    add({k.i - 1, k.j}, true, false);
  }
  if (k.i < g.radial_cells()) {
    add({k.i, k.j - 1}, false, true);
    add({k.i, k.j}, false, false);
  }
  return volume * volume / compliance;
}

void Power::set_corner_weights() {
  const Range columns = shear_columns();
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 0; i < corner_weight_.rows(); ++i)
      if (has_shear({i, j})) corner_weight_[{i, j}] = 4 * corner_viscosity_volume({i, j});
}

void Power::apply(const CornerField& psi, CornerField& force) const {
  const Geometry& g = geometry();
  std::fill(force.values().begin(), force.values().end(), 0.0);
  const Range cells = cells_touching(force, eta_.held());
  for (int j = cells.begin; j < cells.end; ++j)
    for (int i = 0; i < g.radial_cells(); ++i) {
      const Cell c{i, j};
      const double w = cell_weight_[c];
      const Normal e = strain_without_divergence(g, face_velocities(g, psi, c), c);
      const OnFaces f = forces_without_divergence(g, {w * e.rr, w * e.tt, w * e.pp}, c);
      add_to_corners(g, force, inner(c), f.inner);
      add_to_corners(g, force, outer(c), f.outer);
      add_to_corners(g, force, left(c), f.left);
      add_to_corners(g, force, right(c), f.right);
    }
  const Range columns =
      intersection(shear_columns(), {force.owned().begin - 1, force.owned().end + 1});
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 0; i < force.rows(); ++i) {
      const Corner k{i, j};
      if (!has_shear(k)) continue;
      const ShearRow row = shear_row(k);
      const double stress = corner_weight_[k] * shear(g, psi, row);
      add_to_corners(g, force, row.before, row.before_weight * stress);
      add_to_corners(g, force, row.behind, row.behind_weight * stress);
      add_to_corners(g, force, row.near, row.near_weight * stress);
      add_to_corners(g, force, row.far, row.far_weight * stress);
    }
}

void Power::add_buoyancy(const std::function<double(RadialFace)>& b, CornerField& force) const {
  const Geometry& g = geometry();
  for (int j = force.owned().begin; j < force.owned().end; ++j)
    for (int i = 1; i < g.radial_cells(); ++i)
      if (!g.on_side(j)) force[{i, j}] += g.radial_distance(i) * (b({i, j - 1}) - b({i, j}));
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
      const Normal e = strain_without_divergence(g, face_velocities(g, psi, Cell{i, j}), {i, j});
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

CellField strain_rate(const Power& power, const CornerField& psi) {
  const Geometry& g = power.geometry();
  CellField rate(power.decomposition_pointer());
  const auto squared_shear = [&](Corner k) {
    return power.has_shear(k) ? std::pow(shear(g, psi, power.shear_row(k)), 2) : 0.0;
  };
  for (int j = rate.owned().begin; j < rate.owned().end; ++j)
    for (int i = 0; i < rate.rows(); ++i) {
      const Normal e = strain_without_divergence(g, face_velocities(g, psi, Cell{i, j}), {i, j});
      const double shear2 = (squared_shear({i, j}) + squared_shear({i + 1, j}) +
                             squared_shear({i, j + 1}) + squared_shear({i + 1, j + 1})) /
                            4;
      rate[{i, j}] = std::sqrt((e.rr * e.rr + e.tt * e.tt + e.pp * e.pp + 2 * shear2) / 2);
    }
  return rate;
}

}  // namespace lidwright
