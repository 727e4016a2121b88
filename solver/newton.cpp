#include "solver/newton.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "solver/solve_error.hpp"

namespace lidwright {
namespace {

constexpr double infinity = std::numeric_limits<double>::infinity();

/// Largest change of a cell's temperature in one step, in units of the temperatures' range.
constexpr double largest_change = 0.5;

/// A pseudo time in which no cell's temperature changes by more than `change`.
double cautious_pseudo_time(const SteadyEquations& equations, double change) {
  const double fastest = equations.fastest_change();
  return fastest > 0 ? change / fastest : infinity;
}

class Newton {
 public:
  Newton(SteadyEquations& equations, CoupledSolver& solver, const SettleSettings& settings,
         const SettleObserver& observer)
      : equations_(equations), solver_(solver), settings_(settings), observer_(observer) {}

  NewtonOutcome run();

 private:
  bool report(double pseudo_time, int linear_iterations);
  Eigen::VectorXd change_of_temperature(double pseudo_time);
  double forcing_term() const;
  double longest_fraction(const Eigen::VectorXd& change) const;
  bool try_step(const Eigen::VectorXd& change, double fraction, double most_residual);
  bool advance(double pseudo_time);
  double next_pseudo_time(double pseudo_time, double before) const;

  SteadyEquations& equations_;
  CoupledSolver& solver_;
  const SettleSettings& settings_;
  const SettleObserver& observer_;
  NewtonOutcome outcome_;
  int linear_iterations_ = 0;
};

bool Newton::report(double pseudo_time, int linear_iterations) {
  outcome_.steps.push_back({equations_.model().grid, static_cast<int>(outcome_.steps.size()),
                            equations_.residual(), pseudo_time, linear_iterations});
  outcome_.stopped = observer_ && !observer_(outcome_.steps.back());
  return !outcome_.stopped;
}

/// Accuracy of the linear solve: tighter than the residual, so that convergence stays quadratic
/// (Dembo, Eisenstat & Steihaug 1982, SIAM J. Numer. Anal. 19, 400).
double Newton::forcing_term() const { return std::clamp(0.03 * equations_.residual(), 1e-9, 1e-4); }

Eigen::VectorXd Newton::change_of_temperature(double pseudo_time) {
  set_jacobian(solver_, equations_, std::isinf(pseudo_time) ? 0 : 1 / pseudo_time);
  return temperature_change(solver_, equations_, equations_.gain(), forcing_term(),
                            &linear_iterations_);
}

double Newton::longest_fraction(const Eigen::VectorXd& change) const {
  const Eigen::VectorXd t = equations_.unknowns().temperature_vector(equations_.temperature());
  const double range = std::max(t.maxCoeff() - t.minCoeff(), 1e-300);
  const double most = change.cwiseAbs().maxCoeff();
  return most > 0 ? std::min(1.0, largest_change * range / most) : 1.0;
}

/// Goes a fraction of a change, or back again when that does not lower the residual enough.
bool Newton::try_step(const Eigen::VectorXd& change, double fraction, double most_residual) {
  const CellField before = equations_.temperature();
  const Unknowns& u = equations_.unknowns();
  CellField after = before;
  u.set_temperature(u.temperature_vector(before) + fraction * change, after);
  try {
    equations_.set_temperature(after);
    if (equations_.residual() <= most_residual) return true;
  } catch (const SolveError&) {
    // As for a residual that is too large: a shorter step.
  }
  equations_.set_temperature(before);
  return false;
}

/// One step; a full one must lower the residual, one in pseudo time may raise it a little while it
/// follows a transient.
bool Newton::advance(double pseudo_time) {
  const double before = equations_.residual();
  const Eigen::VectorXd change = change_of_temperature(pseudo_time);
  if (!change.allFinite()) return false;
  const double fraction = longest_fraction(change);
  if (!std::isinf(pseudo_time)) return fraction == 1 && try_step(change, 1, 3 * before);
  for (double share = fraction; share > 0.1; share /= 2)
    if (try_step(change, share, (1 - 0.2 * share) * before)) return true;
  return false;
}

/// Switched evolution relaxation: the pseudo time grows as the residual falls.
double Newton::next_pseudo_time(double pseudo_time, double before) const {
  if (std::isinf(pseudo_time)) return infinity;
  const double ratio = before / equations_.residual();
  const double next = pseudo_time * std::clamp(1.5 * ratio, 0.5, 6.0);
  // Longer than what heat takes to pass the shell many times: no longer a transient.
  return next * equations_.heat_rate() > 30 && equations_.residual() < 0.05 ? infinity : next;
}

NewtonOutcome Newton::run() {
  double pseudo_time = infinity;
  solver_.drop_factor();
  int failures = 0;
  if (!report(infinity, 0)) return outcome_;
  while (equations_.residual() > settings_.tolerance) {
    if (static_cast<int>(outcome_.steps.size()) > settings_.most_steps) {
      outcome_.remark = fmt::format("residual {:.1e} after {} steps", equations_.residual(),
                                    settings_.most_steps);
      return outcome_;
    }
    const double before = equations_.residual();
    if (advance(pseudo_time)) {
      const double used = pseudo_time;
      pseudo_time = next_pseudo_time(pseudo_time, before);
      if (!report(used, linear_iterations_)) return outcome_;
      continue;
    }
    // What round-off leaves cannot be lowered.
    if (before < 100 * settings_.tolerance && before < 1e-7) break;
    if (++failures > 12) {
      outcome_.remark = fmt::format("no step lowers the residual further than {:.1e}", before);
      return outcome_;
    }
    solver_.drop_factor();
    const double cautious = cautious_pseudo_time(equations_, 0.1);
    pseudo_time = std::isinf(pseudo_time) ? 4 * cautious : pseudo_time / 4;
  }
  outcome_.converged = true;
  return outcome_;
}

}  // namespace

void set_jacobian(CoupledSolver& solver, const SteadyEquations& equations, double shift) {
  solver.set_matrix(equations.linearise(), shift);
  solver.hold(equations.turning(), equations.holding_rate());
}

Eigen::VectorXd temperature_change(CoupledSolver& solver, const SteadyEquations& equations,
                                   const Eigen::VectorXd& gain, double tolerance,
                                   int* linear_iterations) {
  const Unknowns& u = equations.unknowns();
  Eigen::VectorXd right = Eigen::VectorXd::Zero(u.size()), x;
  right.tail(u.cells()) = gain;
  const LinearReport report = solver.solve(right, tolerance, x);
  if (linear_iterations) *linear_iterations = report.iterations;
  return x.tail(u.cells());
}

NewtonOutcome newton(SteadyEquations& equations, CoupledSolver& solver,
                     const SettleSettings& settings, const SettleObserver& observer) {
  return Newton(equations, solver, settings, observer).run();
}

}  // namespace lidwright
