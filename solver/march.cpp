#include "solver/march.hpp"

#include <fmt/format.h>

#include <algorithm>
#include <cmath>
#include <limits>

namespace lidwright {
namespace {

std::shared_ptr<const Decomposition> decompose(const Model& model, MPI_Comm comm) {
  return std::make_shared<Decomposition>(std::make_shared<Geometry>(model.shell, model.grid), comm);
}

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

template <class Value>
double volume_sum(const CellField& shape, Value&& value) {
  const Geometry& g = shape.decomposition().geometry();
  double sum = 0;
  for (int j = shape.owned().begin; j < shape.owned().end; ++j)
    for (int i = 0; i < shape.rows(); ++i) sum += g.volume({i, j}) * value({i, j});
  return shape.decomposition().sum(sum);
}

}  // namespace

March::March(const Model& model, const FlowSettings& flow, const HeatSettings& heat, MPI_Comm comm)
    : model_(model),
      heat_settings_(heat),
      decomposition_(decompose(model, comm)),
      flow_(decomposition_, model.walls, flow),
      stepper_(decomposition_, model.walls, model.heat, heat.flux),
      temperature_(decomposition_),
      viscosity_(decomposition_, 1.0),
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
}

/// Buoyancy Ra T at radial faces; next to a wall, the mean of the wall and the cell.
std::function<double(RadialFace)> March::buoyancy() const {
  return [this](RadialFace f) {
    const double ra = model_.rayleigh;
    if (f.i == 0)
      return ra * (stepper_.heat().wall_temperature(temperature_, f) + temperature_[outside(f)]) /
             2;
    if (f.i == temperature_.rows())
      return ra * (temperature_[inside(f)] + stepper_.heat().wall_temperature(temperature_, f)) / 2;
    return ra * (temperature_[inside(f)] + temperature_[outside(f)]) / 2;
  };
}

void March::solve_flow() {
  const Geometry& g = decomposition_->geometry();
  for (int j = viscosity_.held().begin; j < viscosity_.held().end; ++j)
    for (int i = 0; i < viscosity_.rows(); ++i)
      viscosity_[{i, j}] = model_.viscosity({temperature_[{i, j}], g.depth(i)});
  const FlowReport report = flow_.solve(viscosity_, buoyancy(), psi_);
  if (report.converged) return;
  throw SolveError(
      fmt::format("the flow did not converge at step {} (time {:.6g}): relative error {:.2e} after "
                  "{} iterations with a fresh "
                  "factor. Raise flow.most_iterations, loosen flow.tolerance, narrow the viscosity "
                  "with viscosity.lowest and "
                  "viscosity.highest, or refine the grid",
                  steps_, time_, report.error, report.iterations));
}

/// The flow at t + dt on the straight line through the last two.
CornerField March::foreseen_flow(double dt) const {
  CornerField then = psi_;
  if (steps_ == 0) return then;
  const double ratio = dt / last_step_;
  for (std::size_t k = 0; k < then.values().size(); ++k)
    then.values()[k] += ratio * (psi_.values()[k] - former_psi_.values()[k]);
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
    const WallHeat through = stepper_.step(temperature_, psi_, foreseen_flow(dt), dt, next);
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
      return accept(std::move(next), dt, end, through, error);
    }
    dt *= std::max(0.3, 0.9 * std::cbrt(heat_settings_.accuracy / error));
  }
}

void March::accept(CellField next, double dt, double end, const WallHeat& through, double error) {
  const double change = volume_sum(next, [&](Cell c) { return next[c] - temperature_[c]; });
  const double source = stepper_.heat().total_source();
  const double scale = std::max({std::abs(change), dt * std::abs(through.inner),
                                 dt * std::abs(through.outer), dt * std::abs(source)});
  const double residual = change - dt * (through.inner - through.outer + source);
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
  solve_flow();
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
  a.cells["viscosity"] = viscosity_;
  a.corners["stream_function"] = psi_;
  a.corners["former_stream_function"] = former_psi_;
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
  adopt(viscosity_, a.cells.at("viscosity"));
  adopt(psi_, a.corners.at("stream_function"));
  adopt(former_psi_, a.corners.at("former_stream_function"));
  const auto count = static_cast<std::size_t>(a.numbers.at("former"));
  for (std::size_t n = 0; n < count; ++n) {
    Former f{a.numbers.at("former.time." + std::to_string(n)), CellField(decomposition_)};
    adopt(f.temperature, a.cells.at("former.temperature." + std::to_string(n)));
    former_.push_back(std::move(f));
  }
  flow_.restore(a);
}

}  // namespace lidwright
