#include "solver/nonlinear_power.hpp"

#include <cmath>

namespace lidwright {
namespace {

/// The tangent of ideal plastic flow is 0 along the stress; its slope is kept this far from -1.
constexpr double softest = 1e-4;

// The quarters q at a corner are those of the cells below left, below right, above left, above
// right.
bool is_below(int q) { return q < 2; }
bool is_left(int q) { return q % 2 == 0; }
/// In ViscosityField::quarters: the upper quarter of a cell below, the right one of a cell left.
std::size_t quarter_place(int q) { return ViscosityField::quarter(is_below(q), is_left(q)); }

}  // namespace

NonlinearPower::NonlinearPower(const Power& shape) : shape_(shape) {
  const auto d = shape.decomposition_pointer();
  for (Strains* s : {&state_, &change_, &work_}) *s = {CellField(d), CellField(d), CornerField(d)};
  stress_rr_ = stress_tt_ = CellField(d);
  const Geometry& g = shape.geometry();
  const Range owned = d->owned(At::Corner);
  columns_ = {owned.begin - 1, owned.end + 1};
  if (!g.periodic())
    columns_ = {std::max(columns_.begin, 0), std::min(columns_.end, g.lateral_cells() + 1)};
  corners_.resize(static_cast<std::size_t>(columns_.size()) *
                  static_cast<std::size_t>(g.radial_cells() + 1));
  for_corners(*this, [this](Corner k, Corner4&) { set_corner(k); });
}

std::size_t NonlinearPower::place(Corner k) const {
  return static_cast<std::size_t>(k.j - columns_.begin) *
             static_cast<std::size_t>(shape_.geometry().radial_cells() + 1) +
         static_cast<std::size_t>(k.i);
}

void NonlinearPower::set_corner(Corner k) {
  const Geometry& g = shape_.geometry();
  const int last = g.radial_cells() - 1;
  Corner4& c = at(k);
  for (int q = 0; q < 4; ++q) {
    const Cell cell{is_below(q) ? k.i - 1 : k.i, is_left(q) ? k.j - 1 : k.j};
    const bool inside = cell.i >= 0 && cell.i <= last &&
                        (g.periodic() || (cell.j >= 0 && cell.j < g.lateral_cells()));
    if (inside) c.volume[q] = g.quarter_volume(cell, is_below(q), is_left(q));
    const int column = g.periodic() ? k.j : std::min(k.j, g.lateral_cells() - 1);
    c.cell[static_cast<std::size_t>(q)] = inside ? cell : Cell{std::min(k.i, last), column};
  }
}

void NonlinearPower::set_share(Corner4& c, const ViscosityField& viscosity) {
  Four eta;
  for (int q = 0; q < 4; ++q) {
    const Cell cell = c.cell[static_cast<std::size_t>(q)];
    eta[q] = viscosity.empty() ? law(cell)(0).viscosity : viscosity.of(cell, quarter_place(q));
  }
  c.share = std::sqrt(2.0) * c.volume.sum() / ((c.volume / eta).sum() * eta);
}

void NonlinearPower::begin(const CornerField& psi, const ViscosityField& viscosity) {
  strains_of(psi, state_);
  for (auto* values : {&change_.rr.values(), &change_.tt.values(), &change_.shear.values()})
    std::fill(values->begin(), values->end(), 0.0);
  for_corners(*this, [&](Corner k, Corner4& c) {
    if (shape_.has_shear(k)) set_share(c, viscosity);
  });
  go(0);
  for (Corner4& c : corners_) c.dual = c.unit;
  set_tangent();
}

void NonlinearPower::strains_of(const CornerField& psi, Strains& s) const {
  const Geometry& g = shape_.geometry();
  const Range held = s.rr.held();
  for (int j = std::max(held.begin, columns_.begin - 1); j < std::min(held.end, columns_.end); ++j)
    for (int i = 0; i < s.rr.rows(); ++i) {
      const Normal e = deviatoric_strain(g, face_velocities(g, psi, Cell{i, j}), {i, j});
      s.rr[{i, j}] = e.rr;
      s.tt[{i, j}] = e.tt;
    }
  for (int j = columns_.begin; j < columns_.end; ++j)
    for (int i = 0; i < psi.rows(); ++i)
      if (shape_.has_shear({i, j})) s.shear[{i, j}] = shear(g, psi, shape_.shear_row({i, j}));
}

inline NonlinearPower::Vector NonlinearPower::strains_at(const Strains& s, Corner k,
                                                         const Corner4& c) const {
  Vector v;
  for (int q = 0; q < 4; ++q) {
    v.rr[q] = s.rr[c.cell[static_cast<std::size_t>(q)]];
    v.tt[q] = s.tt[c.cell[static_cast<std::size_t>(q)]];
  }
  v.x = c.share * s.shear[k];
  return v;
}

/// Viscosity, its slope and the direction of the stress at the strains s.
void NonlinearPower::respond(Corner4& c, const Vector& s) const {
  c.size = dot(s, s).sqrt();
  for (int q = 0; q < 4; ++q) {
    if (c.volume[q] == 0) continue;
    const LocalFlowLaw::Response r =
        law(c.cell[static_cast<std::size_t>(q)])(c.size[q] / std::sqrt(2.0));
    c.viscosity[q] = r.viscosity;
    c.slope[q] = std::max(r.slope, softest - 1);
    c.yields[q] = r.yields;
  }
  const Four per_size = (c.size > 0).select(1 / c.size, 0.0);
  c.unit = {s.rr * per_size, s.tt * per_size, s.x * per_size};
}

double NonlinearPower::go(double step) {
  const Range owned = shape_.decomposition().owned(At::Corner);
  step_ = step;
  double along = 0;
  for_corners(*this, [&](Corner k, Corner4& c) {
    const Vector s = strains_at(state_, k, c), d = strains_at(change_, k, c);
    const Vector here{s.rr + step * d.rr, s.tt + step * d.tt, s.x + step * d.x};
    respond(c, here);
    if (k.j >= owned.begin && k.j < owned.end)
      along += (2 * c.volume * c.viscosity * dot(here, d)).sum();
  });
  return shape_.decomposition().sum(along);
}

/// The linearisation of |s| dual - s = 0 gives the change of the dual variable.
void NonlinearPower::set_direction(const CornerField& change) {
  strains_of(change, change_);
  for_corners(*this, [&](Corner k, Corner4& c) {
    const Vector d = strains_at(change_, k, c);
    const Four per_size = (c.size > 0).select(1 / c.size, 0.0);
    const Four keep = 1 + dot(c.unit, d) * per_size;
    c.dual_change = {c.unit.rr + d.rr * per_size - keep * c.dual.rr,
                     c.unit.tt + d.tt * per_size - keep * c.dual.tt,
                     c.unit.x + d.x * per_size - keep * c.dual.x};
  });
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
    const Vector moved{c.dual.rr + step_ * c.dual_change.rr, c.dual.tt + step_ * c.dual_change.tt,
                       c.dual.x + step_ * c.dual_change.x};
    // A stress is no larger than the law allows; what was at rest has no former stress.
    const Four size = dot(moved, moved).sqrt();
    const Four scale = (size > 1).select(1 / size, 1.0);
    const auto rested = size == 0;
    c.dual = {rested.select(c.unit.rr, scale * moved.rr),
              rested.select(c.unit.tt, scale * moved.tt), rested.select(c.unit.x, scale * moved.x)};
  }
  set_tangent();
}

