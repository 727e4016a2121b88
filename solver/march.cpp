#include "solver/march.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

namespace lidwright {
namespace {

template <class Value>
double volume_rms(const CellField& shape, Value&& value) {
  const Geometry& g = shape.decomposition().geometry();
  double sum = 0;
  for (int j = shape.owned().begin; j < shape.owned().end; ++j)
    for (int i = 0; i < shape.rows(); ++i) {
      const double x = value(Cell{i, j});
      sum += g.volume({i, j}) * x * x;
    }
  return std::sqrt(shape.decomposition().sum(sum) / g.total_volume());
}

}  // namespace

March::March(const Model& model, const FlowSettings& flow, const HeatSettings& heat, MPI_Comm comm)
    : model_(model),
      heat_settings_(heat),
      decomposition_(decompose(model, comm)),
      flow_(decomposition_, model, flow),
      stepper_(decomposition_, model.walls, model.heat, heat.flux, model.reference),
      temperature_(decomposition_),
      psi_(decomposition_),
      former_psi_(decomposition_),
      error_limited_step_(heat.first_step),
      change_rate_(std::numeric_limits<double>::infinity()) {}

March::March(const Model& model, const InitialSettings& initial, const StoredTemperature& stored,
             const FlowSettings& flow, const HeatSettings& heat, MPI_Comm comm)
    : March(model, flow, heat, comm) {
  temperature_ = initial_temperature(stepper_.heat(), initial, stored);
  solve_flow();
  former_psi_ = psi_;
  former_viscous_ = viscous_;
}

void March::solve_flow() {
  const FlowReport report =
      flow_.solve(temperature_, buoyancy(stepper_.heat(), temperature_, model_.rayleigh), psi_);
  if (report.converged) {
    viscous_ = viscous_heating(view());
    return;
  }
  const std::string when = fmt::format(
      "the flow did not converge at step {} (time {:.6g}): "
      "relative error {:.2e} after ",
      steps_, time_, report.error);
  if (model_.nonlinear())
    throw SolveError(fmt::format(
        "{}{} Newton steps. Raise flow.most_newton_steps, loosen flow.tolerance, raise "
        "viscosity.lowest{}, or refine the grid",
        when, report.newton_steps, model_.yielding ? " or viscosity.yielding.floor" : ""));
  throw SolveError(fmt::format(
      "{}{} iterations with a fresh factor. Raise flow.most_iterations, loosen flow.tolerance, "
      "narrow the viscosity with viscosity.lowest and viscosity.highest, or refine the grid",
      when, report.iterations));
}

/// Flow and viscous heating at t + dt on the straight line through the last two.
HeatStepper::Forcing March::foreseen(double dt) const {
  HeatStepper::Forcing then{psi_, viscous_};
  if (steps_ == 0) return then;
  const double ratio = dt / last_step_;
  const auto extrapolate = [ratio](auto& field, const auto& former) {
    for (std::size_t k = 0; k < field.values().size(); ++k)
      field.values()[k] += ratio * (field.values()[k] - former.values()[k]);
  };
  extrapolate(then.psi, former_psi_);
  extrapolate(then.viscous, former_viscous_);
  return then;
}

double March::proposed_step(double until) const {
  const double rate = stepper_.heat().outflow_rate(psi_);
  double dt = std::min(error_limited_step_, heat_settings_.largest_step);
  if (rate > 0) dt = std::min(dt, heat_settings_.courant / rate);
  const double left = until - time_;
  if (dt >= left) return left;
  return dt > 0.5 * left ? 0.5 * left : dt;
}

/// The third divided difference of the last temperatures estimates dt^3 T'''/6, the size of a
/// second-order step's local error. Volume rms; 0 while there is too little history.
double March::local_error(const CellField& next, double dt) const {
  if (former_.size() < 2) return 0;
  const double t3 = time_ + dt, t2 = time_, t1 = former_[0].time, t0 = former_[1].time;
  return dt * dt * dt * volume_rms(next, [&](Cell c) {
           const double d32 = (next[c] - temperature_[c]) / (t3 - t2);
           const double d21 = (temperature_[c] - former_[0].temperature[c]) / (t2 - t1);
           const double d10 = (former_[0].temperature[c] - former_[1].temperature[c]) / (t1 - t0);
           return ((d32 - d21) / (t3 - t1) - (d21 - d10) / (t2 - t0)) / (t3 - t0);
         });
}

void March::step(double until) {
  double dt = proposed_step(until);
  const bool to_the_end = dt == until - time_;
  for (int attempt = 0;; ++attempt) {
    CellField next(decomposition_);
    const StepHeat heat = stepper_.step(temperature_, {psi_, viscous_}, foreseen(dt), dt, next);
    const double error = local_error(next, dt);
    if (!std::isfinite(error) || (error > 2 * heat_settings_.accuracy && attempt == 20))
      throw SolveError(
          fmt::format("the temperature cannot be advanced at step {} (time {:.6g}): local error "
                      "{:.2e} with a step of {:.2e}. Lower "
                      "transport.first_step or transport.courant, or loosen transport.accuracy",
                      steps_, time_, error, dt));
    if (error <= 2 * heat_settings_.accuracy) {
      // Not time_ + dt, which may miss it by a rounding and leave a step of that length.
      const double end = to_the_end && attempt == 0 ? until : time_ + dt;
      return accept(std::move(next), dt, end, heat, error);
    }
    dt *= std::max(0.3, 0.9 * std::cbrt(heat_settings_.accuracy / error));
  }
}

/// Of the heat content, from the present temperature to the next.
double March::content_change(const CellField& next) const {
  double sum = 0;
  for (int j = next.owned().begin; j < next.owned().end; ++j)
    for (int i = 0; i < next.rows(); ++i)
      sum += heat().capacity({i, j}) * (next[{i, j}] - temperature_[{i, j}]);
  return decomposition_->sum(sum);
}

void March::accept(CellField next, double dt, double end, const StepHeat& heat, double error) {
  const HeatOperator& op = stepper_.heat();
  const double change = content_change(next);
  const double source = op.total_source();
  double scale = std::abs(change);
  for (const double part : {heat.through.inner, heat.through.outer, source, heat.viscous})
    scale = std::max(scale, dt * std::abs(part));
  const double residual = change - dt * (heat.gain() + source);
  budget_residual_ = scale > 0 ? residual / scale : 0;
  change_rate_ = volume_rms(next, [&](Cell c) { return (next[c] - temperature_[c]) / dt; });

  former_.insert(former_.begin(), Former{time_, std::move(temperature_)});
  if (former_.size() > 2) former_.pop_back();
  temperature_ = std::move(next);
  time_ = end;
  ++steps_;
  last_step_ = dt;
  const double by_error =
      error > 0 ? 0.9 * std::cbrt(heat_settings_.accuracy / error) : heat_settings_.growth;
  error_limited_step_ = dt * std::clamp(by_error, 0.3, heat_settings_.growth);
  former_psi_ = psi_;
  former_viscous_ = viscous_;
  solve_flow();
}

HistoryRow March::row() const {
  HistoryRow row = measure(view());
  row.step = steps_;
  row.time = time_;
  row.time_step = last_step_;
  row.flow_error = flow_.last_report().error;
  row.flow_iterations = flow_.last_report().newton_steps;
  row.fixed_point_steps = flow_.fixed_point_steps();
  row.yielding_share = flow_.last_report().yielding_share;
  row.heat_budget_residual = budget_residual_;
  row.temperature_change_rate = steps_ > 0 ? change_rate_ : 0;
  row.applications = flow_.applications();
  row.factorisations = flow_.factorisations();
  return row;
}

Snapshot March::snapshot(bool with_stress) const {
  Snapshot s = lidwright::snapshot(view(), with_stress);
  s.step = steps_;
  s.time = time_;
  return s;
}

Archive March::archive() const {
  Archive a;
  flow_.save(a);
  a.numbers["time"] = time_;
  a.numbers["steps"] = static_cast<double>(steps_);
  a.numbers["last_step"] = last_step_;
  a.numbers["error_limited_step"] = error_limited_step_;
  a.numbers["change_rate"] = change_rate_;
  a.numbers["budget_residual"] = budget_residual_;
  a.numbers["former"] = static_cast<double>(former_.size());
  for (std::size_t n = 0; n < former_.size(); ++n) {
    a.numbers["former.time." + std::to_string(n)] = former_[n].time;
    a.cells["former.temperature." + std::to_string(n)] = former_[n].temperature;
  }
  a.cells["temperature"] = temperature_;
  a.corners["stream_function"] = psi_;
  a.corners["former_stream_function"] = former_psi_;
  if (!viscous_.empty()) {
    a.cells["viscous_heating"] = viscous_;
    a.cells["former_viscous_heating"] = former_viscous_;
  }
  return a;
}

March::March(const Model& model, const FlowSettings& flow, const HeatSettings& heat,
             const Archive& a, MPI_Comm comm)
    : March(model, flow, heat, comm) {
  const auto adopt = [](auto& field, const auto& stored) {
    std::copy_n(stored.owned_data(), stored.owned_size(), field.owned_data());
    field.exchange();
  };
  time_ = a.numbers.at("time");
  steps_ = static_cast<long>(a.numbers.at("steps"));
  last_step_ = a.numbers.at("last_step");
  error_limited_step_ = a.numbers.at("error_limited_step");
  change_rate_ = a.numbers.at("change_rate");
  budget_residual_ = a.numbers.at("budget_residual");
  adopt(temperature_, a.cells.at("temperature"));
  adopt(psi_, a.corners.at("stream_function"));
  adopt(former_psi_, a.corners.at("former_stream_function"));
  if (a.cells.contains("viscous_heating")) {
    viscous_ = former_viscous_ = CellField(decomposition_);
    adopt(viscous_, a.cells.at("viscous_heating"));
    adopt(former_viscous_, a.cells.at("former_viscous_heating"));
  }
  const auto count = static_cast<std::size_t>(a.numbers.at("former"));
  for (std::size_t n = 0; n < count; ++n) {
    Former f{a.numbers.at("former.time." + std::to_string(n)), CellField(decomposition_)};
    adopt(f.temperature, a.cells.at("former.temperature." + std::to_string(n)));
    former_.push_back(std::move(f));
  }
  flow_.restore(a);
}

}  // namespace lidwright
