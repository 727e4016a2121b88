#include "solver/first_guess.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <limits>

#include "solver/march.hpp"

namespace lidwright {
namespace {

/// Below this residual Newton's method is tried.
constexpr double near = 0.3;
constexpr int most_attempts = 6;
constexpr long most_steps = 20000;
constexpr long most_steps_of_a_stretch = 100;

/// What a stretch of the march ended with.
struct Seen {
  double time, residual, heat_flow;
};

/// What the second half of a march looked like.
std::string account(const std::vector<Seen>& seen, int attempts) {
  const double middle = (seen.front().time + seen.back().time) / 2;
  double low = std::numeric_limits<double>::infinity(), high = -low;
  for (const Seen& s : seen)
    if (s.time >= middle) {
      low = std::min(low, s.heat_flow);
      high = std::max(high, s.heat_flow);
    }
  return fmt::format(
      "time-dependent flow: from time {:.3g} to {:.3g} of a march the surface heat flow went from "
      "{:.4g} to {:.4g}, the residual at its end is {:.1e}, and Newton's method failed {} times",
      middle, seen.back().time, low, high, seen.back().residual, attempts);
}

class Guess {
 public:
  Guess(SteadyEquations& equations, const SettleSettings& settings, const InitialSettings& initial,
        const StoredTemperature& start)
      : equations_(equations),
        settings_(settings),
        march_(equations.model(), initial, start, FlowSettings{}, heat(settings), MPI_COMM_SELF) {}

  /// Marches for about two overturns.
  void stretch() {
    const double velocity = march_.row().velocity_rms;
    const double most = settings_.most_time / 10;
    const double length = velocity > 0 ? std::min(2 / velocity, most) : most;
    const double until = march_.time() + length;
    for (long n = 0; n < most_steps_of_a_stretch && march_.time() < until; ++n) march_.step(until);
    equations_.set_temperature(march_.temperature());
    seen_.push_back({march_.time(), equations_.residual(), march_.row().heat_flow_outer});
  }
  /// Small, and on its way down: not the slow start of an instability.
  bool near_steady(double below) const {
    if (seen_.size() < 2 || seen_.back().residual >= below) return false;
    return seen_.back().residual < seen_[seen_.size() - 2].residual;
  }
  bool exhausted() const {
    return march_.time() >= settings_.most_time || march_.steps() >= most_steps;
  }
  const std::vector<Seen>& seen() const { return seen_; }

 private:
  static HeatSettings heat(const SettleSettings& settings) {
    HeatSettings h;
    h.flux = settings.flux;
    h.courant = 1;
    h.accuracy = 1e-3;
    return h;
  }
  SteadyEquations& equations_;
  const SettleSettings& settings_;
  March march_;
  std::vector<Seen> seen_;
};

}  // namespace

NewtonOutcome settle_by_marching(SteadyEquations& equations, CoupledSolver& solver,
                                 const SettleSettings& settings, const InitialSettings& initial,
                                 const StoredTemperature& start, const SettleObserver& observer) {
  Guess guess(equations, settings, initial, start);
  NewtonOutcome outcome;
  double below = near;
  for (int attempts = 0; attempts < most_attempts && !guess.exhausted();) {
    guess.stretch();
    const Seen& now = guess.seen().back();
    outcome.stopped =
        observer && !observer({equations.model().grid, -1, now.residual, now.time, 0});
    if (outcome.stopped) return outcome;
    if (!guess.near_steady(below)) continue;
    SettleSettings few = settings;
    few.most_steps = std::min(settings.most_steps, 20);
    outcome = newton(equations, solver, few, std::numeric_limits<double>::infinity(), observer);
    if (outcome.converged || outcome.stopped) return outcome;
    below = now.residual / 2;
    ++attempts;
    outcome.remark = account(guess.seen(), attempts);
  }
  if (outcome.remark.empty()) outcome.remark = account(guess.seen(), 0);
  return outcome;
}

}  // namespace lidwright
