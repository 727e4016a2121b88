#include "io/shell_map.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

#include "io/contours.hpp"
#include "io/field_raster.hpp"
#include "io/plot_chart.hpp"

namespace lidwright::plot {
namespace {

using std::numbers::pi;

/// Corner radius and lateral coordinate at fractions of an index.
double radius_at(const Geometry& g, double i) {
  const int k = std::min(static_cast<int>(i), g.radial_cells() - 1);
  return g.face_radius(k) + (i - k) * (g.face_radius(k + 1) - g.face_radius(k));
}
double lateral_at(const Geometry& g, double j) {
  const int k = std::min(static_cast<int>(j), g.lateral_cells() - 1);
  return g.face_lateral(k) + (j - k) * (g.face_lateral(k + 1) - g.face_lateral(k));
}

/// With the first column once more at the end of a full circle.
std::vector<double> closed(const Geometry& g, std::vector<double> corners) {
  const auto rows = static_cast<std::size_t>(g.radial_cells()) + 1;
  if (g.periodic())
    for (std::size_t i = 0; i < rows; ++i) corners.push_back(corners[i]);
  return corners;
}

/// So that pieces of a line are some pixels long, however fine the grid.
int stride_for(const ShellMap& map) {
  const double cell = map.units_per_thickness() / map.geometry().radial_cells();
  return std::clamp(static_cast<int>(3 / cell), 1, 8);
}

double share_of(const Interval& range, double value) {
  return range.empty() ? 0.5 : (value - range.low) / (range.high - range.low);
}

/// Levels between the extremes, none of them 0: walls are lines of flow already.
std::vector<double> flow_levels(const Interval& psi) {
  constexpr int lines = 11;
  const double step = (psi.high - psi.low) / lines;
  std::vector<double> levels;
  const double air = 0.2 * step;  // no specks around an extreme
  for (double k = std::floor(psi.low / step) + 0.5; k * step < psi.high - air; ++k)
    if (k * step > psi.low + air) levels.push_back(k * step);
  return levels;
}

void add(Canvas& canvas, Place p, Place q) {
  cairo_move_to(canvas.context(), p.x, p.y);
  cairo_line_to(canvas.context(), q.x, q.y);
}

}  // namespace

Extent extent_of(const Geometry& g) {
  constexpr int samples = 720;
  const Shell& s = g.shell();
  const auto at = [&](double radius, int k) {
    return g.cartesian(radius, s.lateral_begin + k * (s.lateral_end - s.lateral_begin) / samples);
  };
  const auto start = at(g.outer_radius(), 0);
  Extent e{{start[0], start[0]}, {start[1], start[1]}};
  for (const double radius : {g.inner_radius(), g.outer_radius()})
    for (int k = 0; k <= samples; ++k) {
      const auto p = at(radius, k);
      e.x.include(p[0]);
      e.y.include(p[1]);
    }
  return e;
}

ShellMap::ShellMap(const Geometry& g, const Frame& f)
    : geometry_(g),
      extent_(extent_of(g)),
      scale_(std::min(f.width / extent_.width(), f.height / extent_.height())),
      frame_{f.middle().x - scale_ * extent_.width() / 2,
             f.middle().y - scale_ * extent_.height() / 2, scale_ * extent_.width(),
             scale_ * extent_.height()} {}

Place ShellMap::on_page(double radius, double lateral) const {
  const auto [x, y] = geometry_.cartesian(radius, lateral);
  return {frame_.left + scale_ * (x - extent_.x.low),
          frame_.bottom() - scale_ * (y - extent_.y.low)};
}

ShellPlace ShellMap::in_shell(Place p) const {
  const Shell& s = geometry_.shell();
  const double x = extent_.x.low + (p.x - frame_.left) / scale_;
  const double y = extent_.y.low + (frame_.bottom() - p.y) / scale_;
  if (geometry_.box())
    return {std::clamp(y, geometry_.inner_radius(), geometry_.outer_radius()),
            std::clamp(x, s.lateral_begin, s.lateral_end)};
  const double angle = s.shape == Shape::AxisymmetricShell ? std::atan2(x, y) : std::atan2(y, x);
  const double middle = (s.lateral_begin + s.lateral_end) / 2;
  const double lateral = middle + std::remainder(angle - middle, 2 * pi);
  return {std::clamp(std::sqrt(x * x + y * y), geometry_.inner_radius(), geometry_.outer_radius()),
          std::clamp(lateral, s.lateral_begin, s.lateral_end)};
}

bool ShellMap::near(Place p, double margin) const {
  if (geometry_.box()) return true;
  const Place centre = centre_on_page();
  const double radius = std::hypot(p.x - centre.x, p.y - centre.y);
  return radius > scale_ * geometry_.inner_radius() - margin &&
         radius < scale_ * geometry_.outer_radius() + margin;
}

Place ShellMap::centre_on_page() const {
  return {frame_.left - scale_ * extent_.x.low, frame_.bottom() + scale_ * extent_.y.low};
}

/// Cairo's angle: from x towards the bottom of the page.
double ShellMap::page_angle(double lateral) const {
  return geometry_.shell().shape == Shape::AxisymmetricShell ? lateral - pi / 2 : -lateral;
}

void ShellMap::trace_arc(Canvas& canvas, double radius, double from, double to) const {
  const Place centre = centre_on_page();
  const double begin = page_angle(from), end = page_angle(to);
  (end > begin ? cairo_arc : cairo_arc_negative)(canvas.context(), centre.x, centre.y,
                                                 scale_ * radius, begin, end);
}

void ShellMap::trace_outline(Canvas& canvas) const {
  const Shell& s = geometry_.shell();
  cairo_t* cr = canvas.context();
  cairo_new_path(cr);
  if (geometry_.box()) {
    cairo_rectangle(cr, frame_.left, frame_.top, frame_.width, frame_.height);
    return;
  }
  trace_arc(canvas, geometry_.outer_radius(), s.lateral_begin, s.lateral_end);
  if (geometry_.periodic()) {
    cairo_close_path(cr);
    cairo_new_sub_path(cr);
  }
  trace_arc(canvas, geometry_.inner_radius(), s.lateral_end, s.lateral_begin);
  cairo_close_path(cr);
}

void draw_flow_lines(Canvas& canvas, const ShellMap& map,
                     const std::vector<double>& stream_function, const std::vector<double>& cells,
                     const Interval& range) {
  const Geometry& g = map.geometry();
  const Interval psi = range_of(stream_function);
  if (psi.empty()) return;
  const std::vector<double> corners = closed(g, stream_function);
  const Lattice lattice{g.radial_cells() + 1, g.lateral_cells() + 1, corners};
  const CellReader temperature(g, cells);
  for (const bool on_dark : {false, true}) {
    for (const double level : flow_levels(psi))
      for (const Segment& s : contour(lattice, level, stride_for(map))) {
        const ShellPlace p{radius_at(g, s[0][0]), lateral_at(g, s[0][1])};
        if ((share_of(range, temperature(p.radius, p.lateral)) < 0.5) != on_dark) continue;
        add(canvas, map.on_page(p.radius, p.lateral),
            map.on_page(radius_at(g, s[1][0]), lateral_at(g, s[1][1])));
      }
    canvas.stroke({on_dark ? Colour{1, 1, 1} : Colour{0.1, 0.1, 0.15}, 0.9, 0.55});
  }
}

void draw_outline(Canvas& canvas, const ShellMap& map) {
  map.trace_outline(canvas);
  canvas.stroke({ink, 1.2});
}

void draw_colour_bar(Canvas& canvas, const Axis& axis, const Label& label, const Frame& f) {
  for (int y = 0; y < static_cast<int>(f.height); ++y)
    canvas.line({{f.left, f.bottom() - y - 0.5}, {f.right(), f.bottom() - y - 0.5}},
                {colour_at((y + 0.5) / f.height), 1});
  canvas.frame({f.left + 0.5, f.top + 0.5, f.width, f.height}, {faint_ink, 1});
  for (const Tick& t : axis.ticks) {
    const double y = std::round(f.bottom() - f.height * axis.place(t.value)) + 0.5;
    canvas.line({{f.right(), y}, {f.right() + 5, y}}, {faint_ink, 1});
    canvas.text(t.label, {f.right() + 9, y}, {0, 0.5}, {14, faint_ink});
  }
  canvas.upright_text(written(label, axis), {f.left - 16, f.middle().y}, {15, ink});
}

}  // namespace lidwright::plot
