#pragma once

#include <string>

#include "io/figure_sheet.hpp"
#include "io/run_reader.hpp"
#include "study/onset_curve.hpp"

/// The neutral Rayleigh numbers of lateral modes with their error bars, the least one marked.
namespace lidwright {

/// Bytes of the figure's file. `title`: plain text.
std::string onset_figure(const OnsetCurve&, const std::string& title, const FigureStyle&);
/// Of a run's onset.csv. Throws InputError: it has none, or a damaged one.
std::string onset_figure(const SavedRun&, const FigureStyle&);

}  // namespace lidwright
