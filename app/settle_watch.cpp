#include "app/settle_watch.hpp"

#include <fmt/format.h>

#include <cmath>

#include "app/stop_signals.hpp"

namespace lidwright {
namespace {

std::string grid_text(const Grid& g) { return fmt::format("grid {} x {}", g.radial, g.lateral); }

std::string march_text(const NewtonStep& s) {
  return fmt::format("{}  march to a first guess  time {:.4g}  residual {:.1e}", grid_text(s.grid),
                     s.pseudo_time, s.residual);
}

std::string step_text(const NewtonStep& s) {
  const std::string how =
      std::isinf(s.pseudo_time) ? "" : fmt::format("  pseudo time {:.2g}", s.pseudo_time);
  return fmt::format("{}  Newton step {}  residual {:.1e}{}", grid_text(s.grid), s.step, s.residual,
                     how);
}

}  // namespace

SettleObserver SettleWatch::observer() {
  return [this](const NewtonStep& step) { return see(step); };
}

/// Stretches of a march are many; Newton steps are few, and each is shown.
bool SettleWatch::see(const NewtonStep& step) {
  steps_.push_back(step);
  if (step.step < 0)
    line_.show(march_text(step));
  else
    line_.show_always(step_text(step));
  return !stop_requested(MPI_COMM_SELF);
}

}  // namespace lidwright
