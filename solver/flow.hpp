#pragma once

#include <petscksp.h>

#include <deque>
#include <memory>

#include "solver/archive.hpp"
#include "solver/factor.hpp"
#include "solver/power.hpp"
#include "solver/settings.hpp"

/// The flow of a given temperature: the minimum of the power functional (solver/power.hpp) by
/// conjugate gradients, preconditioned by a Cholesky factor of an earlier viscosity.
namespace lidwright {

struct [[nodiscard]] FlowReport {
  bool converged = false;
  int iterations = 0;
  int applications = 0;  ///< of the factor
  double error = 0;      ///< relative velocity error in the dissipation norm, estimated
};

class FlowSolver {
 public:
  FlowSolver(std::shared_ptr<const Decomposition>, const Walls&, const FlowSettings&);

  /// Flow of the buoyancy b of a unit mass at radial faces and the viscosity eta (ghosts up to
  /// date), with ghosts. psi holds the best flow found whether or not it converged. Collective;
  /// same report on all ranks.
  FlowReport solve(const CellField& eta, const RadialFaceField& b, CornerField& psi);

  const Power& power() const { return power_; }
  long applications() const { return applications_; }
  long factorisations() const { return factorisations_; }
  const Factor& factor() const { return factor_; }
  /// Estimated error of the last solve: FlowReport::error.
  double last_error() const { return error_; }

  /// Everything the next solve depends on, so that a restart goes on bit for bit.
  void save(Archive&) const;
  void restore(const Archive&);

 private:
  void refactor();
  bool factor_is_stale() const;
  void start_from_former_flows(Vec f, CornerField& psi);
  void remember(const CornerField& psi);
  FlowReport conjugate_gradients(Vec f, CornerField& psi);
  void apply_operator(Vec x, Vec y);
  void scale_to_least_power(Vec f, Vec x);
  static PetscErrorCode operator_callback(Mat, Vec, Vec);
  static PetscErrorCode factor_callback(PC, Vec, Vec);
  static PetscErrorCode convergence_callback(KSP, PetscInt, PetscReal, KSPConvergedReason*, void*);

  FlowSettings settings_;
  Power power_;
  Factor factor_;
  Handle<Mat, MatDestroy> operator_;
  Handle<KSP, KSPDestroy> ksp_;
  CornerField work_psi_, work_force_;
  std::deque<CornerField> former_;  ///< newest first
  bool viscosity_changed_ = true;
  long applications_ = 0, factorisations_ = 0;
  // Since the last factorisation, in applications: what decides when a new one pays.
  double spent_ = 0, last_cost_ = 0;
  long solves_ = 0;
  // For the convergence test of the running solve.
  double reference_ = 0, error_ = 0;
};

}  // namespace lidwright
