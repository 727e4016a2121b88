#include "study/measured.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>

#include "solver/found.hpp"
#include "solver/march.hpp"
#include "solver/solve_error.hpp"
#include "study/cycle.hpp"
#include "study/onset_values.hpp"
#include "study/quantities.hpp"
#include "study/steady_grids.hpp"

namespace lidwright {
namespace {

using Values = std::map<std::string, std::vector<double>>;  ///< one a grid, from coarse to fine

constexpr double flow_tolerance = 1e-11;
/// Relative errors that the solver's tolerance may leave in a quantity.
constexpr double flow_floor = 1e-9, settle_floor = 1e-8, relax_floor = 1e-6, march_floor = 1e-4;

Measured with_bars(const Values& values, const std::vector<std::string>& wanted, double floor) {
  Measured m;
  for (const std::string& name : wanted) {
    const std::vector<double>& v = values.at(name);
    m.bars[name] = error_bar(v, floor * std::abs(v.back()));
  }
  return m;
}

void append(Values& values, const std::map<std::string, double>& of_a_grid) {
  for (const auto& [name, value] : of_a_grid) values[name].push_back(value);
}

Measured measure_flow(const Problem& p, int grids, const std::vector<std::string>& wanted,
                      const Watch& watch) {
  Values values;
  for (int n = grids - 1; n >= 0; --n) {
    const Grid grid = halved(p.model.grid, n);
    watch.say(fmt::format("{} x {}", grid.radial, grid.lateral));
    append(values, prescribed_flow(p.model, p.forcing, flow_tolerance, grid));
    if (watch.stop()) throw Stopped{};
  }
  return with_bars(values, wanted, flow_floor);
}

/// Throws SolveError when there are too few for an error bar.
void check_converged(const std::vector<SteadyState>& states) {
  if (!states.empty() && !states.back().converged)
    throw SolveError(fmt::format("no steady state on {} x {}: {}", states.back().grid.radial,
                                 states.back().grid.lateral, states.back().remark));
  if (states.size() < 2) throw SolveError("a steady state on the finest grid only: no error bar");
}

Measured measure_settled(const Problem& p, int grids, const std::vector<std::string>& wanted,
                         const Watch& watch) {
  bool stopped = false;
  const auto observe = [&](const NewtonStep& s) {
    const std::string stage = s.step < 0 ? "march" : fmt::format("Newton step {}", s.step);
    watch.say(fmt::format("{} x {}, {}, residual {:.1e}", s.grid.radial, s.grid.lateral, stage,
                          s.residual));
    stopped = stopped || watch.stop();
    return !stopped;
  };
  const std::vector<SteadyState> states =
      settle_on_grids(p.model, p.initial, p.start, p.settle, grids, PETSC_COMM_SELF, observe);
  if (stopped) throw Stopped{};
  check_converged(states);
  Values values;
  for (const SteadyState& s : states)
    for (const std::string& name : wanted)
      values[name].push_back(steady_quantity(name, {p.model, s.row, s.snapshot}).value());
  Measured m = with_bars(values, wanted, settle_floor);
  m.end = stored(states.back().snapshot.temperature);
  return m;
}

/// The steady quantities of a march's state.
std::map<std::string, double> quantities_now(const March& march, const Model& model,
                                             const std::vector<std::string>& wanted) {
  const HistoryRow row = march.row();
  const Snapshot snapshot = march.snapshot(true);
  std::map<std::string, double> values;
  for (const std::string& name : wanted)
    values[name] = steady_quantity(name, {model, row, snapshot}).value();
  return values;
}

/// The end of a march that has become steady, and what it lacks of the steady state itself.
struct Relaxed {
  std::map<std::string, double> value, lack;
  StoredTemperature end;
};

/// What is left to go falls as dT/dt does, so from ten times the last rate to the last it is nine
/// tenths of what there was; three times the rest is allowed for.
std::map<std::string, double> lacks(const std::map<std::string, double>& early,
                                    const std::map<std::string, double>& last) {
  std::map<std::string, double> lack;
  for (const auto& [name, value] : last)
    lack[name] = std::max(relax_floor * std::abs(value), std::abs(value - early.at(name)) / 3);
  return lack;
}

Relaxed relax_on(const Problem& p, const Grid& grid, const StoredTemperature& start,
                 const std::vector<std::string>& wanted, const Watch& watch) {
  Model model = p.model;
  model.grid = grid;
  InitialSettings initial = p.initial;
  if (!start.values.empty()) initial.modes.clear();
  March march(model, initial, start, p.flow, p.heat, PETSC_COMM_SELF);
  std::map<std::string, double> early;
  do {
    if (march.time() >= p.march.end_time)
      throw SolveError(fmt::format("not steady on {} x {} by time {:g}: rms of dT/dt {:.1e}",
                                   grid.radial, grid.lateral, p.march.end_time,
                                   march.temperature_change_rate()));
    march.step(p.march.end_time);
    if (watch.stop()) throw Stopped{};
    watch.say(fmt::format("{} x {}, time {:.3f}, rms of dT/dt {:.1e}", grid.radial, grid.lateral,
                          march.time(), march.temperature_change_rate()));
    const bool nearly = march.temperature_change_rate() < 10 * p.march.steady;
    if (!nearly) early.clear();
    if (nearly && early.empty()) early = quantities_now(march, model, wanted);
  } while (march.temperature_change_rate() >= p.march.steady);
  Relaxed r;
  r.value = quantities_now(march, model, wanted);
  r.lack = lacks(early, r.value);
  r.end = stored(march.temperature());
  return r;
}

Measured measure_relaxed(const Problem& p, int grids, const std::vector<std::string>& wanted,
                         const Watch& watch) {
  Values values, lacks;
  Measured m;
  m.end = p.start;
  for (int n = grids - 1; n >= 0; --n) {
    Relaxed r = relax_on(p, halved(p.model.grid, n), m.end, wanted, watch);
    append(values, r.value);
    append(lacks, r.lack);
    m.end = std::move(r.end);
  }
  for (const std::string& name : wanted)
    m.bars[name] =
        error_bar(values[name], *std::max_element(lacks[name].begin(), lacks[name].end()));
  return m;
}

/// History of a march on one grid, and its end.
struct Marched {
  std::vector<double> time, nusselt, velocity;
  StoredTemperature end;
};

Marched march_on(const Problem& p, const Grid& grid, const StoredTemperature& start,
                 const Watch& watch) {
  Model model = p.model;
  model.grid = grid;
  InitialSettings initial = p.initial;
  if (!start.values.empty()) initial.modes.clear();
  March march(model, initial, start, p.flow, p.heat, PETSC_COMM_SELF);
  Marched m;
  while (march.time() < p.march.end_time) {
    march.step(p.march.end_time);
    const HistoryRow row = march.row();
    m.time.push_back(row.time);
    m.nusselt.push_back(row.nusselt_outer);
    m.velocity.push_back(row.velocity_rms);
    if (watch.stop()) throw Stopped{};
    watch.say(fmt::format("{} x {}, time {:.3f} of {:g}", grid.radial, grid.lateral, row.time,
                          p.march.end_time));
  }
  m.end = stored(march.temperature());
  return m;
}

/// The source of Blankenbach's case 3 lists minima of the velocity by size, not by what they
/// follow. Where all beats are alike, those of one beat are what is meant.
std::map<std::string, double> cycle_quantities(const Beats& heat, const Beats& flow) {
  return {{"period", heat.period},
          {"beat", heat.period / 2},
          {"nusselt_maximum", (heat.maximum_1 + heat.maximum_2) / 2},
          {"nusselt_minimum", (heat.minimum_1 + heat.minimum_2) / 2},
          {"velocity_maximum", (flow.maximum_1 + flow.maximum_2) / 2},
          {"velocity_minimum", (flow.minimum_1 + flow.minimum_2) / 2},
          {"nusselt_maximum_1", heat.maximum_1},
          {"nusselt_minimum_1", heat.minimum_1},
          {"nusselt_maximum_2", heat.maximum_2},
          {"nusselt_minimum_2", heat.minimum_2},
          {"velocity_maximum_1", flow.maximum_1},
          {"velocity_maximum_2", flow.maximum_2},
          {"velocity_minimum_1", std::max(flow.minimum_1, flow.minimum_2)},
          {"velocity_minimum_2", std::min(flow.minimum_1, flow.minimum_2)}};
}

Measured measure_march(const Problem& p, int grids, const std::vector<std::string>& wanted,
                       const Watch& watch) {
  Values values;
  Marched last;
  Beats heat, flow;
  for (int n = grids - 1; n >= 0; --n) {
    const Grid grid = halved(p.model.grid, n);
    last = march_on(p, grid, last.end, watch);
    heat = beats(last.time, last.nusselt, p.cycles);
    flow = beats(last.time, last.velocity, p.cycles);
    if (heat.cycles < 2 || flow.cycles < 2)
      throw SolveError(
          fmt::format("no cycle of two beats (or of like ones) on {} x {} by time {:g}",
                      grid.radial, grid.lateral, p.march.end_time));
    append(values, cycle_quantities(heat, flow));
  }
  Measured m = with_bars(values, wanted, march_floor);
  // What an extremum wanders from cycle to cycle is not known better than that.
  for (auto& [name, bar] : m.bars) {
    const double wander = name.starts_with("nusselt")    ? heat.wander
                          : name.starts_with("velocity") ? flow.wander
                                                         : 0;
    bar.half_width = std::max(bar.half_width, wander);
  }
  return m;
}

const std::vector<std::string>& cycle_names() {
  static const std::vector<std::string> names = [] {
    std::vector<std::string> all;
    for (const auto& [name, value] : cycle_quantities({}, {})) all.push_back(name);
    return all;
  }();
  return names;
}

}  // namespace

Measured measured(How how, const Problem& p, int grids, const std::vector<std::string>& wanted,
                  const Watch& watch) {
  switch (how) {
    case How::Flow:
      return measure_flow(p, grids, wanted, watch);
    case How::Relax:
      return measure_relaxed(p, grids, wanted, watch);
    case How::March:
      return measure_march(p, grids, wanted, watch);
    case How::Onset:
      return measured_onset(p, wanted, watch);
    case How::Settle:
      break;
  }
  return measure_settled(p, grids, wanted, watch);
}

bool measurable(How how, const std::string& quantity) {
  if (how == How::Onset && mode_named(quantity) > 0) return true;
  const std::vector<std::string> names = measurable_names(how);
  return std::find(names.begin(), names.end(), quantity) != names.end();
}

std::vector<std::string> measurable_names(How how) {
  if (how == How::Flow) return prescribed_flow_names();
  if (how == How::March) return cycle_names();
  if (how == How::Onset) return {critical_name, std::string(mode_prefix) + "N"};
  return steady_quantity_names();
}

}  // namespace lidwright
