#pragma once

#include <functional>
#include <string>
#include <vector>

#include "solver/march.hpp"

/// Two short marches from which the cost of a long one is foreseen (study/forecast.hpp): a pilot on
/// a coarse grid, which gets to developed convection in seconds, and some steps on the case's own
/// grid from where the pilot ended, with a watch in hand. Nothing is written.
namespace lidwright {

/// Processor time of this process so far, s.
double processor_time();

/// What a march is told, without its output.
struct MarchInputs {
  Model model;
  InitialSettings initial;
  FlowSettings flow;
  HeatSettings heat;
  MarchSettings march;
};

/// Called now and then with what is done; may show it.
using TrialWatch = std::function<void(const std::string&)>;

struct PilotStep {
  double time;        ///< at its end
  double length;      ///< of the step
  double outflow;     ///< largest share of a cell's heat carried out in unit time, before it
  long applications;  ///< of the factor
  long factorisations;
};
struct PilotRow {
  double time, nusselt_outer, velocity_rms, mobility;
};
struct Pilot {
  Grid grid;
  std::vector<PilotStep> steps;
  std::vector<PilotRow> rows;
  bool ended = false;      ///< got to the end of the march, or to a steady state
  StoredTemperature last;  ///< to start from on a finer grid
};

/// Means over the last half of a pilot's time; the time is its end.
PilotRow late_mean(const Pilot&);

/// Radial cells of a pilot, at most.
inline constexpr int pilot_radial_cells = 24;
/// The case's grid coarsened in both directions alike.
Grid pilot_grid(const Grid&);
/// Marches the case on that grid until its end or for some seconds of processor time, half as many
/// more by the clock at most; not collective. Throws SolveError.
Pilot run_pilot(const MarchInputs&, const StoredTemperature&, double seconds, const TrialWatch&);

/// Seconds are of processor time, of the slowest rank.
struct Trial {
  int steps = 0;             ///< that were measured
  double setup = 0;          ///< until the first flow is there
  double step = 0;           ///< one step without applications, factorisations and row
  double application = 0;    ///< of the factor, one
  double factorisation = 0;  ///< one
  double applications = 0;   ///< a step
  double row = 0;            ///< of the history
  double snapshot = 0;       ///< its fields, without writing
  double outflow = 0;        ///< as PilotStep's, where the pilot ended
  double crowding = 1;       ///< wall time over processor time: what others took
};

/// Steps on the case's own grid from the pilot's last temperature, `step` long or less, for some
/// seconds. Collective. Throws SolveError.
Trial run_trial(const MarchInputs&, const StoredTemperature&, double step, double seconds,
                bool with_stress, MPI_Comm, const TrialWatch&);

}  // namespace lidwright
