#include "io/case_keys.hpp"

#include <fmt/format.h>

#include "io/case_bind.hpp"

namespace lidwright::case_text {
namespace {

constexpr Condition layered_start = {
    R"(with initial.base = "boundary-layers")",
    [](const Draft& d) { return d.made.initial.base == InitialBase::BoundaryLayers; }};

constexpr Condition until_known = {R"(with march.until = "known")", [](const Draft& d) {
                                     return d.made.march.until == MarchUntil::Known;
                                   }};

std::vector<Key> initial_keys() {
  using I = InitialSettings;
  const auto at = [](auto member) { return of_case(&Case::initial, member); };
  return {
      {.path = "initial.base",
       .access = at(&I::base),
       .words = {"conductive", "boundary-layers"},
       .help =
           "temperature to start from: conduction between the walls, or a thermal boundary layer "
           "at each wall that holds a temperature"},
      {.path = "initial.interior",
       .access = at(&I::interior),
       .quantity = Quantity::Temperature,
       .only = layered_start,
       .help = "temperature between the boundary layers"},
      {.path = "initial.layer_thickness",
       .access = at(&I::layer_thickness),
       .quantity = Quantity::Length,
       .range = {.low = 0, .high = 0.5, .low_open = true},
       .only = layered_start,
       .help = "thickness scale of the boundary layers, of an error function"},
      {.path = "initial.modes",
       .access = list(&Draft::made, &Case::initial, &I::modes),
       .help = "waves added to it"},
      {.path = "initial.modes[].lateral",
       .access = mode(&TemperatureMode::lateral),
       .range = not_negative,
       .help = "half waves between reflecting sides, whole waves around a periodic shell"},
      {.path = "initial.modes[].radial",
       .access = mode(&TemperatureMode::radial),
       .range = at_least_one,
       .help = "half waves between the walls"},
      {.path = "initial.modes[].amplitude",
       .access = mode(&TemperatureMode::amplitude),
       .quantity = Quantity::TemperatureDifference,
       .help = "amplitude of the wave"},
      {.path = "initial.noise",
       .access = at(&I::noise),
       .quantity = Quantity::TemperatureDifference,
       .range = not_negative,
       .help = "amplitude of random noise added to each cell"},
      {.path = "initial.seed",
       .access = at(&I::seed),
       .range = not_negative,
       .help = "seed of the noise; the same field on any number of ranks"},
      {.path = "initial.from",
       .access = at(&I::from),
       .help =
           "checkpoint or run folder whose temperature replaces the base; a relative path starts "
           "at the case file; empty: none"},
  };
}

std::vector<Key> flow_keys() {
  using F = FlowSettings;
  const auto at = [](auto member) { return of_case(&Case::flow, member); };
  return {
      {.path = "flow.tolerance",
       .access = at(&F::tolerance),
       .range = {.low = 0, .high = 0.1, .low_open = true},
       .help = "relative error of the velocity, in the norm of dissipation"},
      {.path = "flow.most_iterations",
       .access = at(&F::most_iterations),
       .range = {.low = 1, .high = 1e6},
       .help = "iterations with a fresh factor before giving up"},
      {.path = "flow.memory",
       .access = at(&F::memory),
       .range = {.low = 1, .high = 8},
       .help = "former flows from which a solve starts"},
      {.path = "flow.refactor_cost",
       .access = at(&F::refactor_cost),
       .range = not_negative,
       .help = "cost of a factorisation in applications of the factor: when a new one pays"},
      {.path = "flow.most_newton_steps",
       .access = at(&F::most_newton_steps),
       .range = {.low = 1, .high = 1e6},
       .help =
           "Newton steps of a flow before giving up, where the viscosity depends on the rate of "
           "strain"},
  };
}

std::vector<Key> transport_keys() {
  using H = HeatSettings;
  const auto at = [](auto member) { return of_case(&Case::heat, member); };
  return {
      {.path = "transport.flux",
       .access = at(&H::flux),
       .words = {"central", "limited"},
       .help = "heat carried by the flow: central, or third-order upwind with a limiter"},
      {.path = "transport.courant",
       .access = at(&H::courant),
       .range = share,
       .help = "largest share of a cell's heat carried out of it in a step"},
      {.path = "transport.accuracy",
       .access = at(&H::accuracy),
       .quantity = Quantity::TemperatureDifference,
       .range = positive,
       .help = "error of one step, root mean square of temperature"},
      {.path = "transport.first_step",
       .access = at(&H::first_step),
       .quantity = Quantity::Time,
       .range = positive,
       .help = "length of the first step"},
      {.path = "transport.largest_step",
       .access = at(&H::largest_step),
       .quantity = Quantity::Time,
       .range = positive,
       .help = "longest step"},
      {.path = "transport.growth",
       .access = at(&H::growth),
       .range = {.low = 1, .high = 2, .low_open = true},
       .help = "largest ratio of a step to the one before"},
  };
}

std::vector<Key> march_keys() {
  using M = MarchSettings;
  const auto at = [](auto member) { return of_case(&Case::march, member); };
  return {
      {.path = "march.end_time",
       .access = at(&M::end_time),
       .quantity = Quantity::Time,
       .range = positive,
       .help = "time at which the run ends"},
      {.path = "march.until",
       .access = at(&M::until),
       .words = {"time", "known"},
       .help = "\"known\": the run ends as soon as the means of march.known are known, at "
               "march.end_time at the latest"},
      {.path = "march.most_steps",
       .access = at(&M::most_steps),
       .range = not_negative,
       .help = "steps after which the run ends; 0: no limit"},
      {.path = "march.wall_clock",
       .access = at(&M::wall_clock),
       .unit = "s",
       .range = not_negative,
       .help = "time by the clock after which the run ends; 0: no limit"},
      {.path = "march.steady",
       .access = at(&M::steady),
       .quantity = Quantity::TemperatureRate,
       .range = not_negative,
       .help = "the run ends when the root mean square of dT/dt falls below; 0: never. A start "
               "without disturbance is steady at once"},
      {.path = "march.known.quantities",
       .access = at(&M::known_quantities),
       .only = until_known,
       .help = "columns of history.csv whose means are to be known, with commas between"},
      {.path = "march.known.relative_error",
       .access = at(&M::known_error),
       .range = {.low = 1e-6, .high = 1, .high_open = true},
       .only = until_known,
       .help = "half width of the 95 % interval of such a mean, over the mean"},
  };
}

std::vector<Key> settle_keys() {
  using S = SettleSettings;
  const auto at = [](auto member) { return of_case(&Case::settle, member); };
  return {
      {.path = "settle.tolerance",
       .access = at(&S::tolerance),
       .range = {.low = 0, .high = 0.1, .low_open = true},
       .help = "root mean square of dT/dt, over heat flow through heat capacity of the shell, at "
               "which it is steady"},
      {.path = "settle.most_steps",
       .access = at(&S::most_steps),
       .range = {.low = 1, .high = 1e6},
       .help = "Newton steps on one grid before giving up"},
      {.path = "settle.most_time",
       .access = at(&S::most_time),
       .quantity = Quantity::Time,
       .range = positive,
       .help = "longest march to a first guess, on each grid that needs one"},
      {.path = "settle.flux",
       .access = at(&S::flux),
       .words = {"central", "limited"},
       .help = "heat carried by the flow of a steady state, as transport.flux says it of a march"},
      {.path = "settle.coarsest",
       .access = at(&S::coarsest),
       .range = {.low = 8, .high = 100000},
       .help = "cells from wall to wall of the coarsest grid to start from"},
      {.path = "settle.linear",
       .access = at(&S::linear),
       .words = {"automatic", "direct", "iterative"},
       .help = "how the equations of a Newton step are solved"},
  };
}

std::vector<Key> output_keys() {
  using O = OutputSettings;
  const auto at = [](auto member) { return of_case(&Case::output, member); };
  return {
      {.path = "output.history_every",
       .access = at(&O::history_every),
       .range = at_least_one,
       .help = "steps between lines of the history"},
      {.path = "output.snapshot_every",
       .access = at(&O::snapshot_every),
       .quantity = Quantity::Time,
       .range = not_negative,
       .help = "time between snapshots; 0: the first and the last only"},
      {.path = "output.checkpoint_every",
       .access = at(&O::checkpoint_every),
       .range = not_negative,
       .help = "steps between checkpoints; 0: at the end only"},
      {.path = "output.checkpoints_kept",
       .access = at(&O::checkpoints_kept),
       .range = {.low = 1, .high = 1000},
       .help = "latest checkpoints that are kept"},
      {.path = "output.normal_stress",
       .access = at(&O::normal_stress),
       .help = "pressure and the walls' normal stress in snapshots"},
      {.path = "output.pictures",
       .access = at(&O::pictures),
       .help = "a picture of the run with every snapshot"},
      {.path = "output.report",
       .access = at(&O::report),
       .help = "a page about the run at its end, report.html"},
  };
}

std::vector<Key> list_all() {
  std::vector<Key> keys;
  append(keys, scale_keys());
  append(keys, body_used_keys());
  append(keys, shell_keys());
  append(keys, wall_keys("walls.inner", &Draft::inner));
  append(keys, wall_keys("walls.outer", &Draft::outer));
  append(keys, viscosity_keys());
  append(keys, heat_keys());
  append(keys, reference_keys());
  append(keys, initial_keys());
  append(keys, flow_keys());
  append(keys, transport_keys());
  append(keys, march_keys());
  append(keys, settle_keys());
  append(keys, output_keys());
  return keys;
}

}  // namespace

std::string Key::table() const {
  const std::string outside = path.substr(0, path.find("[]."));
  const auto dot = outside.rfind('.');
  return dot == std::string::npos ? "" : outside.substr(0, dot);
}

std::string Key::name() const {
  const auto dot = path.rfind('.');
  return dot == std::string::npos ? path : path.substr(dot + 1);
}

const std::vector<Key>& all_keys() {
  static const std::vector<Key> keys = list_all();
  return keys;
}

std::vector<const Key*> item_keys(const Key& list_key) {
  std::vector<const Key*> items;
  for (const Key& key : all_keys())
    if (key.path.starts_with(list_key.path + "[].")) items.push_back(&key);
  return items;
}

namespace {
struct TypeText {
  const Key& key;
  std::string operator()(double*) const { return "number"; }
  std::string operator()(std::optional<double>*) const { return "number"; }
  std::string operator()(int*) const { return "whole number"; }
  std::string operator()(long*) const { return "whole number"; }
  std::string operator()(std::uint64_t*) const { return "whole number"; }
  std::string operator()(bool*) const { return "true or false"; }
  std::string operator()(std::optional<bool>*) const { return "true or false"; }
  std::string operator()(std::string*) const { return "text"; }
  std::string operator()(const List&) const { return "list"; }
  std::string operator()(const Choice&) const {
    std::string words;
    for (const std::string_view word : key.words)
      words += fmt::format("{}\"{}\"", words.empty() ? "one of " : ", ", word);
    return words;
  }
};
}  // namespace

Draft draft_of_defaults() {
  Draft draft;
  for (const Key& key : all_keys()) {
    if (key.in_list()) continue;
    const Target target = key.access(draft, 0);
    if (const auto* items = std::get_if<List>(&target)) items->resize(1);
  }
  return draft;
}

std::string type_text(const Key& key) {
  Draft draft = draft_of_defaults();
  return std::visit(TypeText{key}, key.access(draft, 0));
}

}  // namespace lidwright::case_text
