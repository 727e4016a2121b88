#include "solver/diagnostics.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "mesh/gather.hpp"
#include "mesh/operators.hpp"
#include "solver/march.hpp"
#include "solver/pressure.hpp"

namespace lidwright {
namespace {

/// Velocity along a wall at a lateral face: v/h continued to the wall as an even parabola where it
/// slips freely (its radial derivative is 0 there), 0 where it grips.
double wall_velocity(const Power& power, const CornerField& psi, int face, int j) {
  const Geometry& g = power.geometry();
  const bool at_inner = face == 0;
  if ((at_inner ? power.inner_slip() : power.outer_slip()) == Slip::None) return 0;
  const int near = at_inner ? 0 : face - 1, far = at_inner ? 1 : face - 2;
  const double near2 = std::pow(g.cell_radius(near) - g.face_radius(face), 2);
  const double far2 = std::pow(g.cell_radius(far) - g.face_radius(face), 2);
  const double near_rate = velocity(g, psi, LateralFace{near, j}) / g.stretch(near);
  const double far_rate = velocity(g, psi, LateralFace{far, j}) / g.stretch(far);
  return g.face_stretch(face) * (far2 * near_rate - near2 * far_rate) / (far2 - near2);
}

/// Mean square over a wall: lateral faces weighted by half their neighbours' areas.
double wall_velocity_rms(const Power& power, const CornerField& psi, int face) {
  const Geometry& g = power.geometry();
  const Range columns = power.decomposition().owned(At::Cell);
  double sum = 0;
  for (int j = columns.begin; j < columns.end; ++j) {
    const double left = wall_velocity(power, psi, face, j),
                 right = wall_velocity(power, psi, face, j + 1);
    sum += g.area(RadialFace{face, j}) * (left * left + right * right) / 2;
  }
  return std::sqrt(power.decomposition().sum(sum) / g.wall_area(face));
}

/// Mean square velocity over the volume: each component squared on its own faces and staggered
/// volumes.
double velocity_rms(const Power& power, const CornerField& psi) {
  const Geometry& g = power.geometry();
  const Range columns = power.decomposition().owned(At::Cell),
              sides = power.decomposition().owned(At::Corner);
  double sum = 0;
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 1; i < g.radial_cells(); ++i)
      sum += g.dual_volume(RadialFace{i, j}) * std::pow(velocity(g, psi, RadialFace{i, j}), 2);
  for (int j = sides.begin; j < sides.end; ++j)
    for (int i = 0; i < g.radial_cells(); ++i)
      sum += g.dual_volume(LateralFace{i, j}) * std::pow(velocity(g, psi, LateralFace{i, j}), 2);
  return std::sqrt(power.decomposition().sum(sum) / g.total_volume());
}

/// Integral of the buoyancy work, from the very faces of the power functional.
double buoyancy_work(const Power& power, const CornerField& psi,
                     const std::function<double(RadialFace)>& b) {
  const Geometry& g = power.geometry();
  const Range columns = power.decomposition().owned(At::Cell);
  double sum = 0;
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 1; i < g.radial_cells(); ++i)
      sum += g.radial_distance(i) * b({i, j}) * flow_through(psi, RadialFace{i, j});
  return power.decomposition().sum(sum);
}

struct WallMeans {
  double heat_inner = 0, heat_outer = 0, t_inner = 0, t_outer = 0;
};

WallMeans wall_means(const HeatOperator& heat, const CellField& t) {
  const Geometry& g = heat.geometry();
  const int last = g.radial_cells();
  std::vector<double> sums(4, 0.0);
  for (int j = t.owned().begin; j < t.owned().end; ++j) {
    const RadialFace in{0, j}, out{last, j};
    sums[0] += heat.wall_flux(t, in);
    sums[1] += heat.wall_flux(t, out);
    sums[2] += g.area(in) * heat.wall_temperature(t, in);
    sums[3] += g.area(out) * heat.wall_temperature(t, out);
  }
  heat.decomposition().sum_in_place(sums);
  return {sums[0], sums[1], sums[2] / g.wall_area(0), sums[3] / g.wall_area(last)};
}

void set_temperatures(const CellField& t, HistoryRow& row) {
  const Geometry& g = t.decomposition().geometry();
  double sum = 0, least = std::numeric_limits<double>::infinity(), most = -least;
  for (int j = t.owned().begin; j < t.owned().end; ++j)
    for (int i = 0; i < t.rows(); ++i) {
      const double x = t[{i, j}];
      sum += g.volume({i, j}) * x;
      least = std::min(least, x);
      most = std::max(most, x);
    }
  row.temperature_mean = t.decomposition().sum(sum) / g.total_volume();
  row.temperature_min = t.decomposition().min(least);
  row.temperature_max = t.decomposition().max(most);
}

/// Adds one column's contributions to the surface sums of profiles: columns of `sums` are the
/// quantities.
void add_column(const March& m, const CellField& viscosity, int j, std::vector<double>& sums) {
  const Geometry& g = m.power().geometry();
  const CornerField& psi = m.stream_function();
  const CellField& t = m.temperature();
  const auto rows = static_cast<std::size_t>(g.radial_cells());
  for (int i = 0; i < g.radial_cells(); ++i) {
    const Cell c{i, j};
    const double share = g.volume(c);
    const OnFaces w = face_velocities(g, psi, c);
    const auto n = static_cast<std::size_t>(i);
    sums[n] += share * t[c];
    sums[rows + n] += share * (w.inner * w.inner + w.outer * w.outer) / 2;
    sums[2 * rows + n] += share * (w.left * w.left + w.right * w.right) / 2;
    sums[3 * rows + n] += share * std::log(viscosity[c]);
    sums[4 * rows + n] += (m.heat().conducted(t, inner(c)) + m.heat().conducted(t, outer(c))) / 2;
    sums[5 * rows + n] +=
        (m.heat().advected(t, psi, inner(c)) + m.heat().advected(t, psi, outer(c))) / 2;
  }
}

}  // namespace

