#include "solver/measure.hpp"

#include <algorithm>
#include <cmath>
#include <limits>

#include "mesh/gather.hpp"
#include "mesh/operators.hpp"
#include "solver/lid_row.hpp"
#include "solver/pressure.hpp"
#include "solver/wall_motion.hpp"

namespace lidwright {
namespace {

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
double buoyancy_work(const Power& power, const CornerField& psi, const RadialFaceField& b) {
  const Geometry& g = power.geometry();
  const Range columns = power.decomposition().owned(At::Cell);
  double sum = 0;
  for (int j = columns.begin; j < columns.end; ++j)
    for (int i = 1; i < g.radial_cells(); ++i)
      sum += g.radial_distance(i) * b[{i, j}] * flow_through(psi, RadialFace{i, j});
  return power.decomposition().sum(sum);
}

double adiabatic_cooling(const StateView& s) {
  if (s.heat.mantle().dissipation_number == 0) return 0;
  CellField gain(s.temperature.decomposition_pointer());
  s.heat.add_adiabatic_work(s.temperature, s.psi, gain);
  double sum = 0;
  for (std::size_t k = 0; k < gain.owned_size(); ++k) sum -= gain.owned_data()[k];
  return s.heat.decomposition().sum(sum);
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

/// Surface sums of profiles: of cells, then of radial faces; velocities and viscosities by their
/// share of the surface, heat as it flows.
struct SurfaceSums {
  explicit SurfaceSums(int cells)
      : rows(static_cast<std::size_t>(cells)), numbers(6 * rows + 3, 0.0) {}
  double* temperature() { return numbers.data(); }
  double* lateral_square() { return numbers.data() + rows; }
  double* log_viscosity() { return numbers.data() + 2 * rows; }
  double* radial_square() { return numbers.data() + 3 * rows; }
  double* conducted() { return radial_square() + rows + 1; }
  double* advected() { return conducted() + rows + 1; }

  std::size_t rows;
  std::vector<double> numbers;
};

void add_column(const StateView& s, int j, SurfaceSums& sums) {
  const Geometry& g = s.power.geometry();
  const double share = g.lateral_measure(j);
  const double* t = s.temperature.column(j);
  const double* eta = s.power.viscosity().column(j);
  for (int i = 0; i < g.radial_cells(); ++i) {
    const double left_speed = velocity(g, s.psi, LateralFace{i, j}),
                 right_speed = velocity(g, s.psi, LateralFace{i, j + 1});
    sums.temperature()[i] += share * t[i];
    sums.lateral_square()[i] += share * (left_speed * left_speed + right_speed * right_speed) / 2;
    sums.log_viscosity()[i] += share * std::log(eta[i]);
  }
  for (int i = 0; i <= g.radial_cells(); ++i) {
    const RadialFace f{i, j};
    const double speed = velocity(g, s.psi, f);
    sums.radial_square()[i] += share * speed * speed;
    sums.conducted()[i] += s.heat.conducted(s.temperature, f);
    sums.advected()[i] += s.heat.advected(s.temperature, s.psi, f);
  }
}

/// The adiabat that passes through the mean temperature at mid-depth.
std::vector<double> adiabat(const Geometry& g, const MantleRows& mantle,
                            const std::vector<double>& mean) {
  std::size_t above = 1;
  while (g.depth(static_cast<int>(above)) > 0.5) ++above;
  const auto at_surface = [&](std::size_t row) {
    return (mean[row] + mantle.surface_temperature) / mantle.adiabatic_rise[row];
  };
  const double deep = g.depth(static_cast<int>(above) - 1), high = g.depth(static_cast<int>(above));
  const double share = (deep - 0.5) / (deep - high);
  const double surface = (1 - share) * at_surface(above - 1) + share * at_surface(above);
  std::vector<double> t;
  for (const double rise : mantle.adiabatic_rise)
    t.push_back(surface * rise - mantle.surface_temperature);
  return t;
}

/// What a wall shows, column by column.
WallTrace wall_trace(const StateView& s, int face, const std::vector<double>& normal_stress) {
  const Geometry& g = s.power.geometry();
  const Decomposition& d = s.power.decomposition();
  std::vector<double> flux, along;
  for (int j = s.temperature.owned().begin; j < s.temperature.owned().end; ++j) {
    flux.push_back(s.heat.wall_flux(s.temperature, {face, j}) *
                   g.inverse_area(RadialFace{face, j}));
    along.push_back(
        (wall_velocity(s.power, s.psi, face, j) + wall_velocity(s.power, s.psi, face, j + 1)) / 2);
  }
  WallTrace t;
  t.heat_flux = gather_to_first(d, flux.data(), flux.size());
  t.velocity = gather_to_first(d, along.data(), along.size());
  t.normal_stress = gather_to_first(d, normal_stress.data(), normal_stress.size());
  if (d.rank() == 0)
    for (int j = 0; j < g.lateral_cells(); ++j) t.lateral.push_back(g.cell_lateral(j));
  return t;
}

}  // namespace

RadialFaceField buoyancy(const HeatOperator& heat, const CellField& t, double rayleigh) {
  RadialFaceField b(t.decomposition_pointer());
  const int last = t.rows();
  for (int j = b.held().begin; j < b.held().end; ++j) {
    double* out = b.column(j);
    const double* cell = t.column(j);
    const auto factor = [&](int i) {
      return rayleigh * heat.mantle().buoyancy[static_cast<std::size_t>(i)];
    };
    out[0] = factor(0) * heat.face_temperature(t, {0, j});
    for (int i = 1; i < last; ++i) out[i] = factor(i) * (cell[i - 1] + cell[i]) / 2;
    out[last] = factor(last) * heat.face_temperature(t, {last, j});
  }
  return b;
}

CellField viscosity_of(const ViscosityLaw& law, const CellField& t) {
  const Geometry& g = t.decomposition().geometry();
  CellField eta(t.decomposition_pointer());
  for (int j = eta.held().begin; j < eta.held().end; ++j)
    for (int i = 0; i < eta.rows(); ++i) eta[{i, j}] = law({t[{i, j}], g.depth(i)});
  return eta;
}

CellField viscous_heating(const StateView& s) {
  const double number = s.heat.mantle().dissipation_number;
  if (number == 0 || s.rayleigh == 0) return {};
  CellField heating = dissipation_of_cells(s.power, s.psi);
  for (double& x : heating.values()) x *= number / s.rayleigh;
  return heating;
}

HistoryRow measure(const StateView& s) {
  HistoryRow row;
  const WallMeans walls = wall_means(s.heat, s.temperature);
  const double conductive = s.heat.mantle().conductive_heat_flow * (walls.t_inner - walls.t_outer);
  row.heat_flow_inner = walls.heat_inner;
  row.heat_flow_outer = walls.heat_outer;
  row.nusselt_inner = walls.heat_inner / conductive;
  row.nusselt_outer = walls.heat_outer / conductive;
  row.temperature_inner = walls.t_inner;
  row.temperature_outer = walls.t_outer;
  set_temperatures(s.temperature, row);
  row.velocity_rms = velocity_rms(s.power, s.psi);
  row.velocity_rms_inner = wall_velocity_rms(s.power, s.psi, 0);
  row.velocity_rms_outer = wall_velocity_rms(s.power, s.psi, s.temperature.rows());
  row.dissipation = dissipation(s.power, s.psi);
  row.buoyancy_work = buoyancy_work(s.power, s.psi, buoyancy(s.heat, s.temperature, s.rayleigh));
  row.work_mismatch =
      row.buoyancy_work != 0 ? (row.dissipation - row.buoyancy_work) / row.buoyancy_work : 0;
  row.heat_source = s.heat.total_source();
  if (s.rayleigh > 0)
    row.viscous_heating = s.heat.mantle().dissipation_number / s.rayleigh * row.dissipation;
  row.adiabatic_cooling = adiabatic_cooling(s);
  set_lid(s, row);
  return row;
}

RadialProfiles profiles(const StateView& s) {
  const Geometry& g = s.power.geometry();
  SurfaceSums sums(g.radial_cells());
  const Range columns = s.temperature.owned();
  for (int j = columns.begin; j < columns.end; ++j) add_column(s, j, sums);
  s.power.decomposition().sum_in_place(sums.numbers);
  double whole = 0;
  for (int j = 0; j < g.lateral_cells(); ++j) whole += g.lateral_measure(j);
  const auto at_middle = [](const double* faces, int i) { return (faces[i] + faces[i + 1]) / 2; };
  RadialProfiles p;
  for (int i = 0; i < g.radial_cells(); ++i) {
    p.radius.push_back(g.cell_radius(i));
    p.temperature.push_back(sums.temperature()[i] / whole);
    p.velocity_radial_rms.push_back(std::sqrt(at_middle(sums.radial_square(), i) / whole));
    p.velocity_lateral_rms.push_back(std::sqrt(sums.lateral_square()[i] / whole));
    p.viscosity.push_back(std::exp(sums.log_viscosity()[i] / whole));
    p.heat_conducted.push_back(at_middle(sums.conducted(), i));
    p.heat_advected.push_back(at_middle(sums.advected(), i));
  }
  p.temperature_adiabatic = adiabat(g, s.heat.mantle(), p.temperature);
  return p;
}

Snapshot snapshot(const StateView& state, bool with_stress) {
  const Geometry& g = state.power.geometry();
  const auto decomposition = state.temperature.decomposition_pointer();
  Snapshot s;
  s.temperature = state.temperature;
  s.viscosity = state.power.viscosity();
  s.strain_rate = strain_rate(state.power, state.psi);
  s.stream_function = state.psi;
  s.velocity_radial = CellField(decomposition);
  s.velocity_lateral = CellField(decomposition);
  for (int j = s.temperature.owned().begin; j < s.temperature.owned().end; ++j)
    for (int i = 0; i < s.temperature.rows(); ++i) {
      const OnFaces w = face_velocities(g, state.psi, Cell{i, j});
      s.velocity_radial[{i, j}] = (w.inner + w.outer) / 2;
      s.velocity_lateral[{i, j}] = (w.left + w.right) / 2;
    }
  Stresses stress;
  if (with_stress) {
    stress =
        stresses(state.power, state.psi, buoyancy(state.heat, state.temperature, state.rayleigh));
    s.pressure = stress.pressure;
  }
  s.inner = wall_trace(state, 0, stress.inner_normal);
  s.outer = wall_trace(state, g.radial_cells(), stress.outer_normal);
  s.profiles = profiles(state);
  return s;
}

}  // namespace lidwright
