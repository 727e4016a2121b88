#pragma once

#include <string>
#include <vector>

#include "io/figure_sheet.hpp"
#include "io/plot_chart.hpp"
#include "io/run_reader.hpp"

/// Columns of a run's history against time, one panel each: the start-up that statistics leave out
/// is shaded, the mean of the rest is a line in a band of its 95 % error.
namespace lidwright {

struct HistoryOptions {
  std::vector<std::string> columns;  ///< empty: heat flow, velocity and what the lid does
  bool logarithmic = false;
};

struct HistoryPanel {
  plot::Chart chart;  ///< with all points; ticks and thinning are for the page's layout
  std::string mean;   ///< markup: the mean with its error, or why there is none
};

/// What the panels show. `ticks`: most on the axis of values. Throws InputError: the run has no
/// history, no rows yet, or no such column.
std::vector<HistoryPanel> history_panels(const SavedRun&, const HistoryOptions&, int ticks);

/// Bytes of the figure's file. Throws InputError as above and when the panels do not fit a slide.
std::string history_figure(const SavedRun&, const HistoryOptions&, const FigureStyle&);

}  // namespace lidwright
