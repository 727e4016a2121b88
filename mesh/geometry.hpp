#pragma once

#include <array>
#include <functional>
#include <vector>

#include "mesh/location.hpp"

/// The four geometries, reduced to what an operator may ask: area, volume, distance, stretch and
/// curvature. No operator asks which shell it is.
///
/// All are orthogonal and separable, with volume element w dr dtheta:
///     box w = 1;  annulus w = r;  spherical annulus w = r^2;  axisymmetric shell w = 2 pi r^2
///     sin(theta).
/// Lengths are in units of the thickness of the shell, so the walls lie at r_inner and r_inner + 1
/// (box: at heights 0 and 1). The lateral coordinate is x in the box (a length), the longitude in
/// the two annuli and the colatitude in the axisymmetric shell (radians).
namespace lidwright {

enum class Shape { Box, Annulus, SphericalAnnulus, AxisymmetricShell };
enum class Sides { Periodic, Reflecting };

/// The region. Invariants: inner_radius > 0 (0 for the box), lateral_end > lateral_begin, in the
/// axisymmetric shell 0 <= lateral_begin < lateral_end <= pi and reflecting sides.
struct Shell {
  Shape shape = Shape::Annulus;
  double inner_radius = 0;  ///< r_i / (r_o - r_i), > 0; 0 in the box
  double lateral_begin = 0;
  double lateral_end = 1;
  Sides sides = Sides::Reflecting;
};

/// Width of the cells in the middle over the width of the cell at the first and at the last wall,
/// >= 1.
struct Grading {
  double first = 1;
  double last = 1;
};

struct Grid {
  int radial = 64;   ///< cells across the shell, >= 4
  int lateral = 64;  ///< cells along it, >= 4
  Grading radial_grading;
  Grading lateral_grading;  ///< box with reflecting sides only
};

/// n + 1 face positions from begin to end. Cell widths vary smoothly with the cell's number s in
/// (0, 1): width(s) ~ first^-cos^2(pi s) for s < 1/2 and last^-cos^2(pi s) beyond, so that
/// refinement by two keeps the map (to second order) and the cells next to the walls are almost
/// uniform.
std::vector<double> graded_faces(double begin, double end, int n, Grading);

/// 1-D list that may also be read up to `pad` places outside [0, n).
class PaddedList {
 public:
  static constexpr int pad = 3;
  PaddedList() = default;
  explicit PaddedList(int n) : values_(static_cast<std::size_t>(n + 2 * pad), 0.0) {}
  double operator[](int k) const { return values_[static_cast<std::size_t>(k + pad)]; }
  double& operator[](int k) { return values_[static_cast<std::size_t>(k + pad)]; }

 private:
  std::vector<double> values_;
};

class Geometry {
 public:
  /// `density` of depth below the outer wall, > 0; none: 1. Flows through faces are mass flows.
  Geometry(const Shell&, const Grid&, const std::function<double(double depth)>& density = {});

  const Shell& shell() const { return shell_; }
  const Grid& grid() const { return grid_; }
  int radial_cells() const { return grid_.radial; }
  int lateral_cells() const { return grid_.lateral; }
  bool periodic() const { return shell_.sides == Sides::Periodic; }
  bool box() const { return shell_.shape == Shape::Box; }
  /// Columns of corners (and of lateral faces) that carry numbers: one more than cells unless
  /// periodic.
  int corner_columns() const { return periodic() ? grid_.lateral : grid_.lateral + 1; }

  // Places. Radius (height in the box) and lateral coordinate of faces and of cell middles.
  double face_radius(int i) const { return face_radius_[i]; }
  double cell_radius(int i) const { return cell_radius_[i]; }
  double face_lateral(int j) const { return face_lateral_[j]; }
  double cell_lateral(int j) const { return cell_lateral_[j]; }
  double outer_radius() const { return face_radius_[grid_.radial]; }
  double inner_radius() const { return face_radius_[0]; }
  /// Distance of a cell's middle below the outer wall, in shell thicknesses.
  double depth(int i) const { return outer_radius() - cell_radius_[i]; }
  /// Plane Cartesian coordinates of a point (box: x, height; annuli: the plane of the circle;
  /// axisymmetric shell: distance from the axis, coordinate along it).
  std::array<double, 2> cartesian(double radius, double lateral) const;
  /// Cartesian vector of the components (radial, lateral) at a lateral coordinate.
  std::array<double, 2> cartesian_vector(double radial, double along, double lateral) const;

