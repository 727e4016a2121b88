#pragma once

#include <string>
#include <vector>

#include "io/canvas.hpp"
#include "io/plot_axis.hpp"

/// Curves in a frame with two labelled axes.
namespace lidwright::plot {

struct Curve {
  std::vector<double> x, y;
  Colour colour;
  std::string name;  ///< markup, shown above the frame; empty: not shown
  double width = 2;
};

struct Chart {
  std::string title;  ///< markup, above the frame
  Label x_label, y_label;
  Axis x, y;
  std::vector<Curve> curves;
  bool y_downwards = false;
  bool y_labels = true;  ///< false: a neighbour with the same axis has them
  double overhang = 30;  ///< how far labels below may reach past the frame's sides
  std::string note;      ///< instead of curves
};

/// Room that labels take outside the frame.
struct Margins {
  double left, top, right, bottom;
};
inline constexpr Margins chart_margins{72, 30, 14, 52};

/// Draws the chart with its frame (labels outside it).
void draw(Canvas&, const Chart&, const Frame&);

/// At most `most` points that look the same as all of them: the extremes of equal stretches of x.
Curve thinned(const Curve&, std::size_t most);

/// Colours of text and lines, shared by all parts of a picture.
inline constexpr Colour ink{0.13, 0.15, 0.19}, faint_ink{0.38, 0.41, 0.46},
    grid_ink{0.87, 0.88, 0.9};

}  // namespace lidwright::plot
