#pragma once

#include "solver/settle.hpp"
#include "solver/steady_equations.hpp"

/// Newton's method for the steady equations, with pseudo-transient continuation (Kelley & Keyes
/// 1998, SIAM J. Numer. Anal. 35, 508) where the start is too far away.
namespace lidwright {

struct NewtonOutcome {
  bool converged = false;
  bool stopped = false;  ///< by the observer
  std::string remark;    ///< why it did not converge
  std::vector<NewtonStep> steps;
};

/// Full steps as long as they lower the residual. The equations hold the best state found. Throws
/// SolveError only for a fault of the linear algebra.
NewtonOutcome newton(SteadyEquations&, CoupledSolver&, const SettleSettings&,
                     const SettleObserver&);

/// The Jacobian at the equations' state as the solver's matrix, with a pattern's turning held;
/// `shift` is 1/(pseudo time), 0 for none.
void set_jacobian(CoupledSolver&, const SteadyEquations&, double shift);
/// The change of temperature that answers to a gain of heat of the cells. The flow's residual is
/// zero, so its rows carry none; its own change follows from that of temperature.
Eigen::VectorXd temperature_change(CoupledSolver&, const SteadyEquations&,
                                   const Eigen::VectorXd& gain, double tolerance,
                                   int* linear_iterations = nullptr);

}  // namespace lidwright
