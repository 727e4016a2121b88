#pragma once

#include "study/trial.hpp"

/// What a march will cost, from a pilot and a trial (study/trial.hpp). Pure arithmetic;
/// docs/check.md.
namespace lidwright {

/// What is written, and how often.
struct OutputPlan {
  long history_every = 1;                               ///< steps
  double snapshot_every = 0;                            ///< time; 0: the first and the last
  long checkpoint_every = 0;                            ///< steps; 0: the last only
  double snapshot_seconds = 0, checkpoint_seconds = 0;  ///< of writing one
};

/// Of the time step, in developed convection.
enum class StepBound { Flow, Accuracy, Largest };

struct Forecast {
  double steps = 0;          ///< until the march ends
  double end_time = 0;       ///< where it ends
  bool covered = false;      ///< the pilot got there, else the rest is like the pilot's last half
  double covered_share = 0;  ///< of the march's time that the pilot saw
  double step_length = 0;    ///< mean over the last half of what the pilot saw
  StepBound bound = StepBound::Flow;  ///< of most of these steps
  double snapshots = 0, checkpoints = 0;
  // Seconds of processor time.
  double setup = 0, stepping = 0, substitution = 0, factorising = 0, writing = 0;
  double factorisations = 0;  ///< their number
  double total() const { return setup + stepping + substitution + factorising + writing; }
};

Forecast forecast(const Pilot&, const Trial&, const HeatSettings&, const MarchSettings&,
                  const OutputPlan&, bool nonlinear);

/// Step that the flow allows on the case's grid where the pilot ended, before the trial is made:
/// the pilot's, over the ratio of cells.
double first_guess_of_step(const Pilot&, const Grid&, const HeatSettings&);

}  // namespace lidwright
