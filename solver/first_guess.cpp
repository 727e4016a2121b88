#include "solver/first_guess.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <limits>

#include "solver/march.hpp"

namespace lidwright {
namespace {

/// Relative rate of change (as the residual) below which Newton's method is tried.
constexpr double near = 0.1;
constexpr int most_attempts = 5;
constexpr long most_steps_of_a_stretch = 100;

/// What a stretch of the march ended with.
struct Seen {
  double time, change, heat_flow;  ///< change: relative rate, as the residual
};

/// What the second half of a march looked like.
std::string account(const std::vector<Seen>& seen, bool keeps_changing, int attempts,
                    const std::string& newton) {
  const double middle = (seen.front().time + seen.back().time) / 2;
  double low = std::numeric_limits<double>::infinity(), high = -low;
  for (const Seen& s : seen)
    if (s.time >= middle) {
      low = std::min(low, s.heat_flow);
      high = std::max(high, s.heat_flow);
    }
  return fmt::format(
      "{}: from time {:.3g} to {:.3g} of a march the surface heat flow went from {:.4g} to {:.4g}, "
      "its relative rate of change at the end is {:.1e}, and Newton's method failed {} times{}",
      keeps_changing ? "time-dependent flow" : "not settled", middle, seen.back().time, low, high,
      seen.back().change, attempts, newton.empty() ? "" : " (" + newton + ")");
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
    seen_.push_back({march_.time(), march_.temperature_change_rate() / equations_.heat_rate(),
                     march_.row().heat_flow_outer});
  }
  /// Slow, and ever slower: not the slow start of an instability.
  bool near_steady(double below) const {
    if (seen_.size() < 2 || seen_.back().change >= below) return false;
    return seen_.back().change < seen_[seen_.size() - 2].change;
  }
  bool exhausted(long most_steps) const {
    return march_.time() >= settings_.most_time || march_.steps() >= most_steps || keeps_changing();
  }
  const CellField& temperature() const { return march_.temperature(); }
  const std::vector<Seen>& seen() const { return seen_; }
  /// In the last third of a long record the slowest change is hardly slower than in the third
  /// before.
  bool keeps_changing() const;

 private:
  static HeatSettings heat(const SettleSettings& settings) {
    HeatSettings h;
    h.flux = HeatFlux::Limited;
    h.accuracy = 1e-3;
    h.largest_step = settings.most_time / 100;
    return h;
  }
  SteadyEquations& equations_;
  const SettleSettings& settings_;
  March march_;
  std::vector<Seen> seen_;
};

bool Guess::keeps_changing() const {
  const std::size_t n = seen_.size();
  if (n < 60) return false;
  const auto slowest = [&](std::size_t from, std::size_t to) {
    double least = seen_[from].change;
    for (std::size_t k = from; k < to; ++k) least = std::min(least, seen_[k].change);
    return least;
  };
  return slowest(2 * n / 3, n) > std::max(0.7 * slowest(n / 3, 2 * n / 3), near);
}

}  // namespace

NewtonOutcome settle_by_marching(SteadyEquations& equations, CoupledSolver& solver,
                                 const SettleSettings& settings, const InitialSettings& initial,
                                 const StoredTemperature& start, long most_steps,
                                 const SettleObserver& observer) {
  Guess guess(equations, settings, initial, start);
  NewtonOutcome outcome;
  double below = near;
  for (int attempts = 0; attempts < most_attempts && !guess.exhausted(most_steps);) {
    guess.stretch();
    const Seen& now = guess.seen().back();
    outcome.stopped = observer && !observer({equations.model().grid, -1, now.change, now.time, 0});
    if (outcome.stopped) return outcome;
    if (!guess.near_steady(below)) continue;
    SettleSettings few = settings;
    few.most_steps = std::min(settings.most_steps, 20);
    outcome = newton(equations, solver, few, observer);
    if (outcome.converged || outcome.stopped) return outcome;
    outcome.remark = account(guess.seen(), guess.keeps_changing(), ++attempts, outcome.remark);
    equations.set_temperature(guess.temperature());
    // As steady as it will be, yet Newton's method finds nothing: the grid is too coarse.
    if (now.change < 1e-3) return outcome;
    below = now.change / 3;
  }
  if (outcome.remark.empty()) outcome.remark = account(guess.seen(), guess.keeps_changing(), 0, "");
  return outcome;
}

}  // namespace lidwright