  // Areas and volumes.
  double area(RadialFace f) const { return face_measure_[f.i] * lateral_measure_[f.j]; }
  double area(LateralFace f) const { return side_measure_[f.i] * side_lateral_[f.j]; }
  double volume(Cell c) const { return cell_measure_[c.i] * lateral_measure_[c.j]; }
  double inverse_area(RadialFace f) const {
    return inv_face_measure_[f.i] * inv_lateral_measure_[f.j];
  }
  /// 0 on the axis of the axisymmetric shell, where no flow crosses a face without area.
  double inverse_area(LateralFace f) const {
    return inv_side_measure_[f.i] * inv_side_lateral_[f.j];
  }
  double inverse_volume(Cell c) const { return inv_cell_measure_[c.i] * inv_lateral_measure_[c.j]; }
  // Their radial and lateral factors, and the inverse ones: what loops down a column take out of
  // the loop.
  double face_measure(int i) const { return face_measure_[i]; }
  double side_measure(int i) const { return side_measure_[i]; }
  double lateral_measure(int j) const { return lateral_measure_[j]; }
  double side_lateral(int j) const { return side_lateral_[j]; }
  double inverse_lateral_measure(int j) const { return inv_lateral_measure_[j]; }
  double inverse_side_lateral(int j) const { return inv_side_lateral_[j]; }
  // Density, and what it takes from a mass flow through a face to the velocity there, 1 / (density
  // * area); 0 on the axis.
  double face_density(int i) const { return face_density_[i]; }
  double cell_density(int i) const { return cell_density_[i]; }
  double velocity_per_flow(RadialFace f) const {
    return face_velocity_per_flow_[f.i] * inv_lateral_measure_[f.j];
  }
  double velocity_per_flow(LateralFace f) const {
    return side_velocity_per_flow_[f.i] * inv_side_lateral_[f.j];
  }
  double face_velocity_per_flow(int i) const { return face_velocity_per_flow_[i]; }
  double side_velocity_per_flow(int i) const { return side_velocity_per_flow_[i]; }
  /// div u in a cell that keeps its mass is outer_dilatation * u_outer - inner_dilatation *
  /// u_inner; both exactly 0 where the density is uniform.
  double inner_dilatation(int cell_row) const { return inner_dilatation_[cell_row]; }
  double outer_dilatation(int cell_row) const { return outer_dilatation_[cell_row]; }
  /// Share of the cell's volume in its corner: above (outer) or below its middle, right or left of
  /// it.
  double quarter_volume(Cell c, bool upper, bool right) const {
    return (upper ? upper_measure_ : lower_measure_)[c.i] *
           (right ? right_measure_ : left_measure_)[c.j];
  }
  /// Volume of the staggered cell around a face, cut off at walls and reflecting sides.
  double dual_volume(RadialFace) const;
  double dual_volume(LateralFace) const;
  double total_volume() const { return total_volume_; }
  double wall_area(int face) const { return face_measure_[face] * total_lateral_measure_; }

  // Distances, stretch, curvature.
  double width(int i) const { return width_[i]; }
  double inv_width(int i) const { return inv_width_[i]; }
  double lateral_width(int j) const { return lateral_width_[j]; }  ///< in the lateral coordinate
  double inv_lateral_width(int j) const { return inv_lateral_width_[j]; }
  /// Between the middles on both sides of a radial face; half a cell at the walls.
  double radial_distance(int i) const { return radial_distance_[i]; }
  /// The same across a lateral face, in the lateral coordinate.
  double lateral_distance(int j) const { return lateral_distance_[j]; }
  /// Length per unit of the lateral coordinate: 1 in the box, else the radius. In cells it is
  /// volume over side area, so that rigid rotation is free of strain to round-off.
  double stretch(int cell_row) const { return stretch_[cell_row]; }
  double face_stretch(int face_row) const { return box() ? 1.0 : face_radius_[face_row]; }
  /// d(ln stretch)/dr in a cell: 0 in the box, else 1/stretch.
  double curvature(int cell_row) const { return curvature_[cell_row]; }
  /// Does a lateral face or corner lie on a reflecting side?
  bool on_side(int j) const { return !periodic() && (j == 0 || j == grid_.lateral); }
  bool on_wall(int face_row) const { return face_row == 0 || face_row == grid_.radial; }

  /// Heat flow by conduction from the inner to the outer wall at unit temperature drop and unit
  /// conductivity, without heat sources: the definition of Nu = 1 (exact, not discrete).
  double conductive_heat_flow() const;

 private:
  void set_radial_metric();
  void set_lateral_metric();
  void set_density(const std::function<double(double depth)>&);

  Shell shell_;
  Grid grid_;
  std::vector<double> face_radius_, cell_radius_, width_, inv_width_, radial_distance_;
  std::vector<double> face_measure_, inv_face_measure_;  // r^p at faces
  std::vector<double> cell_measure_, inv_cell_measure_;  // integral of r^p over the cell
  std::vector<double> upper_measure_, lower_measure_;    // its parts above and below the middle
  std::vector<double> side_measure_, inv_side_measure_;  // integral of r^(p-1), box: of 1
  std::vector<double> stretch_, curvature_;
  std::vector<double> face_density_, cell_density_;
  std::vector<double> face_velocity_per_flow_, side_velocity_per_flow_;  // radial factors
  std::vector<double> inner_dilatation_, outer_dilatation_;
  PaddedList face_lateral_, cell_lateral_, lateral_width_, inv_lateral_width_, lateral_distance_;
  PaddedList lateral_measure_, inv_lateral_measure_;  // integral of 2 pi sin(theta), or the width
  PaddedList left_measure_, right_measure_;           // its parts left and right of the middle
  PaddedList side_lateral_, inv_side_lateral_;        // 2 pi sin(theta) at faces, or 1
  double total_volume_ = 0, total_lateral_measure_ = 0;
};

}  // namespace lidwright
