#include "study/prescribed_flow.hpp"

#include <algorithm>
#include <cmath>

#include "mesh/operators.hpp"
#include "solver/flow.hpp"
#include "solver/pressure.hpp"
#include "solver/solve_error.hpp"
#include "study/interpolation.hpp"

namespace lidwright {
namespace {

using Line = std::vector<double>;

/// The flow on one grid and the places of its numbers.
struct Flow {
  const Geometry& g;
  const Power& power;
  const CornerField& psi;
  const Stresses stress;
};

double radial_harmonic(const Geometry& g, int n, double lateral) {
  if (g.shell().shape != Shape::AxisymmetricShell) return std::cos(n * lateral);
  return std::legendre(static_cast<unsigned>(n), std::cos(lateral));
}

/// sin(n lateral), or dP_n/dtheta = n (cos P_n - P_(n-1)) / sin.
double lateral_harmonic(const Geometry& g, int n, double lateral) {
  if (g.shell().shape != Shape::AxisymmetricShell) return std::sin(n * lateral);
  const double s = std::sin(lateral), c = std::cos(lateral);
  if (s < 1e-12) return 0;
  const auto degree = static_cast<unsigned>(n);
  return n * (c * std::legendre(degree, c) - std::legendre(degree - 1, c)) / s;
}

double buoyancy(const Geometry& g, const Forcing& f, double radius, double lateral) {
  if (g.box()) return std::sin(f.vertical * radius) * std::cos(f.horizontal * lateral);
  return -std::pow(radius / g.outer_radius(), f.power) * radial_harmonic(g, f.wavenumber, lateral);
}

/// At a wall the mean of wall and cell middle, which stands for the half cell next to it.
double face_buoyancy(const Geometry& g, const Forcing& forcing, RadialFace f) {
  const double lateral = g.cell_lateral(f.j);
  const double here = buoyancy(g, forcing, g.face_radius(f.i), lateral);
  if (!g.on_wall(f.i)) return here;
  const Cell c = f.i == 0 ? outside(f) : inside(f);
  return (here + buoyancy(g, forcing, g.cell_radius(c.i), lateral)) / 2;
}

CellField viscosity(const std::shared_ptr<const Decomposition>& d, const Model& model,
                    const Forcing& f) {
  CellField eta(d);
  const Geometry& g = d->geometry();
  for (int j = eta.held().begin; j < eta.held().end; ++j)
    for (int i = 0; i < eta.rows(); ++i) {
      eta[{i, j}] = model.viscosity({0, g.depth(i)});
      if (g.box() && g.cell_lateral(j) > f.step_at) eta[{i, j}] *= f.step_viscosity;
    }
  return eta;
}

double velocity_rms(const Flow& flow) {
  const Geometry& g = flow.g;
  double sum = 0;
  for (int j = 0; j < g.lateral_cells(); ++j)
    for (int i = 1; i < g.radial_cells(); ++i) {
      const RadialFace f{i, j};
      sum += g.dual_volume(f) * std::pow(velocity(g, flow.psi, f), 2);
    }
  for (int j = 0; j < g.corner_columns(); ++j)
    for (int i = 0; i < g.radial_cells(); ++i) {
      const LateralFace f{i, j};
      sum += g.dual_volume(f) * std::pow(velocity(g, flow.psi, f), 2);
    }
  return std::sqrt(sum / g.total_volume());
}

/// Along a wall at lateral face j: v/h continued to a slippery wall as even about it.
double wall_velocity(const Flow& flow, int face, int j) {
  const Geometry& g = flow.g;
  const bool inner_wall = face == 0;
  if ((inner_wall ? flow.power.inner_slip() : flow.power.outer_slip()) == Slip::None) return 0;
  Line distance, rate;
  for (int k = 0; k < 3; ++k) {
    const int i = inner_wall ? k : face - 1 - k;
    distance.push_back(std::abs(g.cell_radius(i) - g.face_radius(face)));
    rate.push_back(velocity(g, flow.psi, LateralFace{i, j}) / g.stretch(i));
  }
  return g.face_stretch(face) * at_side(distance, rate);
}

double velocity_amplitude(const Flow& flow, int face, int n) {
  double product = 0, square = 0;
  for (int j = 0; j < flow.g.corner_columns(); ++j) {
    const double harmonic = lateral_harmonic(flow.g, n, flow.g.face_lateral(j));
    const double weight = flow.g.side_lateral(j);
    product += weight * harmonic * wall_velocity(flow, face, j);
    square += weight * harmonic * harmonic;
  }
  return product / square;
}

double stress_amplitude(const Flow& flow, const Line& stress, int n) {
  double product = 0, square = 0;
  for (int j = 0; j < flow.g.lateral_cells(); ++j) {
    const double harmonic = radial_harmonic(flow.g, n, flow.g.cell_lateral(j));
    const double weight = flow.g.lateral_measure(j);
    product += weight * harmonic * stress[static_cast<std::size_t>(j)];
    square += weight * harmonic * harmonic;
  }
  return product / square;
}

std::map<std::string, double> shell_quantities(const Flow& flow, int n) {
  const int last = flow.g.radial_cells();
  return {{"velocity_rms", velocity_rms(flow)},
          {"velocity_inner_amplitude", velocity_amplitude(flow, 0, n)},
          {"velocity_outer_amplitude", velocity_amplitude(flow, last, n)},
          {"stress_inner_amplitude", stress_amplitude(flow, flow.stress.inner_normal, n)},
          {"stress_outer_amplitude", stress_amplitude(flow, flow.stress.outer_normal, n)}};
}

/// u_x along the top at the middle of its length.
double velocity_top_middle(const Flow& flow) {
  Line place, value;
  for (int j = 0; j < flow.g.corner_columns(); ++j) {
    place.push_back(flow.g.face_lateral(j));
    value.push_back(wall_velocity(flow, flow.g.radial_cells(), j));
  }
  return interpolated(place, value, (place.front() + place.back()) / 2);
}

/// u_z at a side, half-way up.
double velocity_side_middle(const Flow& flow, bool right) {
  const Geometry& g = flow.g;
  Line place, value;
  for (int i = 0; i <= g.radial_cells(); ++i) {
    Line distance, near;
    for (int k = 0; k < 3; ++k) {
      const int j = right ? g.lateral_cells() - 1 - k : k;
      distance.push_back(
          std::abs(g.cell_lateral(j) - g.face_lateral(right ? g.lateral_cells() : 0)));
      near.push_back(g.on_wall(i) ? 0 : velocity(g, flow.psi, RadialFace{i, j}));
    }
    place.push_back(g.face_radius(i));
    value.push_back(at_side(distance, near));
  }
  return interpolated(place, value, (g.inner_radius() + g.outer_radius()) / 2);
}

double stress_at_side(const Flow& flow, bool right) {
  const Geometry& g = flow.g;
  Line distance, near;
  for (int k = 0; k < 3; ++k) {
    const int j = right ? g.lateral_cells() - 1 - k : k;
    distance.push_back(std::abs(g.cell_lateral(j) - g.face_lateral(right ? g.lateral_cells() : 0)));
    near.push_back(flow.stress.outer_normal[static_cast<std::size_t>(j)]);
  }
  return at_side(distance, near);
}

std::map<std::string, double> box_quantities(const Flow& flow) {
  const double left = stress_at_side(flow, false), right = stress_at_side(flow, true);
  return {{"velocity_rms", velocity_rms(flow)},
          {"velocity_top_middle", velocity_top_middle(flow)},
          {"velocity_left_middle", velocity_side_middle(flow, false)},
          {"velocity_right_middle", velocity_side_middle(flow, true)},
          {"stress_top_left", left},
          {"stress_top_right", right},
          {"stress_top_difference", right - left}};
}

}  // namespace

std::map<std::string, double> prescribed_flow(const Model& model, const Forcing& forcing,
                                              double tolerance, const Grid& grid) {
  const auto geometry = std::make_shared<Geometry>(model.shell, grid);
  const auto d = std::make_shared<Decomposition>(geometry, PETSC_COMM_SELF);
  FlowSettings settings;
  settings.tolerance = tolerance;
  FlowSolver solver(d, model.walls, settings);
  CornerField psi(d);
  const RadialFaceField b =
      on_radial_faces(d, [&](RadialFace f) { return face_buoyancy(*geometry, forcing, f); });
  const FlowReport report = solver.solve(viscosity(d, model, forcing), b, psi);
  if (!report.converged) throw SolveError("the flow of the prescribed buoyancy did not converge");
  const Flow flow{*geometry, solver.power(), psi, stresses(solver.power(), psi, b)};
  return geometry->box() ? box_quantities(flow) : shell_quantities(flow, forcing.wavenumber);
}

const std::vector<std::string>& prescribed_flow_names() {
  static const std::vector<std::string> names{
      "velocity_rms",           "velocity_inner_amplitude", "velocity_outer_amplitude",
      "stress_inner_amplitude", "stress_outer_amplitude",   "velocity_top_middle",
      "velocity_left_middle",   "velocity_right_middle",    "stress_top_left",
      "stress_top_right",       "stress_top_difference"};
  return names;
}

}  // namespace lidwright
