#pragma once

#include <string>
#include <vector>

#include "io/picture.hpp"
#include "io/shell_lines.hpp"

/// Lines over a field that temperature draws: isotherms and the lid's base.
namespace lidwright::plot {

/// Round temperatures between the extremes, in the units shown.
Axis isotherm_levels(const std::vector<double>& temperature, const Shown& units);

struct PlacedText {
  std::string text;
  Place middle;
};

/// Draws the lines; returns the number of each at one place, away from the others', to be drawn
/// over all else and not cut off at the walls.
std::vector<PlacedText> draw_isotherms(Canvas&, const ShellMap&,
                                       const std::vector<double>& temperature, const Shown& units);
void draw_labels(Canvas&, const std::vector<PlacedText>&);

/// Depth below the outer wall at which the temperature of a column first reaches a level, for each
/// column; not a number where it never does, 0 where the outer cell is as hot.
std::vector<double> depths_of(const Geometry&, const std::vector<double>& temperature,
                              double level);

/// A broken line at those depths.
void draw_lid(Canvas&, const ShellMap&, const std::vector<double>& depths);
void broken_line(Canvas&, const std::vector<Place>&);

}  // namespace lidwright::plot
