#pragma once

#include <vector>

#include "io/canvas.hpp"
#include "io/shell_map.hpp"

/// Lines of equal value in a shell. Over the seam of a full circle they go on.
namespace lidwright::plot {

using ShellLine = std::vector<ShellPlace>;

/// Numbers at corners, column by column, radial index fastest; on a periodic shell without the
/// column that comes again. `stride`: only every so many corners are looked at.
std::vector<ShellLine> contour_lines(const Geometry&, const std::vector<double>& corners,
                                     double level, int stride = 1);

/// So that pieces of a line are a few units long, however fine the grid.
int stride_for(const ShellMap&);

/// Numbers in cells as numbers at corners: the mean of the up to four cells around each.
std::vector<double> corner_means(const Geometry&, const std::vector<double>& cells);

std::vector<Place> on_page(const ShellMap&, const ShellLine&);

/// Ink on light ground, white on dark.
enum class Tone { Ink, White };
Colour colour_of(Tone);
Tone opposite(Tone);

/// A line with a rim of the other tone, to be seen on any ground.
void rimmed_line(Canvas&, const std::vector<Place>&, double width, Tone = Tone::Ink);

/// The place along a line at a distance from its begin, and the direction there (of length 1).
struct Along {
  Place place;
  double dx, dy;
};
double length_of(const std::vector<Place>&);
Along along(const std::vector<Place>&, double distance);

}  // namespace lidwright::plot
