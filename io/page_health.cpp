#include "io/page_health.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

#include "io/duration.hpp"
#include "io/json.hpp"
#include "io/page_words.hpp"

namespace lidwright::page {
namespace {

constexpr double unknown = std::numeric_limits<double>::quiet_NaN();

/// Largest magnitude of the finite values from `from` on; nan: none.
double largest(const std::vector<double>* column, std::size_t from = 0) {
  double most = unknown;
  if (column)
    for (std::size_t k = from; k < column->size(); ++k)
      if (std::isfinite((*column)[k])) most = std::fmax(most, std::abs((*column)[k]));
  return most;
}

double last(const std::vector<double>* column) {
  return column && !column->empty() ? column->back() : unknown;
}

double median(const std::vector<double>* column) {
  if (!column || column->empty()) return unknown;
  std::vector<double> sorted = *column;
  std::sort(sorted.begin(), sorted.end());
  return sorted[sorted.size() / 2];
}

std::string whole(double x) { return std::isfinite(x) ? fmt::format("{:.0f}", x) : "not known"; }

HealthRow small_row(const std::string& name, double value, double good, double fair,
                    const std::string& meaning) {
  return {name, digits(value, 2),
          fmt::format("good to {}, poor from {}", compact(good, 2), compact(fair, 2)), meaning,
          judged_small(value, good, fair)};
}

HealthRow step_budget_row(double value) {
  return small_row("Heat budget, largest residual of a step", value, 1e-9, 1e-6,
                   "change of heat content less what crossed the walls and was produced, over the "
                   "largest of these: round-off when the equations are solved");
}

/// `of`: " of the state".
HealthRow state_budget_row(double value, const std::string& of) {
  return small_row("Heat budget, residual" + of, value, 1e-9, 1e-6,
                   "what flows in and is produced less what flows out, over the largest of these");
}

/// Largest mismatch of the rows with a flow: where nothing flows both works are round-off, and
/// their ratio says nothing. nan: nothing flows in any row. Velocities below 1e-8 kappa/d carry no
/// heat that a digit would show.
double work_mismatch(const NumberTable& t) {
  const auto *mismatch = t.find("work_mismatch"), *speed = t.find("velocity_rms");
  if (!mismatch || !speed) return largest(mismatch);
  const double still = std::fmax(1e-8, 1e-6 * largest(speed));
  std::vector<double> flowing;
  for (std::size_t k = 0; k < speed->size(); ++k)
    if (!((*speed)[k] < still)) flowing.push_back((*mismatch)[k]);
  return largest(&flowing);
}

/// Of the one state of a summary, by the same rule.
double work_mismatch(const TomlSection& s) {
  return work_mismatch(NumberTable{{"work_mismatch", "velocity_rms"},
                                   {},
                                   {{s.number("work_mismatch")}, {s.number("velocity_rms")}}});
}

/// Where viscosity depends on the flow the two agree as well as the flow is solved.
HealthRow work_row(const SavedRun& run, double value) {
  const double flow = run.settings.model.nonlinear() ? run.settings.flow.tolerance : 0;
  return small_row("Work of buoyancy against dissipation", value, std::max(1e-8, flow),
                   std::max(1e-5, 100 * flow), "largest relative mismatch");
}

HealthRow flow_row(const SavedRun& run, double value) {
  const double tolerance = run.settings.flow.tolerance;
  return small_row("Error of the flow", value, tolerance, 10 * tolerance,
                   "largest relative velocity error, as the solver estimates it; the case asks for "
                   "flow.tolerance");
}

/// Cells that a layer of this thickness at a wall is deep.
double cells_across(const Geometry& g, double layer, bool outer) {
  if (!std::isfinite(layer) || layer <= 0) return unknown;
  const int n = g.radial_cells();
  double depth = 0;
  for (int k = 0; k < n; ++k) {
    const double width = g.width(outer ? n - 1 - k : k);
    if (depth + width >= layer) return k + (layer - depth) / width;
    depth += width;
  }
  return n;
}

HealthRow layer_row(const Geometry& g, const std::string& name, double layer, bool outer) {
  const double cells = cells_across(g, layer, outer);
  return {
      name, std::isfinite(cells) ? fmt::format("{:.1f} cells", cells) : "none",
      "good from 4, poor below 2",
      fmt::format("the thermal boundary layer is {} d thick, on the average of the settled part "
                  "or at the end",
                  digits(layer, 3)),
      judged_large(cells, 4, 2)};
}

double mean_or_last(const SavedRun& run, const RunStatistics& s, const std::string& column) {
  const NamedSummary* r = s.find(column);
  if (r && r->record.enough()) return r->record.mean;
  return last(run.history->find(column));
}

/// What flows in and is produced against what flows out, over the settled part: does the mantle
/// heat up or cool?
HealthRow balance_row(const SavedRun& run, const RunStatistics& s) {
  const auto of = [&](const char* name) { return mean_or_last(run, s, name); };
  const double out = of("heat_flow_outer"), in = of("heat_flow_inner"), made = of("heat_source");
  const double work = of("viscous_heating") - of("adiabatic_cooling");
  const double scale = std::max({std::abs(out), std::abs(in), std::abs(made)});
  const double gained = (in + made + work - out) / scale;
  HealthRow row = small_row("Heat in less heat out, on the average", std::abs(gained), 0.02, 1,
                            "over the largest of them; what is left warms or cools the mantle");
  row.threshold = "steady to 0.02";
  // A mantle that cools is no fault of the computation.
  if (row.judgement == Judgement::Poor) row.judgement = Judgement::Look;
  if (gained > 0.02) row.meaning += ": it warms";
  if (gained < -0.02) row.meaning += ": it cools";
  return row;
}

HealthRow newton_row(const SavedRun& run) {
  const double most = run.settings.flow.most_newton_steps;
  const double seen = largest(run.history->find("flow_iterations"));
  HealthRow row{"Newton iterations of the flow", whole(seen),
                fmt::format("good to {:.0f}, given up at {:.0f}", most / 2, most),
                "largest number in a step", judged_small(seen, most / 2, most)};
  return row;
}

HealthRow step_row(const HistoryTable& t) {
  const auto* steps = t.find("time_step");
  return {"Length of a step", digits(median(steps), 3), "",
          fmt::format("median, d²/κ; the largest {}, the last {}", digits(largest(steps), 3),
                      digits(last(steps), 3)),
          Judgement::None};
}

HealthRow solver_row(const HistoryTable& t) {
  const double steps = last(t.find("step")), uses = last(t.find("applications"));
  return {"Uses of the flow's factor", steps > 0 ? fmt::format("{:.2f} a step", uses / steps) : "-",
          "",
          fmt::format("{} factorisations in {} steps", whole(last(t.find("factorisations"))),
                      whole(steps)),
          Judgement::None};
}

HealthRow time_row(double seconds, const std::string& meaning) {
  return {"Time by the clock", std::isfinite(seconds) ? duration_text(seconds) : "not known", "",
          meaning, Judgement::None};
}

std::string time_per_step(const HistoryTable& t) {
  const double steps = last(t.find("step")), seconds = last(t.find("wall_time"));
  if (!(steps > 0)) return "over all sessions";
  return fmt::format("over all sessions; {} s a step", digits(seconds / steps, 3));
}

std::string overall(const std::vector<HealthRow>& rows) {
  std::vector<std::string> poor, look;
  bool judged = false;
  for (const HealthRow& r : rows) {
    judged = judged || r.judgement != Judgement::None;
    if (r.judgement == Judgement::Poor) poor.push_back(r.name);
    if (r.judgement == Judgement::Look) look.push_back(r.name);
  }
  if (!poor.empty()) return fmt::format("Poor: {}.", fmt::join(poor, "; "));
  if (!look.empty())
    return fmt::format("Nothing is poor. Look closer at: {}.", fmt::join(look, "; "));
  return judged ? "Everything that is judged is good." : "There is nothing to judge.";
}

}  // namespace

const char* word(Judgement j) {
  switch (j) {
    case Judgement::Good:
      return "good";
    case Judgement::Look:
      return "look closer";
    case Judgement::Poor:
      return "poor";
    case Judgement::None:
      return "";
  }
  return "";
}

Judgement judged_small(double value, double good, double fair) {
  if (std::isnan(value)) return Judgement::None;
  if (value <= good) return Judgement::Good;
  return value < fair ? Judgement::Look : Judgement::Poor;
}

Judgement judged_large(double value, double good, double fair) {
  if (std::isnan(value)) return Judgement::None;
  if (value >= good) return Judgement::Good;
  return value >= fair ? Judgement::Look : Judgement::Poor;
}

std::vector<HealthRow> march_health(const SavedRun& run, const RunStatistics& s) {
  const HistoryTable& t = *run.history;
  const Geometry g(run.settings.model.shell, run.settings.model.grid);
  std::vector<HealthRow> rows{step_budget_row(largest(t.find("heat_budget_residual"))),
                              work_row(run, work_mismatch(t)),
                              flow_row(run, largest(t.find("flow_error"))),
                              balance_row(run, s),
                              layer_row(g, "Cells across the outer boundary layer",
                                        mean_or_last(run, s, "lid_thickness_conduction"), true),
                              layer_row(g, "Cells across the inner boundary layer",
                                        mean_or_last(run, s, "boundary_layer_inner"), false)};
  if (run.settings.model.nonlinear()) rows.push_back(newton_row(run));
  rows.push_back(step_row(t));
  rows.push_back(solver_row(t));
  rows.push_back(time_row(last(t.find("wall_time")), time_per_step(t)));
  return rows;
}

std::vector<HealthRow> settle_health(const SavedRun& run, const TomlSection& s) {
  const double asked = run.settings.settle.tolerance;
  return {small_row("Residual of the steady equations", s.number("residual"), asked, 1e4 * asked,
                    "rms of dT/dt over heat flow through heat capacity; the case asks for "
                    "settle.tolerance"),
          state_budget_row(std::abs(s.number("heat_budget_residual")), " of the state"),
          work_row(run, work_mismatch(s)),
          {"Newton steps", s["newton_steps"], "", "on all grids", Judgement::None},
          time_row(s.number("wall_time"), "of the whole search")};
}

std::vector<HealthRow> branch_health(const SavedRun& run, const NumberTable& branch) {
  const double asked = run.settings.settle.tolerance;
  return {small_row("Residual of the steady equations", largest(branch.find("residual")), asked,
                    1e4 * asked, "largest of all states; the case asks for settle.tolerance"),
          state_budget_row(largest(branch.find("heat_budget_residual")), ", largest of a state"),
          work_row(run, work_mismatch(branch)),
          {"Newton steps", whole(largest(branch.find("newton_steps"))), "",
           "most that one state took", Judgement::None}};
}

std::vector<HealthRow> onset_health(const NumberTable& onset, const TomlSection& s) {
  const double error = s.number("critical_rayleigh_error") / s.number("critical_rayleigh");
  std::vector<HealthRow> rows;
  if (error > 0)
    rows.push_back(small_row("Relative error of the critical Rayleigh number", error, 0.01, 0.1,
                             "half width of its error bar, from three grids"));
  rows.push_back({"Radial cells", s["radial_cells"], "", "of the finest grid", Judgement::None});
  rows.push_back(
      {"Modes", whole(static_cast<double>(onset.rows())), "", "looked at", Judgement::None});
  return rows;
}

std::string json_of(const std::vector<HealthRow>& rows) {
  std::vector<std::string> all;
  for (const HealthRow& r : rows)
    all.push_back(json::object({{"name", json::text(r.name)},
                                {"value", json::text(r.value)},
                                {"threshold", json::text(r.threshold)},
                                {"meaning", json::text(r.meaning)},
                                {"judgement", json::text(word(r.judgement))}}));
  return json::object({{"overall", json::text(overall(rows))}, {"rows", json::list(all)}});
}

}  // namespace lidwright::page
