#pragma once

#include <cmath>
#include <memory>
#include <numbers>
#include <string>
#include <vector>

#include "mesh/decomposition.hpp"
#include "mesh/geometry.hpp"
#include "solver/snapshot.hpp"

/// Snapshots with known fields in all kinds of shells.
namespace lidwright::test {

using std::numbers::pi;

struct Sample {
  std::string name;
  Shell shell;
};

inline const std::vector<Sample> samples{
    {"box", {Shape::Box, 0, 0, 2, Sides::Reflecting}},
    {"box_periodic", {Shape::Box, 0, 0, 2, Sides::Periodic}},
    {"annulus", {Shape::Annulus, 1.2, 0, 2 * pi, Sides::Periodic}},
    {"sector", {Shape::Annulus, 1.2, 0.3, 1.4, Sides::Reflecting}},
    {"spherical_annulus", {Shape::SphericalAnnulus, 0.8, 0, 2 * pi, Sides::Periodic}},
    {"shell", {Shape::AxisymmetricShell, 1.2, 0, pi, Sides::Reflecting}}};

inline std::shared_ptr<const Decomposition> share_out(const Shell& shell,
                                                      MPI_Comm comm = MPI_COMM_WORLD) {
  const Grid grid{24, 97, {3, 2}, {}};
  return std::make_shared<Decomposition>(std::make_shared<Geometry>(shell, grid), comm);
}

/// Three pairs of rolls: psi = sin(pi (r - r_i)) sin(6 pi s), s from 0 to 1 along the shell.
inline double flow_at(const Geometry& g, double radius, double lateral) {
  const Shell& s = g.shell();
  const double along = (lateral - s.lateral_begin) / (s.lateral_end - s.lateral_begin);
  return std::sin(pi * (radius - s.inner_radius)) * std::sin(6 * pi * along);
}

inline double flow_at(const Geometry& g, Corner c) {
  return flow_at(g, g.face_radius(c.i), g.face_lateral(c.j));
}
inline double upward_flux(const Geometry& g, RadialFace f) {
  return flow_at(g, right(f)) - flow_at(g, left(f));
}
inline double forward_flux(const Geometry& g, LateralFace f) {
  return flow_at(g, inner(f)) - flow_at(g, outer(f));
}

inline void fill_cells(Snapshot& s, const Geometry& g) {
  for (int j = s.temperature.owned().begin; j < s.temperature.owned().end; ++j)
    for (int i = 0; i < g.radial_cells(); ++i) {
      const Cell c{i, j};
      s.temperature[c] = g.depth(i);
      s.viscosity[c] = std::exp(-13.8 * g.depth(i));
      s.strain_rate[c] = 2;
      s.pressure[c] = j;
      s.velocity_radial[c] = (upward_flux(g, inner(c)) * g.inverse_area(inner(c)) +
                              upward_flux(g, outer(c)) * g.inverse_area(outer(c))) /
                             2;
      s.velocity_lateral[c] = (forward_flux(g, left(c)) * g.inverse_area(left(c)) +
                               forward_flux(g, right(c)) * g.inverse_area(right(c))) /
                              2;
    }
}

inline WallTrace trace(const Geometry& g, double stress) {
  WallTrace t;
  for (int j = 0; j < g.lateral_cells(); ++j) {
    t.lateral.push_back(g.cell_lateral(j));
    t.heat_flux.push_back(1 + j);
    t.velocity.push_back(3);
    t.normal_stress.push_back(stress);
  }
  return t;
}

inline Snapshot example(const std::shared_ptr<const Decomposition>& d, double time) {
  const Geometry& g = d->geometry();
  Snapshot s{7,
             time,
             CellField(d),
             CellField(d),
             CellField(d),
             CellField(d),
             CellField(d),
             CellField(d),
             CornerField(d),
             {},
             {},
             {}};
  fill_cells(s, g);
  for (int j = s.stream_function.owned().begin; j < s.stream_function.owned().end; ++j)
    for (int i = 0; i <= g.radial_cells(); ++i)
      s.stream_function[{i, j}] = flow_at(g, Corner{i, j});
  if (d->rank() == 0) {
    s.inner = trace(g, -1);
    s.outer = trace(g, 5);
  }
  const std::vector<double> ones(static_cast<std::size_t>(g.radial_cells()), 1.0);
  s.profiles = {ones, ones, ones, ones, ones, ones, ones, ones};
  return s;
}

}  // namespace lidwright::test
