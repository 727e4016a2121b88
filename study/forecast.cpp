#include "study/forecast.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

namespace lidwright {
namespace {

/// A pilot's step was held back by the flow if it was so near to what the flow allowed.
constexpr double nearly = 0.98;

/// The pilot's steps, turned into steps of the case's grid.
struct Stretch {
  double time = 0, steps = 0, applications = 0, factorisations = 0;
  std::array<double, 3> by_bound{};
  void add(const Stretch& other, double weight) {
    time += weight * other.time;
    steps += weight * other.steps;
    applications += weight * other.applications;
    factorisations += weight * other.factorisations;
    for (std::size_t k = 0; k < by_bound.size(); ++k) by_bound[k] += weight * other.by_bound[k];
  }
};

struct Bounded {
  double length;
  StepBound bound;
};

/// A step of the case's grid at the time of a pilot's. Where the pilot's was not as long as flow
/// and settings allowed, accuracy held it, which does not depend on the grid.
Bounded bounded(const PilotStep& pilot, double outflow_ratio, const HeatSettings& heat) {
  const double by_pilots_flow =
      pilot.outflow > 0 ? heat.courant / pilot.outflow : std::numeric_limits<double>::infinity();
  const bool free = pilot.length >= nearly * std::min(by_pilots_flow, heat.largest_step);
  Bounded b{heat.largest_step, StepBound::Largest};
  if (by_pilots_flow / outflow_ratio < b.length)
    b = {by_pilots_flow / outflow_ratio, StepBound::Flow};
  if (!free && pilot.length < b.length) b = {pilot.length, StepBound::Accuracy};
  return b;
}

Stretch stretch(const PilotStep& pilot, double outflow_ratio, const HeatSettings& heat) {
  const Bounded b = bounded(pilot, outflow_ratio, heat);
  Stretch s;
  s.time = pilot.length;
  s.steps = pilot.length / b.length;
  s.applications = static_cast<double>(pilot.applications) * s.steps;
  s.factorisations = static_cast<double>(pilot.factorisations);
  s.by_bound[static_cast<std::size_t>(b.bound)] = s.steps;
  return s;
}

/// From a share of the pilot's time on.
Stretch sum_from(const Pilot& pilot, double share, double ratio, const HeatSettings& heat) {
  Stretch sum;
  const double from = share * pilot.steps.back().time;
  for (const PilotStep& step : pilot.steps)
    if (step.time > from) sum.add(stretch(step, ratio, heat), 1);
  return sum;
}

/// Number of writings in some time or steps, first and last included.
double writings(double whole, double every) {
  return every > 0 ? 1 + std::ceil(whole / every * (1 - 1e-9)) : 2;
}

/// Steps more like those there are, since one ends at each snapshot; the first and the last cost
/// none.
Stretch cut_short(const Stretch& all, double whole, double snapshot_every) {
  Stretch more;
  more.steps = std::max(0.0, writings(whole, snapshot_every) - 2);
  more.applications = more.steps * all.applications / all.steps;
  return more;
}

double outflow_ratio(const Pilot& pilot, const Trial& trial) {
  const double last = pilot.steps.back().outflow;
  return last > 0 && trial.outflow > 0 ? trial.outflow / last : 1;
}

}  // namespace

double first_guess_of_step(const Pilot& pilot, const Grid& grid, const HeatSettings& heat) {
  if (pilot.steps.empty()) return heat.first_step;
  const double ratio = static_cast<double>(grid.radial) / pilot.grid.radial;
  return bounded(pilot.steps.back(), ratio, heat).length;
}

Forecast forecast(const Pilot& pilot, const Trial& trial, const HeatSettings& heat,
                  const MarchSettings& march, const OutputPlan& plan, bool nonlinear) {
  Forecast f;
  if (pilot.steps.empty()) return f;
  const double ratio = outflow_ratio(pilot, trial), seen = pilot.steps.back().time;
  const Stretch late = sum_from(pilot, 0.5, ratio, heat);
  Stretch all = sum_from(pilot, 0, ratio, heat);
  f.covered = pilot.ended;
  f.covered_share = std::min(1.0, seen / march.end_time);
  f.end_time = pilot.ended ? seen : march.end_time;
  f.step_length = late.time / late.steps;
  f.bound = static_cast<StepBound>(std::max_element(late.by_bound.begin(), late.by_bound.end()) -
                                   late.by_bound.begin());
  if (!pilot.ended) all.add(late, (march.end_time - seen) / late.time);
  all.add(cut_short(all, f.end_time, plan.snapshot_every), 1);
  if (march.most_steps > 0 && all.steps > static_cast<double>(march.most_steps)) {
    const double share = static_cast<double>(march.most_steps) / all.steps;
    Stretch part;
    part.add(all, share);
    all = part;
    f.end_time *= share;
  }
  f.snapshots = writings(f.end_time, plan.snapshot_every);
  f.steps = all.steps;
  f.checkpoints = writings(f.steps, static_cast<double>(plan.checkpoint_every));
  // The trial's number of applications belongs to the pilot's late ones; others go with the
  // pilot's.
  const double late_mean = late.applications / late.steps, mean = all.applications / all.steps;
  const double busier = late_mean > 0 ? mean / late_mean : 1;
  f.setup = trial.setup;
  f.stepping = f.steps * trial.step * (nonlinear ? busier : 1) +
               f.steps / static_cast<double>(plan.history_every) * trial.row;
  f.substitution = f.steps * trial.applications * busier * trial.application;
  f.factorisations = all.factorisations;
  f.factorising = all.factorisations * trial.factorisation;
  f.writing = f.snapshots * (trial.snapshot + plan.snapshot_seconds) +
              f.checkpoints * plan.checkpoint_seconds;
  return f;
}

}  // namespace lidwright
