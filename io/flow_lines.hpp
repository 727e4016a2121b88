#pragma once

#include <vector>

#include "io/shell_lines.hpp"

/// The flow in a shell: lines of equal steps of the stream function, so that the same flux passes
/// between neighbours, and arrows.
namespace lidwright::plot {

/// A few lines of flow, dark on light and light on dark ground. Numbers at corners; those in the
/// cells and their range are what the ground shows.
void draw_flow_lines(Canvas&, const ShellMap&, const std::vector<double>& stream_function,
                     const std::vector<double>& cells, const Interval& range);

/// Velocity at cell middles, by its components.
struct Flow {
  const std::vector<double>&radial, &lateral;
};

/// The same lines with heads that say which way they are followed.
void draw_directed_flow_lines(Canvas&, const ShellMap&, const std::vector<double>& stream_function,
                              const Flow&, const std::vector<double>& cells, const Interval& range);

/// Arrows at even distances on the page, none where there is hardly any flow.
void draw_arrows(Canvas&, const ShellMap&, const Flow&, const std::vector<double>& cells,
                 const Interval& range);
/// Units of the page per speed, of those arrows; 0 where nothing flows. All but the fastest cells
/// of a hundred have arrows of this length at most.
inline constexpr double usual_arrow = 38;
double arrow_scale(const Flow&);
/// From a place onwards.
void draw_arrow(Canvas&, Place from, double dx, double dy, Tone = Tone::Ink);

}  // namespace lidwright::plot
