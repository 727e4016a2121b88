#include "study/onset_curve.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <numbers>

#include "solver/solve_error.hpp"

namespace lidwright {
namespace {

/// The search ends when a mode's Rayleigh number is this many times the least one ...
constexpr double safely_above = 3;
/// ... or when this many modes in a row cannot be neutral.
constexpr int most_without = 12;
/// Radial cells that the finest grid must have to half a wave.
constexpr double least_cells_in_half_wave = 4;
/// Share of a Rayleigh number that its eigenvalue leaves uncertain.
constexpr double eigenvalue_error = 1e-8;

ErrorBar alone(double value) {
  ErrorBar bar;
  bar.value = value;
  return bar;
}

class Search {
 public:
  Search(const Model& model, const OnsetSettings& settings) : model_(model), settings_(settings) {
    curve_.grids = onset_grids(model.grid.radial, settings.error_bars);
    for (const int cells : curve_.grids) grids_.emplace_back(model, cells);
  }
  OnsetCurve run(const OnsetWatcher& go_on);

 private:
  void add(int number);
  bool passed(int number) const;
  bool resolved(int number) const;
  bool wanted(int number) const;
  double least() const {
    return curve_.points[static_cast<std::size_t>(curve_.least)].rayleigh.value;
  }
  void finish();

  const Model& model_;
  const OnsetSettings& settings_;
  std::vector<NeutralModes> grids_;
  OnsetCurve curve_;
  int without_ = 0;
};

/// The mode's Rayleigh numbers on all grids, where it has them.
void Search::add(int number) {
  OnsetPoint point;
  for (NeutralModes& grid : grids_) {
    const auto shape = grid(number);
    if (!shape) {
      ++without_;
      return;
    }
    point.on_grids.push_back(shape->rayleigh);
  }
  without_ = 0;
  point.wave = wave_of(model_.shell, number);
  const double finest = point.on_grids.back();
  point.rayleigh =
      settings_.error_bars ? error_bar(point.on_grids, eigenvalue_error * finest) : alone(finest);
  curve_.points.push_back(std::move(point));
  if (curve_.points.back().rayleigh.value < least())
    curve_.least = static_cast<int>(curve_.points.size()) - 1;
}

bool Search::passed(int number) const {
  if (curve_.points.empty()) return without_ >= most_without;
  const OnsetPoint& last = curve_.points.back();
  return without_ >= most_without ||
         (last.wave.number == number && last.rayleigh.value > safely_above * least());
}

bool Search::resolved(int number) const {
  const double half_wave = std::numbers::pi / wave_of(model_.shell, number).wavenumber;
  return half_wave * model_.grid.radial >= least_cells_in_half_wave;
}

bool Search::wanted(int number) const {
  if (!resolved(number)) return false;
  if (settings_.last > 0) return number <= settings_.last;
  return number == settings_.first || !passed(number - 1);
}

void Search::finish() {
  if (curve_.points.empty() && curve_.interrupted)
    throw SolveError("interrupted before any mode was found; nothing was written");
  if (curve_.points.empty() && !resolved(settings_.first))
    throw SolveError(
        fmt::format("half a wave of mode {} is less than {} radial cells: take a lower mode, or "
                    "raise grid.radial",
                    settings_.first, least_cells_in_half_wave));
  if (curve_.points.empty())
    throw SolveError(fmt::format(
        "no Rayleigh number above 0 lets a disturbance of mode {} or more grow: at rest this shell "
        "is nowhere denser above than below, or not beyond its adiabat. Heat it from below or "
        "within, and cool it from above",
        settings_.first));
  const auto [first, last] = std::pair(curve_.points.front(), curve_.points.back());
  const int least_number = curve_.points[static_cast<std::size_t>(curve_.least)].wave.number;
  curve_.bracketed =
      last.wave.number > least_number && (least_number == 1 || first.wave.number < least_number);
  curve_.shape = NeutralModes(model_, model_.grid.radial)(least_number).value();
}

OnsetCurve Search::run(const OnsetWatcher& go_on) {
  for (int number = settings_.first; wanted(number); ++number) {
    add(number);
    if (!go_on(number)) {
      curve_.interrupted = true;
      break;
    }
  }
  finish();
  return std::move(curve_);
}

}  // namespace

/// The finest is the case's own where four divides it.
std::vector<int> onset_grids(int radial_cells, bool error_bars) {
  if (!error_bars) return {radial_cells};
  const int quarter = radial_cells / 4;
  return {quarter, 2 * quarter, 4 * quarter};
}

OnsetCurve onset_curve(const Model& model, const OnsetSettings& settings,
                       const OnsetWatcher& go_on) {
  return Search(model, settings).run(go_on);
}

}  // namespace lidwright
