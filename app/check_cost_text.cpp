#include <fmt/format.h>

#include <cmath>

#include "app/check_text.hpp"

namespace lidwright {
namespace {

const char* bound_text(StepBound bound) {
  switch (bound) {
    case StepBound::Flow:
      return "the flow through cells (transport.courant)";
    case StepBound::Accuracy:
      return "accuracy (transport.accuracy)";
    case StepBound::Largest:
      return "transport.largest_step";
  }
  return "";
}

std::string step_in_years(const CheckFindings& f) {
  if (!f.c.body) return "";
  return fmt::format(" ({} Myr)", short_number(f.forecast.step_length * scales_of(*f.c.body).time /
                                               million_years));
}

std::string end_text(const CheckFindings& f) {
  const MarchSettings& m = f.c.march;
  if (m.until == MarchUntil::Known)
    return "at the latest: march.until = \"known\" may end it before";
  if (m.steady > 0 && !f.forecast.covered) return "at the latest: march.steady may end it before";
  if (m.wall_clock > 0 && f.forecast.total() > m.wall_clock)
    return fmt::format("but march.wall_clock ends it after {}", cost_duration(m.wall_clock));
  return "";
}

std::string share(double part, double whole) { return fmt::format("{:.0f} %", 100 * part / whole); }

/// What is not defined, as the Nusselt number between walls of one temperature, is left out.
std::string late_text(const PilotRow& late) {
  std::string text = fmt::format("rms velocity {} kappa/d", short_number(late.velocity_rms));
  if (std::isfinite(late.nusselt_outer))
    text = fmt::format("Nu {} at the outer wall, {}", short_number(late.nusselt_outer), text);
  if (late.velocity_rms > 0) text += ", mobility " + short_number(late.mobility);
  return text;
}

std::string pilot_lines(const CheckFindings& f) {
  const PilotRow late = late_mean(f.pilot);
  const bool same = f.pilot.grid.radial == f.c.model.grid.radial;
  return check_line("pilot", fmt::format("{} steps {} to time {}, {:.0f} % of the march",
                                         f.pilot.steps.size(),
                                         same ? "on the case's own grid"
                                              : fmt::format("on {} x {} cells", f.pilot.grid.radial,
                                                            f.pilot.grid.lateral),
                                         short_number(late.time), 100 * f.forecast.covered_share)) +
         check_line("  its last half", late_text(late));
}

std::string measured_lines(const CheckFindings& f) {
  const Trial& t = f.trial;
  const auto ms = [](double seconds) { return short_number(1e3 * seconds); };
  return check_line("measured", fmt::format("{} steps of {} ms on the case's grid: {} ms, and "
                                            "{:.1f} substitutions of {} ms",
                                            t.steps, ms(t.step + t.applications * t.application),
                                            ms(t.step), t.applications, ms(t.application))) +
         check_line("", fmt::format("{} ms a factorisation, {} ms a row of the history",
                                    ms(t.factorisation), ms(t.row)));
}

}  // namespace

std::string cost_text(const CheckFindings& f) {
  const Forecast& c = f.forecast;
  const Trial& t = f.trial;
  const double all = c.total();
  const std::string end = end_text(f);
  std::string text = "\nCOST of `march` on this machine\n";
  text += check_line("processor time",
                     fmt::format("{} to time {}{}", cost_duration(all), short_number(c.end_time),
                                 end.empty() ? "" : ", " + end));
  if (f.crowded())
    text += check_line("  by the clock",
                       fmt::format("{} as long as this process gets {:.0f} % of a "
                                   "core, as now",
                                   cost_duration(all * t.crowding), 100 / t.crowding));
  text +=
      check_line("  of it", fmt::format("{} steps, {} substitutions, {} factorisations ({}), {} "
                                        "writing {} snapshots and {} checkpoints",
                                        share(c.stepping, all), share(c.substitution, all),
                                        share(c.factorising, all), short_number(c.factorisations),
                                        share(c.writing, all), short_number(c.snapshots),
                                        short_number(c.checkpoints)));
  text += check_line(
      "time step", fmt::format("{} d^2/kappa{} in developed convection, held by {}",
                               short_number(c.step_length), step_in_years(f), bound_text(c.bound)));
  return text + measured_lines(f) + pilot_lines(f);
}

// Seconds and bytes of writing, measured on the virtual machine of docs/performance.md.
namespace {
constexpr double picture_seconds = 0.10, snapshot_seconds = 0.02, snapshot_seconds_a_cell = 2.5e-6;
constexpr double checkpoint_seconds = 0.01, checkpoint_seconds_a_cell = 0.4e-6;
}  // namespace

OutputPlan output_plan(const Case& c) {
  const OutputSettings& o = c.output;
  const double cells = static_cast<double>(c.model.grid.radial) * c.model.grid.lateral;
  return {o.history_every, o.snapshot_every, o.checkpoint_every,
          snapshot_seconds + snapshot_seconds_a_cell * cells + (o.pictures ? picture_seconds : 0),
          checkpoint_seconds + checkpoint_seconds_a_cell * cells};
}

double writers_memory(const Case& c, const Forecast& f) {
  constexpr double files_bytes = 8e6, picture_bytes = 14e6, bytes_a_cell = 100, bytes_a_row = 400;
  const double cells = static_cast<double>(c.model.grid.radial) * c.model.grid.lateral;
  return files_bytes + (c.output.pictures ? picture_bytes : 0) + bytes_a_cell * cells +
         bytes_a_row * f.steps / static_cast<double>(c.output.history_every);
}

}  // namespace lidwright
