#pragma once

#include <memory>

#include "solver/archive.hpp"
#include "solver/conjugate_gradients.hpp"
#include "solver/factor_age.hpp"
#include "solver/former_flows.hpp"
#include "solver/settings.hpp"

/// The flow of a given temperature: the minimum of the power functional (solver/power.hpp) by
/// conjugate gradients, preconditioned by a Cholesky factor of an earlier viscosity.
namespace lidwright {

struct [[nodiscard]] FlowReport {
  bool converged = false;
  int iterations = 0;
  int applications = 0;  ///< of the factor
  /// Relative velocity error in the dissipation norm, estimated: by a factor of an earlier secant
  /// operator, that is, as if the rock were as stiff against changes of flow as against flow.
  double error = 0;
  // Where viscosity depends on the rate of strain:
  int newton_steps = 0;       ///< fixed-point steps among them
  int fixed_point_steps = 0;  ///< where Newton's method made no way
  double yielding_share = 0;  ///< of the volume
};

class FlowSolver {
 public:
  FlowSolver(std::shared_ptr<const Decomposition>, const Walls&, const FlowSettings&);

  /// Flow of the buoyancy b of a unit mass at radial faces and the viscosity eta (ghosts up to
  /// date), with ghosts. psi holds the best flow found whether or not it converged. Collective;
  /// same report on all ranks.
  FlowReport solve(const CellField& eta, const RadialFaceField& b, CornerField& psi);

  const Power& power() const { return power_; }
  long applications() const { return gradients_.applications(); }
  long factorisations() const { return factorisations_; }
  const Factor& factor() const { return factor_; }
  /// Estimated error of the last solve: FlowReport::error.
  double last_error() const { return error_; }

  /// Everything the next solve depends on, so that a restart goes on bit for bit.
  void save(Archive&) const;
  void restore(const Archive&);

 private:
  void refactor();
  FlowReport conjugate_gradients(Vec f, CornerField& psi);
  void apply_operator(Vec x, Vec y);
  void scale_to_least_power(Vec f, Vec x);

  FlowSettings settings_;
  Power power_;
  Factor factor_;
  ConjugateGradients gradients_;
  CornerField work_psi_, work_force_;
  FormerFlows former_;
  FactorAge age_;
  long factorisations_ = 0;
  double error_ = 0;
};

}  // namespace lidwright
