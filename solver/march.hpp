#pragma once

#include <functional>
#include <memory>
#include <string>

#include "solver/diagnostics.hpp"
#include "solver/heat_stepper.hpp"
#include "solver/initial.hpp"
#include "solver/mantle_flow.hpp"
#include "solver/measure.hpp"
#include "solver/settings.hpp"
#include "solver/snapshot.hpp"
#include "solver/solve_error.hpp"

/// Convection in time: temperature and flow step by step, with one flow solve a step.
namespace lidwright {

class March {
 public:
  /// Starts from the initial temperature and solves its flow. Collective; throws SolveError.
  March(const Model&, const InitialSettings&, const StoredTemperature&, const FlowSettings&,
        const HeatSettings&, MPI_Comm);
  /// Goes on from an archive, bit for bit. Collective.
  March(const Model&, const FlowSettings&, const HeatSettings&, const Archive&, MPI_Comm);

  /// One step that does not pass `until` (and hits it exactly when near). The step's length obeys
  /// the flow (settings.courant), the local error (settings.accuracy) and the settings' bounds.
  /// Throws SolveError.
  void step(double until);

  double time() const { return time_; }
  long steps() const { return steps_; }
  /// Volume rms of dT/dt over the last step; infinity before the first.
  double temperature_change_rate() const { return change_rate_; }

  /// The row of the history for the present state; wall_time is left 0. Collective.
  HistoryRow row() const;
  /// Collective.
  RadialProfiles profiles() const { return lidwright::profiles(view()); }
  Snapshot snapshot(bool with_stress) const;
  Archive archive() const;

  const CellField& temperature() const { return temperature_; }
  const CornerField& stream_function() const { return psi_; }
  const Power& power() const { return flow_.power(); }
  const HeatOperator& heat() const { return stepper_.heat(); }
  std::shared_ptr<const Decomposition> decomposition() const { return decomposition_; }
  const MantleFlow& flow() const { return flow_; }

 private:
  struct Former {
    double time;
    CellField temperature;
  };
  March(const Model&, const FlowSettings&, const HeatSettings&, MPI_Comm);
  void solve_flow();
  StateView view() const {
    return {power(), heat(), temperature_, psi_, model_.rayleigh, model_.creep()};
  }
  double content_change(const CellField& next) const;
  HeatStepper::Forcing foreseen(double dt) const;
  double proposed_step(double until) const;
  double local_error(const CellField& next, double dt) const;
  void accept(CellField next, double dt, double end, const StepHeat&, double error);

  Model model_;
  HeatSettings heat_settings_;
  std::shared_ptr<const Decomposition> decomposition_;
  MantleFlow flow_;
  HeatStepper stepper_;
  CellField temperature_;
  CornerField psi_, former_psi_;
  CellField viscous_, former_viscous_;  ///< heating of cells; empty: none
  std::vector<Former> former_;          ///< newest first, at most 2
  double time_ = 0, last_step_ = 0, error_limited_step_;
  long steps_ = 0;
  double change_rate_, budget_residual_ = 0;
};

}  // namespace lidwright
