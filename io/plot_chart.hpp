#pragma once

#include <string>
#include <vector>

#include "io/canvas.hpp"
#include "io/curve_looks.hpp"
#include "io/plot_axis.hpp"

/// Curves in a frame with two labelled axes.
namespace lidwright::plot {

/// Values that are not finite break it.
struct Curve {
  std::vector<double> x, y;
  Colour colour;
  std::string name;  ///< markup, shown above the frame; empty: not shown
  double width = 2;
  Pattern pattern = Pattern::Solid;
};

/// A stretch of an axis with a ground of its own, below the curves.
struct Band {
  Interval range;
  Colour colour;
  double opacity = 1;
};

/// A line across the frame at one value.
struct Level {
  double value;
  Colour colour;
  Pattern pattern = Pattern::Dashed;
  double width = 1.5;
};

struct Chart {
  std::string title;  ///< markup, above the frame
  Label x_label, y_label;
  Axis x, y;
  std::vector<Curve> curves;
  bool y_downwards = false;
  bool y_labels = true;   ///< false: a neighbour with the same axis has them
  double overhang = 30;   ///< how far labels below may reach past the frame's sides
  std::string note = {};  ///< markup, instead of curves
  bool x_labels = true;   ///< false: the chart below has them
  std::vector<Band> x_bands = {}, y_bands = {};
  std::vector<Level> y_levels = {};
};

/// Room that labels take outside the frame.
struct Margins {
  double left, top, right, bottom;
};
inline constexpr Margins chart_margins{72, 30, 14, 52};

/// Draws the chart with its frame (labels outside it).
void draw(Canvas&, const Chart&, const Frame&);

/// Where a point of the chart stands on the page.
Place on_page(const Chart&, const Frame&, double x, double y);

/// At most `most` points that look the same as all of them: the extremes of equal stretches of x,
/// and where it breaks.
Curve thinned(const Curve&, std::size_t most);

/// The width that the labels of the y axis take.
double width_of_labels(Canvas&, const Axis&);

/// Colours of text and lines, shared by all parts of a picture.
inline constexpr Colour ink{0.13, 0.15, 0.19}, faint_ink{0.38, 0.41, 0.46},
    grid_ink{0.87, 0.88, 0.9};

}  // namespace lidwright::plot
