#include "solver/linearised.hpp"

#include <array>
#include <cmath>
#include <span>

#include "solver/advection.hpp"
#include "solver/measure.hpp"
#include "solver/stencil_matrix.hpp"

namespace lidwright {
namespace {

SparseMatrix flow_matrix(const Power& power) {
  StencilMatrix stencil(power);
  stencil.assemble(power);
  const SparseLower& lower = stencil.matrix();
  std::vector<Eigen::Triplet<double, long>> entries;
  entries.reserve(2 * lower.value.size());
  for (long c = 0; c < lower.size; ++c)
    for (long n = lower.column_start[static_cast<std::size_t>(c)];
         n < lower.column_start[static_cast<std::size_t>(c) + 1]; ++n) {
      const long r = lower.row[static_cast<std::size_t>(n)];
      const double x = lower.value[static_cast<std::size_t>(n)];
      entries.emplace_back(r, c, x);
      if (r != c) entries.emplace_back(c, r, x);
    }
  SparseMatrix k(lower.size, lower.size);
  k.setFromTriplets(entries.begin(), entries.end());
  return k;
}

/// A few numbers at corners: a row of G, or forces.
struct AtCorners {
  std::array<Corner, 8> corner;
  std::array<double, 8> value;
  int count = 0;
  void add(Corner k, double x) {
    for (int n = 0; n < count; ++n)
      if (corner[static_cast<std::size_t>(n)].i == k.i &&
          corner[static_cast<std::size_t>(n)].j == k.j) {
        value[static_cast<std::size_t>(n)] += x;
        return;
      }
    corner[static_cast<std::size_t>(count)] = k;
    value[static_cast<std::size_t>(count++)] = x;
  }
  /// For add_to_corners of mesh/operators.hpp.
  struct Slot {
    AtCorners& list;
    Corner k;
    void operator+=(double x) { list.add(k, x); }
    void operator-=(double x) { list.add(k, -x); }
  };
  Slot operator[](Corner k) { return {*this, k}; }
};

/// Derivatives of the heat that a flux function carries, by the four temperatures in line.
using Slopes = std::array<double, 4>;

Slopes upwind_slopes(double far_upwind, double upwind, double downwind) {
  const double behind = upwind - far_upwind, ahead = downwind - upwind;
  if (behind * ahead <= 0) return {0, 1, 0, 0};
  const double d = std::abs(behind), a = std::abs(ahead);
  // The correction is the least of 2a, (d + 2a)/3 and 2d, halved: its slopes by behind and ahead.
  double by_behind = 1.0 / 6, by_ahead = 1.0 / 3;
  if (2 * a < (d + 2 * a) / 3 && a <= d) by_behind = 0, by_ahead = 1;
  if (2 * d < (d + 2 * a) / 3 && d < a) by_behind = 1, by_ahead = 0;
  return {-by_behind, 1 + by_behind - by_ahead, by_ahead, 0};
}

/// Of carried_central or carried_limited.
Slopes carried_slopes(HeatFlux scheme, double flow, const std::array<double, 4>& t) {
  if (scheme == HeatFlux::Central) return {0, flow / 2, flow / 2, 0};
  const bool forwards = flow > 0;
  const Slopes s = forwards ? upwind_slopes(t[0], t[1], t[2]) : upwind_slopes(t[3], t[2], t[1]);
  if (forwards) return {flow * s[0], flow * s[1], flow * s[2], 0};
  return {0, flow * s[2], flow * s[1], flow * s[0]};
}

double carried_per_flow(HeatFlux scheme, double flow, const std::array<double, 4>& t) {
  if (scheme == HeatFlux::Central) return (t[1] + t[2]) / 2;
  return flow > 0 ? upwind_biased(t[0], t[1], t[2]) : upwind_biased(t[3], t[2], t[1]);
}

/// Gathers the entries of the four blocks, cell by cell, face by face and corner by corner.
class Assembly {
 public:
  Assembly(const Model& model, const Power& power, const HeatOperator& heat, HeatFlux scheme,
           const Unknowns& unknowns, const CellField& t, const CornerField& psi)
      : model_(model),
        power_(power),
        heat_(heat),
        scheme_(scheme),
        unknowns_(unknowns),
        t_(t),
        psi_(psi),
        g_(power.geometry()),
        heating_(model.rayleigh > 0 ? heat.mantle().dissipation_number / model.rayleigh : 0),
        thermal_viscosity_(model.viscosity.exponential || model.viscosity.arrhenius) {}

