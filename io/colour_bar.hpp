#pragma once

#include "io/canvas.hpp"
#include "io/colour_map.hpp"
#include "io/plot_axis.hpp"

/// What the colours of a field mean.
namespace lidwright::plot {

struct ColourBar {
  Axis axis;
  Label label;
  ColourMap colours = ColourMap::Warm;
  bool values_below = false, values_above = false;  ///< the range is passed: that end is pointed
};

/// The axis to the right, the title read upwards to the left.
void draw_upright_bar(Canvas&, const ColourBar&, const Frame&);
/// The axis and the title below.
void draw_level_bar(Canvas&, const ColourBar&, const Frame&);

/// Room beside the frame: for the title on the left, and for numbers on the right.
inline constexpr double bar_title_room = 28, bar_tick_gap = 9;
double bar_tick_room(Canvas& ruler, const Axis&);
/// Room below a level bar.
inline constexpr double level_bar_room = 44;

}  // namespace lidwright::plot