void NonlinearPower::use_secant(bool on) {
  secant_ = on;
  set_tangent();
}

void NonlinearPower::set_tangent() {
  for (Corner4& c : corners_) {
    c.weight = 2 * c.volume * c.viscosity;
    c.half_slope = secant_ ? Four::Zero() : Four(c.slope / 2);
  }
}

/// Adds up stresses times volume: stress_at(corner, its quarters) gives those of the quarters.
template <class StressAt>
void NonlinearPower::push(StressAt&& stress_at, CornerField& force) const {
  const Geometry& g = shape_.geometry();
  for (auto* values : {&stress_rr_.values(), &stress_tt_.values(), &force.values()})
    std::fill(values->begin(), values->end(), 0.0);
  for_corners(*this, [&](Corner k, const Corner4& c) {
    const Vector t = stress_at(k, c);
    for (int q = 0; q < 4; ++q) {
      const Cell cell = c.cell[static_cast<std::size_t>(q)];
      stress_rr_[cell] += t.rr[q];
      stress_tt_[cell] += t.tt[q];
    }
    if (shape_.has_shear(k)) add_to_corners(g, force, shape_.shear_row(k), (c.share * t.x).sum());
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
      [&](Corner k, const Corner4& c) {
        const Vector s = strains_at(state_, k, c);
        return Vector{c.weight * s.rr, c.weight * s.tt, c.weight * s.x};
      },
      force);
}

void NonlinearPower::tangent(const CornerField& change, CornerField& force) const {
  strains_of(change, work_);
  push(
      [&](Corner k, const Corner4& c) {
        const Vector d = strains_at(work_, k, c);
        const Four by_dual = c.half_slope * dot(c.dual, d), by_unit = c.half_slope * dot(c.unit, d);
        return Vector{c.weight * (d.rr + by_dual * c.unit.rr + by_unit * c.dual.rr),
                      c.weight * (d.tt + by_dual * c.unit.tt + by_unit * c.dual.tt),
                      c.weight * (d.x + by_dual * c.unit.x + by_unit * c.dual.x)};
      },
      force);
}

ViscosityField NonlinearPower::viscosity() const {
  const auto d = shape_.decomposition_pointer();
  ViscosityField eta;
  for (auto* fields : {&eta.quarters, &eta.shares})
    for (CellField& q : *fields) q = CellField(d);
  for_corners(*this, [&](Corner, const Corner4& c) {
    for (int q = 0; q < 4; ++q) {
      if (c.volume[q] == 0) continue;
      const Cell cell = c.cell[static_cast<std::size_t>(q)];
      eta.quarters[quarter_place(q)][cell] = c.viscosity[q];
      eta.shares[quarter_place(q)][cell] = c.share[q] / std::sqrt(2.0);
    }
  });
  for (auto* fields : {&eta.quarters, &eta.shares})
    for (CellField& q : *fields) q.exchange();
  set_cell_means(eta);
  return eta;
}

/// Sum of of(quarters) over the corners of all ranks.
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

namespace {

/// Simpson's rule on [a, b], halved until its error is about `error`: laws bend where they
/// yield or are cut off.
template <class F>
double simpson(const F& f, double a, double fa, double b, double fb, double error, int halvings) {
  const double m = (a + b) / 2, fm = f(m), left = f((a + m) / 2), right = f((m + b) / 2);
  const double once = (b - a) * (fa + 4 * fm + fb) / 6,
               twice = (b - a) * (fa + 4 * left + 2 * fm + 4 * right + fb) / 12;
  if (halvings == 0 || std::abs(twice - once) <= 15 * error) return twice + (twice - once) / 15;
  return simpson(f, a, fa, m, fm, error / 2, halvings - 1) +
         simpson(f, m, fm, b, fb, error / 2, halvings - 1);
}

/// Pi(e) = integral of 4 eta e de, on intervals that shrink towards 0, down to what is negligible:
/// as the stress never falls with the rate, the rest is no more than rate * slope.
double dissipation_potential(const LocalFlowLaw& law, double rate) {
  const auto slope = [&](double e) { return 4 * law(e).viscosity * e; };
  const double error = 1e-11 * rate * slope(rate);
  double sum = 0;
  for (double top = rate; top * slope(top) > error; top /= 2)
    sum += simpson(slope, top / 2, slope(top / 2), top, slope(top), error, 20);
  return sum;
}

}  // namespace

double NonlinearPower::potential() const {
  return owned_sum([this](const Corner4& c) {
    double sum = 0;
    for (int q = 0; q < 4; ++q)
      if (c.volume[q] > 0)
        sum += c.volume[q] * dissipation_potential(law(c.cell[static_cast<std::size_t>(q)]),
                                                   c.size[q] / std::sqrt(2.0));
    return sum;
  });
}

}  // namespace lidwright