  Linearised blocks();

 private:
  using Entries = std::vector<Eigen::Triplet<double, long>>;

  /// Which of the four temperatures in line a flux depends on, whatever the flow.
  std::span<const int> in_line() const {
    static constexpr std::array all{0, 1, 2, 3};
    return scheme_ == HeatFlux::Central ? std::span(all).subspan(1, 2) : std::span(all);
  }
  double viscosity_slope(Cell c) const {
    return model_.viscosity.log_slope({t_[c], g_.depth(c.i)});
  }
  void add_buoyancy(RadialFace);
  void add_normal_strain(Cell);
  void add_shear(Corner);
  void add_conduction(Cell);
  void add_radial_transport(RadialFace);
  void add_lateral_transport(LateralFace);

  // One entry each; rows of the heat residual get the opposite sign of a gain.
  void flow_by_t(Corner k, Cell c, double x) {
    add(flow_by_t_, unknowns_.of(k), unknowns_.of(c), x);
  }
  void gain_by_psi(Cell c, Corner k, double x) {
    add(heat_by_psi_, unknowns_.of(c), unknowns_.of(k), -x);
  }
  void gain_by_t(Cell c, Cell by, double x) {
    add(heat_by_t_, unknowns_.of(c), unknowns_.of(by), -x);
  }
  static void add(Entries& entries, long row, long column, double x) {
    if (row >= 0 && column >= 0) entries.emplace_back(row, column, x);
  }
  /// Heat that leaves one cell of a face for the other; capacity counts at each.
  template <class Face>
  void transport_by_flow(Cell from, Cell to, Face face, double per_flow, double sign);
  void transport_by_t(Cell from, Cell to, Cell by, double slope);
  double heat_capacity(Cell c) const {
    return heat_.mantle().heat_capacity[static_cast<std::size_t>(c.i)];
  }
  SparseMatrix matrix(long rows, long columns, Entries& entries) const {
    SparseMatrix m(rows, columns);
    m.setFromTriplets(entries.begin(), entries.end());
    Entries().swap(entries);
    return m;
  }

