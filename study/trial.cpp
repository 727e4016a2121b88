#include "study/trial.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <chrono>
#include <cmath>
#include <ctime>

#include "solver/found.hpp"

namespace lidwright {

double processor_time() {
  timespec t{};
  clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t);
  return static_cast<double>(t.tv_sec) + 1e-9 * static_cast<double>(t.tv_nsec);
}

namespace {

using Clock = std::chrono::steady_clock;

double seconds_since(Clock::time_point t) {
  return std::chrono::duration<double>(Clock::now() - t).count();
}

/// Both clocks since it was made.
struct Watch {
  Clock::time_point wall = Clock::now();
  double processor = processor_time();
  double spent() const { return processor_time() - processor; }
};

int coarsened(int cells, double ratio) {
  return std::max(8, static_cast<int>(std::lround(cells * ratio)));
}

/// A pilot's time by the clock over its processor time, at most.
constexpr double crowded = 1.5;
/// Every so many steps of a pilot a row is taken.
constexpr int row_every = 5;

PilotRow row_of(const March& march) {
  const HistoryRow r = march.row();
  return {r.time, r.nusselt_outer, r.velocity_rms, r.mobility};
}

/// The first rank's clock counts.
bool time_left(MPI_Comm comm, const Watch& watch, double seconds) {
  int left = seconds_since(watch.wall) < seconds ? 1 : 0;
  MPI_Bcast(&left, 1, MPI_INT, 0, comm);
  return left != 0;
}

/// Steps that a solve needs until its former flows help.
constexpr int warm_up = 5;
constexpr int most_measured = 400;

/// The march on the case's own grid, and what its parts take.
class Measuring {
 public:
  Measuring(March& march, double end) : march_(march), end_(end) {}
  void warm() {
    for (int k = 0; k < warm_up; ++k) march_.step(end_);
  }
  void step() {
    const Factor& factor = march_.flow().factor();
    const long applications = march_.flow().applications();
    const long factorisations = march_.flow().factorisations();
    const double applying = factor.seconds_applying(), making = factor.seconds_factorising();
    march_.step(end_);
    ++steps_;
    applications_ += march_.flow().applications() - applications;
    factorisations_ += march_.flow().factorisations() - factorisations;
    applying_ += factor.seconds_applying() - applying;
    making_ += factor.seconds_factorising() - making;
  }
  int steps() const { return steps_; }
  void put(Trial& t, double wall, double processor) const;

 private:
  March& march_;
  double end_;
  int steps_ = 0;
  long applications_ = 0, factorisations_ = 0;
  double applying_ = 0, making_ = 0;
};

/// The factor's own clocks show wall time: brought down as the whole is.
void Measuring::put(Trial& t, double wall, double processor) const {
  const double share = processor / wall, steps = std::max(steps_, 1);
  t.steps = steps_;
  t.crowding = wall / processor;
  t.applications = static_cast<double>(applications_) / steps;
  t.application = share * applying_ / static_cast<double>(std::max(applications_, 1L));
  t.step = std::max(0.0, processor - share * (applying_ + making_)) / steps;
}

template <class Action>
double cost_of(Action&& action) {
  const Watch watch;
  action();
  return watch.spent();
}

void take_slowest(MPI_Comm comm, Trial& t) {
  for (double* x :
       {&t.setup, &t.step, &t.application, &t.factorisation, &t.row, &t.snapshot, &t.crowding})
    MPI_Allreduce(MPI_IN_PLACE, x, 1, MPI_DOUBLE, MPI_MAX, comm);
}

}  // namespace

Grid pilot_grid(const Grid& grid) {
  Grid coarse = grid;
  if (grid.radial <= pilot_radial_cells) return coarse;
  coarse.radial = pilot_radial_cells;
  coarse.lateral = coarsened(grid.lateral, pilot_radial_cells / static_cast<double>(grid.radial));
  return coarse;
}

PilotRow late_mean(const Pilot& p) {
  PilotRow sum{p.rows.back().time, 0, 0, 0};
  double count = 0;
  for (const PilotRow& r : p.rows) {
    if (r.time < sum.time / 2) continue;
    sum.nusselt_outer += r.nusselt_outer;
    sum.velocity_rms += r.velocity_rms;
    sum.mobility += r.mobility;
    ++count;
  }
  return {sum.time, sum.nusselt_outer / count, sum.velocity_rms / count, sum.mobility / count};
}

Pilot run_pilot(const MarchInputs& in, const StoredTemperature& start, double seconds,
                const TrialWatch& watch) {
  const Watch begin;
  Pilot pilot;
  Model model = in.model;
  model.grid = pilot.grid = pilot_grid(in.model.grid);
  March march(model, in.initial, start, in.flow, in.heat, MPI_COMM_SELF);
  pilot.rows.push_back(row_of(march));
  const auto time_is_left = [&] {
    return begin.spent() < seconds && seconds_since(begin.wall) < crowded * seconds;
  };
  while (!pilot.ended && time_is_left()) {
    const double outflow = march.heat().outflow_rate(march.stream_function()),
                 before = march.time();
    const long applications = march.flow().applications(), made = march.flow().factorisations();
    march.step(in.march.end_time);
    pilot.steps.push_back({march.time(), march.time() - before, outflow,
                           march.flow().applications() - applications,
                           march.flow().factorisations() - made});
    if (march.steps() % row_every == 0) pilot.rows.push_back(row_of(march));
    pilot.ended = march.time() >= in.march.end_time ||
                  (in.march.steady > 0 && march.temperature_change_rate() < in.march.steady);
    watch(fmt::format("coarse pilot: {:.0f} % of the march's time",
                      100 * march.time() / in.march.end_time));
  }
  pilot.rows.push_back(row_of(march));
  pilot.last = stored(march.temperature());
  return pilot;
}

Trial run_trial(const MarchInputs& in, const StoredTemperature& start, double step, double seconds,
                bool with_stress, MPI_Comm comm, const TrialWatch& watch) {
  Trial trial;
  HeatSettings heat = in.heat;
  heat.first_step = std::max(step, 1e-300);
  const Watch begin;
  watch("the case's own grid: first flow");
  March march(in.model, {}, start, in.flow, heat, comm);
  trial.setup = begin.spent();
  trial.factorisation = march.flow().factor().seconds_factorising() /
                        static_cast<double>(std::max(1L, march.flow().factorisations()));
  trial.outflow = march.heat().outflow_rate(march.stream_function());
  Measuring measuring(march, 1e6 * step);
  measuring.warm();
  const Watch steps;
  do {
    measuring.step();
    watch(fmt::format("the case's own grid: {} steps", measuring.steps()));
  } while (measuring.steps() < most_measured && time_left(comm, begin, seconds));
  measuring.put(trial, std::max(1e-9, seconds_since(steps.wall)), std::max(1e-9, steps.spent()));
  trial.factorisation /= trial.crowding;
  trial.row = cost_of([&] { (void)march.row(); });
  trial.snapshot = cost_of([&] { (void)march.snapshot(with_stress); });
  take_slowest(comm, trial);
  return trial;
}

}  // namespace lidwright
