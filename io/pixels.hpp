#pragma once

#include <cstdint>
#include <vector>

#include "io/canvas.hpp"
#include "io/colour_map.hpp"

/// Images put on a page pixel by pixel.
namespace lidwright::plot {

std::uint32_t packed(const Colour&);

/// Rows of so many opaque pixels, each a unit wide and high, the first at the corner: sharp squares
/// however the page is scaled. The pixels are not needed afterwards.
void paint_pixels(Canvas&, std::vector<std::uint32_t>& pixels, int width, Place corner);

}  // namespace lidwright::plot
