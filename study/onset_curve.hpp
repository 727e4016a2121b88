#pragma once

#include <functional>
#include <vector>

#include "solver/onset.hpp"
#include "study/error_bars.hpp"

/// The critical Rayleigh number: neutral ones of one lateral mode after the other
/// (solver/onset.hpp), each with the error bar of three grids, and the least of them.
namespace lidwright {

struct OnsetSettings {
  int first = 1;           ///< number of the first mode, >= 1
  int last = 0;            ///< of the last; 0: until the least Rayleigh number is passed safely
  bool error_bars = true;  ///< three grids, extrapolated; else the case's own grid, as it is
};

/// Rayleigh numbers of one mode.
struct OnsetPoint {
  Wave wave;
  std::vector<double> on_grids;  ///< from coarse to fine, the last is the case's own
  ErrorBar rayleigh;             ///< extrapolated; without error bars the value alone
};

struct OnsetCurve {
  std::vector<int> grids;          ///< radial cells, from coarse to fine
  std::vector<OnsetPoint> points;  ///< modes that can be neutral, by number
  int least = 0;                   ///< place in `points` of the least Rayleigh number
  bool bracketed = false;    ///< larger ones are known on both sides of it, or no mode is longer
  bool interrupted = false;  ///< the watcher said no
  NeutralShape shape;        ///< of the least one, on the case's own grid
};

/// Called after every mode with its number; false ends the search.
using OnsetWatcher = std::function<bool(int number)>;

/// Fewest radial cells of the coarsest grid.
inline constexpr int least_onset_cells = 8;

/// Radial cells of the grids: a quarter, a half and all of the case's, or its own alone.
std::vector<int> onset_grids(int radial_cells, bool error_bars);

/// Not collective. Throws SolveError when no mode asked for can be neutral at a positive Rayleigh
/// number, or when the numerics fail.
OnsetCurve onset_curve(const Model&, const OnsetSettings&, const OnsetWatcher&);

}  // namespace lidwright
