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

/// `pseudo_time`: of the first step; infinity tries full Newton steps at once. The equations hold
/// the best state found. Throws SolveError only for a fault of the linear algebra.
NewtonOutcome newton(SteadyEquations&, CoupledSolver&, const SettleSettings&, double pseudo_time,
                     const SettleObserver&);

/// A pseudo time in which no cell's temperature changes by more than `change`.
double cautious_pseudo_time(const SteadyEquations&, double change);

}  // namespace lidwright
