#pragma once

#include <vector>

#include "io/canvas.hpp"
#include "io/plot_axis.hpp"
#include "mesh/geometry.hpp"

/// A shell on a page, in its true proportions: x to the right, y (or the axis of symmetry) upwards.
namespace lidwright::plot {

/// The smallest upright rectangle around a shell, in its own coordinates.
struct Extent {
  Interval x, y;
  double width() const { return x.high - x.low; }
  double height() const { return y.high - y.low; }
};
Extent extent_of(const Geometry&);

struct ShellPlace {
  double radius, lateral;
};

class ShellMap {
 public:
  /// As large as fits into the frame, in its middle.
  ShellMap(const Geometry&, const Frame&);

  Place on_page(double radius, double lateral) const;
  /// The reverse, moved to the nearest place within the shell.
  ShellPlace in_shell(Place) const;
  /// Neither in the hole of the shell nor beyond its outer wall by more than the margin.
  bool near(Place, double margin) const;
  /// The rectangle that the shell fills.
  Frame frame() const { return frame_; }
  double units_per_thickness() const { return scale_; }
  const Geometry& geometry() const { return geometry_; }

  /// The outline as the canvas's path, to be clipped to (even-odd) or stroked.
  void trace_outline(Canvas&) const;

 private:
  Place centre_on_page() const;
  double page_angle(double lateral) const;
  void trace_arc(Canvas&, double radius, double from, double to) const;

  const Geometry& geometry_;
  Extent extent_;
  double scale_;
  Frame frame_;
};

void draw_outline(Canvas&, const ShellMap&);

}  // namespace lidwright::plot
