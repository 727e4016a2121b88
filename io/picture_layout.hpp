#pragma once

#include <vector>

#include "io/canvas.hpp"
#include "io/shell_map.hpp"

/// Where the parts of a picture stand on the page. Pure.
namespace lidwright {

/// Frames without the room for labels around them.
struct PictureLayout {
  plot::Frame shell, colour_bar;
  std::vector<plot::Frame> profiles;  ///< side by side, with one depth axis
  plot::Frame history;
};

inline constexpr double page_border = 40;

/// A wide shell stands above its charts, any other one beside them.
PictureLayout layout_for(const plot::Extent&, const plot::Frame& page, int profiles);

/// How many ticks an axis along the frame has room for.
int ticks_across(const plot::Frame&);
int ticks_upright(const plot::Frame&);

}  // namespace lidwright
