#include "mesh/geometry.hpp"

#include <cmath>
#include <numbers>
#include <numeric>

namespace lidwright {
namespace {

using std::numbers::pi;

/// Power p of the radius in the volume element.
int radial_power(Shape shape) {
  if (shape == Shape::Box) return 0;
  return shape == Shape::Annulus ? 1 : 2;
}

/// Integral of r^p from a to b, written without cancellation.
double integral_of_power(int p, double a, double b) {
  const double d = b - a;
  if (p == 0) return d;
  if (p == 1) return d * (a + b) / 2;
  return d * (a * a + a * b + b * b) / 3;
}

/// Integral of 2 pi sin(theta), without cancellation, or the plain width.
double lateral_integral(Shape shape, double a, double b) {
  if (shape != Shape::AxisymmetricShell) return b - a;
  return 4 * pi * std::sin((a + b) / 2) * std::sin((b - a) / 2);
}

double side_factor(Shape shape, double theta) {
  if (shape != Shape::AxisymmetricShell) return 1;
  const bool on_axis = theta == 0 || std::abs(theta - pi) < 1e-12;
  return on_axis ? 0 : 2 * pi * std::sin(theta);
}

double inverse_or_zero(double x) { return x == 0 ? 0 : 1 / x; }

double grading_width(double s, Grading g) {
  const double ratio = s < 0.5 ? g.first : g.last;
  const double c = std::cos(pi * s);
  return std::pow(ratio, -c * c);
}

}  // namespace

std::vector<double> graded_faces(double begin, double end, int n, Grading grading) {
  std::vector<double> face(static_cast<std::size_t>(n) + 1, 0.0);
  if (grading.first == 1 && grading.last == 1) {
    for (int k = 0; k <= n; ++k) face[k] = begin + (end - begin) * k / n;
    return face;
  }
  for (int k = 0; k < n; ++k) face[k + 1] = face[k] + grading_width((k + 0.5) / n, grading);
  const double total = face[n];
  for (double& x : face) x = begin + (end - begin) * x / total;
  face[n] = end;
  return face;
}

Geometry::Geometry(const Shell& shell, const Grid& grid,
                   const std::function<double(double depth)>& density)
    : shell_(shell), grid_(grid) {
  set_radial_metric();
  set_density(density);
  set_lateral_metric();
  const double radial = std::accumulate(cell_measure_.begin(), cell_measure_.end(), 0.0);
  for (int j = 0; j < grid_.lateral; ++j) total_lateral_measure_ += lateral_measure_[j];
  total_volume_ = radial * total_lateral_measure_;
}

void Geometry::set_radial_metric() {
  const int n = grid_.radial;
  const int p = radial_power(shell_.shape);
  face_radius_ =
      graded_faces(shell_.inner_radius, shell_.inner_radius + 1, n, grid_.radial_grading);
  for (int i = 0; i < n; ++i) {
    const double a = face_radius_[i], b = face_radius_[i + 1], middle = (a + b) / 2;
    cell_radius_.push_back(middle);
    width_.push_back(b - a);
    inv_width_.push_back(1 / (b - a));
    cell_measure_.push_back(integral_of_power(p, a, b));
    lower_measure_.push_back(integral_of_power(p, a, middle));
    upper_measure_.push_back(integral_of_power(p, middle, b));
    side_measure_.push_back(integral_of_power(p > 0 ? p - 1 : 0, a, b));
    stretch_.push_back(p == 0 ? 1 : cell_measure_[i] / side_measure_[i]);
    curvature_.push_back(p == 0 ? 0 : 1 / stretch_[i]);
    inv_cell_measure_.push_back(1 / cell_measure_[i]);
    inv_side_measure_.push_back(1 / side_measure_[i]);
  }
  for (int i = 0; i <= n; ++i) {
    face_measure_.push_back(std::pow(face_radius_[i], p));
    inv_face_measure_.push_back(1 / face_measure_[i]);
    const double below = i > 0 ? width_[i - 1] / 2 : 0, above = i < n ? width_[i] / 2 : 0;
    radial_distance_.push_back(below + above);
  }
}

/// With div(rho u) = 0 over the cell and one density rho_c along its sides,
///     V div u = A_o u_o (1 - rho_o/rho_c) - A_i u_i (1 - rho_i/rho_c).
void Geometry::set_density(const std::function<double(double depth)>& density) {
  const auto at = [&](double radius) { return density ? density(outer_radius() - radius) : 1.0; };
  for (int i = 0; i <= grid_.radial; ++i) {
    face_density_.push_back(at(face_radius_[i]));
    face_velocity_per_flow_.push_back(inv_face_measure_[i] / face_density_[i]);
  }
  for (int i = 0; i < grid_.radial; ++i) {
    const double here = at(cell_radius_[i]);
    cell_density_.push_back(here);
    side_velocity_per_flow_.push_back(inv_side_measure_[i] / here);
    const auto dilatation = [&](int face) {
      return face_measure_[face] * inv_cell_measure_[i] * (1 - face_density_[face] / here);
    };
    inner_dilatation_.push_back(dilatation(i));
    outer_dilatation_.push_back(dilatation(i + 1));
  }
}

void Geometry::set_lateral_metric() {
  const int n = grid_.lateral, pad = PaddedList::pad;
  const std::vector<double> faces =
      graded_faces(shell_.lateral_begin, shell_.lateral_end, n, grid_.lateral_grading);
  const double period = shell_.lateral_end - shell_.lateral_begin;
  for (PaddedList* list : {&face_lateral_, &side_lateral_, &inv_side_lateral_, &lateral_distance_})
    *list = PaddedList(n + 1);
  for (PaddedList* list : {&cell_lateral_, &lateral_width_, &inv_lateral_width_, &lateral_measure_,
                           &inv_lateral_measure_, &left_measure_, &right_measure_})
    *list = PaddedList(n);
  const int first = periodic() ? -pad : 0, last = periodic() ? n + pad : n;
  for (int j = first; j <= last; ++j) {
    const int turns = j < 0 ? -1 : (j > n ? 1 : 0);
    face_lateral_[j] = faces[static_cast<std::size_t>(j - turns * n)] + turns * period;
    side_lateral_[j] = side_factor(shell_.shape, face_lateral_[j]);
    inv_side_lateral_[j] = inverse_or_zero(side_lateral_[j]);
  }
  for (int j = first; j < last; ++j) {
    const double a = face_lateral_[j], b = face_lateral_[j + 1], middle = (a + b) / 2;
    cell_lateral_[j] = middle;
    lateral_width_[j] = b - a;
    inv_lateral_width_[j] = 1 / (b - a);
    lateral_measure_[j] = lateral_integral(shell_.shape, a, b);
    inv_lateral_measure_[j] = 1 / lateral_measure_[j];
    left_measure_[j] = lateral_integral(shell_.shape, a, middle);
    right_measure_[j] = lateral_integral(shell_.shape, middle, b);
  }
  for (int j = first; j <= last; ++j) {
    const double before = j > first ? lateral_width_[j - 1] / 2 : 0;
    const double behind = j < last ? lateral_width_[j] / 2 : 0;
    lateral_distance_[j] = before + behind;
  }
}

double Geometry::dual_volume(RadialFace f) const {
  const double below = f.i > 0 ? upper_measure_[f.i - 1] : 0;
  const double above = f.i < grid_.radial ? lower_measure_[f.i] : 0;
  return (below + above) * lateral_measure_[f.j];
}

double Geometry::dual_volume(LateralFace f) const {
  const bool has_left = periodic() || f.j > 0, has_right = periodic() || f.j < grid_.lateral;
  const double before = has_left ? right_measure_[f.j - 1] : 0;
  const double behind = has_right ? left_measure_[f.j] : 0;
  return cell_measure_[f.i] * (before + behind);
}

std::array<double, 2> Geometry::cartesian(double radius, double lateral) const {
  if (box()) return {lateral, radius};
  if (shell_.shape == Shape::AxisymmetricShell)
    return {radius * std::sin(lateral), radius * std::cos(lateral)};
  return {radius * std::cos(lateral), radius * std::sin(lateral)};
}

std::array<double, 2> Geometry::cartesian_vector(double radial, double along,
                                                 double lateral) const {
  if (box()) return {along, radial};
  const double c = std::cos(lateral), s = std::sin(lateral);
  if (shell_.shape == Shape::AxisymmetricShell)
    return {radial * s + along * c, radial * c - along * s};
  return {radial * c - along * s, radial * s + along * c};
}

double Geometry::conductive_heat_flow() const {
  const double a = inner_radius(), b = outer_radius();
  const int p = radial_power(shell_.shape);
  const double per_lateral_measure = p == 0 ? 1 : (p == 1 ? 1 / std::log(b / a) : a * b);
  return per_lateral_measure * total_lateral_measure_;
}

}  // namespace lidwright
