#pragma once

#include "mesh/geometry.hpp"

/// The rows of the strain-rate operator, pure functions of one index that read like their formulas,
/// and their transposes. Velocities follow from the stream function psi at the corners:
///     u = [psi(i, j+1) - psi(i, j)] / (density * area of the radial face)    > 0 outwards
///     v = [psi(i, j) - psi(i+1, j)] / (density * area of the lateral face)   > 0 along the
///     lateral coordinate
/// so that the net mass flow out of every cell is zero to round-off.
namespace lidwright {

template <class Psi>
double velocity(const Geometry& g, const Psi& psi, RadialFace f) {
  return (psi[right(f)] - psi[left(f)]) * g.velocity_per_flow(f);
}
template <class Psi>
double velocity(const Geometry& g, const Psi& psi, LateralFace f) {
  return (psi[inner(f)] - psi[outer(f)]) * g.velocity_per_flow(f);
}

/// Mass that passes a face in unit time.
template <class Psi>
double flow_through(const Psi& psi, RadialFace f) {
  return psi[right(f)] - psi[left(f)];
}
template <class Psi>
double flow_through(const Psi& psi, LateralFace f) {
  return psi[inner(f)] - psi[outer(f)];
}

/// Numbers on the four faces of a cell: velocities, or the forces conjugate to them.
struct OnFaces {
  double inner, outer, left, right;
};

template <class Psi>
OnFaces face_velocities(const Geometry& g, const Psi& psi, Cell c) {
  return {velocity(g, psi, inner(c)), velocity(g, psi, outer(c)), velocity(g, psi, left(c)),
          velocity(g, psi, right(c))};
}

/// Normal strain rates (or stresses) of a cell: radial, lateral, and the hoop rate out of the
/// plane.
struct Normal {
  double rr, tt, pp;
};

/// e_rr = du/dr,  e_tt = (1/h) dv/dtheta + u/h,  e_pp = div u - e_rr - e_tt (h: stretch).
/// With h = volume / side area, e_pp is zero to round-off in box and annulus for any velocity.
inline Normal strain(const Geometry& g, const OnFaces& w, Cell c) {
  const double rr = (w.outer - w.inner) * g.inv_width(c.i);
  const double tt = (w.right - w.left) * g.inv_lateral_width(c.j) / g.stretch(c.i) +
                    g.curvature(c.i) * (w.inner + w.outer) / 2;
  const double divergence = (g.area(outer(c)) * w.outer - g.area(inner(c)) * w.inner +
                             g.area(right(c)) * w.right - g.area(left(c)) * w.left) *
                            g.inverse_volume(c);
  return {rr, tt, divergence - rr - tt};
}

/// Its deviatoric part for the velocities of a stream function, e - (div u)/3, where div u follows
/// from the radial velocities alone and is exactly 0 at uniform density.
inline Normal deviatoric_strain(const Geometry& g, const OnFaces& w, Cell c) {
  const double rr = (w.outer - w.inner) * g.inv_width(c.i);
  const double tt = (w.right - w.left) * g.inv_lateral_width(c.j) / g.stretch(c.i) +
                    g.curvature(c.i) * (w.inner + w.outer) / 2;
  const double third = (g.outer_dilatation(c.i) * w.outer - g.inner_dilatation(c.i) * w.inner) / 3;
  return {rr - third, tt - third, 2 * third - rr - tt};
}

/// Transpose of `strain`: forces on the faces from stresses times volume.
inline OnFaces forces(const Geometry& g, const Normal& s, Cell c) {
  const double rr = (s.rr - s.pp) * g.inv_width(c.i);
  const double tt = (s.tt - s.pp) * g.inv_lateral_width(c.j) / g.stretch(c.i);
  const double hoop = g.curvature(c.i) * (s.tt - s.pp) / 2;
  const double spread = s.pp * g.inverse_volume(c);
  return {-rr + hoop - spread * g.area(inner(c)), rr + hoop + spread * g.area(outer(c)),
          -tt - spread * g.area(left(c)), tt + spread * g.area(right(c))};
}

/// Transpose of `deviatoric_strain`.
inline OnFaces deviatoric_forces(const Geometry& g, const Normal& s, Cell c) {
  const double rr = (s.rr - s.pp) * g.inv_width(c.i);
  const double tt = (s.tt - s.pp) * g.inv_lateral_width(c.j) / g.stretch(c.i);
  const double hoop = g.curvature(c.i) * (s.tt - s.pp) / 2;
  const double spread = (2 * s.pp - s.rr - s.tt) / 3;
  return {-rr + hoop - spread * g.inner_dilatation(c.i),
          rr + hoop + spread * g.outer_dilatation(c.i), -tt, tt};
}

/// Shear strain rate at a corner, e_rt = (1/2) [h d(v/h)/dr + (1/h) du/dtheta], as weights on two
/// radial and two lateral faces. Inside they are the four faces that meet in the corner. Where a
/// wall grips, the row is that of the half cell next to it, v/h rising from 0 at the wall to the
/// nearest lateral face, taken midway (docs/decisions/gripping-walls.md); u = 0 on both sides.
/// Where a wall slips freely all weights are 0, as they are on reflecting sides.
struct ShearRow {
  RadialFace before, behind;
  LateralFace near, far;
  double before_weight, behind_weight, near_weight, far_weight;
};

/// Weight of the radial velocity behind a corner, less that of the one before it. At a wall it
/// serves the wall's reaction only.
inline double lateral_shear_weight(const Geometry& g, Corner k) {
  return 0.5 / (g.face_stretch(k.i) * g.lateral_distance(k.j));
}

inline ShearRow shear_row_inside(const Geometry& g, Corner k) {
  const double lateral = lateral_shear_weight(g, k);
  const double radial = 0.5 * g.face_stretch(k.i) / g.radial_distance(k.i);
  return {{k.i, k.j - 1},
          {k.i, k.j},
          {k.i - 1, k.j},
          {k.i, k.j},
          -lateral,
          lateral,
          -radial / g.stretch(k.i - 1),
          radial / g.stretch(k.i)};
}

inline ShearRow shear_row_gripping(const Geometry& g, Corner k) {
  const int near = k.i == 0 ? 0 : k.i - 1;
  const double wall = g.face_radius(k.i), rise = g.cell_radius(near) - wall;
  const double stretch = g.box() ? 1 : wall + rise / 2;
  const LateralFace face{near, k.j};
  return {
      {k.i, k.j - 1}, {k.i, k.j}, face, face, 0, 0, 0.5 * stretch / (rise * g.stretch(near)), 0};
}

template <class Psi>
double shear(const Geometry& g, const Psi& psi, const ShearRow& row) {
  return row.before_weight * velocity(g, psi, row.before) +
         row.behind_weight * velocity(g, psi, row.behind) +
         row.near_weight * velocity(g, psi, row.near) + row.far_weight * velocity(g, psi, row.far);
}

/// Adds the forces on four faces, as forces on the stream function, to the corners.
template <class Force>
void add_to_corners(const Geometry& g, Force& force, RadialFace f, double face_force) {
  const double push = face_force * g.velocity_per_flow(f);
  force[right(f)] += push;
  force[left(f)] -= push;
}
template <class Force>
void add_to_corners(const Geometry& g, Force& force, LateralFace f, double face_force) {
  const double push = face_force * g.velocity_per_flow(f);
  force[inner(f)] += push;
  force[outer(f)] -= push;
}
template <class Force>
void add_to_corners(const Geometry& g, Force& force, Cell c, const OnFaces& face_forces) {
  add_to_corners(g, force, inner(c), face_forces.inner);
  add_to_corners(g, force, outer(c), face_forces.outer);
  add_to_corners(g, force, left(c), face_forces.left);
  add_to_corners(g, force, right(c), face_forces.right);
}
/// Transpose of `shear`.
template <class Force>
void add_to_corners(const Geometry& g, Force& force, const ShearRow& row, double stress) {
  add_to_corners(g, force, row.before, row.before_weight * stress);
  add_to_corners(g, force, row.behind, row.behind_weight * stress);
  add_to_corners(g, force, row.near, row.near_weight * stress);
  add_to_corners(g, force, row.far, row.far_weight * stress);
}

}  // namespace lidwright
