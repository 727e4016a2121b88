#include "solver/nonlinear_power.hpp"

#include <cmath>

namespace lidwright {
namespace {

/// The tangent of ideal plastic flow is 0 along the stress; its slope is kept this far from -1.
constexpr double softest = 1e-4;

/// In ViscosityField::quarters, of the quarter q of a corner.
std::size_t quarter_place(int q) { return ViscosityField::quarter(q < 2, q % 2 == 0); }

}  // namespace

NonlinearPower::NonlinearPower(const Power& shape) : shape_(shape) {
  const auto d = shape.decomposition_pointer();
  for (Strains* s : {&state_, &change_, &work_})
    *s = {CellField(d), CellField(d), CornerField(d)};
  stress_rr_ = stress_tt_ = CellField(d);
  const Geometry& g = shape.geometry();
  const Range owned = d->owned(At::Corner);
  columns_ = {owned.begin - 1, owned.end + 1};
  if (!g.periodic())
    columns_ = {std::max(columns_.begin, 0), std::min(columns_.end, g.lateral_cells() + 1)};
  corners_.resize(static_cast<std::size_t>(columns_.size()) *
                  static_cast<std::size_t>(g.radial_cells() + 1));
  for (int j = columns_.begin; j < columns_.end; ++j)
    for (int i = 0; i <= g.radial_cells(); ++i) set_corner({i, j});
}

std::size_t NonlinearPower::place(Corner k) const {
  return static_cast<std::size_t>(k.j - columns_.begin) *
             static_cast<std::size_t>(shape_.geometry().radial_cells() + 1) +
         static_cast<std::size_t>(k.i);
}

/// The quarter q (below left, below right, above left, above right) of a corner is the upper quarter
/// of its cell when below, the right one when left.
void NonlinearPower::set_corner(Corner k) {
  const Geometry& g = shape_.geometry();
  Corner4& c = at(k);
  c.shears = shape_.has_shear(k);
  for (int q = 0; q < 4; ++q) {
    const bool below = q < 2, left = q % 2 == 0;
    const Cell cell{below ? k.i - 1 : k.i, left ? k.j - 1 : k.j};
    const bool inside = cell.i >= 0 && cell.i < g.radial_cells() &&
                        (g.periodic() || (cell.j >= 0 && cell.j < g.lateral_cells()));
    if (inside) c.volume[q] = g.quarter_volume(cell, below, left);
    c.cell[static_cast<std::size_t>(q)] =
        inside ? cell
               : Cell{std::min(k.i, g.radial_cells() - 1),
                      g.periodic() ? k.j : std::min(k.j, g.lateral_cells() - 1)};
  }
}

NonlinearPower::Four NonlinearPower::dot(const Vector& a, const Vector& b) {
  return a.rr * b.rr + a.tt * b.tt + (a.rr + a.tt) * (b.rr + b.tt) + a.x * b.x;
}

void NonlinearPower::strains_of(const CornerField& psi, Strains& s) const {
  const Geometry& g = shape_.geometry();
  for (int j = std::max(s.rr.held().begin, columns_.begin - 1);
       j < std::min(s.rr.held().end, columns_.end); ++j)
    for (int i = 0; i < s.rr.rows(); ++i) {
      const Normal e = deviatoric_strain(g, face_velocities(g, psi, Cell{i, j}), {i, j});
      s.rr[{i, j}] = e.rr;
      s.tt[{i, j}] = e.tt;
    }
  for (int j = columns_.begin; j < columns_.end; ++j)
    for (int i = 0; i < psi.rows(); ++i)
      if (at({i, j}).shears) s.shear[{i, j}] = shear(g, psi, shape_.shear_row({i, j}));
}

NonlinearPower::Vector NonlinearPower::normals(const Strains& s, const Corner4& c) const {
  Vector v;
  for (int q = 0; q < 4; ++q) {
    v.rr[q] = s.rr[c.cell[static_cast<std::size_t>(q)]];
    v.tt[q] = s.tt[c.cell[static_cast<std::size_t>(q)]];
  }
  v.x = Four::Zero();
  return v;
}

/// A corner's shear is split so that its quarters would bear one stress at the viscosities given.
void NonlinearPower::begin(const CornerField& psi, const ViscosityField& split) {
  strains_of(psi, state_);
  for_corners(*this, [&](Corner k, Corner4& c) {
    c.x_change = c.x = Four::Zero();
    if (!c.shears) return;
    Four eta;
    for (int q = 0; q < 4; ++q)
      eta[q] = split.empty()
                   ? law(c.cell[static_cast<std::size_t>(q)])(0).viscosity
                   : split.of(c.cell[static_cast<std::size_t>(q)], quarter_place(q));
    c.x = std::sqrt(2.0) * state_.shear[k] * c.volume.sum() / ((c.volume / eta).sum() * eta);
  });
  for (auto* values : {&change_.rr.values(), &change_.tt.values(), &change_.shear.values()})
    std::fill(values->begin(), values->end(), 0.0);
  go(0);
  for (Corner4& c : corners_) c.dual = c.unit;
}

/// Viscosity, its slope and the direction of the stress at the strains s.
void NonlinearPower::respond(Corner4& c, const Vector& s) const {
  const Four size = dot(s, s).sqrt();
  for (int q = 0; q < 4; ++q) {
    if (c.volume[q] == 0) continue;
    const LocalFlowLaw::Response r =
        law(c.cell[static_cast<std::size_t>(q)])(size[q] / std::sqrt(2.0));
    c.viscosity[q] = r.viscosity;
    c.slope[q] = std::max(r.slope, softest - 1);
    c.yields[q] = r.yields;
  }
  const Four per_size = (size > 0).select(1 / size, 0.0);
  c.size = size;
  c.unit = {s.rr * per_size, s.tt * per_size, s.x * per_size};
}

double NonlinearPower::go(double step) {
  const Range owned = shape_.decomposition().owned(At::Corner);
  step_ = step;
  double along = 0;
  for_corners(*this, [&](Corner k, Corner4& c) {
    Vector s = normals(state_, c);
    Vector d = normals(change_, c);
    d.x = c.x_change;
    s = {s.rr + step * d.rr, s.tt + step * d.tt, c.x + step * d.x};
    respond(c, s);
    if (k.j >= owned.begin && k.j < owned.end)
      along += (2 * c.volume * c.viscosity * dot(s, d)).sum();
  });
  return shape_.decomposition().sum(along);
}

void NonlinearPower::accept() {
  const auto add = [this](auto& to, const auto& change) {
    for (std::size_t n = 0; n < to.values().size(); ++n)
      to.values()[n] += step_ * change.values()[n];
  };
  add(state_.rr, change_.rr);
  add(state_.tt, change_.tt);
  add(state_.shear, change_.shear);
  for (Corner4& c : corners_) {
    c.x += step_ * c.x_change;
    c.dual = {c.dual.rr + step_ * c.dual_change.rr, c.dual.tt + step_ * c.dual_change.tt,
              c.dual.x + step_ * c.dual_change.x};
    // A stress is no larger than the law allows; what was at rest has no former stress.
    const Four size = dot(c.dual, c.dual).sqrt();
    const Four scale = (size > 1).select(1 / size, 1.0);
    const auto rested = size == 0;
    c.dual = {rested.select(c.unit.rr, scale * c.dual.rr),
              rested.select(c.unit.tt, scale * c.dual.tt), rested.select(c.unit.x, scale * c.dual.x)};
  }
}

/// D_xx of the quarters, > 0.
NonlinearPower::Four NonlinearPower::shear_stiffness(const Corner4& c) const {
  return 2 * c.viscosity * (1 + slope(c) * c.unit.x * c.dual.x);
}

NonlinearPower::Four NonlinearPower::slope(const Corner4& c) const {
  return secant_ ? Four::Zero() : c.slope;
}

/// D s.
NonlinearPower::Vector NonlinearPower::tangent_stress(const Corner4& c, const Vector& s) const {
  const Four half = slope(c) / 2, by_dual = half * dot(c.dual, s), by_unit = half * dot(c.unit, s);
  const Four two_eta = 2 * c.viscosity;
  return {two_eta * (s.rr + by_dual * c.unit.rr + by_unit * c.dual.rr),
          two_eta * (s.tt + by_dual * c.unit.tt + by_unit * c.dual.tt),
          two_eta * (s.x + by_dual * c.unit.x + by_unit * c.dual.x)};
}

/// Shares dx of a change of shear that give all quarters of a corner one stress tau: with the
/// stress `rest` they would have at dx = 0,
///     rest + D_xx dx = tau,    sum V dx = V sqrt 2 de.
double NonlinearPower::share(const Corner4& c, const Four& rest, double shear_change,
                             Four& x_change) const {
  const Four compliance = 1 / shear_stiffness(c);
  const double tau = (std::sqrt(2.0) * shear_change * c.volume.sum() +
                      (c.volume * compliance * rest).sum()) /
                     (c.volume * compliance).sum();
  x_change = compliance * (tau - rest);
  return tau;
}

/// Adds up what stress_at(corner, its quarters, stresses) gives, the stresses of quarters and,
/// returned, the shear stress of the corner.
template <class StressAt>
void NonlinearPower::push(StressAt&& stress_at, CornerField& force) const {
  const Geometry& g = shape_.geometry();
  for (auto* values : {&stress_rr_.values(), &stress_tt_.values(), &force.values()})
    std::fill(values->begin(), values->end(), 0.0);
  for_corners(*this, [&](Corner k, const Corner4& c) {
    Vector t;
    const double tau = stress_at(k, c, t);
    for (int q = 0; q < 4; ++q) {
      stress_rr_[c.cell[static_cast<std::size_t>(q)]] += c.volume[q] * t.rr[q];
      stress_tt_[c.cell[static_cast<std::size_t>(q)]] += c.volume[q] * t.tt[q];
    }
    if (c.shears)
      add_to_corners(g, force, shape_.shear_row(k), std::sqrt(2.0) * c.volume.sum() * tau);
  });
  const Range owned = shape_.decomposition().owned(At::Corner), held = stress_rr_.held();
  for (int j = std::max(owned.begin - 1, held.begin); j < std::min(owned.end, held.end); ++j)
    for (int i = 0; i < stress_rr_.rows(); ++i) {
      const double rr = stress_rr_[{i, j}], tt = stress_tt_[{i, j}];
      add_to_corners(g, force, Cell{i, j}, deviatoric_forces(g, {rr, tt, -rr - tt}, {i, j}));
    }
}

void NonlinearPower::gradient(CornerField& force) const {
  push(
      [&](Corner, const Corner4& c, Vector& t) {
        const Vector n = normals(state_, c);
        const Four two_eta = 2 * c.viscosity;
        Four dx = Four::Zero();
        const double tau = c.shears ? share(c, two_eta * c.x, 0, dx) : 0;
        const Vector more = tangent_stress(c, {Four::Zero(), Four::Zero(), dx});
        t = {two_eta * n.rr + more.rr, two_eta * n.tt + more.tt, two_eta * c.x + more.x};
        return tau;
      },
      force);
}

void NonlinearPower::tangent(const CornerField& change, CornerField& force) const {
  strains_of(change, work_);
  push(
      [&](Corner k, const Corner4& c, Vector& t) {
        Vector d = normals(work_, c);
        const double tau = c.shears ? share(c, tangent_stress(c, d).x, work_.shear[k], d.x) : 0;
        t = tangent_stress(c, d);
        return tau;
      },
      force);
}

/// The linearisation of |s| dual - s = 0 gives the change of the dual variable.
void NonlinearPower::set_direction(const CornerField& change) {
  strains_of(change, change_);
  for_corners(*this, [&](Corner k, Corner4& c) {
    Vector d = normals(change_, c);
    if (c.shears)
      share(c, 2 * c.viscosity * c.x + tangent_stress(c, d).x, change_.shear[k], c.x_change);
    d.x = c.x_change;
    const Four per_size = (c.size > 0).select(1 / c.size, 0.0), stretch = dot(c.unit, d) * per_size;
    const Four keep = 1 + stretch;
    const Four moved = (c.size > 0).select(Four::Ones(), 0.0);
    c.dual_change = {moved * (c.unit.rr + d.rr * per_size - keep * c.dual.rr),
                     moved * (c.unit.tt + d.tt * per_size - keep * c.dual.tt),
                     moved * (c.unit.x + d.x * per_size - keep * c.dual.x)};
  });
}

ViscosityField NonlinearPower::viscosity() const {
  const auto d = shape_.decomposition_pointer();
  ViscosityField eta;
  for (CellField& q : eta.quarters) q = CellField(d);
  for_corners(*this, [&](Corner, const Corner4& c) {
    for (int q = 0; q < 4; ++q)
      if (c.volume[q] > 0)
        eta.quarters[quarter_place(q)][c.cell[static_cast<std::size_t>(q)]] = c.viscosity[q];
  });
  for (CellField& q : eta.quarters) q.exchange();
  set_cell_means(eta);
  return eta;
}

template <class Of>
double NonlinearPower::owned_sum(Of&& of) const {
  const Range owned = shape_.decomposition().owned(At::Corner);
  double sum = 0;
  for (int j = owned.begin; j < owned.end; ++j)
    for (int i = 0; i <= shape_.geometry().radial_cells(); ++i) sum += of(at({i, j}));
  return shape_.decomposition().sum(sum);
}

double NonlinearPower::yielding_share() const {
  return owned_sum([](const Corner4& c) { return (c.volume * c.yields).sum(); }) /
         shape_.geometry().total_volume();
}

double NonlinearPower::unbalanced_shear() const {
  return std::sqrt(owned_sum([&](const Corner4& c) {
    if (!c.shears) return 0.0;
    Four dx;
    const double tau = share(c, 2 * c.viscosity * c.x, 0, dx);
    return (c.volume * (2 * c.viscosity * c.x - tau).square() / (2 * c.viscosity)).sum();
  }));
}

}  // namespace lidwright
