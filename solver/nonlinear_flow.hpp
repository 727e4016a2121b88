#pragma once

#include "solver/flow.hpp"
#include "solver/nonlinear_power.hpp"

namespace lidwright {

/// The flow of a rock whose viscosity depends on its rate of strain: Newton's method on the power
/// functional (solver/nonlinear_power.hpp). Each step is solved by conjugate gradients with the
/// tangent, preconditioned by a factor of an earlier secant operator, and shortened or lengthened
/// until the power is near its least along it. Where such a step makes no way, a step of
/// fixed-point iteration (the secant operator instead of the tangent) takes its place; that one
/// always goes downhill where viscosity falls with the rate.
class NonlinearFlow {
 public:
  NonlinearFlow(std::shared_ptr<const Decomposition>, const Walls&, const FlowSettings&);

  /// Flow of the buoyancy b of a unit mass at radial faces and of the laws of held cells, with
  /// ghosts. Starts from psi. psi holds the best flow found whether or not it converged.
  /// Collective; same report on all ranks.
  FlowReport solve(std::vector<LocalFlowLaw>, const RadialFaceField& b, CornerField& psi);

  /// The same for any force on psi at owned corners (rank's parts not yet summed up on walls).
  FlowReport solve(std::vector<LocalFlowLaw>, const CornerField& force, CornerField& psi);

  /// What a Newton step left behind.
  struct Step {
    int number;         ///< from 1
    double error;       ///< before it, FlowReport::error
    int iterations;     ///< of conjugate gradients
    double length;      ///< of the step; 1: Newton's own
    double force_work;  ///< f . psi after it
    const NonlinearPower& functional;
  };
  /// Calls `on_step` after every step, on all ranks that set it.
  void watch(std::function<void(const Step&)> on_step) { on_step_ = std::move(on_step); }

  /// With the secant viscosity of the last flow.
  const Power& power() const { return power_; }
  const Factor& factor() const { return factor_; }
  long applications() const { return gradients_.applications(); }
  long factorisations() const { return factorisations_; }

  /// Everything the next solve depends on, so that a restart goes on bit for bit.
  void save(Archive&) const;
  void restore(const Archive&);

 private:
  void refactor();
  void gradient(Vec f, Vec downhill);
  ConjugateGradients::Report direction(Vec downhill, double absolute, Vec change);
  double work(Vec f, const CornerField& psi) const;
  double line_search(double start, double force_along);
  double go_down(Vec f, Vec downhill, const CornerField& direction, CornerField& psi);
  void step_among_former_flows(Vec f, CornerField& psi);
  enum class Progress { There, Moved, Lost };
  Progress step(Vec f, bool may_move, CornerField& psi);
  void scale_to_least_power(Vec downhill, CornerField& psi);
  bool descend(Vec f, CornerField& psi);

  FlowSettings settings_;
  Power power_;
  NonlinearPower functional_;
  Factor factor_;
  ConjugateGradients gradients_;
  CornerField work_psi_, work_force_;
  FormerFlows former_;
  FactorAge age_;
  bool factor_fresh_ = false, fixed_point_ = false;
  long factorisations_ = 0;
  FlowReport last_;
  std::function<void(const Step&)> on_step_;
};

}  // namespace lidwright
