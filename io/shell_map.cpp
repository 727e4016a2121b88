#include "io/shell_map.hpp"

#include <algorithm>
#include <cmath>
#include <numbers>

#include "io/plot_chart.hpp"

namespace lidwright::plot {
namespace {

using std::numbers::pi;

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

void draw_outline(Canvas& canvas, const ShellMap& map) {
  map.trace_outline(canvas);
  canvas.stroke({ink, 1.2});
}

}  // namespace lidwright::plot