HistoryRow March::row() const {
  HistoryRow row;
  const Power& power = flow_.power();
  const WallMeans walls = wall_means(stepper_.heat(), temperature_);
  const double conductive =
      decomposition_->geometry().conductive_heat_flow() * (walls.t_inner - walls.t_outer);
  row.step = steps_;
  row.time = time_;
  row.time_step = last_step_;
  row.heat_flow_inner = walls.heat_inner;
  row.heat_flow_outer = walls.heat_outer;
  row.nusselt_inner = walls.heat_inner / conductive;
  row.nusselt_outer = walls.heat_outer / conductive;
  row.temperature_inner = walls.t_inner;
  row.temperature_outer = walls.t_outer;
  set_temperatures(temperature_, row);
  row.velocity_rms = velocity_rms(power, psi_);
  row.velocity_rms_inner = wall_velocity_rms(power, psi_, 0);
  row.velocity_rms_outer = wall_velocity_rms(power, psi_, temperature_.rows());
  row.dissipation = dissipation(power, psi_);
  row.buoyancy_work = buoyancy_work(power, psi_, buoyancy());
  row.work_mismatch =
      row.buoyancy_work != 0 ? (row.dissipation - row.buoyancy_work) / row.buoyancy_work : 0;
  row.flow_error = flow_.last_error();
  row.heat_source = stepper_.heat().total_source();
  row.heat_budget_residual = budget_residual_;
  row.temperature_change_rate = steps_ > 0 ? change_rate_ : 0;
  row.applications = flow_.applications();
  row.factorisations = flow_.factorisations();
  return row;
}

RadialProfiles March::profiles() const {
  const Geometry& g = decomposition_->geometry();
  const auto rows = static_cast<std::size_t>(g.radial_cells());
  std::vector<double> sums(6 * rows, 0.0);
  const Range columns = decomposition_->owned(At::Cell);
  for (int j = columns.begin; j < columns.end; ++j) add_column(*this, viscosity_, j, sums);
  decomposition_->sum_in_place(sums);
  RadialProfiles p;
  for (std::size_t i = 0; i < rows; ++i) {
    const int row = static_cast<int>(i);
    double volume = 0;
    for (int j = 0; j < g.lateral_cells(); ++j) volume += g.volume({row, j});
    p.radius.push_back(g.cell_radius(row));
    p.temperature.push_back(sums[i] / volume);
    p.velocity_radial_rms.push_back(std::sqrt(sums[rows + i] / volume));
    p.velocity_lateral_rms.push_back(std::sqrt(sums[2 * rows + i] / volume));
    p.viscosity.push_back(std::exp(sums[3 * rows + i] / volume));
    p.heat_conducted.push_back(sums[4 * rows + i]);
    p.heat_advected.push_back(sums[5 * rows + i]);
  }
  return p;
}

Snapshot March::snapshot(bool with_stress) const {
  const Geometry& g = decomposition_->geometry();
  const Power& power = flow_.power();
  Snapshot s;
  s.step = steps_;
  s.time = time_;
  s.temperature = temperature_;
  s.viscosity = viscosity_;
  s.strain_rate = strain_rate(power, psi_);
  s.stream_function = psi_;
  s.velocity_radial = CellField(decomposition_);
  s.velocity_lateral = CellField(decomposition_);
  const Range columns = temperature_.owned();
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 0; i < temperature_.rows(); ++i) {
      const OnFaces w = face_velocities(g, psi_, Cell{i, j});
      s.velocity_radial[{i, j}] = (w.inner + w.outer) / 2;
      s.velocity_lateral[{i, j}] = (w.left + w.right) / 2;
    }
  Stresses stress;
  if (with_stress) {
    stress = stresses(power, psi_, buoyancy());
    s.pressure = stress.pressure;
  }
  const auto trace = [&](int face, const std::vector<double>& normal) {
    std::vector<double> flux, along;
    for (int j = columns.begin; j < columns.end; ++j) {
      flux.push_back(stepper_.heat().wall_flux(temperature_, {face, j}) *
                     g.inverse_area(RadialFace{face, j}));
      along.push_back(
          (wall_velocity(power, psi_, face, j) + wall_velocity(power, psi_, face, j + 1)) / 2);
    }
    WallTrace t;
    t.heat_flux = gather_to_first(*decomposition_, flux.data(), flux.size());
    t.velocity = gather_to_first(*decomposition_, along.data(), along.size());
    t.normal_stress = gather_to_first(*decomposition_, normal.data(), normal.size());
    if (decomposition_->rank() == 0)
      for (int j = 0; j < g.lateral_cells(); ++j) t.lateral.push_back(g.cell_lateral(j));
    return t;
  };
  s.inner = trace(0, stress.inner_normal);
  s.outer = trace(g.radial_cells(), stress.outer_normal);
  s.profiles = profiles();
  return s;
}

}  // namespace lidwright