  const Model& model_;
  const Power& power_;
  const HeatOperator& heat_;
  HeatFlux scheme_;
  const Unknowns& unknowns_;
  const CellField& t_;
  const CornerField& psi_;
  const Geometry& g_;
  double heating_;  ///< Di/Ra
  bool thermal_viscosity_;
  Entries flow_by_t_, heat_by_psi_, heat_by_t_;
};

/// f(corner) = d (b left - b right), b = Ra alpha g (T inside + T outside)/2.
void Assembly::add_buoyancy(RadialFace f) {
  const double x = model_.rayleigh * heat_.mantle().buoyancy[static_cast<std::size_t>(f.i)] *
                   g_.radial_distance(f.i) / 2;
  for (const Cell c : {inside(f), outside(f)}) {
    flow_by_t(left(f), c, x);
    flow_by_t(right(f), c, -x);
  }
}

/// The force is proportional to the cell's viscosity and is half the derivative of what it
/// dissipates.
void Assembly::add_normal_strain(Cell c) {
  if (!thermal_viscosity_ && heating_ == 0) return;
  const double w = power_.cell_weight(c), slope = viscosity_slope(c);
  const Normal e = deviatoric_strain(g_, face_velocities(g_, psi_, c), c);
  const OnFaces f = deviatoric_forces(g_, {w * e.rr, w * e.tt, w * e.pp}, c);
  AtCorners force;
  add_to_corners(g_, force, c, f);
  for (int n = 0; n < force.count; ++n) {
    const Corner k = force.corner[static_cast<std::size_t>(n)];
    const double x = force.value[static_cast<std::size_t>(n)];
    if (thermal_viscosity_) flow_by_t(k, c, slope * x);
    if (heating_ != 0) gain_by_psi(c, k, 2 * heating_ * x);
  }
  if (thermal_viscosity_ && heating_ != 0)
    gain_by_t(c, c, heating_ * slope * w * (e.rr * e.rr + e.tt * e.tt + e.pp * e.pp));
}

/// With shares s of the quarter cells, d(weight)/d(ln eta_p) = weight s_p, and what cell q gets of
/// the dissipation D is D s_q, so that d(D s_q)/d(ln eta_p) = D s_q (2 s_p - delta_qp).
void Assembly::add_shear(Corner k) {
  if (!thermal_viscosity_ && heating_ == 0) return;
  const ShearRow row = power_.shear_row(k);
  const double e = shear(g_, psi_, row), stress = power_.corner_weight(k) * e;
  AtCorners force;
  add_to_corners(g_, force, row, stress);
  const auto shares = power_.shares(k);
  for (const Power::Share& p : shares) {
    if (p.share == 0) continue;
    const double slope = viscosity_slope(p.cell);
    for (int n = 0; n < force.count; ++n) {
      const Corner at = force.corner[static_cast<std::size_t>(n)];
      const double x = force.value[static_cast<std::size_t>(n)] * p.share;
      if (thermal_viscosity_) flow_by_t(at, p.cell, slope * x);
      if (heating_ != 0) gain_by_psi(p.cell, at, 2 * heating_ * x);
    }
    if (heating_ == 0 || !thermal_viscosity_) continue;
    for (const Power::Share& q : shares) {
      const bool same = p.cell.i == q.cell.i && p.cell.j == q.cell.j;
      gain_by_t(q.cell, p.cell,
                heating_ * stress * e * q.share * slope * (2 * p.share - (same ? 1 : 0)));
    }
  }
}

void Assembly::add_conduction(Cell c) {
  const auto couple = [&](Cell other, double conductance) {
    gain_by_t(c, other, conductance);
    gain_by_t(c, c, -conductance);
  };
  const auto wall = [&](RadialFace f, const ThermalWall& condition) {
    if (std::holds_alternative<FixedTemperature>(condition)) gain_by_t(c, c, -heat_.conductance(f));
  };
  if (c.i > 0)
    couple({c.i - 1, c.j}, heat_.conductance(inner(c)));
  else
    wall(inner(c), heat_.walls().inner.thermal);
  if (c.i + 1 < g_.radial_cells())
    couple({c.i + 1, c.j}, heat_.conductance(outer(c)));
  else
    wall(outer(c), heat_.walls().outer.thermal);
  if (!g_.on_side(c.j)) couple({c.i, c.j - 1}, heat_.conductance(left(c)));
  if (!g_.on_side(c.j + 1)) couple({c.i, c.j + 1}, heat_.conductance(right(c)));
}

/// d(flow) = psi(plus) - psi(minus) of a face; the cells lose and gain it times `per_flow`.
template <class Face>
void Assembly::transport_by_flow(Cell from, Cell to, Face f, double per_flow, double sign) {
  Corner plus, minus;
  if constexpr (std::is_same_v<Face, RadialFace>)
    plus = right(f), minus = left(f);
  else
    plus = inner(f), minus = outer(f);
  for (const auto& [cell, direction] : {std::pair{from, -1.0}, std::pair{to, 1.0}}) {
    const double x = sign * direction * heat_capacity(cell) * per_flow;
    gain_by_psi(cell, plus, x);
    gain_by_psi(cell, minus, -x);
  }
}

void Assembly::transport_by_t(Cell from, Cell to, Cell by, double slope) {
  gain_by_t(from, by, -heat_capacity(from) * slope);
  gain_by_t(to, by, heat_capacity(to) * slope);
}

void Assembly::add_radial_transport(RadialFace f) {
  const double flow = flow_through(psi_, f);
  const int last = g_.radial_cells() - 1;
  // A cell beyond a wall is the wall cell continued through the wall's temperature.
  const auto neighbour = [&](int i) {
    const bool below = i < 0;
    if (!below && i <= last) return std::pair{Cell{i, f.j}, 1.0};
    const ThermalWall& wall = below ? heat_.walls().inner.thermal : heat_.walls().outer.thermal;
    return std::pair{Cell{below ? 0 : last, f.j},
                     std::holds_alternative<FixedTemperature>(wall) ? -1.0 : 1.0};
  };
  const auto value = [&](int i) {
    if (i < 0) return 2 * heat_.wall_temperature(t_, {0, f.j}) - t_[{0, f.j}];
    if (i > last) return 2 * heat_.wall_temperature(t_, {last + 1, f.j}) - t_[{last, f.j}];
    return t_[{i, f.j}];
  };
  const std::array<double, 4> t{value(f.i - 2), value(f.i - 1), value(f.i), value(f.i + 1)};
  const Slopes slopes = carried_slopes(scheme_, flow, t);
  for (const int n : in_line()) {
    const auto [by, sign] = neighbour(f.i - 2 + n);
    transport_by_t(inside(f), outside(f), by, sign * slopes[static_cast<std::size_t>(n)]);
  }
  transport_by_flow(inside(f), outside(f), f, carried_per_flow(scheme_, flow, t), 1);
  if (heat_.mantle().dissipation_number == 0) return;
  const double absolute = heat_.face_temperature(t_, f) + heat_.mantle().surface_temperature;
  for (const auto& [cell, work] : {std::pair{inside(f), heat_.adiabatic_inside(f.i)},
                                   std::pair{outside(f), heat_.adiabatic_outside(f.i)}}) {
    gain_by_psi(cell, right(f), -work * absolute);
    gain_by_psi(cell, left(f), work * absolute);
    gain_by_t(cell, inside(f), -work * flow / 2);
    gain_by_t(cell, outside(f), -work * flow / 2);
  }
}

void Assembly::add_lateral_transport(LateralFace f) {
  const double flow = flow_through(psi_, f);
  const int n = g_.lateral_cells();
  const auto mirrored = [&](int j) {
    if (g_.periodic()) return j;
    return j < 0 ? -1 - j : (j >= n ? 2 * n - 1 - j : j);
  };
  std::array<double, 4> t;
  for (int k = 0; k < 4; ++k) t[static_cast<std::size_t>(k)] = t_[{f.i, mirrored(f.j - 2 + k)}];
  const Slopes slopes = carried_slopes(scheme_, flow, t);
  for (const int k : in_line())
    transport_by_t(left(f), right(f), {f.i, mirrored(f.j - 2 + k)},
                   slopes[static_cast<std::size_t>(k)]);
  transport_by_flow(left(f), right(f), f, carried_per_flow(scheme_, flow, t), 1);
}

Linearised Assembly::blocks() {
  const int rows = g_.radial_cells(), columns = g_.lateral_cells();
  for (int j = 0; j < columns; ++j)
    for (int i = 0; i < rows; ++i) {
      if (i > 0) add_buoyancy({i, j});
      if (i > 0) add_radial_transport({i, j});
      if (!g_.on_side(j)) add_lateral_transport({i, j});
      add_normal_strain({i, j});
      add_conduction({i, j});
    }
  for (int j = 0; j < g_.corner_columns(); ++j)
    for (int i = 0; i <= rows; ++i)
      if (power_.has_shear({i, j})) add_shear({i, j});
  Linearised made;
  const long flow = unknowns_.flow(), cells = unknowns_.cells();
  made.flow_by_psi = flow_matrix(power_);
  made.flow_by_temperature = matrix(flow, cells, flow_by_t_);
  made.heat_by_psi = matrix(cells, flow, heat_by_psi_);
  made.heat_by_temperature = matrix(cells, cells, heat_by_t_);
  made.capacity.resize(cells);
  for (int j = 0; j < columns; ++j)
    for (int i = 0; i < rows; ++i) made.capacity[unknowns_.of(Cell{i, j})] = heat_.capacity({i, j});
  return made;
}

}  // namespace

Linearised linearise(const Model& model, const Power& power, const HeatOperator& heat,
                     HeatFlux scheme, const Unknowns& unknowns, const CellField& temperature,
                     const CornerField& psi) {
  return Assembly(model, power, heat, scheme, unknowns, temperature, psi).blocks();
}

CellField heat_gain(const Model& model, const Power& power, const HeatOperator& heat,
                    const CellField& temperature, const CornerField& psi) {
  CellField gain(temperature.decomposition_pointer());
  heat.add_advection(temperature, psi, gain);
  heat.add_adiabatic_work(temperature, psi, gain);
  heat.add_sources(gain);
  (void)heat.add_conduction(temperature, gain);
  const CellField viscous =
      viscous_heating({power, heat, temperature, psi, model.rayleigh, model.viscosity});
  for (std::size_t k = 0; k < viscous.owned_size(); ++k)
    gain.owned_data()[k] += viscous.owned_data()[k];
  return gain;
}

}  // namespace lidwright
