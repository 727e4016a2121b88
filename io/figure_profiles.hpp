#pragma once

#include <string>
#include <vector>

#include "io/figure_sheet.hpp"
#include "io/plot_chart.hpp"
#include "io/profile_charts.hpp"
#include "io/run_reader.hpp"

/// Temperature, rms velocity, viscosity and heat flow against depth: of one snapshot, with the lid
/// and the thermal boundary layers marked, or of several in graded colours.
namespace lidwright {

/// Where a march's history or a branch's table has the layers of a snapshot; nan where it has not.
/// In thicknesses, from the wall that they lie at.
struct Layers {
  double lid, outer, inner;
};
Layers layers_at(const SavedRun&, std::size_t snapshot);

/// Charts side by side. `snapshots` rise. Throws InputError: no such snapshot, or a damaged table.
std::vector<plot::Chart> profile_panels(const SavedRun&, const std::vector<std::size_t>& snapshots,
                                        int ticks_across, int ticks_upright);

/// Bytes of the figure's file. Of more than eight snapshots, eight evenly chosen are drawn. Throws
/// InputError as above, and for the fields of an onset, whose means are 0.
std::string profiles_figure(const SavedRun&, const std::vector<std::size_t>& snapshots,
                            const FigureStyle&);

}  // namespace lidwright
