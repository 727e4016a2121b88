#pragma once

#include "solver/mantle.hpp"
#include "solver/nonlinear_flow.hpp"

namespace lidwright {

/// The flow of a mantle at a temperature, by the solver that its rheology needs.
class MantleFlow {
 public:
  MantleFlow(std::shared_ptr<const Decomposition>, const Model&, const FlowSettings&);

  /// Flow of a temperature and the buoyancy b of a unit mass at radial faces, with ghosts. psi
  /// holds the best flow found whether or not it converged. Collective; same report on all ranks.
  FlowReport solve(const CellField& temperature, const RadialFaceField& b, CornerField& psi);

  /// With the viscosity of the last flow.
  const Power& power() const;
  const Factor& factor() const;
  const FlowReport& last_report() const { return last_; }
  long applications() const;                                     ///< of the factor, so far
  long factorisations() const;                                   ///< so far
  long fixed_point_steps() const { return fixed_point_steps_; }  ///< so far

  /// Everything the next solve depends on, so that a restart goes on bit for bit.
  void save(Archive&) const;
  void restore(const Archive&);

 private:
  std::vector<LocalFlowLaw> laws(const CellField& temperature) const;

  ViscosityLaw creep_;
  std::optional<DislocationCreep> dislocation_;
  std::optional<Yielding> yielding_;
  std::vector<double> pressure_;  ///< lithostatic, at rows of cells
  // One of the two.
  std::unique_ptr<FlowSolver> linear_;
  std::unique_ptr<NonlinearFlow> nonlinear_;
  FlowReport last_;
  long fixed_point_steps_ = 0;
};

}  // namespace lidwright
