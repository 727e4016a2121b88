#include <fmt/format.h>

#include <cmath>

#include "app/check_text.hpp"
#include "app/progress.hpp"

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
  return fmt::format(" ({} Myr)",
                     brief(f.forecast.step_length * scales_of(*f.c.body).time / million_years));
}

std::string end_text(const CheckFindings& f) {
  const MarchSettings& m = f.c.march;
  if (m.until == MarchUntil::Known)
    return "at the latest: march.until = \"known\" may end it before";
  if (m.steady > 0 && !f.forecast.covered) return "at the latest: march.steady may end it before";
  if (m.wall_clock > 0 && f.forecast.total() > m.wall_clock)
    return fmt::format("but march.wall_clock ends it after {}", duration_text(m.wall_clock));
  return "";
}

std::string share(double part, double whole) { return fmt::format("{:.0f} %", 100 * part / whole); }

/// Mean over the pilot's last half, by time.
PilotRow late_mean(const Pilot& p) {
  PilotRow sum{0, 0, 0, 0};
  double count = 0;
  for (const PilotRow& r : p.rows) {
    if (r.time < p.rows.back().time / 2) continue;
    sum.nusselt_outer += r.nusselt_outer;
    sum.velocity_rms += r.velocity_rms;
    sum.mobility += r.mobility;
    ++count;
  }
  return {p.rows.back().time, sum.nusselt_outer / count, sum.velocity_rms / count,
          sum.mobility / count};
}

std::string pilot_lines(const CheckFindings& f) {
  const PilotRow late = late_mean(f.pilot);
  const bool same = f.pilot.grid.radial == f.c.model.grid.radial;
  return check_line("pilot", fmt::format("{} steps {} to time {}, {:.0f} % of the march",
                                         f.pilot.steps.size(),
                                         same ? "on the case's own grid"
                                              : fmt::format("on {} x {} cells", f.pilot.grid.radial,
                                                            f.pilot.grid.lateral),
                                         brief(late.time), 100 * f.forecast.covered_share)) +
         check_line("  its last half",
                    fmt::format("Nu {} at the outer wall, rms velocity {} kappa/d, "
                                "mobility {}",
                                brief(late.nusselt_outer), brief(late.velocity_rms),
                                brief(late.mobility)));
}

}  // namespace

std::string cost_text(const CheckFindings& f) {
  const Forecast& c = f.forecast;
  const Trial& t = f.trial;
  const double all = c.total();
  std::string text = "\nCOST of `march` on this machine\n";
  const std::string end = end_text(f);
  text +=
      check_line("processor time", fmt::format("{} to time {}{}", duration_text(all),
                                               brief(c.end_time), end.empty() ? "" : ", " + end));
  if (t.crowding > 1.15)
    text += check_line("  by the clock",
                       fmt::format("{} if the machine stays as busy as now, when "
                                   "it gave {:.0f} % of a core",
                                   duration_text(all * t.crowding), 100 / t.crowding));
  text +=
      check_line("  of it", fmt::format("steps {}, substitution {}, {} factorisations {}, writing "
                                        "{}",
                                        share(c.stepping, all), share(c.substitution, all),
                                        brief(c.factorisations), share(c.factorising, all),
                                        share(c.writing, all)));
  text += check_line("time step",
                     fmt::format("{} d^2/kappa{} in developed convection, held by {}",
                                 brief(c.step_length), step_in_years(f), bound_text(c.bound)));
  text += check_line(
      "measured",
      fmt::format("{} steps of {} ms, {:.1f} substitutions of {} ms each "
                  "and {} ms apart from them; a factorisation {} ms",
                  t.steps, brief(1e3 * (t.step + t.applications * t.application)), t.applications,
                  brief(1e3 * t.application), brief(1e3 * t.step), brief(1e3 * t.factorisation)));
  return text + pilot_lines(f);
}

// Seconds and bytes of writing, measured on the virtual machine of docs/performance.md.
namespace {
constexpr double picture_seconds = 0.25, snapshot_seconds = 0.02, snapshot_seconds_a_cell = 2.5e-6;
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
  constexpr double picture_bytes = 14e6, bytes_a_cell = 100, bytes_a_row = 1500;
  const double cells = static_cast<double>(c.model.grid.radial) * c.model.grid.lateral;
  return (c.output.pictures ? picture_bytes : 0) + bytes_a_cell * cells +
         bytes_a_row * f.steps / static_cast<double>(c.output.history_every);
}

}  // namespace lidwright
