#include "app/settle_summary.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <iterator>
#include <numbers>

#include "app/progress.hpp"
#include "app/run_summary.hpp"

namespace lidwright {
namespace {

/// rms velocity in kappa/d, a Peclet number, below which nothing convects.
constexpr double at_rest = 1e-3;

std::string heading(const Case& c) { return c.title.empty() ? "" : c.title + "\n"; }

std::string hint(const SteadyState& s) {
  if (!s.converged || convects(s.row)) return "";
  return "  conduction            carries the heat alone; from another start (initial.modes, "
         "initial.noise,\n                        initial.from) it may convect\n";
}

std::string time_text(double x) { return fmt::format("{:.4g} d^2/kappa", x); }

std::string period_text(const GrowthRate& r) {
  return r.frequency > 0 ? fmt::format("oscillating with period {}",
                                       time_text(2 * std::numbers::pi / r.frequency))
                         : "without oscillation";
}

std::string sentence(const StabilityVerdict& v) {
  if (v.leading < 0) return "unknown: no growth rate was found";
  const GrowthRate& r = v.leader();
  if (v.unstable())
    return fmt::format("unstable: a small disturbance grows by e in time {}, {}",
                       time_text(1 / r.growth), period_text(r));
  return fmt::format(
      "stable: a simulation would stay here; the slowest disturbance dies by e in time {}, {}",
      time_text(-1 / r.growth), period_text(r));
}

}  // namespace

bool convects(const HistoryRow& r) { return r.velocity_rms >= at_rest; }

std::string end_of(const SteadyState& s) {
  if (!s.converged) return s.remark == "stopped" ? "interrupted" : "not steady";
  return convects(s.row) ? "steady" : "does not convect";
}

std::vector<SummaryEntry> settle_entries(const Case& c, const SteadyState& s, std::size_t steps,
                                         double seconds) {
  std::vector<SummaryEntry> entries{
      {"title", c.title, "", "of the case"},
      {"end", end_of(s), "", "steady, does not convect, not steady or interrupted"},
      {"remark", s.remark, "", "what was seen when it is not steady"},
      {"radial", static_cast<long>(s.grid.radial), "", "cells from wall to wall"},
      {"lateral", static_cast<long>(s.grid.lateral), "", "cells along the shell"},
  };
  const std::vector<SummaryEntry>
      state = state_entries(s.row),
      last{
          {"heat_budget_residual", s.row.heat_budget_residual, "",
           "what flows in and is produced less what flows out, over the largest of these"},
          {"residual", s.residual, "",
           "rms of dT/dt, over heat flow through heat capacity of the shell"},
          {"newton_steps", static_cast<long>(steps), "", "on all grids"},
          {"wall_time", seconds, "s", "of the whole search"},
      };
  entries.insert(entries.end(), state.begin(), state.end());
  entries.insert(entries.end(), last.begin(), last.end());
  return entries;
}

std::string settle_for_people(const Case& c, const SteadyState& s, std::size_t steps,
                              double seconds) {
  HistoryRow row = s.row;
  if (!convects(s.row)) row.work_mismatch = 0;  // of nothing with nothing
  return fmt::format(
      "{}{}: {} x {} cells, {} Newton steps in {}\n{}{}"
      "  residual              {:.1e}; at most {:.1g} was asked for   [heat flow/heat capacity]\n",
      heading(c), end_of(s), s.grid.radial, s.grid.lateral, steps, duration_text(seconds),
      state_lines(row), hint(s), s.residual, c.settle.tolerance);
}

std::string bars_for_people(const std::vector<QuantityBar>& bars, const std::vector<Grid>& grids) {
  std::string text = fmt::format("  {:<26}", "error bars");
  auto out = std::back_inserter(text);
  for (const Grid& g : grids)
    fmt::format_to(out, " {:>13}", fmt::format("{} x {}", g.radial, g.lateral));
  fmt::format_to(out, " {:>13} {:>9} {:>6}  {}\n", "extrapolated", "+-", "order", "convergence");
  for (const QuantityBar& b : bars) {
    fmt::format_to(out, "    {:<24}", b.name);
    for (const double v : b.values) fmt::format_to(out, " {:>13.8g}", v);
    const std::string order = std::isnan(b.bar.order) ? "-" : fmt::format("{:.2f}", b.bar.order);
    fmt::format_to(out, " {:>13.8g} {:>9.2g} {:>6}  {}\n", b.bar.value, b.bar.half_width, order,
                   word(b.bar.convergence));
  }
  return text;
}

std::vector<SummaryEntry> stability_entries(const StabilityVerdict& v) {
  if (v.leading < 0) return {};
  return {{"stable", static_cast<long>(!v.unstable()), "", "1: small disturbances die away"},
          {"growth", v.leader().growth, "kappa/d^2", "of the fastest growing disturbance"},
          {"frequency", v.leader().frequency, "kappa/d^2",
           "of the same, per radian; 0: it does not oscillate"}};
}

std::string stability_for_people(const StabilityVerdict& v) {
  std::string text = fmt::format("  stability             {}\n", sentence(v));
  auto out = std::back_inserter(text);
  fmt::format_to(out, "    {:>14} {:>14}   [kappa/d^2]\n", "growth", "frequency");
  for (std::size_t k = 0; k < v.rates.size(); ++k)
    fmt::format_to(out, "    {:>14.6g} {:>14.6g}{}\n", v.rates[k].growth, v.rates[k].frequency,
                   static_cast<int>(k) == v.turning
                       ? "   turning the pattern round, neutral but for the mesh"
                       : "");
  return text;
}

std::vector<SummaryEntry> branch_entries(const Case& c, const BranchParameter& p,
                                         const std::vector<BranchRow>& rows, const std::string& end,
                                         double seconds) {
  const auto asked =
      std::count_if(rows.begin(), rows.end(), [](const BranchRow& r) { return r.asked_for; });
  return {{"title", c.title, "", "of the case"},
          {"end", end, "", "why the branch ends"},
          {"key", p.key, "", "of the case, which varies along the branch"},
          {"points", static_cast<long>(rows.size()), "", "steady states found"},
          {"asked_for", static_cast<long>(asked), "", "of them at values asked for"},
          {"wall_time", seconds, "s", "of the whole search"}};
}

std::string branch_for_people(const Case& c, const BranchParameter& p,
                              const std::vector<BranchRow>& rows, const std::string& end,
                              double seconds) {
  const auto asked =
      std::count_if(rows.begin(), rows.end(), [](const BranchRow& r) { return r.asked_for; });
  const bool growth = std::any_of(rows.begin(), rows.end(),
                                  [](const BranchRow& r) { return !std::isnan(r.leading.growth); });
  std::string text = fmt::format(
      "{}{}: steady states along {}, {} asked for and {} on the way, in {}\n", heading(c), end,
      p.key, asked, static_cast<long>(rows.size()) - asked, duration_text(seconds));
  auto out = std::back_inserter(text);
  fmt::format_to(out, "  {:>14} {:>12} {:>12} {:>12} {:>12}{}\n",
                 p.unit.empty() ? "value" : "value, " + p.unit, "Nu outer", "Nu inner", "v_rms",
                 "mean T", growth ? fmt::format(" {:>12} {:>12}", "growth", "frequency") : "");
  for (const BranchRow& r : rows) {
    if (!r.asked_for) continue;
    fmt::format_to(out, "  {:>14.7g} {:>12.6g} {:>12.6g} {:>12.6g} {:>12.6g}", r.parameter,
                   r.row.nusselt_outer, r.row.nusselt_inner, r.row.velocity_rms,
                   r.row.temperature_mean);
    if (growth) fmt::format_to(out, " {:>12.5g} {:>12.5g}", r.leading.growth, r.leading.frequency);
    if (!convects(r.row)) text += "   does not convect";
    text += r.backwards ? "   beyond a fold\n" : "\n";
  }
  return text;
}

}  // namespace lidwright
