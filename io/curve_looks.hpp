#pragma once

#include <cstddef>
#include <vector>

#include "io/colour_map.hpp"

/// How curves of one chart are told apart: by colour and, for whoever sees or prints no colours, by
/// lightness, by the pattern of the line and by symbols.
namespace lidwright::plot {

enum class Pattern { Solid, Dashed, Dotted, DashDotted };
enum class Symbol { None, Dot, Ring, Square, Diamond, ArrowHead };

/// Colours that repeat after so many curves.
inline constexpr std::size_t curve_colours = 4;

/// Colour of curve k: made in OKLab (io/colour_map.hpp), with steps of lightness between all, and
/// bluish and yellowish ones in turn, which dichromats tell apart too. All stand out from white.
Colour curve_colour(std::size_t k);

/// Of the k-th of `count` curves that are the same thing at several times: along the colour map,
/// without its lightest part.
Colour graded_colour(std::size_t k, std::size_t count);

/// Lengths of dashes and gaps in turn of a line of that width; empty: solid.
std::vector<double> dashes(Pattern, double width);

}  // namespace lidwright::plot
